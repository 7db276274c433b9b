import type { Mm } from "./geometry.js";
import { fitText, measureText, printable } from "./text.js";

/**
 * Breaks a name behind its hyphens, underscores and slashes and at its spaces into lines no wider than `width` mm, and within a word
 * only where a word alone is wider. A hyphen it begins with stays with what follows. What does not go into `most` lines is shortened with `…` in the last of them.
 * @param height height of the capitals, mm
 */
export function wrapName(name: string, height: Mm, width: Mm, most: number, bold = false): string[] {
  const drawn = printable(name);
  if (measureText(drawn, height, bold) <= width + tolerance) return drawn.trim() === "" ? [] : [drawn];
  const wide = (text: string) => measureText(text.trimEnd(), height, bold) > width + tolerance;
  const lines: string[] = [];
  let line = "";
  for (let piece of piecesOf(drawn, (text) => !wide(text))) {
    if (!wide(line + piece)) {
      line += piece;
      continue;
    }
    if (line !== "") lines.push(line);
    while (wide(piece) && lines.length <= most) {
      let head = "";
      for (const character of piece) {
        if (head !== "" && wide(head + character)) break;
        head += character;
      }
      lines.push(head);
      piece = piece.slice(head.length);
    }
    line = piece;
    if (lines.length > most) break;
  }
  if (line !== "") lines.push(line);
  const kept = lines.length <= most ? lines : [...lines.slice(0, most - 1), fitText(lines.slice(most - 1).join(""), height, width, bold)];
  return kept.map((text) => text.trim()).filter((text) => text !== "");
}

/** What a name may be broken into; a number keeps its unit beside it where both together have room. */
function piecesOf(name: string, fits: (text: string) => boolean): string[] {
  const pieces: string[] = [];
  for (const piece of name.match(/(?:^-)?[^\s\-_/]*(?:[\s\-_/]+|$)/g) ?? []) {
    const before = pieces.at(-1);
    if (before !== undefined && /\d\s$/.test(before) && /^[A-Za-z°µΩ%][\w²³]{0,3}([\s/]|$)/.test(piece) && fits(before + piece))
      pieces[pieces.length - 1] = before + piece;
    else pieces.push(piece);
  }
  return pieces;
}

/** A name in at most `most` lines: at the first height, or at the next where it would be shortened at that. */
export function wrapNameAt(heights: readonly [Mm, ...Mm[]], name: string, width: Mm, most: number): { lines: string[]; height: Mm } {
  let tried = { lines: wrapName(name, heights[0], width, most), height: heights[0] };
  for (const height of heights.slice(1)) {
    if (!tried.lines.at(-1)?.endsWith("…") || name.endsWith("…")) break;
    tried = { lines: wrapName(name, height, width, most), height };
  }
  return tried;
}

/** From one line of a wrapped text to the next, mm. */
export const wrappedPitch = (height: Mm): Mm => height * 1.45;

/** Rounding must not break a text that was measured to fit. */
const tolerance: Mm = 0.001;
