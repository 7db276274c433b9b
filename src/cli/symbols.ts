import { symbolChart } from "../sheets/symbol-chart.js";
import type { Desk } from "./desk.js";
import { ExitCode } from "./exit-code.js";
import { joinPath, writeFormats } from "./sheet-files.js";

export interface SymbolsOptions {
  out: string;
  svg?: boolean;
  pdf?: boolean;
}

/** `spoolrung symbols`: draws every symbol as a chart, for looking at. */
export async function symbols(options: SymbolsOptions, desk: Desk): Promise<ExitCode> {
  const output = await writeFormats(symbolChart(desk), options, desk);
  const trouble = desk.writeWhole(options.out, output);
  if (trouble) {
    desk.err(`${trouble}\nNothing was written.\n`);
    return ExitCode.Misuse;
  }
  desk.out(output.map(({ name }) => `${joinPath(options.out, name)}\n`).join(""));
  return ExitCode.Fine;
}
