/** A table for the terminal: columns padded to their widest cell, two spaces between. */
export function writeTable(head: readonly string[], rows: readonly (readonly string[])[], color: boolean): string {
  const plain = (cell: string) => cell.replace(/\p{Cc}/gu, " ");
  const cells = [head, ...rows].map((row) => row.map(plain));
  const widths = head.map((_, column) => cells.reduce((most, row) => Math.max(most, width(row[column] ?? "")), 0));
  const lines = cells.map((row) =>
    row
      .map((cell, column) => cell + " ".repeat((widths[column] ?? 0) - width(cell)))
      .join("  ")
      .trimEnd(),
  );
  const [first = "", ...rest] = lines;
  return [color ? `\x1b[1m${first}\x1b[0m` : first, ...rest].map((line) => `${line}\n`).join("");
}

/** Columns a text takes on a terminal: marks that combine take none, wide East Asian characters two. */
function width(text: string): number {
  let columns = 0;
  for (const character of text.normalize("NFC")) {
    if (/\p{M}/u.test(character)) continue;
    columns += /[\u1100-\u115f\u2e80-\ua4cf\uac00-\ud7a3\uf900-\ufaff\ufe30-\ufe6f\uff00-\uff60\uffe0-\uffe6]/.test(character) ? 2 : 1;
  }
  return columns;
}
