import type { Device, DrawingInfo } from "../machine/model.js";
import { printedName } from "../machine/walk.js";
import { linePlace, nameOf, zonePlace } from "../schedules/place-words.js";
import type { ContactReference, CrossReferenceRow, SpareContact } from "../schedules/rows.js";
import { type Appearances, operatorOf } from "./appearances.js";
import type { Piece } from "./references.js";
import type { Cell, Table } from "./table.js";

/** What stands below the tables to explain their entries. */
export function tableNotes(convention: DrawingInfo["convention"]): string[] {
  const place = convention === "international" ? "/sheet.path" : "sheet/line";
  return [
    `Each contact: its terminals, then ${place}. NO is normally open, NC normally closed.`,
    "Not a certification. Isolate and verify before work.",
  ];
}

/**
 * The cross-reference as tables: every coil and other load with its contacts and its valve, then every switch with what
 * works it. A column with nothing in it is left out.
 */
export function crossReferenceTables(
  coils: readonly CrossReferenceRow[],
  switches: readonly CrossReferenceRow[],
  appearances: Appearances,
): Table[] {
  return [coilTable(coils, appearances), switchTable(switches, appearances)].filter(({ rows }) => rows.length > 0).map(withoutEmptyColumns);
}

function withoutEmptyColumns(table: Table): Table {
  const filled = table.columns.map((_, index) =>
    table.rows.some((row) => {
      const cell = row[index] as Cell;
      return "entries" in cell ? cell.entries.length > 0 : cell.text !== "";
    }),
  );
  const keep = <Item>(items: Item[]) => items.filter((_, index) => filled[index]);
  return { ...table, columns: keep(table.columns), rows: table.rows.map(keep) };
}

function coilTable(rows: readonly CrossReferenceRow[], appearances: Appearances): Table {
  const { machine } = appearances;
  const { convention } = machine.drawing;
  return {
    title: "Coils and other loads",
    columns: [
      { title: "Coil", share: 20 },
      { title: "Kind", share: 23 },
      { title: "Function", share: 62 },
      { title: convention === "international" ? "Path" : "Line", share: 18 },
      { title: "Main contacts", share: 40 },
      { title: "NO contacts", share: 62 },
      { title: "NC contacts", share: 62 },
      { title: "Valve", share: 27 },
    ],
    rows: rows.map((row) => {
      const home = appearances.loadOf(row.coil)?.part;
      return [
        { text: rowName(row, appearances), to: home, bold: true },
        { text: kindName(row.kind) },
        { text: row.text },
        { entries: [{ text: linePlace(row.sheet, row.line, convention), to: home }] },
        contacts(row, "main", appearances),
        contacts(row, "NO", appearances),
        contacts(row, "NC", appearances),
        valve(row, appearances),
      ];
    }),
  };
}

function switchTable(rows: readonly CrossReferenceRow[], appearances: Appearances): Table {
  return {
    title: "Switches and other contacts",
    columns: [
      { title: "Device", share: 20 },
      { title: "Kind", share: 23 },
      { title: "Function", share: 62 },
      { title: "Operated by", share: 45 },
      { title: "In the power circuit", share: 40 },
      { title: "NO contacts", share: 62 },
      { title: "NC contacts", share: 62 },
    ],
    rows: rows.map((row) => [
      { text: rowName(row, appearances), to: appearances.contactsOf(row.device ?? row.coil)[0]?.part, bold: true },
      { text: kindName(row.kind) },
      { text: row.text },
      operatedBy(row, appearances),
      contacts(row, "main", appearances),
      contacts(row, "NO", appearances),
      contacts(row, "NC", appearances),
    ]),
  };
}

/** A row's designation as printed. */
function rowName({ coil, device }: CrossReferenceRow, { machine }: Appearances): string {
  return device === undefined ? nameOf(coil, machine) : printedName(coil, machine.drawing.convention);
}

function contacts(row: CrossReferenceRow, type: ContactReference["type"], appearances: Appearances): Cell {
  const entries = row.contacts
    .filter((contact) => contact.type === type)
    .map((contact): Piece => {
      const to = appearances.contactOf(row.device ?? row.coil, contact);
      const terminals = terminalsOf(contact);
      const place = linePlace(contact.sheet, contact.line, appearances.machine.drawing.convention);
      return { text: `${terminals}${terminals === "" ? "" : "  "}${place}`, ...(to === undefined ? {} : { to }) };
    });
  const spare = (row.spare ?? [])
    .filter((contact) => contact.type === type)
    .map((contact): Piece => ({ text: `${terminalsOf(contact)}  spare` }));
  return { entries: [...entries, ...spare] };
}

/** `17-18 timed` */
function terminalsOf({ terminals, timed }: SpareContact): string {
  return [terminals, timed ? "timed" : ""].filter((part) => part !== "").join(" ");
}

function valve(row: CrossReferenceRow, appearances: Appearances): Cell {
  if (!row.valve) return { text: "" };
  const { name } = row.valve;
  const where = zonePlace(row.valve, appearances.machine.drawing.convention);
  const to = appearances.fluidSideOf(row.coil)?.part;
  return { text: `${name} ${where}`, ...(to === undefined ? {} : { to }) };
}

function operatedBy(row: CrossReferenceRow, appearances: Appearances): Cell {
  const { machine } = appearances;
  const device = machine.devices.get(row.device ?? row.coil);
  const operator = device ? operatorOf(device) : undefined;
  if (!device || operator === undefined) return { text: "" };
  const found = appearances.fluidSideOf(row.coil);
  const where = found ? zonePlace(found.place, machine.drawing.convention) : "";
  const stretch = device.place ? placeName(device.place, machine.drawing.units) : "";
  const text = [nameOf(operator, machine), stretch, where].filter((part) => part !== "").join(" ");
  return { text, ...(found ? { to: found.part } : {}) };
}

/** Where along the stroke, in the drawing's unit of length. */
function placeName({ written, from, to }: NonNullable<Device["place"]>, units: DrawingInfo["units"]): string {
  if (written === "retracted" || written === "extended") return written;
  const figure = (mm: number) => (units === "inch" ? Math.round((mm / 25.4) * 1000) / 1000 : Math.round(mm * 100) / 100);
  const unit = units === "inch" ? "in" : "mm";
  // A switch set to one place works a little before and behind it.
  return written === "at" ? `at ${figure((from + to) / 2)} ${unit}` : `${figure(from)} to ${figure(to)} ${unit}`;
}

function kindName(kind: string): string {
  const words = kind.replaceAll("-", " ");
  return words.charAt(0).toUpperCase() + words.slice(1);
}
