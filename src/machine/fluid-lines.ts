import type { SourceRange } from "../language/diagnostic.js";
import type { FluidBlock, LineEnd, LineStatement, PlugStatement, Word } from "../language/tree.js";
import { bareComponent, type ComponentDraft, draftOf } from "./components.js";
import { fluidMedia, isFluidKind, laterKinds, unnamedEnds } from "./kinds.js";
import type { FluidCircuit, FluidEnd, FluidKind, FluidLine, FluidPort } from "./model.js";
import type { Names } from "./names.js";
import { NodeJoiner } from "./nodes.js";
import { portInOtherScheme, throughPorts } from "./ports.js";
import { ItemReader, readProperties } from "./reader.js";
import { didYouMean, listed, type Report, withArticle } from "./report.js";

/** A fluid circuit while its lines are joined up. */
export interface CircuitDraft {
  circuit: FluidCircuit;
  block: FluidBlock;
  points: Map<string, number>;
  drafts: ComponentDraft[];
}

/** Where a line touches something. */
type Joint = ({ kind: "port"; draft: ComponentDraft; port: string } | { kind: "point"; point: string }) & { at?: SourceRange };

/** One end in a line: where a line comes to it from the left and goes on from it to the right. */
interface ReadEnd {
  arriving?: Joint;
  leaving?: Joint;
  /** A component only called by its kind, to be put at each end that it faces. */
  unnamed?: { kind: Exclude<FluidKind, "cylinder" | "valve">; word: Word };
  at: SourceRange;
}

type LineProperties = Pick<FluidLine, "role" | "hose" | "size">;

/** Joins up the lines of every fluid circuit. */
export class LineBuilder {
  private readonly nodes = new NodeJoiner();
  /** The provisional node of each port, keyed by component and port. */
  private readonly ports = new Map<FluidPort, number>();
  private readonly counts = new Map<string, number>();
  private nextNode = 0;

  constructor(
    private readonly byName: ReadonlyMap<string, ComponentDraft>,
    private readonly circuitOf: ReadonlyMap<ComponentDraft, CircuitDraft>,
    private readonly names: Names,
    private readonly report: Report,
  ) {}

  /** Reads every line and plug of a circuit. */
  readLines(draft: CircuitDraft): void {
    for (const statement of draft.block.statements) {
      if (statement.kind === "line") this.readLine(draft, statement);
    }
    for (const statement of draft.block.statements) {
      if (statement.kind === "plug") this.readPlug(draft, statement);
    }
  }

  /** The provisional node of a point, made when the point is first named. */
  point(draft: CircuitDraft, name: string): number {
    const known = draft.points.get(name);
    if (known !== undefined) return known;
    const node = this.nodes.add();
    draft.points.set(name, node);
    return node;
  }

  /** Joins a component's port to a point, as a sensing line does. */
  tap(draft: CircuitDraft, sensor: ComponentDraft, port: string, to: Joint): void {
    this.joinPair(draft, { kind: "port", draft: sensor, port }, to, { role: "pilot", hose: false }, sensor.component.at);
  }

  /** Numbers the nodes for good, in the order in which the text first touches them. Called once, after all lines are read. */
  finish(draft: CircuitDraft): void {
    this.orientFlow(draft);
    const final = new Map<number, number>();
    const number = (provisional: number): number => {
      const root = this.nodes.find(provisional);
      const known = final.get(root);
      if (known !== undefined) return known;
      const id = this.nextNode++;
      final.set(root, id);
      draft.circuit.nodes.push({ id, points: [], ports: [] });
      return id;
    };
    for (const line of draft.circuit.lines) line.node = number(line.node);
    const byId = new Map(draft.circuit.nodes.map((node) => [node.id, node]));
    for (const [name, provisional] of draft.points) {
      const id = number(provisional);
      (byId.get(id) ?? draft.circuit.nodes.at(-1))?.points.push(name);
    }
    for (const component of draft.circuit.components) {
      for (const port of component.ports) {
        const provisional = this.ports.get(port);
        if (provisional === undefined) continue;
        port.node = number(provisional);
        byId.get(port.node)?.ports.push({ component: component.id, port: port.name });
      }
    }
  }

  private readLine(draft: CircuitDraft, line: LineStatement): void {
    const properties = this.readLineItems(line);
    const role = line.role.text === "line" ? "working" : (line.role.text as FluidLine["role"]);
    if (role === "exhaust" && draft.circuit.medium === "hydraulic") {
      this.report.error("wrong-medium", line.role.at, 'Oil is not let out into the open: lead it to the tank with "line" or "drain".');
      return;
    }
    if (line.groups.length === 1) {
      this.readOpenEnd(draft, line, { role, ...properties });
      return;
    }
    const last = line.groups.length - 1;
    const groups = line.groups.map((group, index) =>
      group.map((end) => this.readEnd(draft, end, index > 0, index < last)).filter((end) => end !== undefined),
    );
    for (let i = 0; i < last; i++) this.joinGroups(draft, groups[i] ?? [], groups[i + 1] ?? [], { role, ...properties }, line);
  }

  /** What is let out with nothing behind it ends in the open, or in the tank; any other line needs two ends. */
  private readOpenEnd(draft: CircuitDraft, line: LineStatement, properties: LineProperties): void {
    if (properties.role !== "exhaust" && properties.role !== "drain") {
      this.report.error("line-with-one-end", line.role.at, `A ${line.role.text} joins two things or more, as in "line P1 -- V1.P".`);
      return;
    }
    const kind = draft.circuit.medium === "hydraulic" ? "tank" : "exhaust";
    for (const end of line.groups[0] ?? []) {
      const read = this.readEnd(draft, end, false, true);
      if (read?.leaving)
        this.joinUnnamed(draft, { joint: read.leaving, at: read.at }, { kind, word: line.role }, "right", properties, read.at);
    }
  }

  private readLineItems(line: LineStatement): Pick<FluidLine, "hose" | "size"> {
    const properties: Pick<FluidLine, "hose" | "size"> = { hose: false };
    readProperties(properties, new ItemReader(line.items, this.report, "A line", line.role.at), "a line", {
      words: {
        hose: (draft) => {
          draft.hose = true;
        },
        size: (draft, read, word) => {
          draft.size = read.positive(word, "length");
        },
      },
    });
    return properties;
  }

  private readEnd(draft: CircuitDraft, end: LineEnd, arrives: boolean, leaves: boolean): ReadEnd | undefined {
    const read = this.findEnd(draft, end, arrives, leaves);
    if (!read) draft.circuit.incomplete = true;
    return read;
  }

  private findEnd(draft: CircuitDraft, end: LineEnd, arrives: boolean, leaves: boolean): ReadEnd | undefined {
    if (end.kind === "point") {
      const joint: Joint = { kind: "point", point: end.name, at: end.at };
      this.point(draft, end.name);
      return { arriving: joint, leaving: joint, at: end.at };
    }
    const component = this.byName.get(end.name.text);
    if (component) return this.readComponentEnd(draft, component, end, arrives, leaves);
    const kind = end.name.text;
    if (isFluidKind(kind) && kind !== "cylinder" && kind !== "valve") return this.readUnnamed(draft, kind, end, arrives, leaves);
    if (laterKinds.has(kind)) {
      this.report.error("not-yet-supported", end.name.at, `${withArticle(kind)} is not yet supported.`.replace(/^a/, "A"));
      return undefined;
    }
    if (this.names.isLost(kind)) return undefined;
    const known = this.names.kindOf(kind);
    if (known !== undefined) {
      this.report.error("wrong-kind", end.name.at, `${kind} is ${withArticle(known)}; a line joins fluid components.`);
    } else
      this.names.unknown(
        end.name,
        (other) => isFluidKind(other),
        'Components are declared in the circuit, as in "valve V1 5/2 left solenoid SOL1 right spring".',
      );
    return undefined;
  }

  private readComponentEnd(
    draft: CircuitDraft,
    target: ComponentDraft,
    end: LineEnd & { kind: "component" },
    arrives: boolean,
    leaves: boolean,
  ): ReadEnd | undefined {
    const { component } = target;
    const name = component.name ?? component.kind;
    const home = this.circuitOf.get(target);
    if (home !== undefined && home !== draft) {
      this.report.error("component-elsewhere", end.name.at, `${name} stands in the circuit "${home.circuit.title}".`, {
        seeAlso: [{ message: `${name} is declared here.`, at: component.at }],
      });
      return undefined;
    }
    const ports = component.ports.map((port) => port.name);
    if (end.port) {
      const port = end.port.text;
      if (!ports.includes(port) && target.optionalPorts.includes(port)) component.ports.push({ name: port, plugged: false });
      else if (!ports.includes(port)) {
        this.unknownPort(target, end.port);
        return undefined;
      }
      target.namedPorts.add(port);
      const joint: Joint = { kind: "port", draft: target, port, at: end.at };
      return { arriving: joint, leaving: joint, at: end.at };
    }
    const through = throughPorts(component.kind, ports);
    if (!through) {
      if (ports.length === 0) this.report.error("no-ports", end.name.at, `${name} is ${withArticle(component.kind)} and has no ports.`);
      else
        this.report.error("port-missing", end.name.at, `Which port of ${name}? It has ${listed(ports, "and")}.`, {
          hint: `Write ${name}.${ports[0]}.`,
          data: { ports },
        });
      return undefined;
    }
    return {
      ...(arrives && { arriving: { kind: "port", draft: target, port: through.arriving, at: end.at } as const }),
      ...(leaves && { leaving: { kind: "port", draft: target, port: through.leaving, at: end.at } as const }),
      at: end.at,
    };
  }

  private unknownPort({ component }: ComponentDraft, port: Word): void {
    const ports = component.ports.map((known) => known.name);
    const other = portInOtherScheme(port.text, ports);
    const guess =
      other === undefined
        ? didYouMean(port.text, ports)
        : {
            hint: `In ${component.medium === "hydraulic" ? "hydraulics" : "pneumatics"} it is ${component.name}.${other}.`,
            data: { nearest: other },
          };
    this.report.error(
      "unknown-port",
      port.at,
      `${component.name ?? component.kind} has no port ${port.text}: it has ${listed([...ports].sort(), "and")}.`,
      guess,
    );
  }

  private readUnnamed(
    draft: CircuitDraft,
    kind: Exclude<FluidKind, "cylinder" | "valve">,
    end: LineEnd & { kind: "component" },
    arrives: boolean,
    leaves: boolean,
  ): ReadEnd | undefined {
    if (!this.mediumFits(draft, kind, end.name)) return undefined;
    if (kind === "electric-motor" || kind === "pressure-switch" || kind === "pump" || kind === "compressor") {
      this.report.error("name-missing", end.name.at, `${withArticle(kind)} needs a declaration and a designation.`.replace(/^a/, "A"));
      return undefined;
    }
    if (unnamedEnds.has(kind)) {
      if (end.port)
        this.report.error("unknown-port", end.port.at, `A component called by its kind has no named ports: declare it to name them.`);
      if (arrives && leaves) {
        this.report.error(
          "line-through-end",
          end.name.at,
          `${withArticle(kind)} ends a line; nothing goes on behind it.`.replace(/^a/, "A"),
        );
        return undefined;
      }
      return { unnamed: { kind, word: end.name }, at: end.at };
    }
    const made = this.make(draft, kind, end.name);
    return this.readComponentEnd(draft, made, end, arrives, leaves);
  }

  private mediumFits(draft: CircuitDraft, kind: FluidKind, word: Word): boolean {
    if (fluidMedia[kind].includes(draft.circuit.medium)) return true;
    this.report.error("wrong-medium", word.at, wrongMedium(kind, draft.circuit.medium));
    return false;
  }

  /** A component without a designation. */
  private make(draft: CircuitDraft, kind: Exclude<FluidKind, "cylinder" | "valve">, word: Word): ComponentDraft {
    const count = (this.counts.get(`${draft.circuit.id}/${kind}`) ?? 0) + 1;
    this.counts.set(`${draft.circuit.id}/${kind}`, count);
    const made = draftOf(bareComponent(`${draft.circuit.id}/${kind}${count}`, kind, draft.circuit.medium, word.at));
    draft.drafts.push(made);
    draft.circuit.components.push(made.component);
    return made;
  }

  private joinGroups(draft: CircuitDraft, left: ReadEnd[], right: ReadEnd[], properties: LineProperties, line: LineStatement): void {
    const from = left.flatMap(({ leaving, at }) => (leaving ? [{ joint: leaving, at }] : []));
    const to = right.flatMap(({ arriving, at }) => (arriving ? [{ joint: arriving, at }] : []));
    const [fromUnnamed, toUnnamed] = [left, right].map((ends) => ends.flatMap(({ unnamed }) => (unnamed ? [unnamed] : []))) as [
      NonNullable<ReadEnd["unnamed"]>[],
      NonNullable<ReadEnd["unnamed"]>[],
    ];
    if (from.length === 0 && to.length === 0) {
      if (fromUnnamed.length > 0 && toUnnamed.length > 0) {
        this.report.error("line-joins-nothing", line.role.at, "This line joins nothing that is declared.");
      }
      return;
    }
    // The first on each side is joined with every one opposite; that joins all of them.
    const [first, ...others] = from;
    const [opposite] = to;
    if (first && opposite) {
      for (const end of to) this.joinPair(draft, first.joint, end.joint, properties, between(first.at, end.at));
      for (const end of others) this.joinPair(draft, end.joint, opposite.joint, properties, between(end.at, opposite.at));
    }
    for (const unnamed of toUnnamed) {
      const ends = opposite && first ? [first] : from;
      for (const end of ends) this.joinUnnamed(draft, end, unnamed, "right", properties, between(end.at, unnamed.word.at));
    }
    for (const unnamed of fromUnnamed) {
      const ends = opposite && first ? [opposite] : to;
      for (const end of ends) this.joinUnnamed(draft, end, unnamed, "left", properties, between(unnamed.word.at, end.at));
    }
  }

  private joinUnnamed(
    draft: CircuitDraft,
    end: { joint: Joint; at: SourceRange },
    { kind, word }: NonNullable<ReadEnd["unnamed"]>,
    side: "left" | "right",
    properties: LineProperties,
    at: SourceRange,
  ): void {
    const made = this.make(draft, kind, word);
    const joint: Joint = { kind: "port", draft: made, port: made.component.ports[0]?.name as string };
    if (side === "right") this.joinPair(draft, end.joint, joint, properties, at);
    else this.joinPair(draft, joint, end.joint, properties, at);
  }

  private joinPair(draft: CircuitDraft, a: Joint, b: Joint, properties: LineProperties, at: SourceRange): void {
    if (
      a.kind === b.kind &&
      (a.kind === "point" ? a.point === (b as typeof a).point : a.draft === (b as typeof a).draft && a.port === (b as typeof a).port)
    ) {
      this.report.error("line-to-itself", at, "This line leads back to where it starts.");
      return;
    }
    const node = this.nodes.join(this.nodeOf(draft, a), this.nodeOf(draft, b));
    const { lines, id } = draft.circuit;
    lines.push({ id: `${id}/line${lines.length + 1}`, ...properties, node, ends: [endOf(a), endOf(b)], at });
  }

  private nodeOf(draft: CircuitDraft, joint: Joint): number {
    if (joint.kind === "point") return this.point(draft, joint.point);
    const port = joint.draft.component.ports.find(({ name }) => name === joint.port) as FluidPort;
    const known = this.ports.get(port);
    if (known !== undefined) return known;
    const node = this.nodes.add();
    this.ports.set(port, node);
    return node;
  }

  private readPlug(draft: CircuitDraft, plug: PlugStatement): void {
    for (const end of plug.ends) {
      if (end.kind === "point") {
        this.report.error("wrong-kind", end.at, "A plug closes a port, as in: plug V1.B");
        continue;
      }
      if (!end.port && this.byName.has(end.name.text) && this.byName.get(end.name.text)?.component.ports.length !== 1) {
        const ports = this.byName.get(end.name.text)?.component.ports.map(({ name }) => name) ?? [];
        this.report.error("port-missing", end.name.at, `Which port of ${end.name.text}? It has ${listed(ports, "and")}.`);
        continue;
      }
      const read = this.readEnd(draft, end, true, false);
      if (read?.arriving?.kind !== "port") continue;
      const { draft: target, port: name } = read.arriving;
      const port = target.component.ports.find((known) => known.name === name) as FluidPort;
      if (this.ports.has(port)) {
        this.report.error(
          "plugged-and-joined",
          end.at,
          `${target.component.name ?? target.component.kind}.${name} has a line and cannot be plugged as well.`,
        );
      } else port.plugged = true;
    }
  }

  /** Turns valves with a free direction so that free flow leads to what the author said. */
  private orientFlow(draft: CircuitDraft): void {
    for (const valve of draft.drafts) {
      if (!valve.freeTo || valve.namedPorts.has("in") || valve.namedPorts.has("out")) continue;
      if (!this.isKnownTarget(draft, valve)) continue;
      const [fromIn, fromOut] = ["in", "out"].map((port) => this.distance(draft, valve, port)) as [number, number];
      const written = valve.freeTo.kind === "point" ? `@${valve.freeTo.name}` : valve.freeTo.text;
      if (fromIn === Number.POSITIVE_INFINITY && fromOut === Number.POSITIVE_INFINITY) {
        this.report.error("free-to-not-reached", valve.freeTo.at, `No line leads from ${valve.component.name} to ${written}.`);
      } else if (fromIn < fromOut) this.swapPorts(draft, valve);
      else if (fromIn === fromOut) {
        this.report.error(
          "free-to-not-reached",
          valve.freeTo.at,
          `${written} lies on both sides of ${valve.component.name}: name the ports ${valve.component.name}.in and ${valve.component.name}.out in the lines.`,
        );
      }
    }
  }

  private isKnownTarget(draft: CircuitDraft, { freeTo }: ComponentDraft): boolean {
    if (!freeTo || freeTo.kind === "quantity" || freeTo.kind === "number") return false;
    if (freeTo.kind === "point") {
      if (draft.points.has(freeTo.name)) return true;
      this.report.error(
        "unknown-point",
        freeTo.at,
        `There is no @${freeTo.name} in this circuit.`,
        didYouMean(freeTo.name, draft.points.keys()),
      );
      return false;
    }
    const name = freeTo.kind === "part" ? freeTo.name : freeTo.text;
    if (this.byName.has(name)) return true;
    if (!this.names.isLost(name)) this.names.unknown({ text: name, at: freeTo.at }, (kind) => isFluidKind(kind));
    return false;
  }

  /** How many components lie between a port of a valve and what its free flow leads to, not going through the valve itself. */
  private distance(draft: CircuitDraft, valve: ComponentDraft, from: string): number {
    const start = valve.component.ports.find(({ name }) => name === from);
    const first = start && this.ports.get(start);
    if (first === undefined) return Number.POSITIVE_INFINITY;
    const goal = valve.freeTo;
    const point = goal?.kind === "point" ? draft.points.get(goal.name) : undefined;
    const joined = this.touching(draft);
    const seen = new Set<number>([this.nodes.find(first)]);
    let reached = [...seen];
    for (let steps = 0; reached.length > 0; steps++) {
      const next: number[] = [];
      for (const node of reached) {
        if (point !== undefined && this.nodes.find(point) === node) return steps;
        for (const { draft: other, port } of joined.get(node) ?? []) {
          if (other === valve) continue;
          if (goal?.kind === "word" && other.component.name === goal.text) return steps;
          if (goal?.kind === "part" && other.component.name === goal.name && port.name === goal.part) return steps;
          // A line that ends in a cylinder or directional valve ends there: what lies behind belongs to another line.
          if (other.component.kind === "cylinder" || other.component.kind === "valve") continue;
          for (const beyond of other.component.ports) {
            const provisional = this.ports.get(beyond);
            if (provisional === undefined) continue;
            const root = this.nodes.find(provisional);
            if (!seen.has(root)) {
              seen.add(root);
              next.push(root);
            }
          }
        }
      }
      reached = next;
    }
    return Number.POSITIVE_INFINITY;
  }

  private readonly touchingBy = new Map<CircuitDraft, Map<number, { draft: ComponentDraft; port: FluidPort }[]>>();

  /** What touches each node of a circuit. */
  private touching(draft: CircuitDraft): Map<number, { draft: ComponentDraft; port: FluidPort }[]> {
    const known = this.touchingBy.get(draft);
    if (known) return known;
    const found = new Map<number, { draft: ComponentDraft; port: FluidPort }[]>();
    for (const component of draft.drafts) {
      for (const port of component.component.ports) {
        const provisional = this.ports.get(port);
        if (provisional === undefined) continue;
        const root = this.nodes.find(provisional);
        const there = found.get(root);
        if (there) there.push({ draft: component, port });
        else found.set(root, [{ draft: component, port }]);
      }
    }
    this.touchingBy.set(draft, found);
    return found;
  }

  private readonly endsBy = new Map<CircuitDraft, Map<string, (FluidEnd & { kind: "port" })[]>>();

  /** The line ends at each component of a circuit. */
  private endsOf(draft: CircuitDraft): Map<string, (FluidEnd & { kind: "port" })[]> {
    const known = this.endsBy.get(draft);
    if (known) return known;
    const found = new Map<string, (FluidEnd & { kind: "port" })[]>();
    for (const end of draft.circuit.lines.flatMap(({ ends }) => ends)) {
      if (end.kind !== "port") continue;
      const there = found.get(end.component);
      if (there) there.push(end);
      else found.set(end.component, [end]);
    }
    this.endsBy.set(draft, found);
    return found;
  }

  private swapPorts(draft: CircuitDraft, { component }: ComponentDraft): void {
    const [inlet, outlet] = ["in", "out"].map((name) => component.ports.find((port) => port.name === name)) as [FluidPort, FluidPort];
    const [atInlet, atOutlet] = [this.ports.get(inlet), this.ports.get(outlet)];
    this.ports.delete(inlet);
    this.ports.delete(outlet);
    if (atInlet !== undefined) this.ports.set(outlet, atInlet);
    if (atOutlet !== undefined) this.ports.set(inlet, atOutlet);
    for (const end of this.endsOf(draft).get(component.id) ?? []) {
      if (end.port === "in") end.port = "out";
      else if (end.port === "out") end.port = "in";
    }
    const joined = this.touching(draft);
    for (const provisional of [atInlet, atOutlet]) {
      const there = provisional === undefined ? [] : (joined.get(this.nodes.find(provisional)) ?? []);
      for (const place of there) if (place.draft.component === component) place.port = place.port === inlet ? outlet : inlet;
    }
  }
}

export function wrongMedium(kind: FluidKind, medium: FluidCircuit["medium"]): string {
  const sentence = `${withArticle(kind)} does not belong in a ${medium} circuit.`;
  return `${sentence[0]?.toUpperCase()}${sentence.slice(1)}`;
}

function endOf(joint: Joint): FluidEnd {
  const at = joint.at && { at: joint.at };
  return joint.kind === "point"
    ? { kind: "point", point: joint.point, ...at }
    : { kind: "port", component: joint.draft.component.id, port: joint.port, ...at };
}

/** From the start of one place to the end of another. */
function between(from: SourceRange, to: SourceRange): SourceRange {
  const [first, last] = from.line < to.line || (from.line === to.line && from.column <= to.column) ? [from, to] : [to, from];
  return { ...first, endLine: last.endLine, endColumn: last.endColumn };
}
