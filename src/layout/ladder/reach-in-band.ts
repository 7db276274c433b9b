import { textBox } from "../../drawing/extent.js";
import type { Mm, Point } from "../../drawing/geometry.js";
import type { Segment } from "../../drawing/marks.js";
import { arcCurves } from "../../drawing/path.js";
import type { Symbol } from "../../symbols/symbol.js";

/** How far to one side or the other a symbol, moved by `shift`, reaches between two heights, mm. Texts beside it stay beyond that. */
export function reachInBand(symbol: Symbol, shift: Point, top: Mm, bottom: Mm, side: "left" | "either" = "either"): Mm {
  let reach: Mm = 0;
  for (const shape of symbol.shapes) {
    if (shape.kind === "text") {
      if (side === "either") continue;
      const { x, y, height } = textBox({ ...shape, at: { x: shape.at.x, y: shape.at.y + shape.height / 2 } });
      if (y + shift.y <= bottom && y + height + shift.y >= top) reach = Math.max(reach, -x - shift.x);
      continue;
    }
    for (const { x, y } of pointsAlong(shape.path)) {
      if (y + shift.y >= top && y + shift.y <= bottom) reach = Math.max(reach, side === "left" ? -x - shift.x : Math.abs(x + shift.x));
    }
  }
  return reach;
}

/** The highest and lowest place where a symbol, moved by `shift`, reaches farther right than `x`, mm; its middle if nowhere. */
export function heightBeyond(symbol: Symbol, shift: Point, x: Mm): { top: Mm; bottom: Mm } {
  const there = symbol.shapes
    .flatMap((shape) => (shape.kind === "text" ? [] : pointsAlong(shape.path)))
    .filter((point) => point.x + shift.x > x)
    .map(({ y }) => y + shift.y);
  return { top: Math.min(0, ...there), bottom: Math.max(0, ...there) };
}

/** Fine enough that no line passes a 2 mm band between two of its points. */
const steps = 24;

const pointsAlong = (path: readonly Segment[]): Point[] => polylinesOf(path).flat();

/** A path as runs of points, curves in short straight steps. */
export function polylinesOf(path: readonly Segment[]): Point[][] {
  const runs: Point[][] = [];
  let points: Point[] = [];
  let at: Point = { x: 0, y: 0 };
  let start = at;
  const line = (to: Point) => {
    for (let i = 0; i <= steps; i++) points.push({ x: at.x + ((to.x - at.x) * i) / steps, y: at.y + ((to.y - at.y) * i) / steps });
    at = to;
  };
  const curve = (c: Segment & { op: "C" }) => {
    const from = at;
    for (let i = 0; i <= steps; i++) {
      const t = i / steps;
      const u = 1 - t;
      const mix = (a: Mm, b: Mm, c: Mm, d: Mm) => u * u * u * a + 3 * u * u * t * b + 3 * u * t * t * c + t * t * t * d;
      points.push({ x: mix(from.x, c.x1, c.x2, c.x), y: mix(from.y, c.y1, c.y2, c.y) });
    }
    at = { x: c.x, y: c.y };
  };
  for (const s of path) {
    if (s.op === "M") {
      start = at = { x: s.x, y: s.y };
      points = [];
      runs.push(points);
    } else if (s.op === "L") line({ x: s.x, y: s.y });
    else if (s.op === "C") curve(s);
    else if (s.op === "A") arcCurves(at, s).forEach(curve);
    else line(start);
  }
  return runs;
}
