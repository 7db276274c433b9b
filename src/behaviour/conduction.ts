import type { ContactUse, DeviceKind, LoadUse, Machine, NodeId, PartId, Supply, ThroughUse } from "../machine/model.js";
import { laddersOf, usesOf } from "../machine/walk.js";

/** What current passes through on its way: contacts, and what neither opens by itself nor is driven. */
export type Passage = ContactUse | ThroughUse;

/** A stretch of a ladder's network as current sees it. */
export interface Link {
  use: Passage;
  /** The only way through for a diode: from its anode to its cathode. */
  oneWay?: { from: NodeId; to: NodeId };
  /** A resistor lets a load work behind it, but is no plain wire. */
  resists: boolean;
}

/** The ladders of a machine as one network. Made once; which contacts are closed is asked of it as often as wanted. */
export interface Wiring {
  links: readonly Link[];
  loads: readonly LoadUse[];
  /** The links at each node. */
  at: ReadonlyMap<NodeId, readonly Link[]>;
  /** Supplies that feed a ladder, with the nodes of their rails. */
  feeds: readonly { supply: Supply; live: NodeId; back: NodeId }[];
}

/** What happens when some contacts are closed and the others open. */
export interface Conduction {
  /** Loads that get the whole voltage of a supply: nothing but closed contacts and wire leads from either side to its rails. */
  energized: ReadonlySet<PartId>;
  /** Supplies whose rails are joined with no load in between. What they feed is not energized. */
  shorted: readonly Supply[];
}

export function wiringOf(machine: Machine): Wiring {
  const ladders = laddersOf(machine);
  const links: Link[] = [];
  const loads: LoadUse[] = [];
  const at = new Map<NodeId, Link[]>();
  const put = (node: NodeId, link: Link) => {
    const there = at.get(node);
    if (there) there.push(link);
    else at.set(node, [link]);
  };
  for (const { rungs } of ladders) {
    for (const { path } of rungs) {
      for (const use of usesOf(path)) {
        if (use.kind === "load") {
          loads.push(use);
          continue;
        }
        const link = linkOf(use, machine.devices.get(use.device)?.kind);
        links.push(link);
        if (use.from === use.to) continue;
        put(use.from, link);
        put(use.to, link);
      }
    }
  }
  const rails = new Map<string, NodeId>();
  for (const { rail, id } of machine.potentials) if (rail !== undefined) rails.set(rail, id);
  const feeds = [...new Set(ladders.map(({ supply }) => supply))].flatMap((supply) => {
    const [live, back] = supply.rails.map((rail) => rails.get(rail));
    return live === undefined || back === undefined || live === back ? [] : [{ supply, live, back }];
  });
  return { links, loads, at, feeds };
}

/** A contact or a thing passed through, with what its kind does to current. */
export function linkOf(use: Passage, kind: DeviceKind | undefined): Link {
  const link: Link = { use, resists: kind === "resistor" };
  if (kind === "diode")
    link.oneWay = use.terminals.value[0].startsWith("K") ? { from: use.to, to: use.from } : { from: use.from, to: use.to };
  return link;
}

/**
 * Which loads are energized while some contacts are closed. A load in series with another gets no more than its share of the
 * voltage and is not among them. In an alternating supply a diode passes one half wave, and that counts.
 */
export function conduct(wiring: Wiring, isClosed: (contact: ContactUse) => boolean): Conduction {
  const energized = new Set<PartId>();
  const shorted: Supply[] = [];
  for (const feed of wiring.feeds) {
    const { fed, short } = feedFrom(wiring, feed, isClosed);
    if (short) shorted.push(feed.supply);
    else for (const { id } of fed) energized.add(id);
  }
  return { energized, shorted };
}

/** Loads that have both rails of a supply at hand; unlike `conduct` it lets short circuits pass. */
export function fedLoads(wiring: Wiring, isClosed: (contact: ContactUse) => boolean): Set<LoadUse> {
  return new Set(wiring.feeds.flatMap((feed) => feedFrom(wiring, feed, isClosed).fed));
}

function feedFrom({ at, loads }: Wiring, { supply, live, back }: Wiring["feeds"][number], isClosed: (contact: ContactUse) => boolean) {
  const fed: LoadUse[] = [];
  let short = false;
  const halfWaves = supply.current === "AC" ? [[live, back] as const, [back, live] as const] : [[live, back] as const];
  for (const [positive, negative] of halfWaves) {
    const plain = {
      out: reach(at, [positive], isClosed, "out", (link) => !link.resists),
      in: reach(at, [negative], isClosed, "in", (link) => !link.resists),
    };
    short ||= plain.out.has(negative);
    // Behind a resistor a potential is fed only if nothing holds it to the other rail.
    const whole = {
      out: reach(at, plain.out, isClosed, "out", () => true, plain.in),
      in: reach(at, plain.in, isClosed, "in", () => true, plain.out),
    };
    for (const load of loads) {
      const { from, to } = load;
      if ((whole.out.has(from) && whole.in.has(to)) || (whole.out.has(to) && whole.in.has(from))) fed.push(load);
    }
  }
  return { fed, short };
}

/** The nodes that current comes to from the given ones, or from which it comes to them. */
function reach(
  at: Wiring["at"],
  from: Iterable<NodeId>,
  isClosed: (contact: ContactUse) => boolean,
  way: "out" | "in",
  passes: (link: Link) => boolean,
  held?: ReadonlySet<NodeId>,
): Set<NodeId> {
  const reached = new Set(from);
  const queue = [...reached];
  for (let here = queue.pop(); here !== undefined; here = queue.pop()) {
    for (const link of at.get(here) ?? []) {
      const { use } = link;
      const beyond = use.from === here ? use.to : use.from;
      if (reached.has(beyond) || held?.has(beyond) || !passes(link) || !leads(link, here, way)) continue;
      if (use.kind === "contact" && !isClosed(use)) continue;
      reached.add(beyond);
      queue.push(beyond);
    }
  }
  return reached;
}

/** Whether current may leave a node through a link (`out`) or come to it (`in`). */
export function leads({ oneWay }: Link, node: NodeId, way: "out" | "in"): boolean {
  return oneWay === undefined || (way === "out" ? oneWay.from : oneWay.to) === node;
}
