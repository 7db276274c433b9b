import type { Box, Point } from "../../src/drawing/geometry.js";
import type { Segment } from "../../src/drawing/marks.js";
import { arcCurves } from "../../src/drawing/path.js";
import type { Shape, Symbol } from "../../src/symbols/symbol.js";

/** Straight pieces of a path, curves cut into sixteenths, one list of points for each stretch. */
export function flatten(path: readonly Segment[]): Point[][] {
  const stretches: Point[][] = [];
  let here: Point = { x: 0, y: 0 };
  const curve = (from: Point, c: Segment & { op: "C" }) => {
    for (let i = 1; i <= 16; i++) {
      const t = i / 16;
      const u = 1 - t;
      const at = (a: number, b: number, d: number, e: number) => u * u * u * a + 3 * u * u * t * b + 3 * u * t * t * d + t * t * t * e;
      stretches.at(-1)?.push({ x: at(from.x, c.x1, c.x2, c.x), y: at(from.y, c.y1, c.y2, c.y) });
    }
  };
  for (const segment of path) {
    if (segment.op === "Z") {
      const first = stretches.at(-1)?.[0];
      if (first) stretches.at(-1)?.push(first);
      continue;
    }
    if (segment.op === "M") stretches.push([{ x: segment.x, y: segment.y }]);
    else if (segment.op === "L") stretches.at(-1)?.push({ x: segment.x, y: segment.y });
    else if (segment.op === "C") curve(here, segment);
    else if (segment.op === "A") {
      let from = here;
      for (const c of arcCurves(here, segment)) {
        curve(from, c);
        from = c;
      }
    }
    here = segment;
  }
  return stretches;
}

/** The box of everything drawn but texts, from the flattened paths: a second way beside the one the program uses. */
export function drawnBox(symbol: Symbol): Box {
  const points: Point[] = [...symbol.ports];
  for (const shape of symbol.shapes) if (shape.kind !== "text") points.push(...flatten(shape.path).flat());
  const xs = points.map(({ x }) => x);
  const ys = points.map(({ y }) => y);
  const x = Math.min(...xs);
  const y = Math.min(...ys);
  return { x, y, width: Math.max(...xs) - x, height: Math.max(...ys) - y };
}

export function distanceToSegment(p: Point, a: Point, b: Point): number {
  const dx = b.x - a.x;
  const dy = b.y - a.y;
  const length = dx * dx + dy * dy;
  const t = length === 0 ? 0 : Math.min(1, Math.max(0, ((p.x - a.x) * dx + (p.y - a.y) * dy) / length));
  return Math.hypot(p.x - a.x - t * dx, p.y - a.y - t * dy);
}

/** Whether an end or corner of one line lies on the other. Lines that only cross do not touch. */
export function touch(one: readonly Point[], other: readonly Point[], within = 0.03): boolean {
  const on = (points: readonly Point[], line: readonly Point[]) =>
    points.some((p) => line.some((a, i) => i > 0 && distanceToSegment(p, line[i - 1] as Point, a) <= within));
  return on(one, other) || on(other, one);
}

/** Everything drawn as lists of points, each a piece of ink in one. */
export function pieces(shapes: readonly Shape[]): Point[][] {
  return shapes.flatMap((shape) => (shape.kind === "text" ? [] : flatten(shape.path)));
}

/** Numbers the pieces so that those in touch, directly or through others, have the same number. */
export function groupsInTouch(all: readonly (readonly Point[])[]): number[] {
  const group = all.map((_, index) => index);
  const find = (i: number): number => (group[i] === i ? i : find(group[i] as number));
  for (let i = 0; i < all.length; i++) {
    for (let j = 0; j < i; j++) if (touch(all[i] as Point[], all[j] as Point[])) group[find(i)] = find(j);
  }
  return all.map((_, index) => find(index));
}
