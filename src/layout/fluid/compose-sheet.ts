import type { FluidComponent, FluidNodeId } from "../../machine/model.js";
import type { Arrangement } from "./arrangement.js";
import { type Placed, portOf } from "./block.js";
import type { FluidGraph } from "./graph.js";
import { type Extent, moved, union } from "./modules.js";
import type { PowerUnit } from "./power-unit.js";

/** A shared line drawn straight across below the valves. */
export interface HeaderLine {
  node: FluidNodeId;
  y: number;
  from: number;
  to: number;
  /** It comes from or goes on to another sheet. */
  fromLeft: boolean;
  toRight: boolean;
}

/** Everything of one sheet in modules about an origin of its own. */
export interface Composition {
  placed: Placed[];
  headers: HeaderLine[];
  extent: Extent;
}

/** Rows between headers, and between the last one and what stands below. */
const headerPitch = 3;

export interface Content {
  groups: readonly Arrangement[];
  unit?: PowerUnit;
  /** Shared nodes in their order from above, and on which other sheets they go on. */
  headers: readonly { node: FluidNodeId; before: boolean; after: boolean }[];
  /** Free columns between groups. */
  gap: number;
}

/** Sets groups side by side on common lines, headers below them and the power unit at the bottom left. */
export function compose({ groups, unit, headers, gap }: Content, graph: FluidGraph): Composition {
  const placed: Placed[] = [];
  let x = 0;
  for (const { placed: members, extent } of groups) {
    const shift = Math.ceil(x - extent.left);
    for (const { block, at } of members) placed.push({ block, at: { x: at.x + shift, y: at.y } });
    x = extent.right + shift + gap;
  }
  const right = x - gap;
  const firstRow = groups.length > 0 ? Math.ceil(Math.max(...groups.map(({ extent }) => extent.bottom))) + 2 : 0;
  const joined = headers.filter(({ node, before, after }) => before || after || portsOn(placed, node).length > 1 || (unit !== undefined && hasPort(unit.placed, node)));
  const lastRow = firstRow + Math.max(0, joined.length - 1) * headerPitch;

  // The unit's first riser goes straight on to the first valve, if that leaves it on the sheet's left.
  const risers = new Map<FluidNodeId, number[]>();
  if (unit) {
    const riser = unit.risers[0];
    const target = riser ? portsOn(placed, riser.node)[0] : undefined;
    const shift = riser && target !== undefined ? target - riser.x : Math.ceil(-unit.extent.left);
    const down = (groups.length > 0 ? lastRow : -1) + 1;
    for (const { block, at } of unit.placed) placed.push({ block, at: { x: at.x + shift, y: at.y + down } });
    for (const { node, x: at } of [...unit.risers, ...unit.returns]) risers.set(node, [...(risers.get(node) ?? []), at + shift]);
  }
  const lines = joined.map(({ node, before, after }, index): HeaderLine => {
    const ends = [...portsOn(placed.slice(0, placed.length - (unit?.placed.length ?? 0)), node), ...(risers.get(node) ?? [])];
    const from = before ? Math.min(...ends, 0) - 3 : Math.min(...ends);
    const to = after ? Math.max(...ends, right) + 3 : Math.max(...ends);
    return { node, y: firstRow + index * headerPitch, from, to, fromLeft: before, toRight: after };
  }).filter(({ from, to }) => Number.isFinite(from) && Number.isFinite(to));
  const extent = union([
    ...placed.map(({ block, at }) => moved(block.full, at)),
    ...lines.map(({ from, to, y, fromLeft, toRight }) => ({ left: fromLeft ? from - 1 : from, right: toRight ? to + 1 : to, top: y - (fromLeft || toRight ? 2 : 0), bottom: y })),
  ]);
  void graph;
  return { placed, headers: lines, extent };
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
