import type { Segment } from "../../src/drawing/marks.js";
import type { ContactUse, LoadUse } from "../../src/machine/model.js";
import type { Symbol } from "../../src/symbols/symbol.js";

export function plainSymbol(use: ContactUse | LoadUse): Symbol {
  const line = (...points: [number, number][]): Segment[] => points.map(([x, y], i) => ({ op: i === 0 ? "M" : "L", x, y }));
  const stroke = (path: Segment[]) => ({ kind: "stroke" as const, width: 0.25, path });
  const gap = use.kind === "load" ? 3.75 : 1.875;
  return {
    name: "plain", title: "", box: { x: -10, y: -3.75, width: 20, height: 7.5 }, spots: {},
    ports: [{ name: "1", x: -10, y: 0, direction: "left" }, { name: "2", x: 10, y: 0, direction: "right" }],
    shapes: [stroke(line([-10, 0], [-gap, 0])), stroke(line([gap, 0], [10, 0])), stroke(line([-gap, -3.75], [-gap, 3.75])), stroke(line([gap, -3.75], [gap, 3.75]))],
  };
}
