import { type Compiled, compile } from "../compile.js";
import type { DrawingInfo } from "../machine/model.js";
import { fileStem, sheetFileName } from "../output/file-name.js";
import { useColor } from "./color.js";
import { overridesOf } from "./convention.js";
import type { Desk, OutputFile } from "./desk.js";
import { ExitCode } from "./exit-code.js";
import { exitCodeFor, worldFor } from "./input.js";
import { openProgress } from "./progress.js";
import { wordFindings } from "./report.js";
import { joinPath, writeFormats } from "./sheet-files.js";

export interface DrawOptions {
  out: string;
  svg?: boolean;
  pdf?: boolean;
  convention?: DrawingInfo["convention"];
  quiet?: boolean;
  color?: boolean;
}

type Drawn = Compiled & { file: string; set: NonNullable<Compiled["set"]> };

/** `spoolrung draw FILE…`: writes the sheets of every drawing, or of none if any has an error. */
export async function draw(files: readonly string[], options: DrawOptions, desk: Desk): Promise<ExitCode> {
  const quiet = options.quiet ?? false;
  const world = await worldFor(files, desk);
  const progress = openProgress(desk, quiet);
  const compiled: (Compiled & { file: string })[] = [];
  for (const file of files) {
    compiled.push({ file, ...(await compile(file, world, (phase) => progress.tell(`${file}: ${phase}`), overridesOf(options))) });
  }
  progress.clear();
  desk.err(wordFindings(compiled, useColor(desk, "err", options.color), quiet ? "error" : "warning"));

  const drawn = compiled.filter((drawing): drawing is Drawn => drawing.set !== undefined);
  if (drawn.length < compiled.length) {
    desk.err("Nothing was drawn.\n");
    return exitCodeFor(
      compiled.flatMap(({ diagnostics }) => diagnostics),
      files,
    );
  }
  const clash = findTwins(drawn);
  if (clash) return refuse(desk, clash);

  const output: OutputFile[] = [];
  for (const { file, set } of drawn) {
    progress.tell(`${file}: writing`);
    output.push(...(await writeFormats(set, options, world)));
  }
  progress.clear();
  const overwritten = findOverwritten(output, options.out, drawn, desk);
  if (overwritten) return refuse(desk, overwritten);
  const trouble = desk.writeWhole(options.out, output);
  if (trouble) return refuse(desk, trouble);

  if (!quiet) {
    desk.out(output.map(({ name }) => `${joinPath(options.out, name)}\n`).join(""));
    desk.err(
      leftovers(drawn, options, desk)
        .map((path) => `${path} is left from an earlier drawing with more sheets.\n`)
        .join(""),
    );
  }
  return ExitCode.Fine;
}

function refuse(desk: Desk, why: string): ExitCode {
  desk.err(`${why}\nNothing was written.\n`);
  return ExitCode.Misuse;
}

/** Two drawings that would be written under one name; names that differ in case alone are one on some systems. */
function findTwins(drawn: readonly Drawn[]): string | undefined {
  const files = new Map<string, string>();
  for (const { file, set } of drawn) {
    const stem = fileStem(set.info);
    const first = files.get(stem.toLowerCase());
    if (first !== undefined) return `${first} and ${file} would both be written as ${stem}. Give each drawing its own number.`;
    files.set(stem.toLowerCase(), file);
  }
  return undefined;
}

function findOverwritten(output: readonly OutputFile[], folder: string, drawn: readonly Drawn[], desk: Desk): string | undefined {
  const read = new Set(
    drawn
      .flatMap(({ sources }) => [...sources.keys()])
      .filter((file) => file !== "-")
      .map(desk.identify),
  );
  const name = output.find((file) => read.has(desk.identify(joinPath(folder, file.name))))?.name;
  return name === undefined ? undefined : `${joinPath(folder, name)} is one of the files the drawing is read from; it is not overwritten.`;
}

/** SVG sheets of the same drawing that it no longer has. */
function leftovers(drawn: readonly Drawn[], { out, svg, pdf }: DrawOptions, desk: Desk): string[] {
  if (pdf && !svg) return [];
  const names = desk.list(out);
  return drawn.flatMap(({ set }) => {
    const kept = new Set(set.sheets.map(({ number }) => sheetFileName(set.info, number)));
    const stem = `${fileStem(set.info)}_sheet-`;
    const ours = names.filter((name) => name.startsWith(stem) && /^\d+\.svg$/.test(name.slice(stem.length)));
    return ours.filter((name) => !kept.has(name)).map((name) => joinPath(out, name));
  });
}
