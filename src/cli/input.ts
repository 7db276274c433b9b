import type { Diagnostic } from "../language/diagnostic.js";
import { decodeText } from "../node-world.js";
import type { World } from "../world.js";
import type { Desk } from "./desk.js";
import { ExitCode } from "./exit-code.js";

/** The world as a command sees it that was given these files: `-` among them stands for standard input. */
export async function worldFor(files: readonly string[], desk: Desk): Promise<World> {
  if (!files.includes("-")) return desk;
  const input = decodeText(await desk.readInput());
  return { ...desk, readText: async (path, within) => (path === "-" ? input : desk.readText(path, within)) };
}

/** Codes of findings that mean: the file named on the command line was never seen. */
const notRead: ReadonlySet<string> = new Set(["file-missing", "file-unreadable", "file-folder"]);

/** How a command ends that found this in the files it was given. */
export function exitCodeFor(diagnostics: readonly Diagnostic[], files: readonly string[]): ExitCode {
  const errors = diagnostics.filter(({ severity }) => severity === "error");
  if (errors.some(({ code, at }) => notRead.has(code) && files.includes(at.file))) return ExitCode.Misuse;
  return errors.length > 0 ? ExitCode.Faulty : ExitCode.Fine;
}
