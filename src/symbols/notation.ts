import type { Mm, Point } from "../drawing/geometry.js";
import type { Segment } from "../drawing/marks.js";
import { circle, polyline } from "../drawing/path.js";
import type { Medium } from "../machine/model.js";
import type { Direction, Shape } from "./symbol.js";

/*
 * A short notation for the parts of composed symbols. Coordinates are in modules, x to the right, y UP.
 *
 *   L(x,y x,y …)          line; A(…) with an arrowhead at its end, AA(…) at both ends
 *   R(x,y x,y)            rectangle by opposite corners
 *   C(x,y r)              circle; CF(…) filled
 *   ARC(x,y r a..b)       arc about a centre, degrees counter-clockwise from the right
 *   t(x,y D)              energy triangle, base and height 1, its tip at (x,y) pointing D (U D L R); T(…) base and height 2.
 *                         Filled for a liquid, open for a gas, as ISO 1219-1 has it
 *   ZZ(x,y x,y h n)       spring or zigzag: 2n strokes between the points, reaching h to either side of the line
 *   BLK(x,y D)            blocked port: a stub of 1 from (x,y) in direction D that ends in a bar
 *   TXT(x,y h "s")        text of height h (modules), its middle at (x,y)
 *
 * A prefix changes the line: d: dashed (pilot, drain), e: chain-dotted (enclosure), m: short-dashed (mechanical link).
 */

/** Where the notation's coordinates lie in the symbol: `x`, `y` in modules; `mirrored` turns x over. */
export interface Frame {
  module: Mm;
  x: number;
  y: number;
  mirrored?: boolean;
  /** Turns y over too, for a part that is drawn upside down. */
  flipped?: boolean;
}

/** Module of fluid symbols, ISO 1219-1:2012; an earlier edition had 2.5 mm. From memory. */
export const fluidModule: Mm = 2;

/** Width of every line of a symbol, ISO 128-2. */
export const lineWidth: Mm = 0.25;

const dashes: Record<string, Mm[]> = { d: [2, 1], e: [3, 0.8, 0.25, 0.8], m: [1.5, 0.75] };

const arrowhead = { length: 0.75, width: 0.5 };

const ways: Record<string, Point> = { U: { x: 0, y: 1 }, D: { x: 0, y: -1 }, L: { x: -1, y: 0 }, R: { x: 1, y: 0 } };

/** The shapes a text in the notation stands for, in mm, y down. Throws on a slip in the notation, which is a slip in this program. */
export function sketch(text: string, frame: Frame, medium: Medium): Shape[] {
  const shapes: Shape[] = [];
  for (const [whole, prefix, op, args] of text.matchAll(/(?:([dem]):)?([A-Za-z]+)\(([^)]*)\)/g)) {
    const dash = prefix === undefined ? undefined : dashes[prefix];
    const draw = drawers[op as string];
    if (!draw) throw new Error(`There is no "${whole}" in the notation for symbols.`);
    draw({ frame, medium, shapes, dash, args: args as string });
  }
  return shapes;
}

/** A point of the frame in mm, y down. */
export function inFrame({ module, x, y, mirrored, flipped }: Frame, at: Point): Point {
  return { x: mm(module * (x + (mirrored ? -at.x : at.x))), y: mm(-module * (y + (flipped ? -at.y : at.y))) };
}

/** The frame moved by modules of its own. */
export function frameAt(frame: Frame, x: number, y: number, flipped = frame.flipped): Frame {
  return { ...frame, x: frame.x + (frame.mirrored ? -x : x), y: frame.y + (frame.flipped ? -y : y), flipped };
}

/** A direction of the frame as seen on the sheet. */
export function directionIn({ mirrored, flipped }: Frame, direction: Direction): Direction {
  if (mirrored && (direction === "left" || direction === "right")) return direction === "left" ? "right" : "left";
  if (flipped && (direction === "up" || direction === "down")) return direction === "up" ? "down" : "up";
  return direction;
}

/** Ten-thousandths of a millimetre: finer than any writer prints, coarse enough to drown rounding. */
export function mm(value: number): Mm {
  return Math.round(value * 1e4) / 1e4 + 0;
}

interface Drawing {
  frame: Frame;
  medium: Medium;
  shapes: Shape[];
  dash: Mm[] | undefined;
  args: string;
}

const drawers: Record<string, (drawing: Drawing) => void> = {
  L: (d) => stroke(d, pointsOf(d.args)),
  A: (d) => arrow(d, pointsOf(d.args), false),
  AA: (d) => arrow(d, pointsOf(d.args), true),
  R: (d) => stroke(d, cornersOf(d.args), true),
  C: (d) => {
    const [x, y, r] = numbersOf(d.args) as [number, number, number];
    d.shapes.push(strokeShape(circle(inFrame(d.frame, { x, y }), mm(r * d.frame.module)), d.dash));
  },
  CF: (d) => {
    const [x, y, r] = numbersOf(d.args) as [number, number, number];
    d.shapes.push({ kind: "fill", path: circle(inFrame(d.frame, { x, y }), mm(r * d.frame.module)) });
  },
  ARC: (d) => {
    const [x, y, r, from, to] = numbersOf(d.args.replace("..", " ")) as [number, number, number, number, number];
    const at = (degrees: number): Point => {
      const a = (degrees * Math.PI) / 180;
      return inFrame(d.frame, { x: x + r * Math.cos(a), y: y + r * Math.sin(a) });
    };
    // Counter-clockwise as seen is against the sweep of an axis that runs down; a mirrored frame turns it round.
    const sweep = (d.frame.mirrored ?? false) !== (d.frame.flipped ?? false);
    const arc: Segment = { op: "A", radius: mm(r * d.frame.module), large: Math.abs(to - from) > 180, sweep, ...at(to) };
    d.shapes.push(strokeShape([{ op: "M", ...at(from) }, arc], d.dash));
  },
  t: (d) => triangle(d, 1),
  T: (d) => triangle(d, 2),
  ZZ: (d) => {
    const [x1, y1, x2, y2, h, n] = numbersOf(d.args) as [number, number, number, number, number, number];
    const length = Math.hypot(x2 - x1, y2 - y1);
    const along = { x: (x2 - x1) / length, y: (y2 - y1) / length };
    const strokes = 2 * n;
    const points: Point[] = [{ x: x1, y: y1 }];
    for (let i = 0; i < strokes; i++) {
      const run = (length * (i + 0.5)) / strokes;
      const rise = i % 2 === 0 ? h : -h;
      points.push({ x: x1 + run * along.x - rise * along.y, y: y1 + run * along.y + rise * along.x });
    }
    stroke(d, [...points, { x: x2, y: y2 }]);
  },
  BLK: (d) => {
    const { at, way } = pointed(d.args);
    const end = { x: at.x + way.x, y: at.y + way.y };
    stroke(d, [at, end]);
    stroke(d, [
      { x: end.x - way.y / 2, y: end.y - way.x / 2 },
      { x: end.x + way.y / 2, y: end.y + way.x / 2 },
    ]);
  },
  TXT: (d) => {
    const text = /"([^"]*)"/.exec(d.args)?.[1] ?? "";
    const [x, y, h] = numbersOf(d.args.replace(/".*"/, "")) as [number, number, number];
    d.shapes.push({ kind: "text", at: inFrame(d.frame, { x, y }), text, height: mm(h * d.frame.module), anchor: "middle" });
  },
};

function numbersOf(args: string): number[] {
  return args
    .trim()
    .split(/[\s,]+/)
    .map(Number);
}

function pointsOf(args: string): Point[] {
  const numbers = numbersOf(args);
  return Array.from({ length: numbers.length / 2 }, (_, i) => ({ x: numbers[2 * i] as number, y: numbers[2 * i + 1] as number }));
}

function cornersOf(args: string): Point[] {
  const [a, b] = pointsOf(args) as [Point, Point];
  return [a, { x: b.x, y: a.y }, b, { x: a.x, y: b.y }];
}

/** `x,y D`. */
function pointed(args: string): { at: Point; way: Point } {
  const [place = "", way = ""] = args.trim().split(/\s+/);
  return { at: pointsOf(place)[0] as Point, way: ways[way] as Point };
}

function strokeShape(path: Segment[], dash: Mm[] | undefined): Shape {
  return dash ? { kind: "stroke", path, width: lineWidth, dash } : { kind: "stroke", path, width: lineWidth };
}

function stroke({ frame, shapes, dash }: Drawing, points: Point[], closed = false): void {
  shapes.push(
    strokeShape(
      polyline(
        points.map((point) => inFrame(frame, point)),
        closed,
      ),
      dash,
    ),
  );
}

/** A line whose last stretch ends within its head, so that the tip stays sharp. */
function arrow(drawing: Drawing, points: Point[], both: boolean): void {
  const line = [...points];
  const heads: Point[][] = [];
  const headAt = (end: number, before: number): void => {
    const tip = points[end] as Point;
    const from = points[before] as Point;
    const length = Math.hypot(tip.x - from.x, tip.y - from.y);
    const way = { x: (tip.x - from.x) / length, y: (tip.y - from.y) / length };
    const base = { x: tip.x - way.x * arrowhead.length, y: tip.y - way.y * arrowhead.length };
    const half = arrowhead.width / 2;
    heads.push([tip, { x: base.x - way.y * half, y: base.y + way.x * half }, { x: base.x + way.y * half, y: base.y - way.x * half }]);
    line[end] = base;
  };
  headAt(points.length - 1, points.length - 2);
  if (both) headAt(0, 1);
  stroke(drawing, line);
  for (const head of heads)
    drawing.shapes.push({
      kind: "fill",
      path: polyline(
        head.map((p) => inFrame(drawing.frame, p)),
        true,
      ),
    });
}

function triangle(drawing: Drawing, size: number): void {
  const { at, way } = pointed(drawing.args);
  const base = { x: at.x - way.x * size, y: at.y - way.y * size };
  const half = size / 2;
  const corners = [at, { x: base.x - way.y * half, y: base.y + way.x * half }, { x: base.x + way.y * half, y: base.y - way.x * half }];
  const path = polyline(
    corners.map((point) => inFrame(drawing.frame, point)),
    true,
  );
  drawing.shapes.push(strokeShape(path, drawing.dash));
  if (drawing.medium === "hydraulic") drawing.shapes.push({ kind: "fill", path });
}
