import { compile } from "../compile.js";
import type { DrawingInfo } from "../machine/model.js";
import { capital } from "../machine/report.js";
import { writeCsv } from "../output/csv.js";
import { writeJson } from "../output/json.js";
import type { ListName } from "../schedules/list-names.js";
import { listMakers } from "../schedules/lists.js";
import { useColor } from "./color.js";
import { overridesOf } from "./convention.js";
import type { Desk } from "./desk.js";
import { ExitCode } from "./exit-code.js";
import { exitCodeFor, worldFor } from "./input.js";
import { openProgress } from "./progress.js";
import { wordFindings } from "./report.js";
import { writeTable } from "./table.js";

export interface ListOptions {
  csv?: boolean;
  json?: boolean;
  convention?: DrawingInfo["convention"];
  color?: boolean;
}

/** `spoolrung list FILE devices|wires|terminals|contacts`: one of the lists, as a table for the terminal, as CSV or as JSON. */
export async function list(file: string, name: ListName, options: ListOptions, desk: Desk): Promise<ExitCode> {
  const { csv, json, color } = options;
  const world = await worldFor([file], desk);
  const progress = openProgress(desk, false);
  const compiled = await compile(file, world, (phase) => progress.tell(`${file}: ${phase}`), overridesOf(options));
  progress.clear();
  desk.err(wordFindings([compiled], useColor(desk, "err", color), "warning"));
  const { machine, layout } = compiled;
  if (!layout) return exitCodeFor(compiled.diagnostics, [file]);
  const { heads, records, shared, data } = listMakers[name](machine, layout);
  if (json) desk.out(writeJson(data));
  else if (csv) desk.out(writeCsv(heads, records));
  else
    desk.out(
      writeTable(
        heads.map((head) => capital(head === "line" && machine.drawing.convention === "international" ? "path" : head)),
        withoutRepeats(records, shared),
        useColor(desk, "out", color),
      ),
    );
  return ExitCode.Fine;
}

/** As in the CSV, but what repeats is left out. */
function withoutRepeats(records: readonly (readonly (string | number)[])[], shared: number): string[][] {
  return records.map((record, index) => {
    const before = records[index - 1];
    const alike = before ? record.slice(0, shared).findIndex((cell, column) => cell !== before[column]) : 0;
    const repeated = alike < 0 ? shared : alike;
    return record.map((cell, column) => (column < repeated ? "" : String(cell)));
  });
}
