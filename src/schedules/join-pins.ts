import type {
  DeviceUse,
  LadderCircuit,
  Machine,
  NodeId,
  ParallelPath,
  PowerBranch,
  PowerCircuit,
  Rung,
  SeriesPath,
  Supply,
} from "../machine/model.js";
import { designationOf } from "../machine/walk.js";

/** A connection point as it is marked: `CR1:13`, `X1:4`, and the designation alone where a device's ends are not marked. */
export type Pin = string;

/**
 * A wire from pin to pin. `path`: on along the current path. `head`: from one path to the next where they begin at one potential;
 * `tail`: the same where they end at one.
 */
export interface Connection {
  from: Pin;
  to: Pin;
  way: "path" | "head" | "tail";
}

/** What is joined at one potential, in drawing order. */
export interface JoinedPins {
  pins: Pin[];
  connections: Connection[];
}

/**
 * The pins at each potential, joined pin to pin as an electrician wires a ladder: along each path, and from one path to the next
 * where several meet, so that every wire has two ends and no pins are joined twice. A supply's fuse comes first on its live rail.
 */
export function joinPins(machine: Machine): Map<NodeId, JoinedPins> {
  const joiner = new PinJoiner();
  for (const circuit of machine.circuits) {
    if (circuit.kind === "ladder") joiner.addLadder(circuit);
    else if (circuit.kind === "power") joiner.addPower(circuit, machine.supplies);
  }
  return joiner.finish();
}

class PinJoiner {
  private readonly joined = new Map<NodeId, JoinedPins>();
  /** Which pins of a potential hang together: each leads to another of its group, the first to itself. */
  private readonly groups = new Map<string, string>();
  /** Where the next path that begins or ends at a potential is joined on. */
  private readonly heads = new Map<NodeId, Pin>();
  private readonly tails = new Map<NodeId, Pin>();

  /** Live rails whose supply has a fuse that is set down. */
  private readonly fused = new Set<NodeId>();

  addLadder({ rungs, supply }: LadderCircuit): void {
    for (const rung of rungs) {
      const { start } = rung;
      if (supply.fuse && start.kind === "rail" && !this.fused.has(start.node)) {
        this.fused.add(start.node);
        this.hang(start.node, `${supply.fuse.name}:2`, "head");
      }
      this.addRung(rung);
    }
  }

  addPower({ feed, branches }: PowerCircuit, supplies: readonly Supply[]): void {
    for (const item of feed.path) this.placeMain(item);
    for (const { path, end } of branches) {
      for (const item of path) this.placeMain(item);
      const fuse = end.kind === "supply" ? supplies.find(({ name }) => name === end.supply)?.fuse : undefined;
      const [live] = end.kind === "supply" ? end.conductors : [];
      if (fuse && live) this.hang(live.node, `${fuse.name}:1`, "path");
    }
  }

  private placeMain(item: PowerBranch["path"][number]): void {
    if (item.kind === "power-point") return;
    if (item.kind === "power-parallel") {
      for (const way of item.ways) for (const inner of way) this.placeMain(inner);
      return;
    }
    for (const { terminal, node } of item.ins) this.hang(node, `${item.device}:${terminal}`, "path");
    // A terminal of a strip is the same on both sides.
    const outs = item.outs.filter(({ terminal }) => terminal !== "");
    for (const { terminal, node } of [...outs, ...(item.second ?? [])]) this.hang(node, `${item.device}:${terminal}`, "tail");
    if (item.frame !== undefined) this.hang(item.frame, `${item.device}:PE`, "path");
  }

  /** Joins a pin to what was last set down at its potential. */
  private hang(node: NodeId, pin: Pin, way: Connection["way"]): void {
    const before = this.joined.get(node)?.pins.at(-1);
    this.pin(node, pin);
    if (before !== undefined && before !== pin) this.join(node, before, pin, way);
    this.heads.set(node, pin);
    this.tails.set(node, pin);
  }

  private addRung({ start, end, path }: Rung): void {
    const before = this.heads.get(start.node) ?? this.joined.get(start.node)?.pins.at(-1);
    const { head, foot, tail } = this.walk(path, before === undefined ? undefined : { pin: before, way: "head" });
    if (head !== undefined) this.heads.set(start.node, head);
    if (foot === undefined || tail === undefined) return;
    const above = this.tails.get(end.node) ?? this.joined.get(end.node)?.pins.find((pin) => pin !== foot);
    if (above !== undefined) this.join(end.node, above, foot, "tail");
    this.tails.set(end.node, tail);
  }

  /** Sets a path down behind `entry`; gives the pins at its ends, from which a chain goes on. */
  private walk(path: SeriesPath, entry: Entry | undefined): Ends {
    let here = entry;
    let head: Pin | undefined;
    let foot = entry?.pin;
    for (const part of path.items) {
      if (part.kind === "point") continue;
      const ends = part.kind === "parallel" ? this.walkBranches(part, here) : this.place(part, here);
      head ??= ends.head;
      if (ends.tail !== undefined) here = { pin: ends.tail, way: "path" };
      foot = ends.foot ?? foot;
    }
    return { head, foot, tail: here?.pin };
  }

  private walkBranches({ branches, to }: ParallelPath, entry: Entry | undefined): Ends {
    let before = entry;
    let head: Pin | undefined;
    let foot: Pin | undefined;
    let tail: Pin | undefined;
    for (const branch of branches) {
      const ends = this.walk(branch, before);
      if (ends.head !== undefined) {
        head = ends.head;
        before = { pin: head, way: "head" };
      }
      if (ends.foot !== undefined && tail !== undefined) this.join(to, tail, ends.foot, "tail");
      foot ??= ends.foot;
      tail = ends.tail ?? tail;
    }
    return { head, foot, tail };
  }

  private place(use: DeviceUse, entry: Entry | undefined): Ends {
    const [from, to] = pinsOf(use);
    this.pin(use.from, from);
    if (entry) this.join(use.from, entry.pin, from, entry.way);
    this.pin(use.to, to);
    return { head: from, foot: to, tail: to };
  }

  private pin(node: NodeId, pin: Pin): Pin {
    const joined = this.joined.get(node) ?? { pins: [], connections: [] };
    if (!joined.pins.includes(pin)) joined.pins.push(pin);
    this.joined.set(node, joined);
    return pin;
  }

  private join(node: NodeId, from: Pin, to: Pin, way: Connection["way"]): void {
    const [one, other] = [this.groupOf(node, from), this.groupOf(node, to)];
    if (one === other) return;
    this.groups.set(other, one);
    this.joined.get(node)?.connections.push({ from, to, way });
  }

  private groupOf(node: NodeId, pin: Pin): string {
    let key = `${node} ${pin}`;
    for (let up = this.groups.get(key); up !== undefined && up !== key; up = this.groups.get(key)) key = up;
    return key;
  }

  /** What no path joined, as where several points name one potential, is joined to what was set down before it. */
  finish(): Map<NodeId, JoinedPins> {
    for (const [node, { pins }] of this.joined) {
      for (const [index, pin] of pins.entries()) if (index > 0) this.join(node, pins[index - 1] as Pin, pin, "head");
    }
    for (const { pins, connections } of this.joined.values()) {
      const order = new Map(pins.map((pin, index) => [pin, index]));
      connections.sort((a, b) => (order.get(a.to) ?? 0) - (order.get(b.to) ?? 0));
    }
    return this.joined;
  }
}

/** Pins at the two ends of a path: the last one at its beginning, the first and the last one at its end. */
interface Ends {
  head?: Pin;
  foot?: Pin;
  tail?: Pin;
}

/** The pin that the next one is joined to. */
interface Entry {
  pin: Pin;
  way: "path" | "head";
}

/** The two pins of a use, live side first. A controller's point has the other end at the card itself. */
export function pinsOf(use: DeviceUse): [Pin, Pin] {
  if (use.kind === "through" && use.pin !== undefined) return [designationOf(use), designationOf(use)];
  if (use.kind === "load" && use.point !== undefined) return [designationOf(use), use.device];
  if (use.kind === "contact" && use.point !== undefined) return [use.device, designationOf(use)];
  const [from, to] = use.terminals.value;
  return [from === "" ? use.device : `${use.device}:${from}`, to === "" ? use.device : `${use.device}:${to}`];
}
