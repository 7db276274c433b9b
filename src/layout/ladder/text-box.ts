import { textBox } from "../../drawing/extent.js";
import type { Box, Mm } from "../../drawing/geometry.js";
import type { PlacedText } from "../placement.js";

/** The box a level text needs, with what hangs below its baseline; a reference needs all of its room. */
export function roomOf(text: PlacedText): Box {
  const box = textBox({ at: text.at, text: typeof text.text === "string" ? text.text : "", height: text.height, anchor: text.anchor });
  const width = typeof text.text === "string" ? box.width : text.text.room;
  const before = text.anchor === "start" ? 0 : text.anchor === "middle" ? width / 2 : width;
  return { x: text.at.x - before, y: box.y, width, height: box.height + text.height * 0.3 };
}

/** The smallest box around boxes; about the origin if there are none. */
export function around(boxes: readonly Box[]): Box {
  if (boxes.length === 0) return { x: 0, y: 0, width: 0, height: 0 };
  const x = Math.min(...boxes.map((box) => box.x));
  const y = Math.min(...boxes.map((box) => box.y));
  return {
    x,
    y,
    width: Math.max(...boxes.map((box) => box.x + box.width)) - x,
    height: Math.max(...boxes.map((box) => box.y + box.height)) - y,
  };
}

/** Room for what hangs below the baseline of these words, mm. */
export const hang = (words: string, height: Mm): Mm => (/[gjpqyQ_,;()@/]/.test(words) ? height * 0.3 : 0);
