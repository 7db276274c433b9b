/**
 * Rows as CSV by RFC 4180. A cell that a spreadsheet would take for a formula gets an apostrophe before it, so that a
 * drawing can be opened without running anything.
 */
export function writeCsv(rows: readonly (readonly string[])[]): string {
  return rows.map((row) => `${row.map(writeCell).join(",")}\r\n`).join("");
}

function writeCell(cell: string): string {
  const safe = /^[=+\-@\t\r]/.test(cell) ? `'${cell}` : cell;
  return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}
