import type { NodeId, Rung } from "../../machine/model.js";
import { boundaryOf, type Link, loadColumn, nodeAt, type PointSite, type RungGrid, returnRail } from "./grid.js";
import { bearsLoad, placeRung, returnWidth, widthOf } from "./place-parts.js";

/** A place where a shared point breaks off, to go on elsewhere. */
export interface Ending {
  rung: number;
  node: NodeId;
  point: string;
  line: number;
  /** `start` and `end`: the arrow stands before or behind the rung on its line. `drop`: it hangs below a wire on `boundary`. */
  kind: "start" | "end" | "drop";
  boundary: number;
}

/** Rungs on the grid with the points they share. */
export interface Joined {
  grids: RungGrid[];
  links: Link[];
  endings: Ending[];
}

/** An upright that a later rung may still join. */
interface Open {
  boundary: number;
  rung: number;
  line: number;
}

/**
 * Places rungs in order and joins the points they share. A shared point becomes an upright as long as nothing lies in its
 * way from one rung to the next; where it is interrupted, both parts get an ending that names the other. So no wire
 * crosses another.
 * @param barriers indices of rungs that no upright may reach from above: those that begin a sheet
 * @param apart rungs whose start must not be joined from above, because they continue a rung too wide for one line
 */
export function joinPoints(rungs: readonly Rung[], barriers: ReadonlySet<number>, apart: ReadonlySet<Rung>): Joined {
  const lastUse = lastUses(rungs);
  const grids: RungGrid[] = [];
  const links: Link[] = [];
  const endings: Ending[] = [];
  let open = new Map<NodeId, Open>();
  rungs.forEach((rung, index) => {
    if (barriers.has(index)) open = new Map();
    const meets = (node: NodeId) => open.get(node);
    const from = rung.start.kind === "point" && !apart.has(rung) ? meets(rung.start.node) : undefined;
    const start = rung.start.kind === "rail" ? 0 : (from?.boundary ?? 1);
    const natural = bearsLoad(rung.path) ? loadColumn + 1 + returnWidth(rung.path) : start + widthOf(rung.path);
    const to = rung.end.kind === "point" ? meets(rung.end.node) : undefined;
    const reached = to !== undefined && to.boundary >= natural && to.boundary > start ? to : undefined;
    const meet = new Map([...open].map(([node, { boundary }]) => [node, boundary]));
    const grid = placeRung(rung, { start, meet, ...(reached ? { end: reached.boundary } : {}) });
    grids.push(grid);
    joinWithin(grid);

    const next = new Map<NodeId, Open>();
    for (const [node, upright] of open) {
      if (blocked(grid, node, upright.boundary)) {
        const touched = topOf(grid, node, upright.boundary);
        if (touched !== undefined) links.push(linkTo(node, upright, index, touched));
        continue;
      }
      const touched = topOf(grid, node, upright.boundary);
      if (touched === undefined) next.set(node, upright);
      else {
        links.push(linkTo(node, upright, index, touched));
        next.set(node, { boundary: upright.boundary, rung: index, line: bottomOf(grid, node, upright.boundary) as number });
      }
    }
    for (const node of new Set(grid.sites.map((site) => site.node))) {
      if (next.has(node) || (lastUse.get(node) ?? 0) <= index) continue;
      const way = wayDown(grid, node);
      if (way) next.set(node, { ...way, rung: index });
    }
    for (const node of next.keys()) if ((lastUse.get(node) ?? 0) <= index) next.delete(node);
    open = next;
  });
  endings.push(...findEndings(grids, links));
  return { grids, links, endings };
}

function linkTo(node: NodeId, upright: Open, rung: number, line: number): Link {
  return { node, boundary: upright.boundary, from: { rung: upright.rung, line: upright.line }, to: { rung, line } };
}

/** The last rung that uses each point's node. */
function lastUses(rungs: readonly Rung[]): Map<NodeId, number> {
  const last = new Map<NodeId, number>();
  rungs.forEach((rung, index) => {
    const visit = (path: Rung["path"]) => {
      for (const item of path.items) {
        if (item.kind === "point") last.set(item.from, index);
        else if (item.kind === "parallel") item.branches.forEach(visit);
      }
    };
    visit(rung.path);
    for (const end of [rung.start, rung.end]) if (end.kind === "point") last.set(end.node, index);
  });
  return last;
}

/** Whether an upright from above, on its way down past this rung, would meet another node before or behind its own. */
function blocked(grid: RungGrid, node: NodeId, boundary: number): boolean {
  for (let line = 0; line < grid.lines; line++) {
    const there = nodeAt(grid, line, boundary);
    if (there !== undefined && there !== node) return true;
  }
  return false;
}

/** The first line on which an upright coming from above meets its own node, if nothing else is in the way. */
function topOf(grid: RungGrid, node: NodeId, boundary: number): number | undefined {
  for (let line = 0; line < grid.lines; line++) {
    const there = nodeAt(grid, line, boundary);
    if (there !== undefined) return there === node ? line : undefined;
  }
  return undefined;
}

/** The last line on which a node lies on a boundary. */
function bottomOf(grid: RungGrid, node: NodeId, boundary: number): number | undefined {
  for (let line = grid.lines - 1; line >= 0; line--) if (nodeAt(grid, line, boundary) === node) return line;
  return undefined;
}

/** Where a node can be led down out of its rung: at its point if possible, else anywhere along its wire. */
function wayDown(grid: RungGrid, node: NodeId): { boundary: number; line: number } | undefined {
  const sites = grid.sites.filter((site) => site.node === node).map(({ boundary }) => boundary);
  const along = grid.runs
    .filter((run) => run.node === node)
    .flatMap((run) => {
      const from = boundaryOf(run.from);
      const to = boundaryOf(run.to);
      return from < loadColumn && to >= loadColumn ? [from] : Array.from({ length: to - from + 1 }, (_, i) => from + i);
    });
  for (const boundary of [...sites, ...along]) {
    if (boundary === 0 || boundary === returnRail || boundary === loadColumn) continue;
    const line = bottomOf(grid, node, boundary);
    if (line === undefined) continue;
    let free = true;
    for (let below = line + 1; below < grid.lines && free; below++) free = nodeAt(grid, below, boundary) === undefined;
    if (free) return { boundary, line };
  }
  return undefined;
}

/** Joins places of one point in different branches of a rung where they lie straight above each other. */
function joinWithin(grid: RungGrid): void {
  for (const [index, site] of grid.sites.entries()) {
    const below = grid.sites.slice(index + 1).find((other) => other.node === site.node && other.boundary === site.boundary && other.line > site.line);
    if (!below) continue;
    let free = true;
    for (let line = site.line + 1; line < below.line && free; line++) {
      const there = nodeAt(grid, line, site.boundary);
      free = there === undefined || there === site.node;
    }
    if (free) grid.uprights.push({ boundary: site.boundary, fromLine: site.line, toLine: below.line, node: site.node });
  }
}

/** One connected part of a point's wire. */
interface Island {
  sites: { rung: number; site: PointSite }[];
}

/** An ending for every part of every point that is drawn in more than one part, and for every rung that starts or ends in the open. */
function findEndings(grids: readonly RungGrid[], links: readonly Link[]): Ending[] {
  const islands = new Map<NodeId, Island[]>();
  const of = new Map<string, Island>();
  grids.forEach((grid, rung) => {
    for (const site of grid.sites) {
      const parts = partsOf(grid, site.node);
      const part = parts.findIndex((pieces) => pieces.some((piece) => holds(piece, site)));
      const key = `${rung} ${site.node} ${part < 0 ? `at ${site.line} ${site.boundary}` : part}`;
      let island = of.get(key);
      if (!island) {
        island = { sites: [] };
        of.set(key, island);
        islands.set(site.node, [...(islands.get(site.node) ?? []), island]);
      }
      island.sites.push({ rung, site });
    }
  });
  const linked = (node: NodeId, rung: number, line: number, boundary: number) => {
    const grid = grids[rung] as RungGrid;
    const part = partsOf(grid, node).findIndex((pieces) => pieces.some((piece) => holds(piece, { line, boundary })));
    return of.get(`${rung} ${node} ${part < 0 ? `at ${line} ${boundary}` : part}`);
  };
  for (const link of links) {
    const upper = linked(link.node, link.from.rung, link.from.line, link.boundary);
    const lower = linked(link.node, link.to.rung, link.to.line, link.boundary);
    if (!upper || !lower || upper === lower) continue;
    upper.sites.push(...lower.sites);
    for (const [key, island] of of) if (island === lower) of.set(key, upper);
    islands.set(link.node, (islands.get(link.node) ?? []).filter((island) => island !== lower));
  }
  const endings: Ending[] = [];
  for (const [node, parts] of islands) {
    for (const { sites } of parts) {
      const openStart = sites.find(({ rung, site }) => (grids[rung] as RungGrid).rung.start.kind === "point" && isStart(grids[rung] as RungGrid, site) && !joined(links, rung, node, site));
      const openEnd = sites.find(({ rung, site }) => isEnd(grids[rung] as RungGrid, site) && !joined(links, rung, node, site));
      const point = (sites[0] as Island["sites"][number]).site.point;
      if (openStart) endings.push({ rung: openStart.rung, node, point, line: 0, kind: "start", boundary: openStart.site.boundary });
      if (openEnd) endings.push({ rung: openEnd.rung, node, point, line: 0, kind: "end", boundary: openEnd.site.boundary });
      if (openStart || openEnd || parts.length < 2) continue;
      // The lowest place, because no upright goes on down from there.
      const lowest = sites.reduce((low, next) => (next.rung > low.rung ? next : low));
      const line = bottomOfPart(grids[lowest.rung] as RungGrid, node, lowest.site);
      endings.push({ rung: lowest.rung, node, point, line, kind: "drop", boundary: lowest.site.boundary });
    }
  }
  return endings.sort((a, b) => a.rung - b.rung || a.line - b.line || a.boundary - b.boundary);
}

const isStart = (grid: RungGrid, site: PointSite) => site.part === grid.rung.id && site.line === 0 && site.boundary === grid.start && grid.rung.start.kind === "point" && grid.rung.start.node === site.node;
const isEnd = (grid: RungGrid, site: PointSite) => site.part === grid.rung.id && site.line === 0 && site.boundary === grid.end && grid.rung.end.kind === "point" && grid.rung.end.node === site.node;

function joined(links: readonly Link[], rung: number, node: NodeId, site: PointSite): boolean {
  return links.some(
    (link) => link.node === node && link.boundary === site.boundary && (link.to.rung === rung || link.from.rung === rung),
  );
}

interface Piece {
  line: number;
  toLine: number;
  from: number;
  to: number;
}

/** The connected parts in which a node is drawn within a rung. */
function partsOf(grid: RungGrid, node: NodeId): Piece[][] {
  const pieces: Piece[] = [
    ...grid.runs.filter((run) => run.node === node).map((run) => ({ line: run.line, toLine: run.line, from: boundaryOf(run.from), to: boundaryOf(run.to) })),
    ...grid.uprights.filter((up) => up.node === node).map((up) => ({ line: up.fromLine, toLine: up.toLine, from: up.boundary, to: up.boundary })),
  ];
  const parts: Piece[][] = [];
  for (const piece of pieces) {
    const touching = parts.filter((part) => part.some((other) => piece.line <= other.toLine && other.line <= piece.toLine && piece.from <= other.to && other.from <= piece.to));
    for (const part of touching) parts.splice(parts.indexOf(part), 1);
    parts.push([...touching.flat(), piece]);
  }
  return parts;
}

function holds(piece: Piece, at: { line: number; boundary: number }): boolean {
  return piece.line <= at.line && at.line <= piece.toLine && piece.from <= at.boundary && at.boundary <= piece.to;
}

/** The lowest line that an upright through this site reaches. */
function bottomOfPart(grid: RungGrid, node: NodeId, site: PointSite): number {
  let line = site.line;
  for (const up of grid.uprights) if (up.node === node && up.boundary === site.boundary && up.fromLine <= line && up.toLine > line) line = up.toLine;
  return line;
}
