import { type Link, leads, type Passage, type Wiring } from "../behaviour/conduction.js";
import type { LoadUse, Machine, NodeId, Supply } from "../machine/model.js";
import { type Condition, Conditions, conditionOf, keyOf } from "./conditions.js";
import { gather } from "./gather.js";

/** One way from rail to rail through a load, which conducts when all its conditions hold. */
export interface Way {
  passages: Passage[];
  conditions: Condition[];
  /** Whether all of it is contacts and wire: no diode, no resistor. */
  plain: boolean;
}

/** Links tried in one search before it is given up. */
const mostSteps = 20_000;
/** Ways to one load that are told apart. */
const mostWays = 128;
/** Links tried to count the ways through one part of the network. */
const mostStepsInPart = 2_000;
/** Contacts and joints one behind the other on one way. */
const longestWay = 500;

/**
 * The ways that current can take to a load. Contacts that contradict each other are never closed together, a diode is passed in its
 * direction, no way touches a potential twice or runs through a rail. Every search is bounded: where a bound is met the answer is
 * "not known", and a rule says nothing.
 */
export class Ways {
  private readonly conditions = new Map<Link, Condition>();
  private readonly sides = new Map<NodeId, Side>();
  private readonly known = new Map<LoadUse, Way[] | undefined>();
  private readonly rails: ReadonlySet<NodeId>;
  /** Whether anything in the network minds which way current runs. */
  private readonly directed: boolean;
  /** Pairs of contacts that were found one behind the other and are never closed together. */
  readonly contradictions = new Map<Passage, Passage>();

  constructor(
    private readonly machine: Machine,
    readonly wiring: Wiring,
  ) {
    for (const link of wiring.links)
      if (link.use.kind === "contact") this.conditions.set(link, conditionOf(link.use, machine.devices.get(link.use.device)?.kind));
    this.rails = new Set(wiring.feeds.flatMap(({ live, back }) => [live, back]));
    this.directed = wiring.links.some(({ oneWay }) => oneWay !== undefined);
  }

  /** All ways to a load; undefined where there are too many to tell. */
  to(load: LoadUse): Way[] | undefined {
    if (this.known.has(load)) return this.known.get(load);
    const found: Way[] = [];
    if (this.tooMany(load)) {
      this.known.set(load, undefined);
      return undefined;
    }
    const note = (way: Way) => {
      found.push(way);
      return found.length > mostWays;
    };
    const whole = this.visit(load, this.fresh(), note, this.contradictions);
    const ways = whole === "done" ? found : undefined;
    this.known.set(load, ways);
    return ways;
  }

  /** Whether some way to a load conducts while the given conditions hold; undefined where that could not be found out. */
  feeds(load: LoadUse, given: readonly Condition[]): boolean | undefined {
    const conditions = this.fresh();
    for (const condition of given) if (!conditions.add(condition)) return false;
    const end = this.visit(load, conditions, () => true);
    return end === "stopped" ? true : end === "done" ? false : undefined;
  }

  /**
   * Ways from a live rail to a return rail that pass no load, one for each passage next to the return rail. What the machine's
   * motion rules out is not ruled out for a short circuit.
   * @param counts says of each passage whether it is looked at
   */
  shorts(counts: (passage: Passage) => boolean): { live: NodeId; back: NodeId; passages: Passage[] }[] {
    const found: { live: NodeId; back: NodeId; passages: Passage[] }[] = [];
    for (const { supply, live, back } of this.wiring.feeds) {
      const side = this.side(live);
      for (const last of this.wiring.at.get(back) ?? []) {
        const before = last.use.from === back ? last.use.to : last.use.from;
        if (!side.reaches(before) || last.resists || !counts(last.use)) continue;
        for (const way of this.halfWaves(supply)) {
          if (!leads(last, before, way)) continue;
          const search = new Search(this.conditions, new Conditions(this.machine.devices, false), { counts, resistors: false });
          let passages: Passage[] = [];
          const end = search.take(last)
            ? search.along(side.chainTo(before), way, () => {
                const [final, ...others] = search.way().passages;
                passages = [...others, final as Passage];
                return true;
              })
            : "done";
          if (end !== "stopped") continue;
          found.push({ live, back, passages });
          break;
        }
      }
    }
    return found;
  }

  /**
   * Everything that a way to a load might lead through, known or not.
   * @param seen parts already gone through for other loads, which are left out
   */
  *towards(load: LoadUse, seen: Set<object>): Generator<Passage> {
    for (const { live, back } of this.wiring.feeds)
      for (const rail of [live, back]) for (const node of [load.from, load.to]) yield* this.side(rail).towards(node, seen);
  }

  /** Parts of the network that begin and end on one wire, so that no way leads through them. */
  loops(): Passage[][] {
    const useful = new Set<NodeId>(this.wiring.loads.flatMap(({ from, to }) => [from, to]));
    return [...this.rails].flatMap((rail) => this.side(rail).loops(useful));
  }

  /** Which way current runs from the live rail: alternating current runs both ways, which matters only to diodes. */
  private halfWaves({ current }: Supply): readonly ("out" | "in")[] {
    return this.directed && current === "AC" ? ["out", "in"] : ["out"];
  }

  /** Whether the ways to a load are more than are told apart, contradictions among them not looked at. */
  private tooMany({ from, to }: LoadUse): boolean {
    return this.wiring.feeds.some(({ live, back }) => {
      const [source, sink] = [this.side(live), this.side(back)];
      return [[from, to] as const, [to, from] as const].some(
        ([a, b]) => source.reaches(a) && sink.reaches(b) && source.countTo(a) * sink.countTo(b) > mostWays,
      );
    });
  }

  private fresh(): Conditions {
    return new Conditions(this.machine.devices);
  }

  private visit(load: LoadUse, conditions: Conditions, found: (way: Way) => boolean, contradictions?: Map<Passage, Passage>): End {
    const search = new Search(this.conditions, conditions, { contradictions });
    for (const { supply, live, back } of this.wiring.feeds) {
      const [source, sink] = [this.side(live), this.side(back)];
      for (const [a, b] of [[load.from, load.to] as const, [load.to, load.from] as const]) {
        if (!source.reaches(a) || !sink.reaches(b)) continue;
        const [there, home] = [source.chainTo(a), sink.chainTo(b)];
        for (const way of this.halfWaves(supply)) {
          const end = search.along(
            there,
            way,
            () => search.along(home, way === "out" ? "in" : "out", () => found(search.way())) === "stopped",
          );
          if (search.gaveUp) return "gave up";
          if (end === "stopped") return end;
        }
      }
    }
    return "done";
  }

  private side(rail: NodeId): Side {
    const known = this.sides.get(rail);
    if (known) return known;
    const side = new Side(this.wiring, rail, this.rails);
    this.sides.set(rail, side);
    return side;
  }
}

type End = "done" | "stopped" | "gave up";

/** A part of the network that is left whole whichever one of its potentials is taken out, with the potential nearest to the rail. */
interface Block {
  links: Map<NodeId, Link[]>;
  root: NodeId;
  /** How many ways lead to each of its potentials from its root, where that was counted. */
  counts: Map<NodeId, number>;
  /** Whether counting was given up once. */
  intricate: boolean;
}

/** From the rail outward: each part that a way to some potential goes through, from where to where. */
type Chain = { block: Block; from: NodeId; to: NodeId }[];

/** What is joined with one rail by contacts, without a load and without another rail. */
class Side {
  /** The part in which a potential is reached. */
  private readonly blockOf = new Map<NodeId, Block>();
  private readonly blocks: Block[] = [];

  constructor(
    private readonly wiring: Wiring,
    private readonly rail: NodeId,
    private readonly rails: ReadonlySet<NodeId>,
  ) {
    this.divide();
  }

  reaches(node: NodeId): boolean {
    return node === this.rail || this.blockOf.has(node);
  }

  chainTo(node: NodeId): Chain {
    const chain: Chain = [];
    for (let here = node; here !== this.rail; ) {
      const block = this.blockOf.get(here) as Block;
      chain.push({ block, from: block.root, to: here });
      here = block.root;
    }
    return chain.reverse();
  }

  /** How many ways lead to a potential; anything beyond `mostWays` is as good as endless. */
  countTo(node: NodeId): number {
    let count = 1;
    for (let here = node; here !== this.rail && count <= mostWays; ) {
      const block = this.blockOf.get(here) as Block;
      count *= countThrough(block, here);
      here = block.root;
    }
    return count;
  }

  *towards(node: NodeId, seen: Set<object>): Generator<Passage> {
    if (!this.reaches(node)) return;
    for (let here = node; here !== this.rail; ) {
      const block = this.blockOf.get(here) as Block;
      if (seen.has(block)) return;
      seen.add(block);
      for (const links of block.links.values()) for (const { use } of links) yield use;
      here = block.root;
    }
  }

  /** Parts from which nothing leads on. A single contact that leads nowhere is a loose end, which is another matter. */
  loops(useful: ReadonlySet<NodeId>): Passage[][] {
    // Blocks are found from the outside in: what hangs on a block is known before the block.
    const leadsOn = new Set<NodeId>();
    const found: Passage[][] = [];
    for (const block of this.blocks) {
      const inner = [...block.links.keys()].filter((node) => node !== block.root);
      const links = new Set([...block.links.values()].flat());
      if (links.size === 1 || inner.some((node) => useful.has(node) || leadsOn.has(node) || this.meetsRail(node))) leadsOn.add(block.root);
      else found.push([...links].map(({ use }) => use));
    }
    return found;
  }

  /** Whether a passage leads on to another rail: a short circuit, not a loop. */
  private meetsRail(node: NodeId): boolean {
    return (
      this.wiring.at.get(node)?.some(({ use: { from, to } }) => [from, to].some((end) => end !== this.rail && this.rails.has(end))) ?? false
    );
  }

  /** Divides what the rail reaches into blocks (depth first, by the lowest potential seen from each). */
  private divide(): void {
    const order = new Map<NodeId, number>([[this.rail, 0]]);
    const low = new Map<NodeId, number>([[this.rail, 0]]);
    const open: { link: Link; from: NodeId }[] = [];
    const stack: { node: NodeId; came?: Link; next: number; mark: number }[] = [{ node: this.rail, next: 0, mark: 0 }];
    for (let top = stack.at(-1); top; top = stack.at(-1)) {
      const { node } = top;
      const link = (this.wiring.at.get(node) ?? [])[top.next++];
      if (link) {
        if (link === top.came) continue;
        const beyond = link.use.from === node ? link.use.to : link.use.from;
        if (beyond !== this.rail && this.rails.has(beyond)) continue;
        const seen = order.get(beyond);
        if (seen === undefined) {
          order.set(beyond, order.size);
          low.set(beyond, order.get(beyond) as number);
          stack.push({ node: beyond, came: link, next: 0, mark: open.length });
          open.push({ link, from: node });
        } else if (seen < (order.get(node) as number)) {
          open.push({ link, from: node });
          low.set(node, Math.min(low.get(node) as number, seen));
        }
        continue;
      }
      stack.pop();
      const parent = stack.at(-1);
      if (!parent) break;
      low.set(parent.node, Math.min(low.get(parent.node) as number, low.get(node) as number));
      if ((low.get(node) as number) >= (order.get(parent.node) as number)) this.close(parent.node, open.splice(top.mark));
    }
  }

  private close(root: NodeId, links: readonly { link: Link }[]): void {
    const block: Block = { links: new Map(), root, counts: new Map(), intricate: false };
    for (const { link } of links) {
      for (const node of [link.use.from, link.use.to]) {
        gather(block.links, node, link);
        if (node !== root) this.blockOf.set(node, block);
      }
    }
    this.blocks.push(block);
  }
}

/** The ways through a part from its root to one of its potentials, as far as they are worth counting. */
function countThrough(block: Block, goal: NodeId): number {
  const known = block.counts.get(goal);
  if (known !== undefined) return known;
  if (block.intricate) return Number.POSITIVE_INFINITY;
  let [count, steps] = [0, 0];
  const touched = new Set<NodeId>();
  const visit = (here: NodeId): void => {
    if (here === goal) {
      count++;
      return;
    }
    touched.add(here);
    for (const { use } of block.links.get(here) ?? []) {
      if (count > mostWays || ++steps > mostStepsInPart || touched.size > longestWay) break;
      const beyond = use.from === here ? use.to : use.from;
      if (!touched.has(beyond)) visit(beyond);
    }
    touched.delete(here);
  };
  visit(block.root);
  if (steps > mostStepsInPart) block.intricate = true;
  if (block.intricate || count > mostWays) count = Number.POSITIVE_INFINITY;
  block.counts.set(goal, count);
  return count;
}

/** One bounded search for ways. */
class Search {
  private steps = 0;
  private readonly links: Link[] = [];
  private readonly taken: (Condition | undefined)[] = [];
  private readonly touched = new Set<NodeId>();

  constructor(
    private readonly conditionsOf: ReadonlyMap<Link, Condition>,
    private readonly conditions: Conditions,
    private readonly options: { resistors?: false; counts?: (passage: Passage) => boolean; contradictions?: Map<Passage, Passage> },
  ) {}

  get gaveUp(): boolean {
    return this.steps > mostSteps;
  }

  way(): Way {
    return {
      passages: this.links.map(({ use }) => use),
      conditions: this.taken.filter((condition) => condition !== undefined),
      plain: this.links.every(({ resists, oneWay }) => !resists && !oneWay),
    };
  }

  /** Passes one link first of all. */
  take(link: Link): boolean {
    const condition = this.conditionsOf.get(link);
    if (condition && !this.conditions.add(condition)) return false;
    this.links.push(link);
    this.taken.push(condition);
    return true;
  }

  /**
   * Follows every way along a chain of parts and calls `arrived` at the end of each; that says whether to stop.
   * @param way whether current runs from the rail or to it
   */
  along(chain: Chain, way: "out" | "in", arrived: () => boolean, at = 0): End {
    if (chain.length > longestWay) this.steps = Number.POSITIVE_INFINITY;
    if (this.gaveUp) return "gave up";
    const stage = chain[at];
    if (!stage) return arrived() ? "stopped" : "done";
    return this.through(stage.block, stage.from, stage.to, way, () => this.along(chain, way, arrived, at + 1) === "stopped");
  }

  private through(block: Block, here: NodeId, goal: NodeId, way: "out" | "in", arrived: () => boolean): End {
    if (here === goal) return arrived() ? "stopped" : "done";
    this.touched.add(here);
    let end: End = "done";
    for (const link of block.links.get(here) ?? []) {
      const { use } = link;
      const beyond = use.from === here ? use.to : use.from;
      if (this.touched.has(beyond) || !leads(link, here, way)) continue;
      if ((link.resists && this.options.resistors === false) || this.options.counts?.(use) === false) continue;
      if (this.links.length > longestWay) this.steps = Number.POSITIVE_INFINITY;
      if (++this.steps > mostSteps) {
        end = "gave up";
        break;
      }
      const mark = this.conditions.mark;
      if (!this.take(link)) {
        this.noteContradiction(link);
        continue;
      }
      end = this.through(block, beyond, goal, way, arrived);
      this.links.pop();
      this.taken.pop();
      this.conditions.backTo(mark);
      if (end !== "done") break;
    }
    this.touched.delete(here);
    return this.gaveUp && end === "done" ? "gave up" : end;
  }

  /** Remembers which contact on the way rules this one out. */
  private noteContradiction(link: Link): void {
    const { contradictions } = this.options;
    const condition = contradictions && this.conditionsOf.get(link);
    if (!condition || contradictions.has(link.use)) return;
    const other = this.links.find((_, index) => this.taken[index]?.subject === condition.subject);
    if (other) contradictions.set(link.use, other.use);
  }
}

/** Whether one way asks for nothing that the other does not ask for too. */
export function isWithin(one: Way, other: Way): boolean {
  const asked = new Set(other.conditions.map(keyOf));
  return one.conditions.every((condition) => asked.has(keyOf(condition)));
}
