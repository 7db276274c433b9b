import type { Box, Mm, Point } from "../../drawing/geometry.js";

/** The fluid module M of ISO 1219-1, mm. Ports and lines lie on whole modules; this folder reckons in modules, y down. */
export const module: Mm = 2;

/** A rectangle by its sides, in modules. */
export interface Extent {
  left: number;
  top: number;
  right: number;
  bottom: number;
}

/** The extent of a box given in mm. */
export function extentOf({ x, y, width, height }: Box): Extent {
  return { left: x / module, top: y / module, right: (x + width) / module, bottom: (y + height) / module };
}

export function moved({ left, top, right, bottom }: Extent, by: Point): Extent {
  return { left: left + by.x, top: top + by.y, right: right + by.x, bottom: bottom + by.y };
}

export function grown({ left, top, right, bottom }: Extent, by: number): Extent {
  return { left: left - by, top: top - by, right: right + by, bottom: bottom + by };
}

export function union(extents: readonly Extent[]): Extent {
  return {
    left: Math.min(...extents.map(({ left }) => left)),
    top: Math.min(...extents.map(({ top }) => top)),
    right: Math.max(...extents.map(({ right }) => right)),
    bottom: Math.max(...extents.map(({ bottom }) => bottom)),
  };
}

export function meet(a: Extent, b: Extent): boolean {
  return a.left < b.right && b.left < a.right && a.top < b.bottom && b.top < a.bottom;
}
