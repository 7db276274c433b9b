import type { NodeId } from "../../machine/model.js";
import { afterWide, boundaryOf, isCommon, loadColumn, nodeAt, type RungGrid, returnRail, stride } from "./grid.js";

/** The first line on which an upright coming from above meets its own node, whatever lies before it. */
export function topOf(grid: RungGrid, node: NodeId, boundary: number): number | undefined {
  for (let line = 0; line < grid.lines; line++) if (nodeAt(grid, line, boundary) === node) return line;
  return undefined;
}

/** The last line on which a node lies on a boundary. */
export function bottomOf(grid: RungGrid, node: NodeId, boundary: number): number | undefined {
  for (let line = grid.lines - 1; line >= 0; line--) if (nodeAt(grid, line, boundary) === node) return line;
  return undefined;
}

/** How many wires of other nodes an upright crosses from a line to before another; infinite where it would run into something. */
export function crossed(grid: RungGrid, node: NodeId, boundary: number, from: number, to: number): number {
  let count = 0;
  for (let line = from; line < to; line++) {
    if (onArrow(grid, line, boundary)) return Number.POSITIVE_INFINITY;
    const there = nodeAt(grid, line, boundary);
    if (there === undefined) continue;
    if (there === node || !isPlainWire(grid, line, boundary)) return Number.POSITIVE_INFINITY;
    count++;
  }
  return count;
}

/** Whether an arrow with its text stands where the upright would pass. */
function onArrow({ sites }: RungGrid, line: number, boundary: number): boolean {
  return sites.some((site) => {
    if (site.line !== line || site.open === undefined) return false;
    const [from, to] = site.open === "end" ? [site.boundary, afterWide(site.boundary)] : [site.boundary - stride, site.boundary];
    return from < boundary && boundary < to;
  });
}

/** Whether a wire runs on to both sides of a boundary with nothing else there. */
function isPlainWire(grid: RungGrid, line: number, boundary: number): boolean {
  const run = grid.runs.find((other) => other.line === line && boundaryOf(other.from) <= boundary && boundary <= boundaryOf(other.to));
  if (!run) return false;
  for (const stop of [run.from, run.to]) if ("boundary" in stop && stop.boundary === boundary) return false;
  return (
    !grid.uprights.some((up) => up.boundary === boundary && up.fromLine <= line && line <= up.toLine) &&
    !grid.sites.some((site) => site.boundary === boundary && site.line === line)
  );
}

/**
 * Where a node can be led down out of its rung: at its point if possible, else anywhere along its wire.
 * @param taken boundaries on which other uprights go down
 * @param most how many wires it may cross on its way out
 */
export function wayDown(
  grid: RungGrid,
  node: NodeId,
  taken: ReadonlySet<number>,
  most: 0 | 1,
): { boundary: number; line: number; crossings: number } | undefined {
  const sites = grid.sites.filter((site) => site.node === node).map(({ boundary }) => boundary);
  const along = grid.runs.filter((run) => run.node === node).flatMap((run) => boundariesAlong(boundaryOf(run.from), boundaryOf(run.to)));
  const candidates = [...new Set([...sites, ...along])].filter(
    (boundary) => boundary !== 0 && boundary !== returnRail && boundary !== loadColumn && !taken.has(boundary),
  );
  for (let crossings = 0; crossings <= most; crossings++) {
    for (const boundary of candidates) {
      const line = bottomOf(grid, node, boundary);
      if (line !== undefined && crossed(grid, node, boundary, line + 1, grid.lines) === crossings) return { boundary, line, crossings };
    }
  }
  return undefined;
}

/** The places along a wire where an upright may stand: its beginning, and those that every rung has. */
function boundariesAlong(from: number, to: number): number[] {
  if (from < loadColumn && to >= loadColumn) return [from];
  const found = [from];
  for (let boundary = from + 1; boundary <= to; boundary++) if (isCommon(boundary)) found.push(boundary);
  return found;
}

/** Joins places of one point in different branches of a rung where they lie straight above each other. */
export function joinWithin(grid: RungGrid): void {
  for (const [index, site] of grid.sites.entries()) {
    if (site.boundary === 0 || site.boundary === returnRail) continue;
    const below = grid.sites
      .slice(index + 1)
      .find((other) => other.node === site.node && other.boundary === site.boundary && other.line > site.line);
    if (!below) continue;
    let free = true;
    for (let line = site.line + 1; line < below.line && free; line++) {
      const there = nodeAt(grid, line, site.boundary);
      free = there === undefined || there === site.node;
    }
    if (free) grid.uprights.push({ boundary: site.boundary, fromLine: site.line, toLine: below.line, node: site.node });
  }
}
