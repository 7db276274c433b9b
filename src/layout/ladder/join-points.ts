import type { NodeId, Rung } from "../../machine/model.js";
import { findBridges, placesForBridges, runsBack } from "./bridges.js";
import { type Ending, findEndings } from "./find-endings.js";
import { type Link, loadColumn, type RungGrid, stride } from "./grid.js";
import { bearsLoad, placeRung, type RungEnds, reachOf, type Wishes } from "./place-parts.js";
import { reverseRung } from "./reverse-rung.js";
import { bottomOf, crossed, joinWithin, topOf, wayDown } from "./uprights.js";

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
  /** Wires that it crosses on its way from there. */
  crossings: number;
}

export interface SharedPoints {
  /** Indices of rungs that no upright may reach from above: those that begin a sheet. */
  barriers: ReadonlySet<number>;
  /** Points made by cutting a rung: what begins or ends there is not joined by wire. */
  letters: ReadonlySet<string>;
  /** Points that are drawn in other circuits too. */
  abroad: ReadonlySet<string>;
  /** How many columns a rung may take before its loads. */
  columnsOf(index: number): number;
}

/**
 * Places rungs in order and joins the points they share. A shared point becomes an upright as long as nothing lies in its
 * way from one rung to the next; where it is interrupted, both parts get an ending that names the other.
 *
 * A bridge, which leads from point to point, is drawn from left to right between its two uprights whichever of its points
 * is written first, and the points are placed so far apart that it has room between them. For its sake alone an upright may
 * cross one wire on its way, if the other crosses none: one crossing is easier to read than two pairs of references, two
 * are not. So in rungs without bridges no wire crosses another.
 */
export function joinPoints(rungs: readonly Rung[], shared: SharedPoints): Joined {
  const { barriers, letters, columnsOf } = shared;
  const lastUse = lastUses(rungs, letters);
  const bridges = findBridges(rungs, letters);
  const grids: RungGrid[] = [];
  const links: Link[] = [];
  const lastOnLine = new Set<number>();
  let open = new Map<NodeId, Open>();
  rungs.forEach((written, index) => {
    if (barriers.has(index)) open = new Map();
    const bridge = bridges.at(index);
    const reachable = openTo(open, bridge?.nodes ?? []);
    const turned = bridge && runsBack(bridge, (node) => reachable.get(node)?.boundary, stride);
    const grid = placeBetween(turned ? reverseRung(written) : written, index, reachable);
    grids.push(grid);
    joinWithin(grid);

    if (grid.end < loadColumn && ![...open.values()].some(({ boundary }) => boundary > grid.end)) lastOnLine.add(index);
    const next = new Map<NodeId, Open>();
    const taken = new Set<number>();
    const keep = (node: NodeId, upright: Open, most: 0 | 1) => {
      if (upright.crossings > most || (lastUse.get(node) ?? 0) <= index) return;
      if (upright.crossings > 0 && !bridges.after(index, node)) return;
      next.set(node, upright);
      taken.add(upright.boundary);
    };
    for (const [node, upright] of open) {
      const { boundary } = upright;
      const touched = topOf(grid, node, boundary);
      if (touched === undefined) {
        keep(node, { ...upright, crossings: upright.crossings + crossed(grid, node, boundary, 0, grid.lines) }, 1);
      } else if (reachable.has(node) && crossed(grid, node, boundary, 0, touched) === 0) {
        links.push({ node, boundary, from: { rung: upright.rung, line: upright.line }, to: { rung: index, line: touched } });
        const line = bottomOf(grid, node, boundary) as number;
        keep(node, { boundary, rung: index, line, crossings: crossed(grid, node, boundary, line + 1, grid.lines) }, 1);
      }
    }
    for (const node of new Set(grid.sites.filter(({ point }) => !letters.has(point)).map((site) => site.node))) {
      if (next.has(node)) continue;
      const way = wayDown(grid, node, taken, bridges.after(index, node) ? 1 : 0);
      if (way) keep(node, { ...way, rung: index }, 1);
    }
    open = next;
  });
  const endings = findEndings(grids, links, letters, shared.abroad).map((ending): Ending => {
    const last = ending.kind === "end" && ending.boundary === grids[ending.rung]?.end && lastOnLine.has(ending.rung);
    return last ? { ...ending, last } : ending;
  });
  return { grids, links, endings };

  /** Places a rung from the upright it can begin at to the one it can end at, with room between its points for bridges to come. */
  function placeBetween(rung: Rung, index: number, reachable: ReadonlyMap<NodeId, Open>): RungGrid {
    const limit = columnsOf(index) * stride;
    const cutStart = rung.start.kind === "point" && letters.has(rung.start.point);
    const cutEnd = rung.end.kind === "point" && letters.has(rung.end.point);
    const above = rung.start.kind === "point" && !cutStart ? reachable.get(rung.start.node) : undefined;
    // A wire that comes down behind the loads can begin nothing that has a load.
    const within = above !== undefined && (above.boundary < loadColumn || !bearsLoad(rung.path));
    const from = within && reachOf(rung).contactEnd(rung.path, above.boundary) <= limit ? above : undefined;
    const to = rung.end.kind === "point" && !cutEnd ? reachable.get(rung.end.node) : undefined;
    const endsFor = (wishes?: Wishes): RungEnds => {
      const wished = ({ node }: Rung["start"]) => wishes?.any.get(node) ?? 0;
      const start = rung.start.kind === "rail" ? 0 : (from?.boundary ?? Math.max(stride, wished(rung.start)));
      const natural = bearsLoad(rung.path) ? loadColumn + 1 : reachOf(rung, wishes).end(rung.path.items, start);
      const reached = to !== undefined && to.boundary >= natural && to.boundary > start ? to.boundary : Math.max(natural, wished(rung.end));
      return { start, cutStart, cutEnd, ...(reached > natural ? { end: reached } : {}), ...(wishes ? { wishes } : {}) };
    };
    const plain = placeRung(rung, endsFor());
    // A rung that was too wide before is not stretched for its points' sake.
    if (Number.isFinite(limit) || plain.sites.length === 0) return plain;
    const main = new Map([...reachable].filter(([, { crossings }]) => crossings === 0).map(([node, { boundary }]) => [node, boundary]));
    const any = new Map<NodeId, number>();
    let grid = main.size > 0 ? placeRung(rung, endsFor({ main, any })) : plain;
    for (let round = 0; round < mostShifts; round++) {
      const wider = placesForBridges(grid, bridges.ahead(index), (node) => open.get(node)?.boundary);
      if (wider.size === 0) break;
      for (const [node, boundary] of wider) any.set(node, boundary);
      grid = placeRung(rung, endsFor({ main, any }));
    }
    const missed = to !== undefined && plain.end === to.boundary && grid.end !== to.boundary;
    return missed ? plain : grid;
  }
}

/** A point is moved again where bridges follow each other. */
const mostShifts = 6;

/** The uprights a rung can join: those that cross nothing, and an end of a bridge that crosses one wire if the other end crosses none. */
function openTo(open: ReadonlyMap<NodeId, Open>, ends: readonly NodeId[]): ReadonlyMap<NodeId, Open> {
  const crossings = ends.reduce((sum, node) => sum + (open.get(node)?.crossings ?? 0), 0);
  return new Map([...open].filter(([node, upright]) => upright.crossings === 0 || (crossings === 1 && ends.includes(node))));
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
