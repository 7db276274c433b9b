import type { NodeId, Rung } from "../../machine/model.js";
import type { RungGrid } from "./grid.js";
import { bearsLoad, reachOf } from "./place-parts.js";
import { reverseRung } from "./reverse-rung.js";

/** A rung that leads from point to point with nothing driven in it. */
export interface Bridge {
  rung: Rung;
  nodes: readonly [NodeId, NodeId];
}

export interface Bridges {
  at(index: number): Bridge | undefined;
  /** Whether a node is an end of a bridge behind this rung. */
  after(index: number, node: NodeId): boolean;
  /** The bridges soon behind this rung, which wires from it may reach. */
  ahead(index: number): Bridge[];
}

/** How many rungs ahead room is made for a bridge. */
const sight = 16;

/** @param letters points made by cutting a rung: what begins or ends there is no bridge */
export function findBridges(rungs: readonly Rung[], letters: ReadonlySet<string>): Bridges {
  const bridges = rungs.map((rung): Bridge | undefined => {
    const { start, end, path } = rung;
    if (start.kind === "rail" || end.kind === "rail" || start.node === end.node || bearsLoad(path)) return undefined;
    return letters.has(start.point) || letters.has(end.point) ? undefined : { rung, nodes: [start.node, end.node] };
  });
  const last = new Map<NodeId, number>();
  bridges.forEach((bridge, index) => {
    for (const node of bridge?.nodes ?? []) last.set(node, index);
  });
  return {
    at: (index) => bridges[index],
    after: (index, node) => (last.get(node) ?? -1) > index,
    ahead: (index) => bridges.slice(index + 1, index + 1 + sight).filter((bridge) => bridge !== undefined),
  };
}

/** Whether a bridge must be read from its end to be drawn from left to right between the uprights it can join. */
export function runsBack(
  { rung, nodes: [first, second] }: Bridge,
  boundaryOf: (node: NodeId) => number | undefined,
  free: number,
): boolean {
  const [one, other] = [boundaryOf(first), boundaryOf(second)];
  if (other === undefined) return false;
  return one !== undefined ? one > other : reachOf(rung).end(rung.path.items, free) > other;
}

/**
 * How far along the points of a rung must lie so that the bridges to come have room between them: of two points that a
 * bridge joins, one in this rung, the other here or on an upright, the right one lies a bridge's length behind the left one.
 */
export function placesForBridges(
  grid: RungGrid,
  bridges: readonly Bridge[],
  openAt: (node: NodeId) => number | undefined,
): Map<NodeId, number> {
  const places = new Map<NodeId, number>();
  const here = new Map<NodeId, number>();
  for (const { node, boundary } of grid.sites) if (!here.has(node)) here.set(node, boundary);
  for (const { rung, nodes } of bridges) {
    const [one, other] = nodes.map((node) => openAt(node) ?? here.get(node));
    if (one === undefined || other === undefined) continue;
    const movable = nodes.map((node) => openAt(node) === undefined && here.has(node));
    const back = one > other || (one === other && !movable[1]);
    const [left, right] = back ? [nodes[1], nodes[0]] : nodes;
    const from = back ? other : one;
    const to = back ? one : other;
    const needed = reachOf(rung).end((back ? reverseRung(rung) : rung).path.items, from);
    if (to >= needed) continue;
    if (openAt(right) === undefined) places.set(right, Math.max(needed, places.get(right) ?? 0));
    else if (openAt(left) === undefined) {
      const beyond = reachOf(rung).end((back ? rung : reverseRung(rung)).path.items, to);
      places.set(left, Math.max(beyond, places.get(left) ?? 0));
    }
  }
  return places;
}
