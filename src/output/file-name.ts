import type { DrawingSet } from "../drawing/marks.js";

/** Names that some systems keep for devices. */
const kept = /^(con|prn|aux|nul|com\d|lpt\d)$/i;

/**
 * The stem of every file of a drawing: its number, else its title, with anything but letters, digits, `.`, `_` and `-`
 * made `-`, so that it is one safe name on every system: `TS-2040`. Never empty.
 */
export function fileStem(info: Pick<DrawingSet["info"], "number" | "title">): string {
  const stem = (text: string) =>
    text
      .normalize("NFKD")
      .replace(/\p{M}/gu, "")
      .replace(/[^\p{L}\p{N}._-]+/gu, "-")
      .replace(/-+/g, "-")
      .replace(/^[-.]+|[-.]+$/g, "")
      .slice(0, 80)
      .replace(/[\ud800-\udbff]$/, "")
      .replace(/[-.]+$/, "");
  const name = stem(info.number) || stem(info.title) || "drawing";
  return kept.test(name.split(".")[0] as string) ? `drawing-${name}` : name;
}

/** The SVG file of one sheet: `TS-2040_sheet-1.svg`. */
export function sheetFileName(info: Pick<DrawingSet["info"], "number" | "title">, sheet: number): string {
  return `${fileStem(info)}_sheet-${sheet}.svg`;
}
