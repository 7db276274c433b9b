import type { CrossReferenceRow } from "./rows.js";

/** The heads of the cross-reference as flat records. */
export const crossReferenceHeads = [
  "coil",
  "kind",
  "text",
  "sheet",
  "line",
  "contact",
  "timed",
  "terminals",
  "contact sheet",
  "contact line",
  "valve",
  "valve sheet",
  "valve zone",
] as const;

/** The cross-reference as flat records under `crossReferenceHeads`, one for each contact, and one for a coil that has none. */
export function crossReferenceRecords(rows: readonly CrossReferenceRow[]): (string | number)[][] {
  return rows.flatMap((row) => {
    const start = [row.coil, row.kind, row.text, row.sheet, row.line];
    const end = row.valve ? [row.valve.name, row.valve.sheet, row.valve.zone] : ["", "", ""];
    if (row.contacts.length === 0) return [[...start, "", "", "", "", "", ...end]];
    return row.contacts.map(({ type, timed, terminals, sheet, line }) => [
      ...start,
      type,
      timed ? "timed" : "",
      terminals,
      sheet,
      line,
      ...end,
    ]);
  });
}

/** The cross-reference as it is handed to other programs: the same keys in the same order whatever made the rows. */
export function crossReferenceData(rows: readonly CrossReferenceRow[]): object[] {
  return rows.map(({ coil, kind, text, sheet, line, contacts, valve }) => ({
    coil,
    kind,
    text,
    sheet,
    line,
    contacts: contacts.map(({ type, terminals, sheet, line }) => ({ type, terminals, sheet, line })),
    ...(valve ? { valve: { name: valve.name, sheet: valve.sheet, zone: valve.zone } } : {}),
  }));
}
