import type { FluidComponent } from "../../machine/model.js";
import type { Symbol } from "../../symbols/symbol.js";
import type { Placed } from "./block.js";
import { type Extent, moved, union } from "./modules.js";

/** Gives the symbol a component is drawn with. */
export interface SymbolOf {
  (component: FluidComponent): Symbol;
  /** On how many ladder lines a device has contacts. */
  usesOf(device: string): number;
}

/** A group of components set down about its own origin. Directional valves stand on the line y = 0. */
export interface Arrangement {
  placed: Placed[];
  extent: Extent;
  /** How far over the valves' line the cylinders must at least stand; nothing where there are none. */
  height?: number;
}

export function extentOfAll(placed: readonly Placed[]): Extent {
  return placed.length === 0 ? { left: 0, top: 0, right: 0, bottom: 0 } : union(placed.map(({ block, at }) => moved(block.full, at)));
}
