import { compile } from "../compile.js";
import type { CrossReferenceRow } from "../schedules/rows.js";
import { useColor } from "./color.js";
import { writeCsv } from "./csv.js";
import type { Desk } from "./desk.js";
import { ExitCode } from "./exit-code.js";
import { exitCodeFor, worldFor } from "./input.js";
import { openProgress } from "./progress.js";
import { wordFindings } from "./report.js";
import { writeTable } from "./table.js";

export interface XrefOptions {
  csv?: boolean;
  json?: boolean;
  color?: boolean;
}

/** `spoolrung xref FILE`: every coil with its contacts, as a table for the terminal, as CSV or as JSON. */
export async function xref(file: string, { csv, json, color }: XrefOptions, desk: Desk): Promise<ExitCode> {
  const world = await worldFor([file], desk);
  const progress = openProgress(desk, false);
  const compiled = await compile(file, world, (phase) => progress.tell(`${file}: ${phase}`));
  progress.clear();
  desk.err(wordFindings([compiled], useColor(desk, "err", color)));
  const { rows } = compiled;
  if (!rows) return exitCodeFor(compiled.diagnostics, [file]);
  if (json) desk.out(`${JSON.stringify(rows.map(asData), null, 2)}\n`);
  else if (csv) desk.out(writeCsv([csvHead, ...rows.flatMap(csvLines)]));
  else desk.out(writeTable(tableHead, rows.flatMap(tableLines), useColor(desk, "out", color)));
  return ExitCode.Fine;
}

/** A row as written by `--json`. */
function asData({ coil, kind, text, sheet, line, contacts, valve }: CrossReferenceRow) {
  return {
    coil,
    kind,
    text,
    sheet,
    line,
    contacts: contacts.map(({ type, terminals, sheet, line }) => ({ type, terminals, sheet, line })),
    ...(valve ? { valve: { name: valve.name, sheet: valve.sheet, zone: valve.zone } } : {}),
  };
}

const csvHead = [
  "coil",
  "kind",
  "text",
  "sheet",
  "line",
  "contact type",
  "contact terminals",
  "contact sheet",
  "contact line",
  "valve",
  "valve sheet",
  "valve zone",
];

/** One line a contact; a coil with none has one line of its own. */
function csvLines({ coil, kind, text, sheet, line, contacts, valve }: CrossReferenceRow): string[][] {
  const own = [coil, kind, text, String(sheet), String(line)];
  const end = valve ? [valve.name, String(valve.sheet), valve.zone] : ["", "", ""];
  if (contacts.length === 0) return [[...own, "", "", "", "", ...end]];
  return contacts.map((c) => [...own, c.type, c.terminals, String(c.sheet), String(c.line), ...end]);
}

const tableHead = ["Coil", "Kind", "Function", "Sheet", "Line", "Contact", "Terminals", "Sheet", "Line", "Valve"];

/** As in the CSV, but what repeats is left out. */
function tableLines({ coil, kind, text, sheet, line, contacts, valve }: CrossReferenceRow): string[][] {
  const own = [coil, kind, text, String(sheet), String(line)];
  const end = valve ? `${valve.name}, sheet ${valve.sheet} ${valve.zone}` : "";
  const [first, ...more] = contacts.map((c) => [c.timed ? `${c.type} timed` : c.type, c.terminals, String(c.sheet), String(c.line)]);
  return [[...own, ...(first ?? ["", "", "", ""]), end], ...more.map((cells) => ["", "", "", "", "", ...cells, ""])];
}
