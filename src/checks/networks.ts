import { type Wiring, wiringOf } from "../behaviour/conduction.js";
import type { ContactUse, LoadUse, Machine, NodeId, Rung, Supply, ThroughUse } from "../machine/model.js";
import { laddersOf, usesOf } from "../machine/walk.js";
import { findQuenching, type Quenching } from "./quenching.js";
import { States } from "./states.js";
import { Ways } from "./ways.js";

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
  /** What current can do in it. */
  readonly wiring: Wiring;
  /** The ways to each load. */
  readonly ways: Ways;
  /** Which states devices can be in together. */
  readonly states: States;
  private joined: NodeId[] | undefined;
  private quenching: ReadonlyMap<ThroughUse, Quenching> | undefined;

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
    this.wiring = wiringOf(machine);
    this.ways = new Ways(machine, this.wiring);
    this.states = new States(machine, this.ways);
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

  railNode(rail: string): NodeId | undefined {
    return this.railNodes.get(rail);
  }

  railName(node: NodeId): string {
    return this.machine.potentials[node]?.rail ?? "";
  }

  /**
   * Nodes that contacts can join, were all of them closed, and what current passes through, are in one group: its first node. A
   * diode or a resistor across a load joins nothing.
   */
  groupOf(node: NodeId): NodeId {
    this.joined ??= this.joinContacts();
    return this.joined[node] ?? node;
  }

  /** The load that a diode or a resistor stands across, to quench it. */
  quenchedBy(use: ContactUse | ThroughUse): Quenching | undefined {
    if (use.kind === "contact") return undefined;
    this.quenching ??= findQuenching(this.machine, this.rungs);
    return this.quenching.get(use);
  }

  private joinContacts(): NodeId[] {
    const groups: NodeId[] = this.machine.potentials.map(({ id }) => id);
    const seen = new Set<NodeId>();
    for (const { id } of this.machine.potentials) {
      if (seen.has(id)) continue;
      seen.add(id);
      const queue = [id];
      for (let here = queue.pop(); here !== undefined; here = queue.pop()) {
        groups[here] = id;
        for (const { use } of this.wiring.at.get(here) ?? []) {
          const beyond = use.from === here ? use.to : use.from;
          if (seen.has(beyond) || this.quenchedBy(use)) continue;
          seen.add(beyond);
          queue.push(beyond);
        }
      }
    }
    return groups;
  }
}
