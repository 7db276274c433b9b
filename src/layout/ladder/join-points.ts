import type { NodeId, Rung } from "../../machine/model.js";
import { boundaryOf, type Link, loadColumn, nodeAt, type PointSite, type RungGrid, returnRail } from "./grid.js";
import { bearsLoad, contactWidth, placeRung, returnWidth, widthOf } from "./place-parts.js";

/** A place where a shared point breaks off, to go on elsewhere. */
export interface Ending {
  rung: number;
  node: NodeId;
  point: string;
  line: number;
  /** `start` and `end`: the arrow stands before or behind the rung on its line. `drop`: it hangs below a wire on `boundary`. */
  kind: "start" | "end" | "drop";
  boundary: number;
  /** Nothing stands behind it on its line, so that its text may reach as far as the return rail. */
  last?: boolean;
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
 * @param columnsOf how many columns a rung may take before its loads
 * @param letters points made by cutting a rung: what begins or ends there is not joined by wire
 */
export function joinPoints(
  rungs: readonly Rung[],
  barriers: ReadonlySet<number>,
  letters: ReadonlySet<string>,
  columnsOf: (index: number) => number,
): Joined {
  const lastUse = lastUses(rungs, letters);
  const grids: RungGrid[] = [];
  const links: Link[] = [];
  const endings: Ending[] = [];
  const lastOnLine = new Set<number>();
  let open = new Map<NodeId, Open>();
  rungs.forEach((rung, index) => {
    if (barriers.has(index)) open = new Map();
    const meets = (node: NodeId) => open.get(node);
    const cutStart = rung.start.kind === "point" && letters.has(rung.start.point);
    const cutEnd = rung.end.kind === "point" && letters.has(rung.end.point);
    const above = rung.start.kind === "point" && !cutStart ? meets(rung.start.node) : undefined;
    const from = above && above.boundary + contactWidth(rung.path) <= columnsOf(index) ? above : undefined;
    const start = rung.start.kind === "rail" ? 0 : (from?.boundary ?? 1);
    const natural = bearsLoad(rung.path) ? loadColumn + 1 + returnWidth(rung.path) : start + widthOf(rung.path);
    const to = rung.end.kind === "point" && !cutEnd ? meets(rung.end.node) : undefined;
    const reached = to !== undefined && to.boundary >= natural && to.boundary > start ? to : undefined;
    // A rung that was too wide before is not stretched to meet an upright.
    const meet = new Map(Number.isFinite(columnsOf(index)) ? [] : [...open].map(([node, { boundary }]) => [node, boundary]));
    const ends = { start, cutStart, cutEnd, ...(reached ? { end: reached.boundary } : {}) };
    const stretched = placeRung(rung, { ...ends, meet });
    const runsBack = stretched.runs.some((run) => boundaryOf(run.from) > boundaryOf(run.to));
    const grid = runsBack ? placeRung(rung, { ...ends, meet: new Map() }) : stretched;
    grids.push(grid);
    joinWithin(grid);

    if (grid.end < loadColumn && ![...open.values()].some(({ boundary }) => boundary > grid.end)) lastOnLine.add(index);
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
    for (const node of new Set(grid.sites.filter(({ point }) => !letters.has(point)).map((site) => site.node))) {
      if (next.has(node) || (lastUse.get(node) ?? 0) <= index) continue;
      const way = wayDown(grid, node);
      if (way) next.set(node, { ...way, rung: index });
    }
    for (const node of next.keys()) if ((lastUse.get(node) ?? 0) <= index) next.delete(node);
    open = next;
  });
  for (const ending of findEndings(grids, links)) {
    const last = ending.kind === "end" && ending.boundary === grids[ending.rung]?.end && lastOnLine.has(ending.rung);
    endings.push(last ? { ...ending, last } : ending);
  }
  return { grids, links, endings };
}

function linkTo(node: NodeId, upright: Open, rung: number, line: number): Link {
  return { node, boundary: upright.boundary, from: { rung: upright.rung, line: upright.line }, to: { rung, line } };
}

/** The last rung that uses the node of each of the author's points. */
function lastUses(rungs: readonly Rung[], letters: ReadonlySet<string>): Map<NodeId, number> {
  const last = new Map<NodeId, number>();
  rungs.forEach((rung, index) => {
    const visit = (path: Rung["path"]) => {
      for (const item of path.items) {
        if (item.kind === "point" && !letters.has(item.point)) last.set(item.from, index);
        else if (item.kind === "parallel") item.branches.forEach(visit);
      }
    };
    visit(rung.path);
    for (const end of [rung.start, rung.end]) if (end.kind === "point" && !letters.has(end.point)) last.set(end.node, index);
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

/** One connected part of a point's wire within a rung; joined by links, several become one. */
interface Island {
  sites: { rung: number; site: PointSite }[];
  within?: Island;
}

/** An ending for every part of every point that is drawn in more than one part, and for every rung that starts or ends in the open. */
function findEndings(grids: readonly RungGrid[], links: readonly Link[]): Ending[] {
  const byNode = new Map<NodeId, Island[]>();
  const byPart = new Map<string, Island>();
  const partsOfRung = new Map<string, Piece[][]>();
  const islandAt = (rung: number, node: NodeId, line: number, boundary: number): Island => {
    const parts = partsOfRung.get(`${rung} ${node}`) ?? partsOf(grids[rung] as RungGrid, node);
    partsOfRung.set(`${rung} ${node}`, parts);
    const part = parts.findIndex((pieces) => pieces.some((piece) => holds(piece, { line, boundary })));
    const key = `${rung} ${node} ${part < 0 ? `at ${line} ${boundary}` : part}`;
    let island = byPart.get(key);
    if (!island) {
      island = { sites: [] };
      byPart.set(key, island);
      const list = byNode.get(node);
      if (list) list.push(island);
      else byNode.set(node, [island]);
    }
    while (island.within) island = island.within;
    return island;
  };
  grids.forEach((grid, rung) => {
    for (const site of grid.sites) islandAt(rung, site.node, site.line, site.boundary).sites.push({ rung, site });
  });
  for (const { node, boundary, from, to } of links) {
    const upper = islandAt(from.rung, node, from.line, boundary);
    const lower = islandAt(to.rung, node, to.line, boundary);
    if (upper === lower) continue;
    upper.sites.push(...lower.sites);
    lower.within = upper;
  }
  const islands = new Map([...byNode].map(([node, list]) => [node, list.filter(({ within, sites }) => !within && sites.length > 0)]));
  const arrives = new Set(links.map(({ node, boundary, to }) => `${to.rung} ${node} ${boundary}`));
  const leaves = new Set(links.map(({ node, boundary, from }) => `${from.rung} ${node} ${boundary}`));
  const isOpen = (rung: number, { node, boundary, open, cut }: PointSite) => {
    const key = `${rung} ${node} ${boundary}`;
    return open !== undefined && (cut === true || !(arrives.has(key) || (open === "end" && leaves.has(key))));
  };
  const endings: Ending[] = [];
  for (const [node, parts] of islands) {
    for (const { sites } of parts) {
      const open = sites.filter(({ rung, site }) => isOpen(rung, site));
      for (const { rung, site } of open)
        endings.push({ rung, node, point: site.point, line: site.line, kind: site.open as "start" | "end", boundary: site.boundary });
      if (open.length > 0 || parts.length < 2) continue;
      // The lowest place, because no upright goes on down from there.
      const lowest = sites.reduce((low, next) => (next.rung > low.rung ? next : low));
      const line = bottomOfPart(grids[lowest.rung] as RungGrid, node, lowest.site);
      endings.push({ rung: lowest.rung, node, point: lowest.site.point, line, kind: "drop", boundary: lowest.site.boundary });
    }
  }
  return endings.sort((a, b) => a.rung - b.rung || a.line - b.line || a.boundary - b.boundary);
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
    ...grid.runs
      .filter((run) => run.node === node)
      .map((run) => ({ line: run.line, toLine: run.line, from: boundaryOf(run.from), to: boundaryOf(run.to) })),
    ...grid.uprights
      .filter((up) => up.node === node)
      .map((up) => ({ line: up.fromLine, toLine: up.toLine, from: up.boundary, to: up.boundary })),
  ];
  const parts: Piece[][] = [];
  for (const piece of pieces) {
    const touching = parts.filter((part) =>
      part.some((other) => piece.line <= other.toLine && other.line <= piece.toLine && piece.from <= other.to && other.from <= piece.to),
    );
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
  for (let before = -1; before !== line; ) {
    before = line;
    for (const up of grid.uprights)
      if (up.node === node && up.boundary === site.boundary && up.fromLine <= line) line = Math.max(line, up.toLine);
  }
  return line;
}
