import type { Mm, Point } from "../../drawing/geometry.js";
import type { NodeId } from "../../machine/model.js";

/** A straight piece of wire along (`from.across === to.across`) or across. */
export interface Straight {
  node: NodeId;
  from: { along: Mm; across: Mm };
  to: { along: Mm; across: Mm };
}

export interface JoinedWires {
  /** Each from end to end, with its corners. */
  wires: { node: NodeId; points: Point[] }[];
  /** Where three or more ways of a node meet. */
  dots: { node: NodeId; at: Point }[];
}

/**
 * Makes whole wires of straight pieces: pieces of a node in one line become one, two that meet in a corner become one
 * wire with a bend, and where more meet there is a dot. On the rails there is none: a rung's end there is plain.
 * @param onRail whether a point lies on a rail
 */
export function joinWires(pieces: readonly Straight[], onRail: (along: Mm) => boolean): JoinedWires {
  const byNode = new Map<NodeId, Straight[]>();
  for (const piece of pieces) {
    if (same(piece.from.along, piece.to.along) && same(piece.from.across, piece.to.across)) continue;
    const list = byNode.get(piece.node);
    if (list) list.push(piece);
    else byNode.set(piece.node, [piece]);
  }
  const wires: JoinedWires["wires"] = [];
  const dots: JoinedWires["dots"] = [];
  for (const [node, list] of byNode) {
    const level = merge(
      list.filter(({ from, to }) => same(from.across, to.across)),
      "along",
      "across",
    );
    const upright = merge(
      list.filter(({ from, to }) => !same(from.across, to.across)),
      "across",
      "along",
    );
    const lines = [
      ...level.map(({ at, from, to }) => [
        { x: from, y: at },
        { x: to, y: at },
      ]),
      ...upright.map(({ at, from, to }) => [
        { x: at, y: from },
        { x: at, y: to },
      ]),
    ];
    const corners: Point[] = [];
    for (const up of upright) {
      for (const flat of level) {
        if (flat.at < up.from - near || flat.at > up.to + near || up.at < flat.from - near || up.at > flat.to + near) continue;
        const ways = (same(flat.at, up.from) || same(flat.at, up.to) ? 1 : 2) + (same(up.at, flat.from) || same(up.at, flat.to) ? 1 : 2);
        const at = { x: up.at, y: flat.at };
        if (ways === 2) corners.push(at);
        else if (!onRail(at.x)) dots.push({ node, at });
      }
    }
    wires.push(...bend(lines, corners).map((points) => ({ node, points })));
  }
  return { wires, dots };
}

const near: Mm = 0.01;
const same = (a: Mm, b: Mm) => Math.abs(a - b) < near;

interface Bar {
  at: Mm;
  from: Mm;
  to: Mm;
}

/** Pieces that lie in one line and touch become one. */
function merge(pieces: readonly Straight[], running: "along" | "across", fixed: "along" | "across"): Bar[] {
  const bars = pieces
    .map(({ from, to }) => ({ at: from[fixed], from: Math.min(from[running], to[running]), to: Math.max(from[running], to[running]) }))
    .sort((a, b) => (same(a.at, b.at) ? a.from - b.from : a.at - b.at));
  const merged: Bar[] = [];
  for (const bar of bars) {
    const last = merged.at(-1);
    if (last && same(last.at, bar.at) && bar.from <= last.to + near) last.to = Math.max(last.to, bar.to);
    else merged.push({ ...bar });
  }
  return merged;
}

/** Joins lines whose ends meet in a corner. */
function bend(lines: Point[][], corners: readonly Point[]): Point[][] {
  const key = ({ x, y }: Point) => `${x.toFixed(2)} ${y.toFixed(2)}`;
  const wires = new Set(lines);
  const ends = new Map<string, Point[][]>();
  const add = (wire: Point[]) => {
    for (const end of [wire[0] as Point, wire.at(-1) as Point]) ends.set(key(end), [...(ends.get(key(end)) ?? []), wire]);
  };
  const remove = (wire: Point[]) => {
    wires.delete(wire);
    for (const end of [wire[0] as Point, wire.at(-1) as Point])
      ends.set(
        key(end),
        (ends.get(key(end)) ?? []).filter((other) => other !== wire),
      );
  };
  lines.forEach(add);
  for (const corner of corners) {
    const [one, other] = ends.get(key(corner)) ?? [];
    if (!one || !other || one === other) continue;
    remove(one);
    remove(other);
    const before = key(one[0] as Point) === key(corner) ? [...one].reverse() : one;
    const after = key(other[0] as Point) === key(corner) ? other : [...other].reverse();
    const whole = [...before, ...after.slice(1)];
    wires.add(whole);
    add(whole);
  }
  return [...wires];
}
