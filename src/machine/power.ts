import type { SourceRange } from "../language/diagnostic.js";
import type { BranchStatement, FeedStatement, PathItem, PathReference, PowerBlock, Series, Word } from "../language/tree.js";
import type {
  Conductor,
  Device,
  DrawingInfo,
  MainPin,
  MainUse,
  NodeId,
  PowerBranch,
  PowerCircuit,
  PowerEnd,
  PowerFeed,
  PowerParallel,
  PowerPoint,
  Supply,
} from "./model.js";
import type { Names } from "./names.js";
import {
  conductorsThrough,
  conversionTerminals,
  inTrackOrder,
  isEarth,
  leadsOf,
  motorTerminals,
  poleTerminals,
  powerRoles,
  withoutReturn,
} from "./power-kinds.js";
import { type ConductorStages, nameConductors } from "./power-names.js";
import { ItemReader, type PropertyTable, readProperties } from "./reader.js";
import { didYouMean, listed, type Report, withArticle } from "./report.js";

/** The nodes that power circuits share with the ladders. */
export interface SharedNodes {
  addNode(): NodeId;
  /** The node of a rail or a conductor by its name. */
  rail(name: string): NodeId;
  join(a: NodeId, b: NodeId, at: SourceRange): void;
}

interface MotorDraft {
  device: Device;
  main?: MainUse;
  /** The branches that lead to the second ends of its windings. */
  second?: MainPin[];
  delta?: SourceRange;
  star?: SourceRange;
  starNode?: NodeId;
  at: SourceRange;
}

interface Head {
  voltage?: PowerCircuit["voltage"];
  frequency?: PowerCircuit["frequency"];
  current?: "AC" | "DC";
  phases?: number;
}

const headTable: PropertyTable<Head> = {
  words: {
    AC: (head) => {
      head.current = "AC";
    },
    DC: (head) => {
      head.current = "DC";
    },
  },
  bare: {
    voltage: (head, quantity) => {
      head.voltage = quantity;
    },
    frequency: (head, quantity) => {
      head.frequency = quantity;
    },
  },
  other: (head, item, read) => {
    if (item.kind !== "number" || !read.take("phase")) return false;
    if (item.value === 1 || item.value === 3) head.phases = item.value;
    else read.report.error("value-unknown", item.at, `A power circuit has 1 or 3 phases, not ${item.text}.`);
    return true;
  },
  values: ["phase"],
};

/** Turns power blocks into chains of multi-pole elements with electrical nodes. Nodes are provisional until the ladders' are numbered. */
export class PowerBuilder {
  private readonly circuits: PowerCircuit[] = [];
  private readonly motors = new Map<string, MotorDraft>();
  private readonly stages: Conductor[][] = [];
  /** Names that are conductors of a feed, each with its node. */
  private readonly feedNodes = new Map<string, NodeId>();
  private readonly points = new Map<string, PowerPoint & { used: boolean }>();
  /** The protective conductor of the circuit being read. */
  private earth: NodeId | undefined;

  constructor(
    private readonly devices: ReadonlyMap<string, Device>,
    private readonly supplies: readonly Supply[],
    private readonly nodes: SharedNodes,
    private readonly convention: DrawingInfo["convention"],
    private readonly names: Names,
    private readonly report: Report,
  ) {}

  // ------------------------------------------------------------ circuits

  readPower(block: PowerBlock, id: string): PowerCircuit {
    const head: Head = {};
    const at = block.title?.at ?? { ...block.at, endLine: block.at.line, endColumn: block.at.column + "power".length };
    readProperties(head, new ItemReader(block.items, this.report, "A power circuit", at), "a power circuit", headTable);
    const feeds = block.statements.filter((statement) => statement.kind === "feed");
    for (const again of feeds.slice(1)) {
      this.report.error("feed-twice", firstWord(again, "feed"), "A power circuit has one feed.", {
        seeAlso: [{ message: "The first stands here.", at: firstWord(feeds[0] as FeedStatement, "feed") }],
        hint: "What taps the busbars is a branch; another feed belongs in a power circuit of its own.",
      });
    }
    const [written] = feeds;
    const names = this.feedNames(written, head, at);
    const current = head.current ?? (names.some(({ text }) => text.includes("+")) ? "DC" : "AC");
    const conductors = names.map(({ text }): Conductor => {
      const node = this.nodes.rail(text);
      this.feedNodes.set(text, node);
      return { phase: text, node };
    });
    this.earth = conductors.find(({ phase }) => isEarth(phase))?.node;
    const feed: PowerFeed = { id: `${id}/feed`, conductors, path: [], bus: conductors, at: written?.at ?? at };
    const circuit: PowerCircuit = {
      kind: "power",
      id,
      title: block.title?.text ?? "",
      ...(head.voltage && { voltage: head.voltage }),
      current,
      ...(head.frequency && { frequency: head.frequency }),
      feed,
      branches: [],
      sheetBreaks: [],
      at,
    };
    this.circuits.push(circuit);
    this.points.clear();
    if (written) {
      const work = this.work(feed.id, current, written.incomplete);
      for (const item of written.path.items) {
        if (item.kind === "reference") continue;
        this.report.error("feed-not-in-series", item.at, "In a feed things stand in series; what divides is a branch.");
      }
      const live = inTrackOrder(conductors.filter(({ phase }) => !isEarth(phase)));
      const path: PowerBranch["path"] = [];
      const behind = this.readPath(this.elements(written.path.items.filter(({ kind }) => kind === "reference")), live, path, work);
      feed.path = path.filter((item) => item.kind === "main");
      const bus = (phase: string) => behind.find((one) => one.phase === phase);
      feed.bus = conductors.map((one) => bus(one.phase) ?? one);
      if (behind.length > 0 && live.some(({ phase }) => !bus(phase))) {
        this.report.error("feed-converted", written.path.at, "What stands in the feed must give the conductors that come in.", {
          hint: "A transformer for some of the branches stands in a branch that ends in a @point.",
        });
      }
      this.readTaps(written, block, circuit);
    }
    for (const statement of block.statements) {
      if (statement.kind === "branch") this.readBranch(statement, circuit);
      else if (statement.kind === "sheet-break")
        circuit.sheetBreaks.push({ before: circuit.branches.length, title: statement.title?.text });
    }
    if (circuit.branches.length === 0 && !block.incomplete) {
      this.report.error("power-empty", at, "This power circuit has no branch.", {
        hint: 'Write one as in branch "Pump": FU1 KM1 OL1 -> M1.',
      });
    }
    for (const point of this.points.values()) {
      if (!point.used) this.report.warning("point-used-once", point.at, `No branch goes on from @${point.point}.`);
    }
    return circuit;
  }

  /** The conductors of the feed as written, or the usual ones of the kind of current. */
  private feedNames(feed: FeedStatement | undefined, head: Head, at: SourceRange): Word[] {
    const names: Word[] = [];
    for (const word of feed?.conductors ?? []) {
      const first = names.find(({ text }) => text === word.text);
      if (first) {
        this.report.error("conductor-twice", word.at, `The feed already has a conductor ${word.text}.`, {
          seeAlso: [{ message: "First written here.", at: first.at }],
        });
      } else names.push(word);
    }
    const live = names.filter(({ text }) => !isEarth(text) && text !== "N");
    if (names.length > 0 && live.length === 0) {
      this.report.error("conductors-missing", (names[0] as Word).at, "A feed needs at least one live conductor, as in: feed L1 N PE.");
    }
    if (head.phases === 3 && live.length > 0 && live.length !== 3) {
      this.report.error(
        "conductors-unlike-phases",
        (live.at(-1) as Word).at,
        `Three phases come in on three conductors, not on ${listed(
          live.map(({ text }) => text),
          "and",
        )}.`,
      );
    }
    if (live.length > 0) return names;
    const usual = head.current === "DC" ? ["L+", "M"] : head.phases === 1 ? ["L1", "N", "PE"] : ["L1", "L2", "L3", "PE"];
    return usual.map((text) => ({ text, at }));
  }

  /** What taps the busbars without a branch of its own is one by itself. */
  private readTaps(feed: FeedStatement, block: PowerBlock, circuit: PowerCircuit): void {
    const heads = new Set(
      block.statements.flatMap((statement) => {
        const [first] = statement.kind === "branch" ? statement.path.items : [];
        return first?.kind === "reference" ? [first.name.text] : [];
      }),
    );
    const seen = new Set<string>();
    for (const tap of feed.taps) {
      const name = tap.name.text;
      if (seen.has(name)) this.report.error("tap-twice", tap.at, `${name} already taps the busbars.`);
      if (heads.has(name) || seen.has(name)) continue;
      seen.add(name);
      const branch = this.openBranch(circuit, tap.at);
      const work = this.work(branch.id, circuit.current, false);
      const live = this.usualConductors(circuit);
      const role = powerRoles[this.devices.get(name)?.kind ?? "relay"];
      // A control transformer or a power supply stands between two phases unless its branch says otherwise.
      const conductors = role === "conversion" ? live.slice(0, 2) : live;
      branch.conductors = conductors;
      const behind = this.readPath(this.elements([tap]), conductors, branch.path, work);
      branch.end = role === "load" ? { kind: "load" } : { kind: "open", conductors: behind };
      if (work.incomplete) branch.incomplete = true;
      else if (role === "through") {
        this.report.warning("branch-without-load", tap.at, `${name} taps the busbars, but no branch goes on from it.`, {
          hint: `Write what it feeds, as in branch "…": ${name} KM1 -> M1.`,
        });
      }
    }
  }

  /** The busbars a branch has when it names none: all phases, and of a feed with one phase also its return. */
  private usualConductors({ feed }: PowerCircuit): Conductor[] {
    const bus = feed.bus.filter(({ phase }) => !isEarth(phase));
    const live = withoutReturn(bus);
    return live.length > 1 ? live : bus;
  }

  private openBranch(circuit: PowerCircuit, at: SourceRange): PowerBranch {
    const branch: PowerBranch = {
      id: `${circuit.id}/branch${circuit.branches.length + 1}`,
      start: { kind: "bus" },
      conductors: [],
      path: [],
      end: { kind: "open", conductors: [] },
      at,
    };
    circuit.branches.push(branch);
    return branch;
  }

  // ------------------------------------------------------------ branches

  private readBranch(statement: BranchStatement, circuit: PowerCircuit): void {
    const branch = this.openBranch(circuit, statement.title?.at ?? firstWord(statement, "branch"));
    if (statement.title) branch.title = statement.title.text;
    const work = this.work(branch.id, circuit.current, statement.incomplete);
    const { items, arrow } = statement.path;
    const before = [...items.slice(0, arrow ?? items.length)];
    const behind = arrow === undefined ? [] : items.slice(arrow);
    const source = this.readStart(before, statement, circuit, branch, work);
    branch.conductors = inTrackOrder(this.chosen(statement.conductors, source, branch, circuit));
    const elements = this.elements(before);
    const at = this.readPath(elements, branch.conductors, branch.path, work);
    this.readEnd(behind, at, statement.path, branch, work);
    if (work.incomplete) branch.incomplete = true;
  }

  /** Where a branch begins; its word is taken from the items. */
  private readStart(
    items: PathItem[],
    statement: BranchStatement,
    circuit: PowerCircuit,
    branch: PowerBranch,
    work: PowerWork,
  ): Conductor[] {
    const [first] = items;
    if (first?.kind === "point") {
      items.shift();
      const point = this.points.get(first.name);
      if (point) {
        point.used = true;
        branch.start = { kind: "point", point: first.name };
        return point.conductors;
      }
      const guess = didYouMean(first.name, this.points.keys());
      this.report.error("unknown-point", first.at, `No branch before this one has a point @${first.name}.`, {
        ...guess,
        hint: guess.hint ?? `Put @${first.name} into the branch that it taps, above this one.`,
      });
      work.incomplete = true;
      return this.usualConductors(circuit);
    }
    if (first?.kind === "reference" && first.name.text === "star" && !this.devices.has("star")) {
      items.shift();
      branch.start = { kind: "star" };
      const node = this.nodes.addNode();
      for (const word of statement.conductors) {
        this.report.error("unexpected-word", word.at, "A star point has no conductors to choose from.");
      }
      return ["L1", "L2", "L3"].map((phase) => ({ phase, node }));
    }
    return circuit.feed.bus.filter(({ phase }) => !isEarth(phase));
  }

  /** The conductors that a branch names, or those it has when it names none. */
  private chosen(written: readonly Word[], source: Conductor[], branch: PowerBranch, circuit: PowerCircuit): Conductor[] {
    if (branch.start.kind === "star") return source;
    if (written.length === 0) return branch.start.kind === "bus" ? this.usualConductors(circuit) : source;
    const chosen: Conductor[] = [];
    for (const word of written) {
      const one = source.find(({ phase }) => phase === word.text);
      if (one && chosen.includes(one)) this.report.error("conductor-twice", word.at, `This branch already has the conductor ${word.text}.`);
      else if (one) chosen.push(one);
      else if (!isEarth(word.text) || this.earth === undefined) {
        const known = source.map(({ phase }) => phase);
        const guess = didYouMean(word.text, known);
        this.report.error("unknown-conductor", word.at, `There is no conductor ${word.text} here: there are ${listed(known, "and")}.`, {
          ...guess,
          hint: guess.hint ?? "A function text stands in quotation marks.",
        });
      }
    }
    return chosen.length > 0 ? chosen : source;
  }

  // ------------------------------------------------------------ paths

  private work(branch: string, current: "AC" | "DC", incomplete?: boolean): PowerWork {
    return { branch, current, incomplete: incomplete ?? false };
  }

  /** References with the word `crossed` that stands behind some of them. */
  private elements(items: readonly PathItem[]): Element[] {
    const elements: Element[] = [];
    for (const item of items) {
      const last = elements.at(-1);
      const isWord = item.kind === "reference" && item.name.text === "crossed" && !this.devices.has("crossed");
      if (!isWord) elements.push({ item });
      else if (last?.item.kind === "reference" && last.crossed === undefined) last.crossed = item.at;
      else this.report.error("unexpected-word", item.at, '"crossed" stands behind the contactor that exchanges the phases.');
    }
    return elements;
  }

  /** Reads elements in series into `path`; gives the conductors behind them. `to` are the conductors it must end on. */
  private readPath(
    elements: readonly Element[],
    from: readonly Conductor[],
    path: PowerBranch["path"],
    work: PowerWork,
    to?: readonly Conductor[],
  ): Conductor[] {
    let here = [...from];
    elements.forEach(({ item, crossed }, index) => {
      const target = index === elements.length - 1 ? to : undefined;
      if (item.kind === "point") this.readPoint(item, here, path, work, to !== undefined);
      else if (item.kind === "parallel") here = this.readParallel(item, here, path, work, to !== undefined);
      else here = this.readElement(item, crossed, here, path, work, target);
    });
    return here;
  }

  private readPoint(
    { name, at }: { name: string; at: SourceRange },
    conductors: Conductor[],
    path: PowerBranch["path"],
    work: PowerWork,
    within: boolean,
  ): void {
    if (within) {
      this.report.error("point-in-brackets", at, `@${name} stands within brackets; a branch is tapped before or behind them.`);
      work.incomplete = true;
      return;
    }
    const known = this.points.get(name);
    if (known) {
      this.report.error("point-twice", at, `@${name} is already a point of another branch.`, {
        seeAlso: [{ message: "First written here.", at: known.at }],
        hint: "A branch that goes on from it begins with it.",
      });
      return;
    }
    const point: PowerPoint = { kind: "power-point", id: `${work.branch}/@${name}`, point: name, conductors, at };
    this.points.set(name, { ...point, used: false });
    path.push(point);
  }

  private readParallel(
    { branches, at }: PathItem & { kind: "parallel" },
    from: Conductor[],
    path: PowerBranch["path"],
    work: PowerWork,
    within: boolean,
  ): Conductor[] {
    if (within) {
      this.report.error("nested-too-deep", at, "Brackets do not stand within brackets in a power circuit.");
      work.incomplete = true;
      return from;
    }
    const [only] = branches;
    if (branches.length === 1 && only) return this.readPath(this.elements(only.items), from, path, work);
    const ways = branches.map((way) => this.elements(way.items));
    const empty = branches.find((_, index) => ways[index]?.length === 0);
    if (empty) {
      this.report.error("bridged", at, "One way of these brackets is a plain wire, which bridges the others.");
      work.incomplete = true;
      return from;
    }
    const through = (way: readonly Element[]): Set<string> => {
      const phases = way.flatMap(({ item }) => {
        const device = item.kind === "reference" ? this.devices.get(item.name.text) : undefined;
        return device ? (conductorsThrough(device, from) ?? []).map(({ phase }) => phase) : [];
      });
      return new Set(phases);
    };
    const passed = new Set(ways.flatMap((way) => [...through(way)]));
    const to = this.stage(from.map((one) => (passed.has(one.phase) ? { phase: one.phase } : one)));
    const parallel: PowerParallel = { kind: "power-parallel", ways: [], from, to };
    path.push(parallel);
    for (const [index, way] of ways.entries()) {
      const items: PowerBranch["path"] = [];
      const behind = this.readPath(way, from, items, work, to);
      parallel.ways.push(items.filter((item) => item.kind !== "power-parallel"));
      if (behind.some((one, i) => one.node !== to[i]?.node) && !work.incomplete) {
        this.report.error("poles-unlike", (branches[index] as Series).at, "The ways of these brackets do not switch the same conductors.", {
          hint: "What one way leaves through, it bridges.",
        });
        work.incomplete = true;
      }
    }
    return to;
  }

  /** New nodes for those conductors that have none, numbered together. */
  private stage(conductors: readonly (Conductor | { phase: string })[]): Conductor[] {
    const made = conductors.map((one): Conductor => ("node" in one ? one : { phase: one.phase, node: this.nodes.addNode() }));
    const fresh = made.filter((one) => !conductors.includes(one));
    if (fresh.length > 0) this.stages.push(fresh);
    return made;
  }

  private readElement(
    reference: PathReference,
    crossed: SourceRange | undefined,
    here: Conductor[],
    path: PowerBranch["path"],
    work: PowerWork,
    to: readonly Conductor[] | undefined,
  ): Conductor[] {
    const device = this.deviceOf(reference, work);
    if (!device) return here;
    const role = powerRoles[device.kind];
    if (role === "load" || role === undefined) {
      if (role === "load") {
        this.report.error(
          "load-in-path",
          reference.at,
          `${device.name} is ${withArticle(device.kind)}; it stands at the end of its branch, behind "->".`,
        );
      } else this.wrongKind(device, reference);
      work.incomplete = true;
      return here;
    }
    if (crossed && device.kind !== "contactor") {
      this.report.error(
        "crossed-not-contactor",
        crossed,
        `${device.name} is ${withArticle(device.kind)}; a contactor exchanges the phases.`,
      );
    }
    if (role === "conversion") return this.convert(device, reference, here, path, work);
    if (!this.checkPart(reference, device)) work.incomplete = true;
    const through = conductorsThrough(device, here);
    if (!through) {
      this.report.error(
        "poles-too-few",
        reference.at,
        `${device.name} has ${device.ways} ${device.ways === 1 ? "pole" : "poles"}, but ${withoutReturn(here).length} conductors pass here.`,
      );
      work.incomplete = true;
      return here;
    }
    const isTerminal = device.kind === "terminal-strip" || device.kind === "plug";
    const ordinal = isTerminal ? 0 : this.takePoles(device, through.length, reference, work);
    if (ordinal === undefined) return here;
    const numbers = isTerminal ? this.pinsOf(reference, through.length, device, work) : [];
    const fresh = isTerminal ? here : (to ?? this.stage(here.map((one) => (through.includes(one) ? { phase: one.phase } : one))));
    const exchange = crossed ? exchangeOf(through) : new Map<string, string>();
    const behind = (phase: string) => behindOf(fresh, exchange.get(phase) ?? phase);
    const terminals = (index: number): [string, string] => (isTerminal ? [numbers[index] ?? "", ""] : poleTerminals(ordinal + index));
    const use: MainUse = {
      kind: "main",
      id: "",
      device: device.name,
      role: "through",
      ins: through.map(({ phase, node }, index) => ({ terminal: terminals(index)[0], phase, node })),
      outs: through.map(({ phase }, index) => ({ terminal: terminals(index)[1], phase: behind(phase).phase, node: behind(phase).node })),
      ...(crossed ? { crossed: true } : {}),
      current: work.current,
      branch: work.branch,
      at: reference.at,
    };
    if (device.kind === "overload") work.overloads = [...(work.overloads ?? []), { device, at: reference.at }];
    this.keep(use, device, path);
    if (isTerminal && to) for (const { phase, node } of through) this.nodes.join(node, behindOf(to, phase).node, reference.at);
    return to ? this.behindWay(here, through, to) : [...fresh];
  }

  /** Behind the last element of a way: where it switches a conductor, it ends on the common one. */
  private behindWay(here: readonly Conductor[], through: readonly Conductor[], to: readonly Conductor[]): Conductor[] {
    return here.map((one, index) => (through.some(({ phase }) => phase === one.phase) ? (to[index] as Conductor) : one));
  }

  private convert(device: Device, reference: PathReference, here: Conductor[], path: PowerBranch["path"], work: PowerWork): Conductor[] {
    if (!this.checkPart(reference, device) || !this.checkLeads(device, here, reference, work)) return here;
    if (!this.takeOnce(device, reference, work)) return here;
    const alternating = device.kind === "transformer";
    const phases = alternating ? (here.length === 3 ? here.map(({ phase }) => phase) : ["X1", "X2"]) : ["L+", "L-"];
    const behind = this.stage(phases.map((phase) => ({ phase })));
    const ins = here.map(({ phase }) => phase);
    const terminals = conversionTerminals(device.kind, ins, behind.length, this.convention);
    const use: MainUse = {
      kind: "main",
      id: "",
      device: device.name,
      role: "conversion",
      ins: here.map(({ phase, node }, i) => ({ terminal: terminals.ins[i] as string, phase, node })),
      outs: behind.map(({ phase, node }, i) => ({ terminal: terminals.outs[i] as string, phase, node })),
      ...(this.earth !== undefined && device.kind === "power-supply" ? { frame: this.earth } : {}),
      current: work.current,
      branch: work.branch,
      at: reference.at,
    };
    work.current = alternating ? "AC" : "DC";
    work.converter = device.name;
    this.keep(use, device, path);
    return behind;
  }

  // ------------------------------------------------------------ ends

  private readEnd(behind: readonly PathItem[], here: Conductor[], path: Series, branch: PowerBranch, work: PowerWork): void {
    branch.end = { kind: "open", conductors: here };
    const [end, ...more] = behind;
    if (!end) {
      if (path.items.at(-1)?.kind === "point" && branch.path.length > 0) return;
      if (!work.incomplete) {
        this.report.error("branch-without-load", branch.at, "This branch feeds nothing.", {
          hint: 'What it feeds stands behind "->", as in -> M1; or it ends in a @point from which others go on.',
        });
      }
      work.incomplete = true;
      return;
    }
    if (end.kind !== "reference" || more.length > 0) {
      const at = end.kind === "reference" ? (more[0] as PathItem).at : end.at;
      this.report.error("end-not-single", at, 'One thing stands behind "->" in a branch.', {
        hint: "Several loads are branches of their own: end this one in a @point and begin the others with it.",
      });
      work.incomplete = true;
      if (end.kind !== "reference") return;
    }
    if (this.names.kindOf(end.name.text) === "supply") {
      branch.end = this.endInSupply(end, here, branch, work);
      return;
    }
    const device = this.deviceOf(end, work);
    if (!device) return;
    const role = powerRoles[device.kind];
    if (role === "conversion") {
      branch.end = { kind: "open", conductors: this.convert(device, end, here, branch.path, work) };
      return;
    }
    if (role !== "load") {
      if (role === "through") {
        this.report.error("branch-without-load", end.at, `${device.name} is ${withArticle(device.kind)} and no load.`, {
          hint: 'What a branch feeds stands behind "->": a motor, a heater, a transformer, a supply.',
        });
      } else this.wrongKind(device, end);
      work.incomplete = true;
      return;
    }
    if (device.kind === "motor") this.endInMotor(device, end, here, branch, work);
    else if (branch.start.kind === "star") this.starElsewhere(end);
    else if (this.checkPart(end, device) && this.checkLeads(device, here, end, work) && this.takeOnce(device, end, work)) {
      const terminals = device.kind === "heater" ? ["1", "2", "3"] : ["X1", "X2"];
      this.keep(this.loadUse(device, here, terminals, end.at, work), device, branch.path);
      branch.end = { kind: "load" };
    }
  }

  private loadUse(device: Device, here: readonly Conductor[], terminals: readonly string[], at: SourceRange, work: PowerWork): MainUse {
    return {
      kind: "main",
      id: "",
      device: device.name,
      role: "load",
      ins: here.map(({ phase, node }, i) => ({ terminal: terminals[i] ?? "", phase, node })),
      outs: [],
      ...(this.earth !== undefined ? { frame: this.earth } : {}),
      current: work.current,
      branch: work.branch,
      at,
    };
  }

  private starElsewhere({ at }: PathReference): void {
    this.report.error("star-not-at-motor", at, "A star point joins the second ends of a motor's windings.", {
      hint: "Write it as in: star KM3 -> M1.2",
    });
  }

  private endInMotor(device: Device, end: PathReference, here: Conductor[], branch: PowerBranch, work: PowerWork): void {
    const part = end.part?.text;
    if (end.part && part !== "1" && part !== "2") {
      this.report.error("unknown-part", end.part.at, `${device.name} is a motor and has no part ${part}.`, {
        hint: `Its leads are ${device.name}, the second ends of its windings ${device.name}.2.`,
      });
      work.incomplete = true;
      return;
    }
    this.checkOverloads(device, work);
    // A neutral that comes along does not go into a motor of three phases.
    const live = withoutReturn(here).length === 3 ? withoutReturn(here) : here;
    if (!this.checkLeads(device, live, end, work)) return;
    const motor = this.motors.get(device.name) ?? { device, at: end.at };
    if (part === "2") this.endInSecond(motor, end, live, branch, work);
    else if (branch.start.kind === "star") this.starElsewhere(end);
    else if (motor.main) this.fedTwice(device, end, motor.main.at);
    else {
      this.motors.set(device.name, motor);
      motor.main = this.loadUse(device, live, [], end.at, work);
      this.keep(motor.main, device, branch.path);
      branch.end = { kind: "load" };
    }
  }

  private endInSecond(motor: MotorDraft, end: PathReference, here: Conductor[], branch: PowerBranch, work: PowerWork): void {
    const { device } = motor;
    if (here.length !== 3) {
      this.report.error(
        "conductors-unlike-load",
        end.at,
        `The second ends of the windings of ${device.name} take three conductors, not ${here.length}.`,
      );
      work.incomplete = true;
      return;
    }
    const which = branch.start.kind === "star" ? "star" : "delta";
    const first = motor[which];
    if (first) {
      this.fedTwice(device, end, first);
      return;
    }
    this.motors.set(device.name, motor);
    motor[which] = end.at;
    if (which === "star") motor.starNode = branch.conductors[0]?.node;
    if (motor.second) for (const [i, { node }] of motor.second.entries()) this.nodes.join(node, (here[i] as Conductor).node, end.at);
    else motor.second = here.map(({ phase, node }) => ({ terminal: "", phase, node }));
    branch.end = { kind: "second", device: device.name, conductors: here };
  }

  private fedTwice({ name }: Device, end: PathReference, first: SourceRange): void {
    this.report.error("motor-fed-twice", end.at, `${end.part?.text === "2" ? `${name}.2` : name} is already fed.`, {
      seeAlso: [{ message: "The first feed stands here.", at: first }],
      hint: "A reversing pair stands in brackets: (KM1 | KM2 crossed).",
    });
  }

  private checkOverloads({ name }: Device, work: PowerWork): void {
    for (const { device, at } of work.overloads ?? []) {
      if (device.guards === undefined) device.guards = name;
      else if (device.guards !== name) {
        this.report.error("overload-guards-other", at, `${device.name} guards ${device.guards}, but this branch feeds ${name}.`);
      }
    }
  }

  private endInSupply(end: PathReference, here: Conductor[], branch: PowerBranch, work: PowerWork): PowerEnd {
    const open: PowerEnd = { kind: "open", conductors: here };
    const supply = this.supplies.find(({ name }) => name === end.name.text);
    if (!supply) return open;
    if (supply.branch !== undefined) {
      this.report.error("supply-fed-twice", end.at, `${supply.name} already has its rails from another branch.`);
      return open;
    }
    if (supply.from !== undefined && supply.from !== work.converter) {
      const behind = work.converter === undefined ? "has no such device" : `ends behind ${work.converter}`;
      this.report.error("supply-fed-otherwise", end.at, `${supply.name} has its rails from ${supply.from}, but this branch ${behind}.`);
      return open;
    }
    if (here.length !== 2) {
      this.report.error("conductors-unlike-load", end.at, `${supply.name} has two rails, but ${here.length} conductors reach it.`, {
        hint: 'Name the conductors of the branch, as in branch "Control" L1 N: …',
      });
      work.incomplete = true;
      return open;
    }
    if (supply.current !== work.current && !work.incomplete) {
      this.report.error("supply-current", end.at, `${supply.name} is ${supply.current}, but ${work.current} reaches it.`, {
        hint: "A power-supply or a rectifier gives DC.",
      });
    }
    return this.joinRails(supply, here, branch, end.at, work.converter);
  }

  /** The conductors at the end of a branch become the rails; behind the supply's own fuse the live one is another. */
  private joinRails(supply: Supply, here: Conductor[], branch: PowerBranch, at: SourceRange, from: string | undefined): PowerEnd {
    supply.branch = branch.id;
    if (from !== undefined) supply.from = from;
    for (const [index, rail] of supply.rails.entries()) {
      const { node } = here[index] as Conductor;
      if (index === 0 && supply.fuse) continue;
      const known = this.feedNodes.get(rail);
      if (known !== undefined && known !== node) {
        this.report.error(
          "rail-named-like-conductor",
          at,
          `The rail ${rail} of ${supply.name} has the name of a conductor of the feed that it is not.`,
          {
            hint: `Give the rails names of their own, as in "rails 1 2".`,
          },
        );
        continue;
      }
      this.nodes.join(node, this.nodes.rail(rail), at);
    }
    return { kind: "supply", supply: supply.name, conductors: here };
  }

  // ------------------------------------------------------------ devices

  private deviceOf(reference: PathReference, work: PowerWork): Device | undefined {
    const { name, negated, at } = reference;
    const device = this.devices.get(name.text);
    if (device && negated) {
      this.report.error("no-contacts", at, `${name.text} stands here without a slash: poles and main contacts are normally open.`);
      work.incomplete = true;
      return undefined;
    }
    if (device) return device;
    work.incomplete = true;
    if (this.names.isLost(name.text)) return undefined;
    const kind = this.names.kindOf(name.text);
    if (kind === undefined) {
      const words = ["star", "crossed"];
      const guess = didYouMean(name.text, words);
      if (guess.hint) this.report.error("unknown-name", name.at, `There is no ${name.text} in this drawing.`, guess);
      else
        this.names.unknown(
          name,
          (other) => other === "supply" || Object.hasOwn(powerRoles, other),
          `Declare it, as in "contactor ${name.text}".`,
        );
    } else this.report.error("wrong-kind", name.at, `${name.text} is ${withArticle(kind)}, which cannot stand in a power circuit.`);
    return undefined;
  }

  private wrongKind({ name, kind }: Device, { at }: PathReference): void {
    const hint = kind === "relay" ? { hint: "Main contacts are those of a contactor." } : {};
    this.report.error("wrong-kind", at, `${name} is ${withArticle(kind)}, which cannot stand in a power circuit.`, hint);
  }

  private checkPart({ part, terminals, name }: PathReference, device: Device): boolean {
    const strip = device.kind === "terminal-strip" || device.kind === "plug";
    if (part) this.report.error("unknown-part", part.at, `${name.text} is ${withArticle(device.kind)} and has no part ${part.text}.`);
    else if (terminals && !strip) {
      this.report.error("terminals-wrong", terminals.at, "Terminals in a power circuit follow from the order of the conductors.");
    }
    return !part;
  }

  private checkLeads(device: Device, here: readonly Conductor[], { at }: PathReference, work: PowerWork): boolean {
    const counts = leadsOf(device);
    if (counts.includes(here.length)) return true;
    const words = ["no", "one", "two", "three", "four"];
    this.report.error(
      "conductors-unlike-load",
      at,
      `${device.name} takes ${listed(counts.map((count) => words[count] as string))} conductors, but ${here.length} reach it.`,
      here.length > 2 ? { hint: 'Name those of the branch, as in branch "Fan" L1 N: …' } : {},
    );
    work.incomplete = true;
    return false;
  }

  private takeOnce(device: Device, reference: PathReference, work: PowerWork): boolean {
    const [first] = device.mains;
    if (!first) return true;
    this.report.error("main-used-twice", reference.at, `${device.name} already stands in a power circuit.`, {
      seeAlso: [{ message: "First used here.", at: first.at }],
    });
    work.incomplete = true;
    return false;
  }

  /** The ordinal of the first of so many free poles of a device. A contactor may switch in several places as far as its poles go. */
  private takePoles(device: Device, count: number, reference: PathReference, work: PowerWork): number | undefined {
    if (device.kind !== "contactor") return this.takeOnce(device, reference, work) ? 1 : undefined;
    const taken = device.mains.reduce((sum, { ins }) => sum + ins.length, 0);
    const has = device.ways ?? Math.max(usualMains, count);
    if (taken + count <= has) return taken + 1;
    const left = has - taken;
    this.report.error(
      "main-used-twice",
      reference.at,
      `${device.name} has ${has} main contacts, of which ${left === 0 ? "none is" : left === 1 ? "one is" : `${left} are`} free here.`,
      { seeAlso: device.mains.slice(0, 1).map(({ at }) => ({ message: "First used here.", at })) },
    );
    work.incomplete = true;
    return undefined;
  }

  /** The terminals a strip gives to the conductors: `X1:1-3`, or `X1:1` counting on. */
  private pinsOf({ name, terminals, at }: PathReference, count: number, device: Device, work: PowerWork): string[] {
    const range = /^(\d+)(?:-(\d+))?$/.exec(terminals?.text ?? "");
    const first = Number(range?.[1]);
    if (range && (range[2] === undefined || Number(range[2]) - first + 1 === count)) {
      return Array.from({ length: count }, (_, i) => String(first + i));
    }
    const what = device.kind === "plug" ? "pins" : "terminals";
    const hint = { hint: `Write ${name.text}:1-${count}.` };
    if (!terminals) this.report.error("terminals-missing", at, `Which ${what} of ${name.text}?`, hint);
    else this.report.error("terminals-wrong", terminals.at, `${count} conductors take ${count} ${what}.`, hint);
    work.incomplete = true;
    return [];
  }

  private keep(use: MainUse, device: Device, path: PowerBranch["path"]): void {
    const strip = device.kind === "terminal-strip" || device.kind === "plug";
    const own = strip ? `${device.name}:${use.ins[0]?.terminal}-${use.ins.at(-1)?.terminal}` : device.name;
    const times = device.mains.filter(({ id }) => id === `${own}:main` || id.startsWith(`${own}:main/`)).length;
    use.id = times === 0 ? `${own}:main` : `${own}:main/${times + 1}`;
    device.mains.push(use);
    path.push(use);
  }

  // ------------------------------------------------------------ at the end

  /** When everything is read: rails that only their supply says are fed, and the leads of motors. */
  finish(): void {
    for (const supply of this.supplies) {
      if (supply.from === undefined || supply.branch !== undefined) continue;
      for (const { branches } of this.circuits) {
        for (const branch of branches) {
          const last = branch.path.at(-1);
          if (branch.end.kind !== "open" || last?.kind !== "main" || last.device !== supply.from || last.role !== "conversion") continue;
          if (branch.end.conductors.length === 2) branch.end = this.joinRails(supply, branch.end.conductors, branch, last.at, supply.from);
        }
      }
    }
    for (const { device, main, second, star, at } of this.motors.values()) {
      if (!main) {
        this.report.error("motor-half-fed", at, `The second ends of the windings of ${device.name} are fed, but not its leads.`, {
          hint: `A branch must end in -> ${device.name}.`,
        });
        continue;
      }
      const windings = star ? "star-delta" : second ? "two-speed" : "one";
      const terminals = motorTerminals(main.ins.length, main.current, windings, this.convention);
      main.ins.forEach((pin, index) => {
        pin.terminal = terminals.first[index] ?? "";
      });
      if (!second) continue;
      main.second = second.map((pin, index) => ({ ...pin, terminal: terminals.second[index] ?? "" }));
    }
    for (const device of this.devices.values()) {
      const [main] = device.mains;
      if (!main) continue;
      for (const { at, pin } of device.throughs) {
        if (pin !== undefined) continue;
        this.report.error("main-used-twice", at, `${device.name} already stands in a power circuit.`, {
          seeAlso: [{ message: "It stands here.", at: main.at }],
        });
      }
    }
  }

  /** Gives every node of the power circuits its final number. */
  numberNodes(number: (node: NodeId) => NodeId): void {
    const done = new Set<object>();
    const renumber = (one: Conductor | MainPin) => {
      if (done.has(one)) return;
      done.add(one);
      one.node = number(one.node);
    };
    const visit = (item: PowerBranch["path"][number]): void => {
      if (item.kind === "power-parallel") {
        for (const one of [...item.from, ...item.to]) renumber(one);
        for (const way of item.ways) way.forEach(visit);
      } else if (item.kind === "power-point") item.conductors.forEach(renumber);
      else {
        for (const pin of [...item.ins, ...item.outs, ...(item.second ?? [])]) renumber(pin);
        if (item.frame !== undefined) item.frame = number(item.frame);
      }
    };
    for (const { feed, branches } of this.circuits) {
      for (const one of [...feed.conductors, ...feed.bus]) renumber(one);
      for (const use of feed.path) visit(use);
      for (const { conductors, path, end } of branches) {
        conductors.forEach(renumber);
        path.forEach(visit);
        if (end.kind !== "load") end.conductors.forEach(renumber);
      }
    }
    for (const stage of this.stages) stage.forEach(renumber);
    for (const motor of this.motors.values()) if (motor.starNode !== undefined) motor.starNode = number(motor.starNode);
  }

  /** Names the conductors, once their nodes have their final numbers. */
  nameConductors(named: { rail?: string; conductor?: string }[]): void {
    const motors: ConductorStages["motors"] = [];
    for (const { main, starNode } of this.motors.values()) {
      if (!main) continue;
      const star = starNode === undefined ? [] : [{ terminal: "Y", node: starNode }];
      motors.push({ leads: [...main.ins, ...(main.second ?? []), ...star] });
    }
    const busbars = this.circuits.flatMap(({ feed }) => feed.bus.map(({ node }) => node));
    nameConductors(named, { stages: this.stages, motors, busbars: new Set(busbars) });
  }
}

const behindOf = (conductors: readonly Conductor[], phase: string): Conductor => conductors.find((one) => one.phase === phase) as Conductor;

/** A contactor has three main contacts unless more conductors pass through it or its `poles` say otherwise. */
const usualMains = 3;

interface Element {
  item: PathItem;
  /** Where the word `crossed` stands behind it. */
  crossed?: SourceRange;
}

interface PowerWork {
  branch: string;
  /** The kind of current here. */
  current: "AC" | "DC";
  incomplete: boolean;
  /** The last transformer or power supply passed. */
  converter?: string;
  overloads?: { device: Device; at: SourceRange }[];
}

/** The first and the last live conductor change places. */
function exchangeOf(through: readonly Conductor[]): Map<string, string> {
  const live = withoutReturn(through).length > 1 ? withoutReturn(through) : through;
  const [first, last] = [live[0]?.phase, live.at(-1)?.phase];
  return first === undefined || last === undefined
    ? new Map()
    : new Map([
        [first, last],
        [last, first],
      ]);
}

function firstWord({ at }: { at: SourceRange }, word: string): SourceRange {
  return { ...at, endLine: at.line, endColumn: at.column + word.length };
}
