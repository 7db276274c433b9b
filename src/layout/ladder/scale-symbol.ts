import type { Point } from "../../drawing/geometry.js";
import type { Segment } from "../../drawing/marks.js";
import type { Symbol } from "../../symbols/symbol.js";

/** The symbol drawn on a smaller or larger module; line widths and text heights stay. */
export function scaleSymbol(symbol: Symbol, by: number): Symbol {
  if (by === 1) return symbol;
  const { box } = symbol;
  return {
    ...symbol,
    box: { x: box.x * by, y: box.y * by, width: box.width * by, height: box.height * by },
    ports: symbol.ports.map((port) => ({ ...port, ...scaled(port, by) })),
    shapes: symbol.shapes.map((shape) =>
      shape.kind === "text"
        ? { ...shape, at: scaled(shape.at, by), height: Math.max(1.8, shape.height * by) }
        : { ...shape, path: shape.path.map((s) => scaleSegment(s, by)) },
    ),
    spots: Object.fromEntries(Object.entries(symbol.spots).map(([name, spot]) => [name, { ...spot, ...scaled(spot, by) }])),
  };
}

const scaled = ({ x, y }: Point, by: number): Point => ({ x: x * by, y: y * by });

function scaleSegment(s: Segment, by: number): Segment {
  switch (s.op) {
    case "Z":
      return s;
    case "C":
      return { op: "C", x1: s.x1 * by, y1: s.y1 * by, x2: s.x2 * by, y2: s.y2 * by, x: s.x * by, y: s.y * by };
    case "A":
      return { ...s, radius: s.radius * by, x: s.x * by, y: s.y * by };
    default:
      return { ...s, x: s.x * by, y: s.y * by };
  }
}
