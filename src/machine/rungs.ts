import type { SourceRange } from "../language/diagnostic.js";
import type { LadderBlock, Parallel, PathItem, PathReference, Rung as RungSyntax, Series } from "../language/tree.js";
import { startOf } from "./drawing.js";
import { deviceRoles } from "./kinds.js";
import type {
  ContactUse,
  Device,
  DeviceUse,
  LadderCircuit,
  LoadUse,
  NodeId,
  ParallelPath,
  Rung,
  RungElement,
  RungEnd,
  SeriesPath,
  Supply,
  ThroughUse,
} from "./model.js";
import type { Names } from "./names.js";
import { NodeJoiner } from "./nodes.js";
import { didYouMean, listed, type Report, withArticle } from "./report.js";
import { deepest, Roles } from "./roles.js";

/** Turns rungs into paths with electrical nodes. Nodes are provisional until `finish`. */
export class RungBuilder {
  private readonly nodes = new NodeJoiner();
  private readonly rails = new Map<string, NodeId>();
  /** The rail a joined node is, keyed by the joiner's node. */
  private readonly railOf = new Map<NodeId, string>();
  private readonly points = new Map<string, NodeId>();
  private readonly ladders: LadderCircuit[] = [];

  constructor(
    private readonly devices: ReadonlyMap<string, Device>,
    private readonly names: Names,
    private readonly report: Report,
  ) {}

  readLadder(block: LadderBlock, id: string, supply: Supply): LadderCircuit {
    const ladder: LadderCircuit = { kind: "ladder", id, title: block.title?.text ?? "", supply, rungs: [], sheetBreaks: [], at: block.at };
    this.ladders.push(ladder);
    const rails = supply.rails.map((rail) => this.rail(rail)) as [NodeId, NodeId];
    for (const statement of block.statements) {
      if (statement.kind === "rung") {
        const rung = this.readRung(statement, `${id}/rung${ladder.rungs.length + 1}`, rails);
        if (rung) ladder.rungs.push(rung);
      } else if (statement.kind === "sheet-break") {
        ladder.sheetBreaks.push({ before: ladder.rungs.length, title: statement.title?.text });
      }
    }
    return ladder;
  }

  /** A node of its own, for what is drawn outside rungs. */
  addNode(): NodeId {
    return this.nodes.add();
  }

  /**
   * Gives every node its final number in reading order, rails first, and returns what names each.
   * @param others numbers the nodes of what is drawn outside rungs
   */
  finish(others: (number: (node: NodeId) => NodeId) => void = () => {}): { rail?: string; points: string[] }[] {
    const final = new Map<NodeId, NodeId>();
    const named: { rail?: string; points: string[] }[] = [];
    const number = (node: NodeId): NodeId => {
      const root = this.nodes.find(node);
      const known = final.get(root);
      if (known !== undefined) return known;
      final.set(root, named.length);
      return named.push({ points: [] }) - 1;
    };
    for (const [rail, node] of this.rails) (named[number(node)] as { rail?: string }).rail = rail;
    for (const { rungs } of this.ladders) {
      for (const rung of rungs) {
        rung.start.node = number(rung.start.node);
        numberPath(rung.path, number);
        rung.end.node = number(rung.end.node);
      }
    }
    others(number);
    for (const [point, node] of this.points) named[number(node)]?.points.push(point);
    return named;
  }

  /** The node of a rail or of a conductor of that name: one name, one potential. */
  rail(name: string): NodeId {
    const known = this.rails.get(name);
    if (known !== undefined) return known;
    const node = this.nodes.add();
    this.rails.set(name, node);
    this.railOf.set(node, name);
    return node;
  }

  private point(name: string): NodeId {
    const known = this.points.get(name);
    if (known !== undefined) return known;
    const node = this.nodes.add();
    this.points.set(name, node);
    return node;
  }

  join(a: NodeId, b: NodeId, at: SourceRange): void {
    const [one, other] = [this.railOf.get(this.nodes.find(a)), this.railOf.get(this.nodes.find(b))];
    if (one !== undefined && other !== undefined && one !== other) {
      this.report.error("rails-joined", at, `This wire joins the rails ${one} and ${other}.`);
      return;
    }
    const root = this.nodes.join(a, b);
    const rail = one ?? other;
    if (rail !== undefined) this.railOf.set(root, rail);
  }

  private readRung(syntax: RungSyntax, id: string, rails: [NodeId, NodeId]): Rung | undefined {
    const items = [...syntax.path.items];
    if (items.length === 0) {
      this.report.error("rung-empty", syntax.title?.at ?? startOf(syntax.at, "rung"), "This rung has no device.");
      return undefined;
    }
    const roles = new Roles((name) => this.devices.get(name)?.kind, this.report);
    roles.decide(syntax.path);
    const work: RungWork = { id, roles, points: new Map(), incomplete: syntax.incomplete ?? false };

    const start: RungEnd = { kind: "rail", node: rails[0] };
    const end: RungEnd = { kind: "rail", node: rails[1] };
    const rung: Rung = {
      id,
      title: syntax.title?.text,
      start,
      end,
      path: { kind: "series", items: [], from: -1, to: -1 },
      at: syntax.title?.at ?? syntax.at,
    };
    const [first] = items;
    if (first?.kind === "point") {
      rung.start = { kind: "point", point: first.name, node: this.point(first.name), at: first.at };
      items.shift();
    }
    const last = items.at(-1);
    if (last?.kind === "point") {
      rung.end = { kind: "point", point: last.name, node: this.point(last.name), at: last.at };
      items.pop();
    }
    if (items.length === 0 && rung.end.kind === "rail") {
      this.report.error("rung-empty", syntax.path.at, "This rung has no device.");
      rung.incomplete = true;
      return rung;
    }
    rung.path = this.readSeries(items, rung.start.node, rung.end.node, work, syntax.path.at, 0);
    if (work.incomplete || roles.incomplete) rung.incomplete = true;
    return rung;
  }

  private readSeries(syntax: readonly PathItem[], from: NodeId, to: NodeId, work: RungWork, at: SourceRange, depth: number): SeriesPath {
    const items = this.flatten(syntax, work, depth);
    const parts: SeriesPath["items"] = [];
    // The last thing with a length ends at `to`; points behind it lie on `to`.
    const lastLong = items.findLastIndex((item) => item.kind !== "point");
    let here = from;
    if (lastLong < 0) this.join(from, to, at);
    items.forEach((item, index) => {
      if (item.kind === "point") {
        this.join(here, this.point(item.name), item.at);
        parts.push({ kind: "point", id: pointId(work, item.name), point: item.name, from: here, to: here, rung: work.id, at: item.at });
        return;
      }
      const next = index === lastLong ? to : this.nodes.add();
      const part = item.kind === "parallel" ? this.readParallel(item, here, next, work, depth) : this.readReference(item, here, next, work);
      // What could not be read leaves a gap rather than a wire that is not there.
      if (part) parts.push(part);
      else work.incomplete = true;
      here = next;
    });
    return { kind: "series", items: parts, from, to };
  }

  /** Brackets with one branch are no more than what stands in them. */
  private flatten(items: readonly PathItem[], work: RungWork, depth: number): PathItem[] {
    return items.flatMap((item): PathItem[] => {
      if (item.kind !== "parallel" || item.branches.length !== 1) return [item];
      if (depth > deepest) return [item];
      return this.flatten((item.branches[0] as Series).items, work, depth + 1);
    });
  }

  private readParallel(syntax: Parallel, from: NodeId, to: NodeId, work: RungWork, depth: number): ParallelPath | undefined {
    if (depth > deepest) {
      this.report.error("nested-too-deep", syntax.at, `Brackets may stand ${deepest} deep within each other.`);
      return undefined;
    }
    const branches = syntax.branches.map((branch) => this.readSeries(branch.items, from, to, work, branch.at, depth + 1));
    return { kind: "parallel", branches, from, to };
  }

  private readReference(reference: PathReference, from: NodeId, to: NodeId, work: RungWork): RungElement | undefined {
    const { name, part, negated, at } = reference;
    const device = this.devices.get(name.text);
    if (!device) {
      this.unknownDevice(reference);
      return undefined;
    }
    if (device.kind === "motor") {
      this.report.error("wrong-kind", at, `${name.text} is a motor, which cannot stand in a rung.`, {
        hint: "Drive its contactor in the rung, and feed the motor in a power circuit.",
      });
      return undefined;
    }
    const { through, auxiliary } = deviceRoles[device.kind];
    if (through && !(auxiliary && part?.text === "aux")) return this.readThrough(reference, device, from, to, work);
    const shared = { device: device.name, from, to, rung: work.id, at };
    if (work.roles.isLoad(reference)) {
      const load: LoadUse = { kind: "load", id: "", terminals: { value: ["", ""], by: "unallotted" }, ...shared };
      if (!this.readLoadPart(load, device, reference)) return undefined;
      pin(load, reference, this.report);
      device.loads.push(load);
      return load;
    }
    if (!deviceRoles[device.kind].contacts && !auxiliary) {
      this.report.error("no-contacts", at, `${name.text} is ${withArticle(device.kind)} and has no contacts.`);
      return undefined;
    }
    if (device.kind === "output-card" && negated) {
      this.report.error("no-contacts", at, `${name.text} has no normally closed contacts: an output closes when its program says so.`, {
        hint: "Drive a relay and use its normally closed contact.",
      });
      return undefined;
    }
    const contact: ContactUse = {
      kind: "contact",
      id: "",
      form: negated ? "NC" : "NO",
      timed: device.kind === "timer" && part === undefined,
      terminals: { value: ["", ""], by: "unallotted" },
      ...shared,
    };
    if (!this.readPart(contact, device, reference)) return undefined;
    pin(contact, reference, this.report);
    device.contacts.push(contact);
    return contact;
  }

  /** A fuse, a terminal, a diode: what current passes through. */
  private readThrough(
    { name, part, terminals, negated, at }: PathReference,
    device: Device,
    from: NodeId,
    to: NodeId,
    work: RungWork,
  ): ThroughUse | undefined {
    const { auxiliary } = deviceRoles[device.kind];
    const onStrip = device.kind === "terminal-strip" || device.kind === "plug";
    const what = device.kind === "plug" ? "pin" : "terminal";
    const hint = auxiliary
      ? { hint: `Its auxiliary contacts are ${name.text}.aux and /${name.text}.aux.` }
      : onStrip && part
        ? { hint: `A ${what} stands behind a colon: ${name.text}:${part.text}.` }
        : {};
    const kind = withArticle(device.kind);
    if (negated) {
      const why = auxiliary ? ": its poles are drawn as they carry current." : " and has no contacts.";
      this.report.error("no-contacts", at, `${name.text} is ${kind}${why}`, hint);
      return undefined;
    }
    if (part) {
      this.report.error("unknown-part", part.at, `${name.text} is ${kind} and has no part ${part.text}.`, hint);
      return undefined;
    }
    const through: ThroughUse = {
      kind: "through",
      id: "",
      device: device.name,
      terminals: { value: ["", ""], by: "unallotted" },
      from,
      to,
      rung: work.id,
      at,
    };
    if (onStrip) {
      if (!terminals) {
        this.report.error("terminals-missing", at, `Which ${what} of ${name.text}?`, { hint: `Write ${name.text}:1.` });
        return undefined;
      }
      if (/^\d+-\d+$/.test(terminals.text)) {
        const [one, other] = terminals.text.split("-");
        this.report.error("terminals-wrong", terminals.at, `${name.text}:${terminals.text} is no single ${what}.`, {
          hint: `Write ${name.text}:${one} ${name.text}:${other}, one behind the other.`,
        });
        return undefined;
      }
      // The wire goes straight through it.
      this.join(from, to, at);
      through.pin = terminals.text;
    } else pin(through, { name, terminals }, this.report);
    device.throughs.push(through);
    return through;
  }

  private readLoadPart(load: LoadUse, device: Device, { part, name, at }: PathReference): boolean {
    if (device.kind !== "input-card") {
      if (part) load.coil = part.text as NonNullable<LoadUse["coil"]>;
      return true;
    }
    const point = this.readPoint(device, name, part, at);
    if (point !== undefined) load.point = point;
    return point !== undefined;
  }

  /** The point of a controller's card. */
  private readPoint({ points }: Device, name: PathReference["name"], part: PathReference["part"], at: SourceRange): string | undefined {
    if (!part) {
      this.report.error("position-missing", at, `Which point of ${name.text}?`, { hint: `Write ${name.text}.0.` });
      return undefined;
    }
    const number = /^\d{1,3}$/.test(part.text) ? Number(part.text) : undefined;
    if (number === undefined || (points !== undefined && number >= points)) {
      const those = points === undefined ? "Points are numbers" : points === 1 ? "It has point 0 alone" : `It has 0 to ${points - 1}`;
      this.report.error("unknown-part", part.at, `${name.text} has no point ${part.text}.`, { hint: `${those}.` });
      return undefined;
    }
    return part.text;
  }

  private readPart(contact: ContactUse, device: Device, { part, name, at }: PathReference): boolean {
    if (device.kind === "output-card") {
      const point = this.readPoint(device, name, part, at);
      if (point !== undefined) contact.point = point;
      return point !== undefined;
    }
    if (device.kind === "selector-switch" || device.kind === "key-switch") {
      const positions = device.selector?.positions ?? [];
      if (!part) {
        this.report.error("position-missing", at, `In which position of ${name.text}? It has ${listed(positions, "and")}.`, {
          hint: `Write ${name.text}.${positions[0]}.`,
        });
        return false;
      }
      if (!positions.includes(part.text)) {
        this.report.error(
          "unknown-position",
          part.at,
          `${name.text} has no position ${part.text}: it has ${listed(positions, "and")}.`,
          didYouMean(part.text, positions),
        );
        return false;
      }
      contact.position = part.text;
      return true;
    }
    if (!part || (device.kind === "timer" && part.text === "inst") || deviceRoles[device.kind].auxiliary) return true;
    const { coils } = deviceRoles[device.kind];
    if (coils && (coils as readonly string[]).includes(part.text)) {
      this.report.error("not-a-contact", at, `${name.text}.${part.text} is a coil, not a contact.`, {
        hint: `Its contacts are ${name.text} and /${name.text}.`,
      });
    } else if (coils) {
      const guess = didYouMean(part.text, coils);
      const hint =
        guess.hint ??
        `Its coils are ${listed(
          coils.map((coil) => `${name.text}.${coil}`),
          "and",
        )}.`;
      this.report.error("unknown-part", part.at, `${name.text} is ${withArticle(device.kind)} and has no part ${part.text}.`, {
        ...guess,
        hint,
      });
    } else {
      this.report.error(
        "unknown-part",
        part.at,
        `${name.text} is ${withArticle(device.kind)} and has no part ${part.text}.`,
        device.kind === "timer" ? { hint: `Its instantaneous contact is ${name.text}.inst.` } : {},
      );
    }
    return false;
  }

  private unknownDevice({ name, terminals }: PathReference): void {
    if (this.names.isLost(name.text)) return;
    const kind = this.names.kindOf(name.text);
    if (kind === undefined) {
      const coil = /^\d*(SOL|Y|MB)/.test(name.text)
        ? `A solenoid is declared by its valve, as in "valve V1 5/2 left solenoid ${name.text} right spring".`
        : `Declare it, as in "${terminals && !terminals.text.includes("-") ? "terminal-strip" : "relay"} ${name.text}".`;
      this.names.unknown(name, (other) => Object.hasOwn(deviceRoles, other), coil);
      return;
    }
    const coils = [...this.devices.values()].filter(({ valve }) => valve?.name === name.text).map((coil) => coil.name);
    this.report.error(
      "wrong-kind",
      name.at,
      `${name.text} is ${withArticle(kind)}, which cannot stand in a rung.`,
      coils.length > 0 ? { hint: `Its coil is ${listed(coils)}.` } : {},
    );
  }
}

interface RungWork {
  id: string;
  roles: Roles;
  /** How often each point was met in this rung. */
  points: Map<string, number>;
  incomplete: boolean;
}

function pointId({ id, points }: RungWork, name: string): string {
  const times = (points.get(name) ?? 0) + 1;
  points.set(name, times);
  return times === 1 ? `${id}/@${name}` : `${id}/@${name}/${times}`;
}

/** Takes the terminals the author pinned: `CR1:23-24`. */
function pin(use: DeviceUse, { terminals, name }: Pick<PathReference, "terminals" | "name">, report: Report): void {
  if (!terminals) return;
  const written = /^([A-Za-z0-9]+)-([A-Za-z0-9]+)$/.exec(terminals.text);
  if (!written || written[1] === written[2]) {
    const what = use.kind === "through" ? "A pole" : use.kind === "load" ? "A coil" : "A contact";
    const pair = use.kind === "through" ? "1-2" : use.kind === "load" ? "A1-A2" : "13-14";
    report.error("terminals-wrong", terminals.at, `${what} has two terminals, as in ${name.text}:${pair}.`);
    return;
  }
  use.terminals = { value: [written[1] as string, written[2] as string], by: "author", at: terminals.at };
}

function numberPath(path: SeriesPath | ParallelPath, number: (node: NodeId) => NodeId): void {
  path.from = number(path.from);
  for (const part of path.kind === "series" ? path.items : path.branches) {
    if (part.kind === "series" || part.kind === "parallel") numberPath(part, number);
    else {
      part.from = number(part.from);
      part.to = part.kind === "point" ? part.from : number(part.to);
    }
  }
  path.to = number(path.to);
}
