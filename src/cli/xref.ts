import { compile } from "../compile.js";
import type { DrawingInfo } from "../machine/model.js";
import { writeCsv } from "../output/csv.js";
import { writeJson } from "../output/json.js";
import { crossReferenceData, crossReferenceHeads, crossReferenceRecords } from "../schedules/cross-reference-records.js";
import type { CrossReferenceRow } from "../schedules/rows.js";
import { useColor } from "./color.js";
import { overridesOf } from "./convention.js";
import type { Desk } from "./desk.js";
import { ExitCode } from "./exit-code.js";
import { exitCodeFor, worldFor } from "./input.js";
import { openProgress } from "./progress.js";
import { wordFindings } from "./report.js";
import { writeTable } from "./table.js";

export interface XrefOptions {
  csv?: boolean;
  json?: boolean;
  convention?: DrawingInfo["convention"];
  color?: boolean;
}

/** `spoolrung xref FILE`: every coil with its contacts, as a table for the terminal, as CSV or as JSON. */
export async function xref(file: string, options: XrefOptions, desk: Desk): Promise<ExitCode> {
  const { csv, json, color } = options;
  const world = await worldFor([file], desk);
  const progress = openProgress(desk, false);
  const compiled = await compile(file, world, (phase) => progress.tell(`${file}: ${phase}`), overridesOf(options));
  progress.clear();
  desk.err(wordFindings([compiled], useColor(desk, "err", color), "warning"));
  const { rows, machine } = compiled;
  if (!rows) return exitCodeFor(compiled.diagnostics, [file]);
  if (json) desk.out(writeJson(crossReferenceData(rows)));
  else if (csv) desk.out(writeCsv(crossReferenceHeads, crossReferenceRecords(rows)));
  else desk.out(writeTable(tableHead(machine.drawing.convention), rows.flatMap(tableLines), useColor(desk, "out", color)));
  return ExitCode.Fine;
}

function tableHead(convention: DrawingInfo["convention"]): string[] {
  const line = convention === "international" ? "Path" : "Line";
  return ["Coil", "Kind", "Function", "Sheet", line, "Contact", "Terminals", "Sheet", line, "Valve"];
}

/** As in the CSV, but what repeats is left out. */
function tableLines({ coil, kind, text, sheet, line, contacts, valve }: CrossReferenceRow): string[][] {
  const own = [coil, kind, text, String(sheet), String(line)];
  const end = valve ? `${valve.name}, sheet ${valve.sheet} ${valve.zone}` : "";
  const [first, ...more] = contacts.map((c) => [c.timed ? `${c.type} timed` : c.type, c.terminals, String(c.sheet), String(c.line)]);
  return [[...own, ...(first ?? ["", "", "", ""]), end], ...more.map((cells) => ["", "", "", "", "", ...cells, ""])];
}
