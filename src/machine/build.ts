import type { Diagnostic } from "../language/diagnostic.js";
import type { Declaration, DrawingBlock, FluidBlock, LadderBlock, SequenceBlock, Tree, Word } from "../language/tree.js";
import { type ComponentDraft, readComponent } from "./components.js";
import { readCylinder } from "./cylinder.js";
import type { DeviceDraft } from "./device-words.js";
import { readDevice } from "./devices.js";
import { turnDiodes } from "./diodes.js";
import { readDrawingInfo } from "./drawing.js";
import { type CircuitDraft, LineBuilder, wrongMedium } from "./fluid-lines.js";
import { declarationWords, fluidMedia, isDeviceKind, isFluidKind, isSensorKind, laterKinds } from "./kinds.js";
import { linkDevices, linkDrives, linkSensors, linkSolenoids, linkSwitches, putSensor } from "./links.js";
import type {
  Circuit,
  Device,
  DeviceKind,
  DrawingInfo,
  FluidComponent,
  FluidKind,
  LadderCircuit,
  Machine,
  Medium,
  Supply,
} from "./model.js";
import { Names } from "./names.js";
import { numberPotentials } from "./potentials.js";
import { PowerBuilder } from "./power.js";
import { capital, didYouMean, listed, Report, withArticle } from "./report.js";
import { RungBuilder } from "./rungs.js";
import { linkSupplies, readSupply, type SupplyDraft, unsaidSupply } from "./supplies.js";
import { allotTerminals } from "./terminals.js";
import { readValve } from "./valve.js";

/**
 * Turns what the text says into the machine: every name looked up, every unit converted, every contact on its terminals, every
 * wire and fluid line part of its node. There is always a machine; what could not be understood is missing from it and has its
 * diagnostic. Never throws for bad input.
 */
export function buildMachine(tree: Tree, overrides: Overrides = {}): { machine: Machine; diagnostics: Diagnostic[] } {
  return new MachineBuilder(tree, overrides).build();
}

/** What the caller decides instead of the drawing's text. */
export type Overrides = Partial<Pick<DrawingInfo, "convention">>;

class MachineBuilder {
  private readonly report = new Report();
  private readonly names = new Names(this.report);
  private readonly info: DrawingInfo;
  private readonly supplies: Supply[] = [];
  private readonly supplyDrafts: SupplyDraft[] = [];
  private readonly devices = new Map<string, Device>();
  private readonly deviceDrafts: DeviceDraft[] = [];
  private readonly components = new Map<string, ComponentDraft>();
  private readonly circuitOf = new Map<ComponentDraft, CircuitDraft>();
  private readonly fluids: CircuitDraft[] = [];
  private readonly sequences: SequenceBlock[] = [];

  constructor(
    private readonly tree: Tree,
    overrides: Overrides,
  ) {
    const blocks = tree.statements.filter((statement): statement is DrawingBlock => statement.kind === "drawing");
    this.info = { ...readDrawingInfo(blocks, tree.file, this.report), ...overrides };
  }

  build(): { machine: Machine; diagnostics: Diagnostic[] } {
    this.declareAll();
    linkDrives(this.fluids, this.devices, this.components, this.names, this.report);
    const lines = this.readLines();
    linkDevices(this.deviceDrafts, this.devices, this.components, this.names, this.report);
    for (const fluid of this.fluids) lines.finish(fluid);
    const components = this.namedComponents();
    linkSupplies(this.supplyDrafts, this.devices, this.names, this.report);
    linkSwitches(this.deviceDrafts, components, this.names, this.report);

    const rungs = new RungBuilder(this.devices, this.names, this.report);
    const power = new PowerBuilder(this.devices, this.supplies, rungs, this.info.convention, this.names, this.report);
    const circuits = this.readCircuits(rungs, power);
    power.finish();
    const named = rungs.finish((number) => power.numberNodes(number));
    power.nameConductors(named);
    const potentials = numberPotentials(named, this.info.wireNumbers);
    turnDiodes(
      circuits.filter((circuit) => circuit.kind === "ladder"),
      this.devices,
    );
    for (const device of this.devices.values()) allotTerminals(device, this.report);

    const machine: Machine = {
      drawing: this.info,
      devices: this.devices,
      components,
      supplies: this.supplies,
      circuits,
      potentials,
      sequences: this.sequences,
    };
    return { machine, diagnostics: this.report.diagnostics };
  }

  /** Takes every declaration, so that what follows may name anything anywhere. */
  private declareAll(): void {
    let fluids = 0;
    for (const statement of this.tree.statements) {
      switch (statement.kind) {
        case "declaration":
          this.declare(statement);
          break;
        case "ladder":
        case "power":
          for (const inner of statement.statements) if (inner.kind === "declaration") this.declare(inner);
          break;
        case "fluid":
          this.declareCircuit(statement, `fluid${++fluids}`);
          break;
        case "cycle":
        case "trial":
          this.sequences.push(statement);
          break;
        case "drawing":
          break;
      }
    }
  }

  private declareCircuit(block: FluidBlock, id: string): void {
    const medium = this.mediumOf(block);
    const fluid: CircuitDraft = {
      circuit: {
        kind: "fluid",
        id,
        title: block.title?.text ?? "",
        medium,
        components: [],
        nodes: [],
        lines: [],
        sheetBreaks: [],
        at: block.at,
      },
      block,
      points: new Map(),
      drafts: [],
    };
    this.fluids.push(fluid);
    for (const statement of block.statements) {
      if (statement.kind === "declaration") this.declare(statement, fluid);
      else if (statement.kind === "sheet-break") {
        fluid.circuit.sheetBreaks.push({ before: fluid.circuit.components.length, title: statement.title?.text });
      }
    }
  }

  private mediumOf({ medium, title, at }: FluidBlock): Medium {
    if (medium?.text === "hydraulic" || medium?.text === "pneumatic") return medium.text;
    if (medium) {
      this.report.error(
        "value-unknown",
        medium.at,
        `A fluid circuit is hydraulic or pneumatic, not "${medium.text}".`,
        didYouMean(medium.text, ["hydraulic", "pneumatic"]),
      );
    } else {
      this.report.error(
        "property-missing",
        title?.at ?? { ...at, endLine: at.line, endColumn: at.column + "fluid".length },
        'A fluid circuit is "hydraulic" or "pneumatic": say which.',
      );
    }
    return "pneumatic";
  }

  /** One declaration, within a fluid circuit or outside. */
  private declare(declaration: Declaration, fluid?: CircuitDraft): void {
    const { keyword } = declaration;
    const kind = keyword.text;
    if (kind === "supply") {
      this.declareSupply(declaration);
      return;
    }
    if (laterKinds.has(kind) && (fluid || !isDeviceKind(kind))) {
      this.report.error("not-yet-supported", keyword.at, `${capital(withArticle(kind))} is not yet supported.`);
      if (declaration.name && this.names.kindOf(declaration.name.text) === undefined) {
        this.names.claim(declaration.name, kind);
        this.names.lose(declaration.name.text);
      }
      return;
    }
    if (!isDeviceKind(kind) && !isFluidKind(kind)) {
      this.unknownKind(declaration);
      return;
    }
    const { name } = declaration;
    if (!name) {
      this.report.error(
        "name-missing",
        keyword.at,
        `${capital(withArticle(kind))} needs a designation, as in "${kind} ${usualNames[kind] ?? "X1"}".`,
        declaration.text ? { hint: "The designation stands before the text." } : {},
      );
      return;
    }
    if (isDeviceKind(kind)) this.declareDevice({ ...declaration, name }, kind, fluid);
    else this.declareComponent({ ...declaration, name }, kind, fluid);
  }

  private unknownKind({ keyword, name }: Declaration): void {
    const guess = didYouMean(keyword.text, [
      ...declarationWords,
      ...laterKinds,
      "rung",
      "line",
      "ladder",
      "fluid",
      "drawing",
      "sheet",
      "include",
    ]);
    this.report.error("unknown-kind", keyword.at, `"${keyword.text}" is not a kind of device or component.`, guess);
    // Its uses would say no more than this.
    if (name) this.names.lose(name.text);
  }

  private declareSupply(declaration: Declaration): void {
    const { name, keyword } = declaration;
    if (!name) {
      this.report.error("name-missing", keyword.at, 'A supply needs a name, as in "supply CTRL 24 V DC".');
      return;
    }
    const draft = readSupply({ ...declaration, name }, this.report);
    if (!this.names.claim(name, "supply")) return;
    this.supplies.push(draft.supply);
    this.supplyDrafts.push(draft);
    if (draft.fuse) this.names.claim(draft.fuse, "fuse");
  }

  private declareDevice(declaration: Declaration & { name: Word }, kind: DeviceKind, fluid?: CircuitDraft): void {
    const draft = readDevice(declaration, kind, this.report);
    const { name } = declaration;
    const known = this.devices.get(name.text);
    // A coil its valve has already brought in may still be declared, once, for a text of its own.
    if (kind === "solenoid" && known?.kind === "solenoid" && !this.deviceDrafts.some(({ device }) => device.name === name.text)) {
      Object.assign(known, { ...draft.device, valve: known.valve, text: draft.device.text ?? known.text });
      this.deviceDrafts.push({ ...draft, device: known });
      return;
    }
    if (!this.names.claim(name, kind)) return;
    this.devices.set(name.text, draft.device);
    this.deviceDrafts.push(draft);
    if (fluid && isSensorKind(kind) && !draft.on) this.circuitOf.set(putSensor(draft.device, kind, fluid, this.components), fluid);
  }

  private declareComponent(declaration: Declaration & { name: Word }, kind: FluidKind, fluid?: CircuitDraft): void {
    const { name, keyword } = declaration;
    if (!fluid) {
      this.report.error("component-outside-circuit", keyword.at, `${capital(withArticle(kind))} is declared within its fluid circuit.`, {
        hint: 'Move it into a "fluid … { }" block.',
      });
      if (this.names.claim(name, kind)) this.names.lose(name.text);
      return;
    }
    const { medium } = fluid.circuit;
    if (!fluidMedia[kind].includes(medium)) this.report.error("wrong-medium", keyword.at, wrongMedium(kind, medium));
    const valve = kind === "valve" ? readValve(declaration, medium, this.report) : undefined;
    const draft =
      valve ??
      (kind === "cylinder"
        ? readCylinder(declaration, medium, this.info, this.report)
        : readComponent(declaration, kind as Exclude<FluidKind, "cylinder" | "valve">, medium, this.report));
    if (!this.names.claim(name, kind)) return;
    fluid.drafts.push(draft);
    fluid.circuit.components.push(draft.component);
    this.components.set(name.text, draft);
    this.circuitOf.set(draft, fluid);
    if (valve) linkSolenoids(valve, this.devices, this.names, this.report);
  }

  private readLines(): LineBuilder {
    const lines = new LineBuilder(this.components, this.circuitOf, this.names, this.report);
    for (const fluid of this.fluids) lines.readLines(fluid);
    linkSensors(this.deviceDrafts, this.fluids, this.components, lines, this.names, this.report);
    return lines;
  }

  private namedComponents(): Map<string, FluidComponent> {
    const components = new Map<string, FluidComponent>();
    for (const { circuit } of this.fluids) {
      for (const component of circuit.components) if (component.name !== undefined) components.set(component.name, component);
    }
    return components;
  }

  /** Circuits in the order written. */
  private readCircuits(rungs: RungBuilder, power: PowerBuilder): Circuit[] {
    const circuits: Circuit[] = [];
    let [ladders, powers, fluids] = [0, 0, 0];
    for (const statement of this.tree.statements) {
      if (statement.kind === "ladder") circuits.push(this.readLadder(rungs, statement, `ladder${++ladders}`));
      else if (statement.kind === "power") circuits.push(power.readPower(statement, `power${++powers}`));
      else if (statement.kind === "fluid") circuits.push((this.fluids[fluids++] as CircuitDraft).circuit);
    }
    for (const circuit of circuits) this.checkSheetBreaks(circuit);
    return circuits;
  }

  private readLadder(rungs: RungBuilder, block: LadderBlock, id: string): LadderCircuit {
    return rungs.readLadder(block, id, this.supplyOf(block));
  }

  private supplyOf({ supply: word, at, title }: LadderBlock): Supply {
    const [first, ...others] = this.supplies;
    if (!word) {
      if (others.length > 0) {
        this.report.error(
          "property-missing",
          title?.at ?? { ...at, endLine: at.line, endColumn: at.column + "ladder".length },
          `Which supply feeds this ladder? There are ${listed(
            this.supplies.map(({ name }) => name),
            "and",
          )}.`,
        );
      }
      return first ?? unsaidSupply(at);
    }
    const named = this.supplies.find(({ name }) => name === word.text);
    if (!named) {
      const guess = didYouMean(
        word.text,
        this.supplies.map(({ name }) => name),
      );
      this.report.error("unknown-name", word.at, `There is no supply ${word.text} in this drawing.`, {
        ...guess,
        hint: guess.hint ?? `Declare it, as in "supply ${word.text} 24 V DC { rails L+ M }".`,
      });
    }
    return named ?? first ?? unsaidSupply(at);
  }

  /** A new sheet needs something before and behind it. */
  private checkSheetBreaks(circuit: Circuit): void {
    const length =
      circuit.kind === "ladder" ? circuit.rungs.length : circuit.kind === "fluid" ? circuit.components.length : circuit.branches.length;
    circuit.sheetBreaks = circuit.sheetBreaks.filter(({ before }, index, all) => before < length && all[index + 1]?.before !== before);
  }
}

const usualNames: Partial<Record<DeviceKind | FluidKind, string>> = {
  relay: "CR1",
  contactor: "MS1",
  timer: "TR1",
  "push-button": "PB1",
  "emergency-stop": "ES1",
  "selector-switch": "SS1",
  "limit-switch": "LS1",
  "proximity-switch": "PRS1",
  "pressure-switch": "PS1",
  "vacuum-switch": "VS1",
  "flow-switch": "FLS1",
  "level-switch": "FS1",
  "temperature-switch": "TAS1",
  "latching-relay": "KL1",
  counter: "CTR1",
  "key-switch": "KS1",
  "foot-switch": "FTS1",
  "cable-pull": "CP1",
  "door-switch": "DS1",
  overload: "OL1",
  solenoid: "SOL1",
  "pilot-light": "LT1",
  horn: "AH1",
  bell: "ABE1",
  heater: "HTR1",
  fuse: "FU1",
  "circuit-breaker": "CB1",
  disconnect: "DISC1",
  transformer: "T1",
  "power-supply": "PWS1",
  rectifier: "REC1",
  plug: "XP1",
  diode: "D1",
  resistor: "RES1",
  "input-card": "I0",
  "output-card": "Q0",
  motor: "M1",
  cylinder: "CYL1",
  valve: "V1",
};
