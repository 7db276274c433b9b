import type { Mm } from "../../drawing/geometry.js";
import type { LoadUse, NodeId } from "../../machine/model.js";
import type { Arrangement, Block, Dressed } from "./arrangement.js";
import type { Ending } from "./find-endings.js";
import { boundaryOf, type Cell, type Link, type RungGrid } from "./grid.js";
import type { Joined } from "./join-points.js";

/** A number at a wire. `beside`: wire from another line comes to its beginning. */
export interface NumberPlace {
  node: NodeId;
  line: number;
  boundary: number;
  beside: boolean;
}

/** A rung with all its texts measured. */
export interface MeasuredRung {
  grid: RungGrid;
  dressed: Map<Cell, Dressed>;
  numbers: NumberPlace[];
  margins: { line: number; block: Block }[];
  endings: MeasuredEnding[];
  /** Boundaries on which wire comes to it or goes past it from other rungs, with the point it leads from. */
  passes: ReadonlyMap<number, string>;
  /** Room each line needs before and behind it, across. */
  lines: LineRoom[];
}

/** An ending with the wire from its boundary to its arrow, mm. */
export type MeasuredEnding = Ending & { lead: Mm };

export interface LineRoom {
  above: Mm;
  below: Mm;
  /** How far behind the line an arrow hangs, across, to be clear of what stands there. */
  drop: Mm;
}

/** Where an ending's arrow and text stand off the wire, mm. */
export const endingSize = { lead: 3.5, head: 2.5, half: 1.25, gap: 0.9 } as const;

/**
 * Dresses every part, chooses where each wire carries its number, and says how much room every line needs.
 * @param tight whether the texts of a rung are to be wrapped as narrow as its symbols
 */
export function measureRungs(
  { grids, links, endings }: Joined,
  rails: ReadonlySet<NodeId>,
  arrangement: Arrangement,
  tight: (rung: number) => boolean,
): MeasuredRung[] {
  const endingsOf = groupBy(endings, (ending) => ending.rung);
  const passes = grids.map(() => new Map<number, string>());
  for (const { node, boundary, from, to } of links) {
    const point = grids[from.rung]?.sites.find((site) => site.node === node)?.point ?? "";
    for (let rung = from.rung; rung <= to.rung; rung++) passes[rung]?.set(boundary, point);
  }
  const comings = uprightsAt(links);
  return grids.map((grid, index) => {
    const dressed = new Map(grid.cells.map((cell) => [cell, arrangement.dress(cell.use, tight(index))]));
    const lines = Array.from({ length: grid.lines }, () => ({ ...arrangement.bareLine, drop: 0 }) satisfies LineRoom as LineRoom);
    const claim = (line: number, above: Mm, below: Mm) => {
      const room = lines[line];
      if (!room) return;
      room.above = Math.max(room.above, above);
      room.below = Math.max(room.below, below);
    };
    for (const [cell, { above, below }] of dressed) claim(cell.line, above, below);
    const own = endingsOf.get(index) ?? [];
    // What stands outside the return rail is in no arrow's way.
    for (const room of lines) room.drop = Math.max(room.below + 0.7, 3);
    const margins = marginsOf(grid, arrangement);
    for (const { line, block } of margins) claim(line, block.above, block.below);
    for (const { kind, line, point } of own) {
      const { across } = arrangement.ending(kind, point);
      if (kind === "drop") claim(line, 0, (lines[line] as LineRoom).drop + endingSize.head + endingSize.gap + across);
      else claim(line, across, across);
    }
    const numbers = placeNumbers(grid, rails, comings.get(index) ?? [], own);
    for (const { node, line, beside } of numbers) claim(line, arrangement.wireNumber(node, beside)?.above ?? 0, 0);
    const leads = own.map((ending) => ({ ...ending, lead: leadOf(ending, numbers, arrangement) }));
    return { grid, dressed, numbers, margins, endings: leads, passes: passes[index] ?? new Map(), lines };
  });
}

/** Wire that comes down from above onto lines of a rung, or on its way to a later one crosses them. */
interface Coming {
  boundary: number;
  from: number;
  to: number;
}

function uprightsAt(links: readonly Link[]): Map<number, Coming[]> {
  const found = new Map<number, Coming[]>();
  for (const { boundary, from, to } of links) {
    for (let rung = from.rung; rung <= to.rung; rung++) {
      const coming = {
        boundary,
        from: rung === from.rung ? from.line + 1 : 0,
        to: rung === to.rung ? to.line : Number.POSITIVE_INFINITY,
      };
      const list = found.get(rung);
      if (list) list.push(coming);
      else found.set(rung, [coming]);
    }
  }
  return found;
}

/** An arrow at the end of a line stands clear of a number at its wire. */
function leadOf({ kind, line, boundary }: Ending, numbers: readonly NumberPlace[], arrangement: Arrangement): Mm {
  const number = kind === "end" ? numbers.find((other) => other.line === line && other.boundary === boundary) : undefined;
  if (!number) return endingSize.lead;
  return Math.max(endingSize.lead, (arrangement.wireNumber(number.node, number.beside)?.end ?? 0) + 0.8);
}

/** The number of each potential stands once in a rung: on the uppermost of its wires, as near to its source as it can. */
function placeNumbers(grid: RungGrid, rails: ReadonlySet<NodeId>, comings: readonly Coming[], endings: readonly Ending[]): NumberPlace[] {
  const best = new Map<NodeId, NumberPlace>();
  for (const run of grid.runs) {
    if (rails.has(run.node)) continue;
    const boundary = boundaryOf(run.from);
    const known = best.get(run.node);
    if (known && (known.line < run.line || (known.line === run.line && known.boundary <= boundary))) continue;
    const starts = endings.some((ending) => ending.kind === "start" && ending.node === run.node && ending.boundary === boundary);
    const meets = comings.some((up) => up.boundary === boundary && up.from <= run.line && run.line <= up.to);
    best.set(run.node, { node: run.node, line: run.line, boundary, beside: starts || meets });
  }
  return [...best.values()].sort((a, b) => a.line - b.line || a.boundary - b.boundary);
}

/** The rung's title on its first line and every load's text on its own. */
function marginsOf(grid: RungGrid, arrangement: Arrangement): MeasuredRung["margins"] {
  const loads = new Map<number, LoadUse>();
  for (const { use, line } of grid.cells) if (use.kind === "load" && !loads.has(line)) loads.set(line, use);
  const lines = [...new Set([0, ...loads.keys()])].sort((a, b) => a - b);
  return lines.map((line) => {
    const load = loads.get(line);
    const title = line === 0 ? grid.rung.title : undefined;
    return { line, block: arrangement.margin({ ...(title ? { title } : {}), ...(load ? { load } : {}) }) };
  });
}

function groupBy<T>(list: readonly T[], key: (item: T) => number): Map<number, T[]> {
  const groups = new Map<number, T[]>();
  for (const item of list) {
    const group = groups.get(key(item));
    if (group) group.push(item);
    else groups.set(key(item), [item]);
  }
  return groups;
}
