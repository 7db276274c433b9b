import type { Mm, Point } from "../../drawing/geometry.js";
import type { Segment } from "../../drawing/marks.js";
import type { DeviceUse } from "../../machine/model.js";
import { extentOf } from "../../symbols/extent.js";
import type { Shape, Symbol } from "../../symbols/symbol.js";
import { isNarrow } from "./grid.js";

/** The symbol as it stands in its line: a terminal with short leads, for its column is narrow. */
export function prepareSymbol(symbol: Symbol, use: DeviceUse): Symbol {
  return isNarrow(use) ? shortenLeads(symbol, shortLead) : symbol;
}

/** From the middle of a terminal to its ports, mm: one module. */
const shortLead: Mm = 2.5;

/** Brings ports that lie farther from the origin than `reach` nearer, with the straight leads to them. */
function shortenLeads(symbol: Symbol, reach: Mm): Symbol {
  const near = (value: Mm) => Math.min(Math.max(value, -reach), reach);
  const nearer = <P extends Point>(point: P): P => ({ ...point, x: near(point.x), y: near(point.y) });
  const move = (segment: Segment): Segment => (segment.op === "M" || segment.op === "L" ? nearer(segment) : segment);
  const ports = symbol.ports.map(nearer);
  const shapes = symbol.shapes.map((shape): Shape => (shape.kind === "text" ? shape : { ...shape, path: shape.path.map(move) }));
  return { ...symbol, ports, shapes, box: extentOf(shapes, ports) };
}
