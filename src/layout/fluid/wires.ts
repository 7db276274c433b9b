import type { Mm, Point } from "../../drawing/geometry.js";
import type { FluidNodeId } from "../../machine/model.js";
import type { PlacedDot, PlacedWire } from "../placement.js";
import { module } from "./modules.js";
import type { LineStyle, Step } from "./router.js";

/** Line widths after ISO 128: lines and, twice as wide, headers. */
const lineWidth: Mm = 0.25;
const headerWidth: Mm = 0.5;

/** Dashes of control and drain lines, mm. */
const dashes: Partial<Record<LineStyle["role"], Mm[]>> = { pilot: [2, 1], drain: [1, 1] };

const dotDiameter: Mm = 0.75 * module;

/** Joins the steps of a net into lines from bend to bend, and puts dots where three or more meet. */
export function drawNet(node: FluidNodeId, steps: readonly Step[], origin: Point): { wires: PlacedWire[]; dots: PlacedDot[] } {
  const key = ({ x, y }: Point) => `${x} ${y}`;
  const at = new Map<string, Step[]>();
  for (const step of steps) {
    for (const end of [step.a, step.b]) {
      const there = at.get(key(end));
      if (there) there.push(step);
      else at.set(key(end), [step]);
    }
  }
  const same = (a: LineStyle, b: LineStyle) => a.part === b.part && a.role === b.role && a.header === b.header;
  const goesOn = (point: Point, step: Step): Step | undefined => {
    const there = at.get(key(point)) ?? [];
    if (there.length !== 2) return undefined;
    const next = there[0] === step ? there[1] : there[0];
    return next && same(next.style, step.style) ? next : undefined;
  };
  const done = new Set<Step>();
  const wires: PlacedWire[] = [];
  const toSheet = ({ x, y }: Point): Point => ({ x: origin.x + x * module, y: origin.y + y * module });
  const walk = (from: Point, first: Step): Point[] => {
    const points = [from];
    let here = from;
    for (let step: Step | undefined = first; step && !done.has(step); ) {
      done.add(step);
      here = key(step.a) === key(here) ? step.b : step.a;
      points.push(here);
      step = goesOn(here, step);
    }
    return points;
  };
  const draw = (points: Point[], style: LineStyle) => {
    const bends = points.filter((point, i) => {
      const before = points[i - 1];
      const after = points[i + 1];
      return !before || !after || (before.x === point.x) !== (after.x === point.x);
    });
    const dash = dashes[style.role];
    wires.push({
      part: style.part,
      node,
      role: style.role,
      points: bends.map(toSheet),
      width: style.header ? headerWidth : lineWidth,
      ...(dash ? { dash } : {}),
    });
  };
  for (const step of steps) {
    if (done.has(step)) continue;
    for (const end of [step.a, step.b]) {
      if (!done.has(step) && goesOn(end, step) === undefined) draw(walk(end, step), step.style);
    }
  }
  // Rings, if there should ever be one.
  for (const step of steps) if (!done.has(step)) draw(walk(step.a, step), step.style);
  const dots = [...at]
    .filter(([, there]) => there.length > 2)
    .map(([place, there]): PlacedDot => {
      const [x, y] = place.split(" ").map(Number) as [number, number];
      return { part: (there[0] as Step).style.part, at: toSheet({ x, y }), diameter: dotDiameter };
    });
  return { wires, dots };
}
