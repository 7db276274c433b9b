import { Argument, Command, CommanderError, InvalidArgumentError } from "commander";
import { type ListName, listNames } from "../schedules/list-names.js";
import type { CheckOptions } from "./check.js";
import { readConvention } from "./convention.js";
import type { Desk } from "./desk.js";
import type { DrawOptions } from "./draw.js";
import { ExitCode } from "./exit-code.js";
import type { ListOptions } from "./list.js";
import type { SymbolsOptions } from "./symbols.js";
import type { XrefOptions } from "./xref.js";

/** Runs one command line, given without the program's name. Each command is loaded only when it is called. */
export async function run(args: readonly string[], desk: Desk): Promise<ExitCode> {
  let ended: ExitCode = ExitCode.Fine;
  const program = new Command("spoolrung")
    .description("Draws matching electrical ladder and fluid-power sheets for relay-controlled machines from one text file.")
    .version(versionOf(desk), "-V, --version", "print the version")
    .helpOption("-h, --help", "print this help")
    .helpCommand("help [command]", "print the help of a command")
    .exitOverride()
    .showHelpAfterError("(--help says more.)")
    .configureOutput({
      writeOut: desk.out,
      writeErr: desk.err,
      outputError: (text, write) => write(text.replace(/^error: (.)/, (_, first: string) => `spoolrung: ${first}`)),
      getOutHelpWidth: () => desk.columns ?? 100,
      getErrHelpWidth: () => desk.columns ?? 100,
      getOutHasColors: () => false,
      getErrHasColors: () => false,
    })
    .addHelpText("after", generalHelp);

  const command = (name: string, description: string, examples: string) =>
    program
      .command(name)
      .description(description)
      .helpOption("-h, --help", "print this help")
      .addHelpText("after", `\nExamples:\n${examples}`);
  const withColor = (made: Command) =>
    made.option("--color", "colour messages, even into a file or pipe").option("--no-color", "never colour messages");
  withColor(program);

  withColor(
    command(
      "draw",
      "Draw the sheets of each drawing as SVG, one file a sheet, and as one PDF. Files are named after the drawing number.",
      "  $ spoolrung draw samples/tray-stamper.sprung\n  $ spoolrung draw press.sprung --pdf --out prints\n  $ generate-drawing | spoolrung draw -",
    )
      .argument("<file...>", "drawings to draw; - is standard input")
      .option("-o, --out <dir>", "folder to write to; made if missing", folderName, "drawings")
      .option("--svg", "write SVG only, unless --pdf is given too")
      .option("--pdf", "write PDF only, unless --svg is given too")
      .option(...conventionOption)
      .option("-q, --quiet", "print errors only"),
  ).action(async (files: string[], _, made: Command) => {
    const { draw } = await import("./draw.js");
    ended = await draw(files, made.optsWithGlobals<DrawOptions>(), desk);
  });

  withColor(
    command(
      "check",
      "Check each drawing and print what is wrong with it, without drawing.",
      "  $ spoolrung check press.sprung\n  $ spoolrung check --json *.sprung",
    )
      .argument("<file...>", "drawings to check; - is standard input")
      .option("--json", "print the findings as a JSON array"),
  ).action(async (files: string[], _, made: Command) => {
    const { check } = await import("./check.js");
    ended = await check(files, made.optsWithGlobals<CheckOptions>(), desk);
  });

  withColor(
    command(
      "xref",
      "Print the cross-reference of a drawing: every coil with its contacts, every solenoid with its valve, and where they are drawn.",
      "  $ spoolrung xref press.sprung\n  $ spoolrung xref press.sprung --csv > press.csv",
    )
      .argument("<file>", "drawing to read; - is standard input")
      .option("--csv", "print CSV, one line a contact")
      .option("--json", "print a JSON array, one entry a coil")
      .option(...conventionOption),
  ).action(async (file: string, _, made: Command) => {
    const options = made.optsWithGlobals<XrefOptions>();
    if (options.csv && options.json) made.error("error: choose one of --csv and --json");
    const { xref: print } = await import("./xref.js");
    ended = await print(file, options, desk);
  });

  withColor(
    command(
      "list",
      "Print a list made from a drawing: its devices, its wires from pin to pin, the terminals of its strips and plugs, or the contacts of each device with the spare ones.",
      "  $ spoolrung list press.sprung devices\n  $ spoolrung list press.sprung wires --csv > wires.csv",
    )
      .argument("<file>", "drawing to read; - is standard input")
      .addArgument(new Argument("<list>", "which list").choices(listNames))
      .option("--csv", "print CSV, one line a device, connection, terminal or contact")
      .option("--json", "print a JSON array")
      .option(...conventionOption),
  ).action(async (file: string, name: ListName, _, made: Command) => {
    const options = made.optsWithGlobals<ListOptions>();
    if (options.csv && options.json) made.error("error: choose one of --csv and --json");
    const { list } = await import("./list.js");
    ended = await list(file, name, options, desk);
  });

  withColor(
    command("symbols", "Draw every symbol the program has as a chart.", "  $ spoolrung symbols\n  $ spoolrung symbols --pdf --out prints")
      .option("-o, --out <dir>", "folder to write to; made if missing", folderName, "drawings")
      .option("--svg", "write SVG only, unless --pdf is given too")
      .option("--pdf", "write PDF only, unless --svg is given too"),
  ).action(async (_, made: Command) => {
    const { symbols } = await import("./symbols.js");
    ended = await symbols(made.optsWithGlobals<SymbolsOptions>(), desk);
  });

  try {
    await program.parseAsync(args, { from: "user" });
    return ended;
  } catch (error) {
    if (!(error instanceof CommanderError)) throw error;
    return error.exitCode === 0 ? ExitCode.Fine : ExitCode.Misuse;
  }
}

const conventionOption = ["--convention <name>", "north-american or international, whatever the drawing says", readConvention] as const;

const generalHelp = `
Examples:
  $ spoolrung draw samples/tray-stamper.sprung
  $ spoolrung check samples/tray-stamper.sprung
  $ spoolrung xref samples/tray-stamper.sprung --csv

Exit codes:
  0  fine; there may be warnings
  1  the drawing has errors, is empty or is no text
  2  the command was wrong, a file could not be read, or the output could not be written

Colour follows the terminal, NO_COLOR, --color and --no-color.`;

function folderName(text: string): string {
  if (text === "") throw new InvalidArgumentError("A folder has a name.");
  return text;
}

function versionOf(desk: Desk): string {
  const text = new TextDecoder().decode(desk.readAsset("package.json"));
  return (JSON.parse(text) as { version: string }).version;
}
