import type { ContactUse, LoadUse, Machine, NodeId, Rung, Supply, ThroughUse } from "../machine/model.js";
import { laddersOf, usesOf } from "../machine/walk.js";

/** Electrical facts that several rules ask for, each found once. */
export class Networks {
  readonly rungs: readonly Rung[];
  readonly contacts: ContactUse[] = [];
  readonly loads: LoadUse[] = [];
  readonly throughs: ThroughUse[] = [];
  readonly rungById: ReadonlyMap<string, Rung>;
  /** Whether some rung could not be read whole: then what a wire leads to is not known for certain. */
  readonly gaps: boolean;
  readonly supplies: readonly Supply[];
  private readonly railNodes = new Map<string, NodeId>();
  private joined: NodeId[] | undefined;

  constructor(private readonly machine: Machine) {
    const ladders = laddersOf(machine);
    this.rungs = ladders.flatMap(({ rungs }) => rungs);
    this.rungById = new Map(this.rungs.map((rung) => [rung.id, rung]));
    this.supplies = [...new Set(ladders.map(({ supply }) => supply))];
    this.gaps = this.rungs.some(({ incomplete }) => incomplete);
    for (const { rail, id } of machine.potentials) if (rail !== undefined) this.railNodes.set(rail, id);
    for (const { path } of this.rungs) {
      for (const use of usesOf(path)) {
        if (use.kind === "contact") this.contacts.push(use);
        else if (use.kind === "load") this.loads.push(use);
        else this.throughs.push(use);
      }
    }
  }

  /** The nodes of all live rails, or of all return rails. */
  railsAt(side: "live" | "return"): Set<NodeId> {
    const nodes = new Set<NodeId>();
    for (const { rails } of this.supplies) {
      const node = this.railNodes.get(rails[side === "live" ? 0 : 1]);
      if (node !== undefined) nodes.add(node);
    }
    return nodes;
  }

  railName(node: NodeId): string {
    return this.machine.potentials[node]?.rail ?? "";
  }

  /** Nodes that contacts can join, were all of them closed, and what current passes through, are in one group: its first node. */
  groupOf(node: NodeId): NodeId {
    this.joined ??= this.joinContacts();
    return this.joined[node] ?? node;
  }

  /** The contacts at each node. */
  contactsAt(): Map<NodeId, ContactUse[]> {
    const at = new Map<NodeId, ContactUse[]>();
    for (const contact of this.contacts) {
      for (const node of new Set([contact.from, contact.to])) {
        const there = at.get(node);
        if (there) there.push(contact);
        else at.set(node, [contact]);
      }
    }
    return at;
  }

  private joinContacts(): NodeId[] {
    const groups: NodeId[] = this.machine.potentials.map(({ id }) => id);
    const at = new Map<NodeId, (ContactUse | ThroughUse)[]>(this.contactsAt());
    for (const through of this.throughs)
      for (const node of new Set([through.from, through.to])) at.set(node, [...(at.get(node) ?? []), through]);
    const seen = new Set<NodeId>();
    for (const { id } of this.machine.potentials) {
      if (seen.has(id)) continue;
      seen.add(id);
      const queue = [id];
      for (let here = queue.pop(); here !== undefined; here = queue.pop()) {
        groups[here] = id;
        for (const { from, to } of at.get(here) ?? []) {
          const beyond = from === here ? to : from;
          if (seen.has(beyond)) continue;
          seen.add(beyond);
          queue.push(beyond);
        }
      }
    }
    return groups;
  }
}
