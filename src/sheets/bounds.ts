import { textBox } from "../drawing/extent.js";
import type { Box, Point } from "../drawing/geometry.js";
import type { Mark, PartId } from "../drawing/marks.js";

/** The box of all marks of each part, in the order drawn. Curves are taken by their ends and handles, arcs by their ends. */
export function boundsByPart(marks: readonly Mark[]): Map<PartId, Box> {
  const bounds = new Map<PartId, { left: number; top: number; right: number; bottom: number }>();
  for (const mark of marks) {
    if (mark.part === undefined || mark.kind === "link") continue;
    for (const { x, y } of pointsOf(mark)) {
      const known = bounds.get(mark.part);
      if (!known) bounds.set(mark.part, { left: x, top: y, right: x, bottom: y });
      else {
        known.left = Math.min(known.left, x);
        known.top = Math.min(known.top, y);
        known.right = Math.max(known.right, x);
        known.bottom = Math.max(known.bottom, y);
      }
    }
  }
  return new Map(
    [...bounds].map(([part, { left, top, right, bottom }]) => [part, { x: left, y: top, width: right - left, height: bottom - top }]),
  );
}

function pointsOf(mark: Exclude<Mark, { kind: "link" }>): Point[] {
  if (mark.kind === "text") {
    const { x, y, width, height } = textBox(mark);
    return [
      { x, y },
      { x: x + width, y: y + height },
    ];
  }
  return mark.path.flatMap((s): Point[] => {
    if (s.op === "Z") return [];
    if (s.op === "C") return [{ x: s.x1, y: s.y1 }, { x: s.x2, y: s.y2 }, s];
    return [s];
  });
}
