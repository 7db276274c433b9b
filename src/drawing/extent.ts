import type { Box, Point } from "./geometry.js";
import type { Mark, Segment } from "./marks.js";
import { fontSize, measureText } from "./text.js";

type TextMark = Mark & { kind: "text" };

/** The box of a text: its width by its capitals' height, without what hangs below the baseline. */
export function textBox(mark: Pick<TextMark, "at" | "text" | "height" | "anchor" | "rotated" | "bold">): Box {
  const width = measureText(mark.text, mark.height, mark.bold);
  const before = mark.anchor === "start" ? 0 : mark.anchor === "middle" ? width / 2 : width;
  return mark.rotated
    ? { x: mark.at.x - mark.height, y: mark.at.y - (width - before), width: mark.height, height: width }
    : { x: mark.at.x - before, y: mark.at.y - mark.height, width, height: mark.height };
}

/** The line under an underlined text: where it is drawn and how wide. Both writers draw it as a stroke, so that they agree. */
export function underline(mark: TextMark): { path: Segment[]; width: number } {
  const box = textBox(mark);
  const drop = fontSize(mark.height) * 0.1;
  const [from, to]: [Point, Point] = mark.rotated
    ? [
        { x: mark.at.x + drop, y: box.y + box.height },
        { x: mark.at.x + drop, y: box.y },
      ]
    : [
        { x: box.x, y: mark.at.y + drop },
        { x: box.x + box.width, y: mark.at.y + drop },
      ];
  return {
    path: [
      { op: "M", ...from },
      { op: "L", ...to },
    ],
    width: Math.max(0.18, mark.height * 0.08),
  };
}
