import { textBox } from "../drawing/extent.js";
import type { Box, Mm, Point } from "../drawing/geometry.js";
import type { Segment } from "../drawing/marks.js";
import { mm } from "./notation.js";
import type { Port, Shape } from "./symbol.js";

/** The box around shapes and ports, without the width of the strokes; nothing drawn gives an empty box at the origin. */
export function extentOf(shapes: readonly Shape[], ports: readonly Port[]): Box {
  const bounds = new Bounds();
  for (const shape of shapes) {
    if (shape.kind !== "text") bounds.addPath(shape.path);
    else {
      const box = textBox({ ...shape, at: { x: shape.at.x, y: shape.at.y + shape.height / 2 } });
      bounds.add(box);
      bounds.add({ x: box.x + box.width, y: box.y + box.height });
    }
  }
  for (const port of ports) bounds.add(port);
  return bounds.box();
}

/** Gathers points; a curve counts with what it reaches and not with its handles. */
class Bounds {
  private left = Number.POSITIVE_INFINITY;
  private top = Number.POSITIVE_INFINITY;
  private right = Number.NEGATIVE_INFINITY;
  private bottom = Number.NEGATIVE_INFINITY;

  add({ x, y }: Point): void {
    this.left = Math.min(this.left, x);
    this.top = Math.min(this.top, y);
    this.right = Math.max(this.right, x);
    this.bottom = Math.max(this.bottom, y);
  }

  addPath(path: readonly Segment[]): void {
    let here: Point = { x: 0, y: 0 };
    for (const segment of path) {
      if (segment.op === "Z") continue;
      if (segment.op === "C") this.addCurve(here, segment);
      if (segment.op === "A") this.addArc(here, segment);
      this.add(segment);
      here = segment;
    }
  }

  private addCurve(from: Point, curve: Segment & { op: "C" }): void {
    for (const t of [...turns(from.x, curve.x1, curve.x2, curve.x), ...turns(from.y, curve.y1, curve.y2, curve.y)]) {
      this.add({ x: bezier(t, from.x, curve.x1, curve.x2, curve.x), y: bezier(t, from.y, curve.y1, curve.y2, curve.y) });
    }
  }

  /** The outermost points of the full circle that lie on the arc. */
  private addArc(from: Point, arc: Segment & { op: "A" }): void {
    const { x: cx, y: cy, radius, start, turn } = arcAbout(from, arc);
    for (let quarter = -4; quarter <= 8; quarter++) {
      const angle = (quarter * Math.PI) / 2;
      const past = (angle - start) * Math.sign(turn);
      if (past > 0 && past < Math.abs(turn)) this.add({ x: cx + radius * Math.cos(angle), y: cy + radius * Math.sin(angle) });
    }
  }

  box(): Box {
    if (this.left > this.right) return { x: 0, y: 0, width: 0, height: 0 };
    const x = mm(this.left);
    const y = mm(this.top);
    return { x, y, width: mm(this.right - x), height: mm(this.bottom - y) };
  }
}

/** Centre, start and signed turn of an arc, in radians with y down. */
function arcAbout(from: Point, arc: Segment & { op: "A" }): { x: Mm; y: Mm; radius: Mm; start: number; turn: number } {
  const dx = arc.x - from.x;
  const dy = arc.y - from.y;
  const chord = Math.hypot(dx, dy);
  const radius = Math.max(arc.radius, chord / 2);
  const rise = Math.sqrt(Math.max(0, radius * radius - (chord * chord) / 4));
  const side = arc.large === arc.sweep ? -1 : 1;
  const x = (from.x + arc.x) / 2 - (side * rise * dy) / (chord || 1);
  const y = (from.y + arc.y) / 2 + (side * rise * dx) / (chord || 1);
  const start = Math.atan2(from.y - y, from.x - x);
  let turn = Math.atan2(arc.y - y, arc.x - x) - start;
  if (arc.sweep && turn <= 0) turn += 2 * Math.PI;
  if (!arc.sweep && turn >= 0) turn -= 2 * Math.PI;
  return { x, y, radius, start, turn };
}

/** Where along a Bézier curve one coordinate turns back. */
function turns(p0: number, p1: number, p2: number, p3: number): number[] {
  const a = -p0 + 3 * p1 - 3 * p2 + p3;
  const b = 2 * (p0 - 2 * p1 + p2);
  const c = p1 - p0;
  const roots = Math.abs(a) < 1e-9 ? (Math.abs(b) < 1e-9 ? [] : [-c / b]) : quadratic(a, b, c);
  return roots.filter((t) => t > 0 && t < 1);
}

function quadratic(a: number, b: number, c: number): number[] {
  const d = b * b - 4 * a * c;
  return d < 0 ? [] : [(-b + Math.sqrt(d)) / (2 * a), (-b - Math.sqrt(d)) / (2 * a)];
}

function bezier(t: number, p0: number, p1: number, p2: number, p3: number): number {
  const u = 1 - t;
  return u * u * u * p0 + 3 * u * u * t * p1 + 3 * u * t * t * p2 + t * t * t * p3;
}
