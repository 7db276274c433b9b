import type { Point } from "../../drawing/geometry.js";
import type { FluidComponent, FluidNodeId } from "../../machine/model.js";
import type { Arrangement } from "./arrangement.js";
import { type Placed, portOf } from "./block.js";
import type { HeaderKind } from "./divide.js";
import { type Extent, moved, union } from "./modules.js";
import type { PowerUnit } from "./power-unit.js";

/** A shared line drawn straight across below the valves. */
export interface HeaderLine {
  node: FluidNodeId;
  kind: HeaderKind;
  y: number;
  from: number;
  to: number;
  /** It serves several, and is drawn as a header. */
  shared: boolean;
  /** It comes from or goes on to another sheet. */
  fromLeft: boolean;
  toRight: boolean;
}

/** Everything of one sheet in modules about an origin of its own. */
export interface Composition {
  placed: Placed[];
  headers: HeaderLine[];
  /** Lines that lead straight, bend by bend, from a port of the unit to a header. */
  risers: { node: FluidNodeId; points: Point[] }[];
  extent: Extent;
}

/** Rows between headers; more where they say over their ends where they go on. */
const plainPitch = 3;
const wordedPitch = 4;

/** Columns between the groups and a unit beside them, for its lines to come down in. */
const besideRoom = 6;

/** How long a line is beyond the last thing on it, for the name and place it goes on to. */
const wordRoom = 12;

export interface Content {
  groups: readonly Arrangement[];
  unit?: PowerUnit;
  /** Shared nodes in their order from above, and on which other sheets they go on. */
  headers: readonly { node: FluidNodeId; kind: HeaderKind; before: boolean; after: boolean }[];
  /** Free columns between groups. */
  gap: number;
  /** At even distances, as wide as the widest needs. */
  even: boolean;
  /** How wide a sheet is. */
  width: number;
  /** The unit stands left of the groups rather than below them. */
  beside: boolean;
}

/** Sets groups side by side on common lines, headers below them and the power unit at the bottom left. */
export function compose({ groups, unit, headers, gap, even, width, beside }: Content): Composition {
  const placed: Placed[] = [];
  const origins = sideBySide(groups, gap, even);
  groups.forEach(({ placed: members }, index) => {
    for (const { block, at } of members) placed.push({ block, at: { x: at.x + (origins[index] as number), y: at.y } });
  });
  const right = groups.length > 0 ? (origins.at(-1) as number) + (groups.at(-1) as Arrangement).extent.right : 0;
  const joined = headers.filter(
    ({ node, before, after }) => before || after || portsOn(placed, node).length > 1 || (unit !== undefined && hasPort(unit.placed, node)),
  );
  // A line that goes on elsewhere says so over its end.
  const worded = joined.some(({ before, after }) => before || after);
  const headerPitch = worded ? wordedPitch : plainPitch;
  const firstRow = groups.length > 0 ? Math.ceil(Math.max(...groups.map(({ extent }) => extent.bottom))) + (worded ? 3 : 2) : 0;
  const drops = joined.flatMap(({ node }) => portsOn(placed, node));
  const lastRow = firstRow + Math.max(0, joined.length - 1) * headerPitch;

  // The unit's first riser goes straight on to the first valve, if that leaves it on the sheet's left.
  const rising: { node: FluidNodeId; x: number; from: Point }[] = [];
  const risers = new Map<FluidNodeId, number[]>();
  if (unit && beside && groups.length > 0) {
    const left = Math.min(...placed.map(({ block, at }) => at.x + block.full.left));
    const shift = Math.floor(left - besideRoom - unit.extent.right);
    const down = Math.floor(lastRow + 1 - unit.extent.bottom);
    for (const { block, at } of unit.placed) placed.push({ block, at: { x: at.x + shift, y: at.y + down } });
  } else if (unit) {
    const riser = unit.risers[0];
    const target = riser ? portsOn(placed, riser.node)[0] : undefined;
    const shift =
      riser && target !== undefined ? besideOthers(unit, riser.x, target, placed, width - (worded ? 10 : 0)) : Math.ceil(-unit.extent.left);
    const down = groups.length > 0 || joined.length > 0 ? lastRow + 1 : 0;
    for (const { block, at } of unit.placed) placed.push({ block, at: { x: at.x + shift, y: at.y + down } });
    for (const { node, x: at, from } of unit.risers) rising.push({ node, x: at + shift, from: { x: from.x + shift, y: from.y + down } });
    for (const { node, x: at } of [...unit.risers, ...unit.returns]) risers.set(node, [...(risers.get(node) ?? []), at + shift]);
  }
  const lines = joined
    .map(({ node, kind, before, after }, index): HeaderLine => {
      const users = portsOn(placed.slice(0, placed.length - (unit?.placed.length ?? 0)), node);
      const ends = [...users, ...(risers.get(node) ?? [])];
      const from = before ? Math.min(Math.floor(Math.min(...ends, 0)) - 3, ...drops.map((drop) => drop - wordRoom)) : Math.min(...ends);
      const to = after ? Math.max(Math.ceil(Math.max(...ends, right)) + 3, ...drops.map((drop) => drop + wordRoom)) : Math.max(...ends);
      return {
        node,
        kind,
        y: firstRow + index * headerPitch,
        from,
        to,
        shared: before || after || users.length > 1,
        fromLeft: before,
        toRight: after,
      };
    })
    .filter(({ from, to }) => Number.isFinite(from) && Number.isFinite(to));
  const extent = union([
    ...placed.map(({ block, at }) => moved(block.full, at)),
    ...lines.map(({ from, to, y, fromLeft, toRight }) => ({
      left: fromLeft ? from - 1 : from,
      right: toRight ? to + 1 : to,
      top: y - (fromLeft || toRight ? 2 : 0),
      bottom: y + (fromLeft || toRight ? 0.6 : 0),
    })),
  ]);
  const rows = new Map(lines.map(({ node, y }) => [node, y]));
  const straight = rising.flatMap(({ node, x, from }) => {
    const y = rows.get(node);
    return y === undefined ? [] : [{ node, points: [from, { x, y: from.y }, { x, y }] }];
  });
  return { placed, headers: lines, risers: straight, extent };
}

/** Where the unit goes: its riser straight below the first valve, or where the sheet is too narrow, its edge below theirs. */
function besideOthers(unit: PowerUnit, riser: number, target: number, placed: readonly Placed[], width: number): number {
  const left = Math.min(...placed.map(({ block, at }) => at.x + block.full.left));
  const right = Math.max(...placed.map(({ block, at }) => at.x + block.full.right));
  const below = target - riser;
  if (below + unit.extent.left >= left || Math.max(right, below + unit.extent.right) - (below + unit.extent.left) <= width) return below;
  const spare = Math.max(0, width - (right - left));
  return Math.ceil(left - spare - unit.extent.left);
}

/** Where the origins of groups stand. */
function sideBySide(groups: readonly Arrangement[], gap: number, even: boolean): number[] {
  const steps = groups.slice(1).map((group, index) => stepTo(group, groups[index] as Arrangement, gap));
  const widest = Math.max(0, ...steps);
  let x = Math.ceil(-(groups[0]?.extent.left ?? 0));
  return groups.map((_, index) => {
    if (index > 0) x += even ? widest : (steps[index - 1] as number);
    return x;
  });
}

/** How far a group stands from the one before it: the symbols of one all right of the other's, texts between them where they fit. */
function stepTo(group: Arrangement, before: Arrangement, gap: number): number {
  const bodies = ({ placed }: Arrangement) => placed.map(({ block, at }) => moved(block.body, at));
  const whole = ({ placed }: Arrangement) => placed.map(({ block, at }) => moved(block.full, at));
  const right = Math.max(...bodies(before).map((extent) => extent.right));
  const left = Math.min(...bodies(group).map((extent) => extent.left));
  let step = right + gap - left;
  for (const one of whole(before)) {
    for (const other of whole(group)) {
      if (one.top - gap < other.bottom && other.top - gap < one.bottom) step = Math.max(step, one.right + gap - other.left);
    }
  }
  return Math.ceil(step);
}

/** Where ports on a node stand, from left to right. */
function portsOn(placed: readonly Placed[], node: FluidNodeId): number[] {
  return placed
    .flatMap(({ block, at }) => portNames(block.component, node).map((name) => portOf(block, name).x + at.x))
    .sort((a, b) => a - b);
}

function hasPort(placed: readonly Placed[], node: FluidNodeId): boolean {
  return placed.some(({ block }) => portNames(block.component, node).length > 0);
}

function portNames(component: FluidComponent, node: FluidNodeId): string[] {
  return component.ports.filter((port) => port.node === node).map(({ name }) => name);
}
