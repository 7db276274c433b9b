/** Data as indented JSON with a line end, keys in the order they were set. */
export function writeJson(data: unknown): string {
  return `${JSON.stringify(data, null, 2)}\n`;
}
