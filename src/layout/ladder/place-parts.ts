import type { NodeId, ParallelPath, PointUse, Rung, RungElement, SeriesPath } from "../../machine/model.js";
import { afterWide, type Cell, columnAfter, isNarrow, loadColumn, type PointSite, type RungGrid, returnRail, type Stop } from "./grid.js";

/** A stretch that is drawn on lines of its own elsewhere: an arrow out and an arrow back in, each with its letter. */
export interface Gap {
  kind: "gap";
  points: [string, string];
  from: NodeId;
  to: NodeId;
  rung: string;
}

export type Item = ParallelPath | RungElement | Gap;

/** Where points are wished for, at the least: those of the main path under uprights they can join, any farther behind their neighbours. */
export interface Wishes {
  main: ReadonlyMap<NodeId, number>;
  any: ReadonlyMap<NodeId, number>;
}

/** Where a rung begins and, if a shared point fixes it, ends; and what is wished for the points between. */
export interface RungEnds {
  start: number;
  end?: number;
  wishes?: Wishes;
  /** It is a piece of a rung that was cut there. */
  cutStart?: boolean;
  cutEnd?: boolean;
}

/**
 * Gives every part of a rung its line and column. The main path keeps to the first line; branches hang below it, each on a
 * line of its own; every last load of a path stands in the load column. In what comes out no two wires cross, because a
 * branch lies wholly between the uprights of its parallel, and below all that stands before it there.
 */
export function placeRung(rung: Rung, ends: RungEnds): RungGrid {
  const grid: RungGrid = { rung, lines: 1, start: ends.start, end: ends.start, cells: [], runs: [], uprights: [], sites: [] };
  const path = rung.path;
  const reach = reachOf(rung, ends.wishes);
  const natural = bearsLoad(path) ? reach.returnEnd(path) : reach.end(path.items, ends.start);
  grid.end = rung.end.kind === "rail" ? returnRail : (ends.end ?? natural);
  grid.lines = placeSeries(path, 0, ends.start, grid.end, "main");
  if (rung.start.kind === "point") note(rung.start.point, rung.start.node, 0, ends.start, rung.id, "start", ends.cutStart);
  if (rung.end.kind === "point") note(rung.end.point, rung.end.node, 0, grid.end, rung.id, "end", ends.cutEnd);
  return grid;

  /** Places a path from boundary to boundary and says how many lines it took. */
  function placeSeries(
    series: SeriesPath,
    line: number,
    from: number,
    to: number,
    where: "main" | "beside loads" | "among contacts",
  ): number {
    const at = where === "among contacts" ? -1 : placeOfLoad(series, where === "beside loads");
    if (at < 0) return follow(series.items, series.from, series.to, line, { boundary: from }, from, to);
    const head = series.items.slice(0, at);
    const load = series.items[at] as Item;
    const after = series.items.slice(at + 1);
    const before = advance(head, line, { boundary: from }, from, undefined);
    let lines = before.lines;
    if (load.kind === "parallel") {
      // Loads with nothing before them part close to where they stand.
      const fork = isBare(load) ? loadColumn : before.boundary;
      run(line, before.stop, { boundary: fork }, load.from);
      const join = after.some((item) => item.kind !== "point") ? Math.max(loadColumn + 1, ...load.branches.map(reach.returnEnd)) : to;
      lines = Math.max(lines, placeBranches(load, line, fork, join, "beside loads"));
      return Math.max(lines, follow(after, load.to, series.to, line, { boundary: join }, join, to));
    }
    const cell = put(load as Cell["use"], line, loadColumn);
    run(line, before.stop, { cell, pin: 0 }, load.from);
    return Math.max(lines, follow(after, load.to, series.to, line, { cell, pin: 1 }, loadColumn + 1, to));
  }

  /** Places items and draws the wire on to the end. */
  function follow(items: Item[], first: NodeId, last: NodeId, line: number, stop: Stop, boundary: number, to: number): number {
    const after = advance(items, line, stop, boundary, to);
    run(line, after.stop, { boundary: to }, items.length === 0 ? first : last);
    return after.lines;
  }

  /** Places items one behind the other; a parallel that nothing follows is stretched to `to`. */
  function advance(items: readonly Item[], line: number, stop: Stop, boundary: number, to: number | undefined) {
    let lines = 1;
    let lastPart = items.length - 1;
    while (lastPart >= 0 && items[lastPart]?.kind === "point") lastPart--;
    items.forEach((item, index) => {
      if (item.kind === "point") {
        boundary = reach.endOf(item, boundary);
        note(item.point, item.from, line, boundary, item.id);
      } else if (item.kind === "gap") {
        run(line, stop, { boundary }, item.from);
        note(item.points[0], item.from, line, boundary, item.rung, "end", true);
        boundary = reach.endOf(item, boundary);
        note(item.points[1], item.to, line, boundary, item.rung, "start", true);
        stop = { boundary };
      } else if (item.kind === "parallel") {
        const join = index === lastPart && to !== undefined ? to : reach.endOf(item, boundary);
        run(line, stop, { boundary }, item.from);
        lines = Math.max(lines, placeBranches(item, line, boundary, join, "among contacts"));
        stop = { boundary: join };
        boundary = join;
      } else {
        const cell = put(item, line, columnAfter(boundary, item));
        run(line, stop, { cell, pin: 0 }, item.from);
        stop = { cell, pin: 1 };
        boundary = cell.column + 1;
      }
    });
    return { lines, stop, boundary };
  }

  function placeBranches(parallel: ParallelPath, line: number, from: number, to: number, where: "beside loads" | "among contacts"): number {
    let next = line;
    let lowest = line;
    for (const branch of parallel.branches) {
      lowest = next;
      next += placeSeries(branch, next, from, to, where);
    }
    if (from > 0) grid.uprights.push({ boundary: from, fromLine: line, toLine: lowest, node: parallel.from });
    if (to < returnRail) grid.uprights.push({ boundary: to, fromLine: line, toLine: lowest, node: parallel.to });
    return next - line;
  }

  function put(use: Cell["use"], line: number, column: number): Cell {
    const cell = { use, line, column };
    grid.cells.push(cell);
    return cell;
  }

  function run(line: number, from: Stop, to: Stop, node: NodeId) {
    if ("boundary" in from && "boundary" in to && from.boundary === to.boundary) return;
    grid.runs.push({ line, from, to, node });
  }

  function note(point: string, node: NodeId, line: number, boundary: number, part: string, open?: PointSite["open"], cut = false) {
    grid.sites.push({ node, point, line, boundary, part, ...(open ? { open } : {}), ...(cut ? { cut } : {}) });
  }
}

/** How far along the parts of a rung come, as boundaries of the grid. */
export interface Reach {
  /** Where an item ends that begins at a boundary. */
  endOf(item: Item, boundary: number): number;
  /** Where items one behind the other end. */
  end(items: readonly Item[], boundary: number): number;
  /** Where what stands before the loads of a path ends. */
  contactEnd(series: SeriesPath, boundary: number): number;
  /** Where what lies behind the loads of a path ends. */
  returnEnd(series: SeriesPath): number;
}

/** Measures a rung whose points keep to the wishes. */
export function reachOf(rung: Rung, wishes?: Wishes): Reach {
  // Moving on to an upright that comes down from above is of use only on the main path, where nothing is beside it.
  const main = new Set<Item>(wishes && wishes.main.size > 0 ? rung.path.items : []);
  const wished = (item: PointUse, boundary: number) => {
    const there = Math.max((main.has(item) && wishes?.main.get(item.from)) || 0, wishes?.any.get(item.from) ?? 0);
    return there > boundary && there < loadColumn ? there : boundary;
  };
  const endOf = (item: Item, boundary: number): number => {
    if (item.kind === "point") return wished(item, boundary);
    if (item.kind === "gap") return afterWide(afterWide(boundary));
    if (item.kind !== "parallel") return columnAfter(boundary, item) + 1;
    const longest = Math.max(...item.branches.map(({ items }) => end(items, boundary)));
    return longest > boundary ? longest : afterWide(boundary);
  };
  const end = (items: readonly Item[], boundary: number): number => items.reduce((at, item) => endOf(item, at), boundary);
  const contactEnd = (series: SeriesPath, boundary: number, beside = false): number => {
    const at = placeOfLoad(series, beside);
    if (at < 0) return end(series.items, boundary);
    const load = series.items[at] as Item;
    const before = end(series.items.slice(0, at), boundary);
    return load.kind === "parallel" ? Math.max(before, ...load.branches.map((branch) => contactEnd(branch, before, true))) : before;
  };
  const returnEnd = (series: SeriesPath): number => {
    const at = placeOfLoad(series, true);
    if (at < 0) return loadColumn + 1;
    const load = series.items[at] as Item;
    const inside = load.kind === "parallel" ? Math.max(loadColumn + 1, ...load.branches.map(returnEnd)) : loadColumn + 1;
    return end(series.items.slice(at + 1), inside);
  };
  return { endOf, end, contactEnd: (series, boundary) => contactEnd(series, boundary), returnEnd };
}

/** Whether every branch begins with a load, or with what stands beside one. */
function isBare({ branches }: ParallelPath): boolean {
  return branches.every((branch) => {
    const [first] = branch.items;
    return placeOfLoad(branch, true) === 0 && (first?.kind !== "parallel" || isBare(first));
  });
}

/** The share of a contact's column that a terminal takes. */
const narrowShare = 0.4;

/** Roughly how many columns a path takes if its loads stood among its contacts. */
export function widthOf(series: SeriesPath): number {
  return series.items.reduce((sum, item) => sum + widthOfItem(item), 0);
}

export function widthOfItem(item: Item): number {
  if (item.kind === "point") return 0;
  if (item.kind === "gap") return 2;
  if (item.kind !== "parallel") return isNarrow(item) ? narrowShare : 1;
  return Math.max(...item.branches.map(widthOf)) || 1;
}

/** Roughly how many columns a path takes before the load column. */
export function contactWidth(series: SeriesPath, beside = false): number {
  const at = placeOfLoad(series, beside);
  if (at < 0) return widthOf(series);
  const load = series.items[at] as Item;
  const inside = load.kind === "parallel" ? Math.max(0, ...load.branches.map((branch) => contactWidth(branch, true))) : 0;
  return series.items.slice(0, at).reduce((sum, item) => sum + widthOfItem(item), 0) + inside;
}

/** Roughly how many columns a path takes behind the load column. */
export function returnWidth(series: SeriesPath): number {
  const at = placeOfLoad(series, true);
  if (at < 0) return 0;
  const load = series.items[at] as Item;
  const inside = load.kind === "parallel" ? Math.max(0, ...load.branches.map(returnWidth)) : 0;
  return inside + series.items.slice(at + 1).reduce((sum, item) => sum + widthOfItem(item), 0);
}

/** How many lines a path takes. */
export function heightOf(series: SeriesPath): number {
  return Math.max(
    1,
    ...series.items.map((item) => (item.kind === "parallel" ? item.branches.reduce((sum, branch) => sum + heightOf(branch), 0) : 1)),
  );
}

export function bearsLoad(series: SeriesPath): boolean {
  return lastLoad(series) >= 0;
}

/** The last item that is or holds a load; loads before it stand among the contacts. */
export function lastLoad(series: SeriesPath): number {
  return series.items.findLastIndex((item) => item.kind === "load" || (item.kind === "parallel" && item.branches.some(bearsLoad)));
}

/**
 * The item that stands in the load column. In a branch beside a load that is its last load or, without one, the last
 * diode, resistor or the like: what is wired across a coil stands under it.
 */
export function placeOfLoad(series: SeriesPath, beside: boolean): number {
  const load = lastLoad(series);
  if (load >= 0 || !beside) return load;
  return series.items.findLastIndex((item) =>
    item.kind === "parallel" ? item.branches.every((branch) => placeOfLoad(branch, true) >= 0) : item.kind === "through" && !isNarrow(item),
  );
}
