import type { NodeId } from "../../machine/model.js";
import { boundaryOf, type Link, type PointSite, type RungGrid, returnRail } from "./grid.js";

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

interface Sited {
  rung: number;
  site: PointSite;
}

/** One connected part of a point's wire within a rung; joined by links, several become one. */
interface Island {
  sites: Sited[];
  within?: Island;
}

/**
 * An ending for every part of every point that is drawn in more than one part, for every letter where a rung was cut, and for
 * every rung that starts or ends in the open.
 * @param letters points made by cutting rungs
 * @param abroad points that are drawn in other circuits too
 */
export function findEndings(
  grids: readonly RungGrid[],
  links: readonly Link[],
  letters: ReadonlySet<string>,
  abroad: ReadonlySet<string>,
): Ending[] {
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
  const isJoined = (rung: number, { node, boundary }: PointSite) =>
    arrives.has(`${rung} ${node} ${boundary}`) || leaves.has(`${rung} ${node} ${boundary}`);
  const endings: Ending[] = [];
  for (const [node, parts] of islands) {
    const named = parts.filter(({ sites }) => sites.some(({ site }) => !letters.has(site.point)));
    const nameOf = sharedName(named, letters, abroad);
    for (const part of parts) {
      const { sites } = part;
      const elsewhere = named.some((other) => other !== part) || sites.some(({ site }) => abroad.has(site.point));
      // Wire that only goes on down from where a rung begins comes from elsewhere, if it is drawn there at all.
      const comes = ({ rung, site }: Sited) => elsewhere && site.open === "start" && !arrives.has(`${rung} ${node} ${site.boundary}`);
      const open = sites.filter((place) => place.site.open && (place.site.cut || !isJoined(place.rung, place.site) || comes(place)));
      for (const { rung, site } of open)
        endings.push({
          rung,
          node,
          point: nameOf(site.point),
          line: site.line,
          kind: site.open as "start" | "end",
          boundary: site.boundary,
        });
      const hang = ({ rung, site }: Sited) => {
        // A rail says itself where it goes on.
        if (site.boundary === 0 || site.boundary === returnRail) return;
        const line = bottomOfPart(grids[rung] as RungGrid, node, site);
        endings.push({ rung, node, point: nameOf(site.point), line, kind: "drop", boundary: site.boundary });
      };
      const ended = new Set(open.map(({ site }) => site.point));
      for (const place of sites) if (letters.has(place.site.point) && !place.site.open && !ended.has(place.site.point)) hang(place);
      const own = sites.filter(({ site }) => !letters.has(site.point));
      // The lowest place, because no upright goes on down from there.
      const lowest = own.reduce<Sited | undefined>((low, next) => (low && next.rung <= low.rung ? low : next), undefined);
      if (lowest && elsewhere && !own.some(({ site }) => ended.has(site.point))) hang(lowest);
    }
  }
  return endings.sort((a, b) => a.rung - b.rung || a.line - b.line || a.boundary - b.boundary);
}

/** A wire may have several points: wherever it breaks off it goes by the one that most of its parts have. */
function sharedName(parts: readonly Island[], letters: ReadonlySet<string>, abroad: ReadonlySet<string>): (point: string) => string {
  const count = new Map<string, number>();
  for (const { sites } of parts) {
    for (const point of new Set(sites.map(({ site }) => site.point))) {
      if (!letters.has(point)) count.set(point, (count.get(point) ?? 0) + 1);
    }
  }
  const most = Math.max(0, ...count.values());
  const [common] = [...count].find(([, times]) => times === most) ?? [];
  return (point) => (common === undefined || letters.has(point) || abroad.has(point) ? point : common);
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
