import { type Examined, examine } from "../compile.js";
import type { Diagnostic } from "../language/diagnostic.js";
import { writeJson } from "../output/json.js";
import { useColor } from "./color.js";
import type { Desk } from "./desk.js";
import type { ExitCode } from "./exit-code.js";
import { exitCodeFor, worldFor } from "./input.js";
import { wordFindings } from "./report.js";

export interface CheckOptions {
  json?: boolean;
  color?: boolean;
}

/** Stands under every report: silence of the checks is not safety. */
const caution =
  "These checks do not certify the machine. Emergency stop, guarding and risk reduction follow local codes and qualified people; isolate and verify before work.\n";

/** `spoolrung check FILE…`: says what is wrong with each drawing, to the reader or as data. */
export async function check(files: readonly string[], { json, color }: CheckOptions, desk: Desk): Promise<ExitCode> {
  const world = await worldFor(files, desk);
  const examined: Examined[] = [];
  for (const file of files) examined.push(await examine(file, world));
  const all = examined.flatMap(({ diagnostics }) => diagnostics);
  if (json) desk.out(writeJson(all.map(asData)));
  else desk.out((wordFindings(examined, useColor(desk, "out", color)) || "No errors, no warnings.\n") + caution);
  return exitCodeFor(all, files);
}

/** A finding as written by `--json`. */
function asData({ code, severity, message, at: { file, line, column, endLine, endColumn }, hint }: Diagnostic) {
  return { code, severity, message, file, line, column, endLine, endColumn, ...(hint === undefined ? {} : { hint }) };
}
