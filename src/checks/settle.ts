import { fedLoads, type Link, leads, type Wiring } from "../behaviour/conduction.js";
import type { ContactUse, LoadUse, NodeId } from "../machine/model.js";
import { gather } from "./gather.js";
import type { Networks } from "./networks.js";

/** Says of a contact whether it is closed while some devices are on. */
export type Closes = (contact: ContactUse, on: ReadonlySet<string>) => boolean;

/**
 * What stays energized when every load has been, relays dropping out one after another where nothing feeds them any more.
 * A contact that `closes` while some devices are on also does while more are.
 */
export function whatStaysOn({ wiring, loads }: Networks, closes: Closes): Set<LoadUse> {
  let on = afterDropping(wiring, devicesOf(loads), closes);
  for (;;) {
    const fed = fedLoads(wiring, (contact) => closes(contact, on));
    const still = new Set([...devicesOf(fed)].filter((device) => on.has(device)));
    if (still.size === on.size) return fed;
    on = still;
  }
}

function devicesOf(loads: Iterable<LoadUse>): Set<string> {
  return new Set([...loads].map(({ device }) => device));
}

/**
 * The devices left on once every one that is not fed has dropped out. A long chain of relays drops out link by link here, where going over
 * the whole network each time would take the square of its length.
 */
function afterDropping(wiring: Wiring, devices: ReadonlySet<string>, closes: Closes): Set<string> {
  const on = new Set(devices);
  const isClosed = ({ use }: Link) => use.kind === "through" || closes(use, on);
  const sides = wiring.feeds.flatMap(({ supply, live, back }) => {
    const pairs = supply.current === "AC" ? [[live, back] as const, [back, live] as const] : [[live, back] as const];
    return pairs.map(([positive, negative]) => ({
      out: new Reach(wiring, positive, "out", isClosed),
      in: new Reach(wiring, negative, "in", isClosed),
    }));
  });
  const isFed = ({ from, to }: LoadUse) =>
    sides.some((side) => (side.out.has(from) && side.in.has(to)) || (side.out.has(to) && side.in.has(from)));

  const loadsAt = new Map<NodeId, LoadUse[]>();
  const loadsOf = new Map<string, LoadUse[]>();
  for (const load of wiring.loads) {
    gather(loadsOf, load.device, load);
    for (const node of new Set([load.from, load.to])) gather(loadsAt, node, load);
  }
  const linksOf = new Map<string, Link[]>();
  for (const link of wiring.links) gather(linksOf, link.use.device, link);

  const doubtful = [...on];
  for (let device = doubtful.pop(); device !== undefined; device = doubtful.pop()) {
    if (!on.has(device) || loadsOf.get(device)?.some(isFed)) continue;
    on.delete(device);
    for (const link of linksOf.get(device) ?? []) {
      if (isClosed(link)) continue;
      for (const side of sides)
        for (const reach of [side.out, side.in])
          for (const lost of reach.open(link)) doubtful.push(...(loadsAt.get(lost) ?? []).map((load) => load.device));
    }
  }
  return on;
}

/** What current from a rail comes to, kept up to date while links open. */
class Reach {
  /** The link by which each potential is reached; the rail is reached by none. */
  private readonly cameBy = new Map<NodeId, Link | undefined>();

  constructor(
    private readonly wiring: Wiring,
    rail: NodeId,
    private readonly way: "out" | "in",
    private readonly isClosed: (link: Link) => boolean,
  ) {
    this.cameBy.set(rail, undefined);
    this.spread([rail]);
  }

  has(node: NodeId): boolean {
    return this.cameBy.has(node);
  }

  /** Takes notice that a link has opened; gives the potentials that are no longer reached. */
  open(link: Link): NodeId[] {
    const first = [link.use.from, link.use.to].find((node) => this.cameBy.get(node) === link);
    if (first === undefined) return [];
    const lost = new Set([first]);
    for (const node of lost)
      for (const next of this.wiring.at.get(node) ?? []) {
        const beyond = beyondOf(next, node);
        if (this.cameBy.get(beyond) === next) lost.add(beyond);
      }
    for (const node of lost) this.cameBy.delete(node);
    const edge = [...lost].flatMap((node) =>
      (this.wiring.at.get(node) ?? []).map((next) => beyondOf(next, node)).filter((beyond) => this.cameBy.has(beyond)),
    );
    this.spread([...new Set(edge)]);
    return [...lost].filter((node) => !this.cameBy.has(node));
  }

  private spread(queue: NodeId[]): void {
    for (let here = queue.pop(); here !== undefined; here = queue.pop()) {
      for (const link of this.wiring.at.get(here) ?? []) {
        const beyond = beyondOf(link, here);
        if (this.cameBy.has(beyond) || !leads(link, here, this.way) || !this.isClosed(link)) continue;
        this.cameBy.set(beyond, link);
        queue.push(beyond);
      }
    }
  }
}

function beyondOf({ use }: Link, node: NodeId): NodeId {
  return use.from === node ? use.to : use.from;
}
