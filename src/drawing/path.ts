import type { Box, Mm, Point } from "./geometry.js";
import type { Segment } from "./marks.js";

/** A path through points, from the first to the last. */
export function polyline(points: readonly Point[], closed = false): Segment[] {
  const path: Segment[] = points.map(({ x, y }, index) => ({ op: index === 0 ? "M" : "L", x, y }));
  if (closed && path.length > 0) path.push({ op: "Z" });
  return path;
}

/** The outline of a box. */
export function rectangle({ x, y, width, height }: Box): Segment[] {
  return polyline(
    [
      { x, y },
      { x: x + width, y },
      { x: x + width, y: y + height },
      { x, y: y + height },
    ],
    true,
  );
}

/** A full circle, as two half circles. */
export function circle(centre: Point, radius: Mm): Segment[] {
  const { x, y } = centre;
  return [
    { op: "M", x: x - radius, y },
    { op: "A", radius, large: false, sweep: true, x: x + radius, y },
    { op: "A", radius, large: false, sweep: true, x: x - radius, y },
    { op: "Z" },
  ];
}

/** The path set down at a point. */
export function movePath(path: readonly Segment[], by: Point): Segment[] {
  return path.map((s) => {
    if (s.op === "Z") return s;
    if (s.op === "C") return { ...s, x1: s.x1 + by.x, y1: s.y1 + by.y, x2: s.x2 + by.x, y2: s.y2 + by.y, x: s.x + by.x, y: s.y + by.y };
    return { ...s, x: s.x + by.x, y: s.y + by.y };
  });
}

/**
 * A circular arc as cubic curves, none longer than a quarter circle; the error of each is under 0.03 % of the radius.
 * A radius too small for its ends is taken as half their distance, as SVG does.
 */
export function arcCurves(from: Point, arc: Segment & { op: "A" }): (Segment & { op: "C" })[] {
  const dx = arc.x - from.x;
  const dy = arc.y - from.y;
  const chord = Math.hypot(dx, dy);
  if (chord === 0) return [];
  const radius = Math.max(Math.abs(arc.radius), chord / 2);
  const rise = Math.sqrt(Math.max(0, radius * radius - (chord * chord) / 4));
  const side = arc.large === arc.sweep ? -1 : 1;
  const cx = (from.x + arc.x) / 2 - (side * rise * dy) / chord;
  const cy = (from.y + arc.y) / 2 + (side * rise * dx) / chord;
  const start = Math.atan2(from.y - cy, from.x - cx);
  let turn = Math.atan2(arc.y - cy, arc.x - cx) - start;
  if (arc.sweep && turn <= 0) turn += 2 * Math.PI;
  if (!arc.sweep && turn >= 0) turn -= 2 * Math.PI;
  const count = Math.max(1, Math.ceil(Math.abs(turn) / (Math.PI / 2) - 1e-9));
  const step = turn / count;
  const reach = (4 / 3) * Math.tan(step / 4) * radius;
  const curves: (Segment & { op: "C" })[] = [];
  for (let i = 0; i < count; i++) {
    const a = start + i * step;
    const b = a + step;
    const last = i === count - 1;
    const end = last ? { x: arc.x, y: arc.y } : { x: cx + radius * Math.cos(b), y: cy + radius * Math.sin(b) };
    curves.push({
      op: "C",
      x1: cx + radius * Math.cos(a) - reach * Math.sin(a),
      y1: cy + radius * Math.sin(a) + reach * Math.cos(a),
      x2: end.x + reach * Math.sin(b),
      y2: end.y - reach * Math.cos(b),
      ...end,
    });
  }
  return curves;
}
