import { boldAdvances, capHeight, regularAdvances } from "./font-metrics.js";
import type { Mm } from "./geometry.js";

/** Size of the font, in mm of its em, whose capitals are `height` mm high. */
export function fontSize(height: Mm): Mm {
  return (height * 1000) / capHeight;
}

/** What stands for a character the font does not have. */
const missing = "□";

/** Characters drawn by another that reads the same. */
const equivalents: ReadonlyMap<string, string> = new Map([
  ["⌀", "Ø"],
  ["‐", "-"],
  ["‑", "-"],
  ["─", "–"],
  ["\u2002", " "],
  ["\u2003", " "],
]);

/** Steer printing or direction but show nothing themselves: joiners, direction and variation marks. */
const invisible = /[\p{Cf}\p{Variation_Selector}]/gu;

/**
 * The text as it is drawn: composed, each control character a space or nothing, and every character the font lacks
 * replaced by a small box, so that what is measured, what is drawn and what XML allows are the same. Idempotent.
 */
export function printable(text: string): string {
  if (/^[ -~]*$/.test(text)) return text;
  let out = "";
  for (const character of text
    .normalize("NFC")
    .replace(/[\t\n\v\f\r\u0085\u2028\u2029]+/g, " ")
    .replace(invisible, "")) {
    const code = character.codePointAt(0) as number;
    if (code < 0x20 || (code >= 0x7f && code < 0xa0)) continue;
    const drawn = equivalents.get(character) ?? character;
    out += advances(false).has(drawn.codePointAt(0) as number) ? drawn : missing;
  }
  return out;
}

/**
 * Width of a text in mm as both writers set it: no kerning, no ligatures.
 * @param height height of the capitals, mm
 */
export function measureText(text: string, height: Mm, bold = false): Mm {
  const table = advances(bold);
  let sum = 0;
  for (const character of printable(text)) sum += table.get(character.codePointAt(0) as number) ?? 0;
  return (sum / 1000) * fontSize(height);
}

/** The text if it is no wider than `width` mm, else as much of its beginning as fits with `…` after it; empty if not even that fits. */
export function fitText(text: string, height: Mm, width: Mm, bold = false): string {
  const drawn = printable(text);
  if (measureText(drawn, height, bold) <= width + tolerance) return drawn;
  const table = advances(bold);
  const room = ((width + tolerance) * 1000) / fontSize(height) - (table.get(0x2026) ?? 0);
  if (room < 0) return "";
  let sum = 0;
  let kept = "";
  for (const character of drawn) {
    sum += table.get(character.codePointAt(0) as number) ?? 0;
    if (sum > room) break;
    kept += character;
  }
  return `${kept.trimEnd()}…`;
}

/**
 * Breaks a text at spaces into lines no wider than `width` mm, and a word longer than a line within the word. Line
 * breaks in the text are kept. What does not go into `maxLines` is shortened with `…` in the last of them.
 */
export function wrapText(text: string, height: Mm, width: Mm, maxLines: number, bold = false): string[] {
  if (maxLines < 1) return [];
  const lines: string[] = [];
  for (const paragraph of text.split(/\r\n|[\n\r\u2028\u2029]/)) {
    const words = printable(paragraph)
      .split(" ")
      .filter((word) => word !== "");
    let line = "";
    for (let word of words) {
      const longer = line === "" ? word : `${line} ${word}`;
      if (measureText(longer, height, bold) <= width + tolerance) {
        line = longer;
        continue;
      }
      if (line !== "") lines.push(line);
      while (word !== "" && measureText(word, height, bold) > width + tolerance && lines.length <= maxLines) {
        const head = longestHead(word, height, width, bold);
        lines.push(head);
        word = word.slice(head.length);
      }
      line = word;
      if (lines.length > maxLines) break;
    }
    if (line !== "") lines.push(line);
    if (lines.length > maxLines) break;
  }
  if (lines.length <= maxLines) return lines;
  const kept = lines.slice(0, maxLines);
  kept[maxLines - 1] = fitText(`${kept[maxLines - 1]} ${lines.slice(maxLines).join(" ")}`, height, width, bold);
  return kept.filter((line) => line !== "");
}

/** Rounding must not shorten a text in a cell made to its measure. */
const tolerance: Mm = 0.001;

/** At least one character, so that a narrow column ends somewhere. */
function longestHead(word: string, height: Mm, width: Mm, bold: boolean): string {
  let head = "";
  for (const character of word) {
    if (head !== "" && measureText(head + character, height, bold) > width + tolerance) break;
    head += character;
  }
  return head;
}

const tables: { regular?: ReadonlyMap<number, number>; bold?: ReadonlyMap<number, number> } = {};

/** Advance of each code point the font has, in thousandths of the em. */
function advances(bold: boolean): ReadonlyMap<number, number> {
  if (bold) {
    tables.bold ??= readAdvances(boldAdvances);
    return tables.bold;
  }
  tables.regular ??= readAdvances(regularAdvances);
  return tables.regular;
}

function readAdvances(text: string): ReadonlyMap<number, number> {
  const table = new Map<number, number>();
  for (const line of text.trim().split("\n")) {
    const [first, ...widths] = line.split(" ");
    const start = Number.parseInt(first as string, 16);
    widths.forEach((width, index) => {
      table.set(start + index, Number(width));
    });
  }
  return table;
}
