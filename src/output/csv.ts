/**
 * Rows as comma-separated values after RFC 4180: CRLF at line ends, a cell quoted where it must be. A text that a
 * spreadsheet would take for a formula gets an apostrophe before it, so that it stays text.
 */
export function writeCsv(header: readonly string[], rows: readonly (readonly (string | number)[])[]): string {
  return [header, ...rows].map((row) => `${row.map(cell).join(",")}\r\n`).join("");
}

function cell(value: string | number): string {
  if (typeof value === "number") return String(value);
  const text = /^[=+\-@\t\r]/.test(value) ? `'${value}` : value;
  return /[",\r\n]|^\s|\s$/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
}
