import type { SourceRange } from "../language/diagnostic.js";
import type { Quantity } from "../language/quantity.js";
import type { SequenceBlock } from "../language/tree.js";

/** Names one thing that can be drawn. `CR1` is a device, `CR1:13-14` one contact of it, `V1/left` one end of a valve. */
export type PartId = string;

/** A value and who decided it. Only author against author is a conflict. */
export type Decided<T> = { value: T; by: "author"; at: SourceRange } | { value: T; by: string };

/** The whole machine: every name resolved, every unit converted. Every later stage reads this and nothing else. */
export interface Machine {
  drawing: DrawingInfo;
  /** Electrical devices by designation in order of declaration; solenoids stand where their valve declares them. */
  devices: ReadonlyMap<string, Device>;
  /** Fluid components by designation over all circuits. Unnamed ones (a local silencer or tank) are only in their circuit. */
  components: ReadonlyMap<string, FluidComponent>;
  supplies: Supply[];
  circuits: Circuit[];
  /** Electrical nodes over all ladders in drawing order; rails first. */
  potentials: Potential[];
  /** `cycle` and `trial` blocks as written. */
  sequences: SequenceBlock[];
}

export type Circuit = LadderCircuit | FluidCircuit | PowerCircuit;

export interface DrawingInfo {
  title: string;
  number: string;
  owner: string;
  creator: string;
  approvedBy: string;
  department: string;
  documentType: string;
  status: string;
  /** YYYY-MM-DD; the last revision's date unless given. Empty when there is none: nothing is taken from the clock. */
  date: string;
  language: string;
  revisions: { index: string; date: string; text: string }[];
  notes: string[];
  convention: "north-american" | "international";
  paper: PaperName;
  template: string;
  lineNumbers: "by-sheet" | "running";
  wireNumbers: "by-line" | "running";
  units: "metric" | "inch";
}

export type PaperName = "A4" | "A3" | "A2" | "A1" | "A0" | "ANSI-A" | "ANSI-B" | "ANSI-C" | "ANSI-D" | "ANSI-E";

// ---------------------------------------------------------------- electrical

/** Kinds of electrical device. A new kind is added here first; the compiler then finds every table that needs it. */
export type DeviceKind =
  | "relay"
  | "contactor"
  | "timer"
  | "latching-relay"
  | "counter"
  | "push-button"
  | "emergency-stop"
  | "selector-switch"
  | "key-switch"
  | "foot-switch"
  | "cable-pull"
  | "door-switch"
  | "limit-switch"
  | "proximity-switch"
  | "pressure-switch"
  | "vacuum-switch"
  | "flow-switch"
  | "level-switch"
  | "temperature-switch"
  | "overload"
  | "solenoid"
  | "pilot-light"
  | "horn"
  | "bell"
  | "heater"
  | "motor"
  | "fuse"
  | "circuit-breaker"
  | "disconnect"
  | "transformer"
  | "power-supply"
  | "rectifier"
  | "terminal-strip"
  | "plug"
  | "diode"
  | "resistor"
  | "input-card"
  | "output-card";

export interface Device {
  name: string;
  kind: DeviceKind;
  text?: string;
  note?: string;
  /** The maker's order code. */
  orderCode?: string;
  location?: string;
  at: SourceRange;
  /** Ratings and settings as printed, in reading order: `1.5 s`, `30 W`. */
  values: string[];
  /** Declared poles: normally open and normally closed. Absent: as many as are used. */
  poles?: { no: number; nc: number };
  /** Contactors, fuses, breakers and disconnects: how many conductors pass through. Absent: as many as the circuit has. */
  ways?: number;
  /** Timers. */
  delay?: { mode: "on-delay" | "off-delay"; time: Quantity };
  /** Coils: rated power, its inrush, and how long the armature takes. */
  coil?: { power?: Quantity; inrush?: Quantity; pickup?: Quantity; dropout?: Quantity };
  /** Push-buttons. `lamp` is the pilot light in the button. */
  button?: { action: "momentary" | "maintained"; mushroom: boolean; lamp?: string };
  /** Proximity switches. */
  wires?: 2 | 3;
  /** Pilot lights. */
  lamp?: { pushToTest: boolean };
  /** Counters: the count at which the contacts change over. */
  preset?: number;
  /** Controller cards: how many points. */
  points?: number;
  /** What a load, a motor or a controller's card is made for. */
  voltage?: Rating;
  /** Transformers, power supplies, rectifiers: what goes in and what comes out. */
  conversion?: { primary?: Rating; secondary?: Rating };
  /** Selector and key switches: positions in order and the one drawn. */
  selector?: { positions: string[]; start: string };
  colour?: string;
  /** Limit and proximity switches: where on the machine they are operated. */
  place?: SwitchPlace;
  /**
   * Pressure, vacuum, flow, level and temperature switches: the fluid point they sense, if it is drawn, with the settings.
   * `component` without `port` is the tank a level or temperature switch stands in. A vacuum may be written below nought or above
   * it, and means the same: how far the pressure is below that of the air; `rising` is where it gets deeper.
   */
  senses?: { component?: string; port?: string; point?: string; rising?: Quantity; falling?: Quantity };
  /** Overloads: the motor guarded. */
  guards?: string;
  /** Solenoids: the valve that carries them and at which end. */
  valve?: { name: string; side: "left" | "right" };
  /** Uses in rungs, in drawing order. */
  contacts: ContactUse[];
  loads: LoadUse[];
  /** Fuses, terminals, plugs and the like in rungs, in drawing order. */
  throughs: ThroughUse[];
  /** Uses in power circuits, in drawing order: main contacts of a contactor, poles of a breaker, leads of a motor. */
  mains: MainUse[];
}

/** A voltage with its kind of current. */
export interface Rating {
  voltage: Quantity;
  current?: "AC" | "DC";
}

/** A stretch of a cylinder's stroke in mm from retracted, in which a switch is operated. */
export interface SwitchPlace {
  cylinder: string;
  from: number;
  to: number;
  /** How the author put it. */
  written: "retracted" | "extended" | "at" | "from-to";
  /** Where the text says so. */
  at?: SourceRange;
}

export interface Supply {
  name: string;
  voltage?: Quantity;
  current: "AC" | "DC";
  frequency?: Quantity;
  /** The live rail (left or top) and the return rail (right or bottom). */
  rails: [string, string];
  fuse?: { name: string; rating: string };
  /** The transformer or power supply whose secondary the rails are. */
  from?: string;
  /** The branch of a power circuit that ends in the rails. */
  branch?: PartId;
  /** It stays live with the machine's disconnect open (IEC 60204-1, excepted circuits). */
  excepted?: true;
  at: SourceRange;
}

export interface LadderCircuit {
  kind: "ladder";
  id: PartId;
  title: string;
  supply: Supply;
  rungs: Rung[];
  /** Rungs before which the author asked for a new sheet, with its title. */
  sheetBreaks: { before: number; title?: string }[];
  at: SourceRange;
}

export interface Rung {
  id: PartId;
  title?: string;
  /** Where its left and right ends join: a rail, or a point written first or last in the rung. */
  start: RungEnd;
  end: RungEnd;
  path: SeriesPath;
  /** Something in it could not be understood and has its diagnostic: what is left may not join up, and is not judged further. */
  incomplete?: boolean;
  at: SourceRange;
}

export type RungEnd = { kind: "rail"; node: NodeId } | { kind: "point"; point: string; node: NodeId; at: SourceRange };

/** Things one after another from the live side to the return side. Never nested directly in another series. */
export interface SeriesPath {
  kind: "series";
  items: (ParallelPath | RungElement)[];
  from: NodeId;
  to: NodeId;
}

/** Two or more branches between the same two nodes. A branch with no items is a plain wire. */
export interface ParallelPath {
  kind: "parallel";
  branches: SeriesPath[];
  from: NodeId;
  to: NodeId;
}

export type RungElement = DeviceUse | PointUse;

/** What stands in a rung on behalf of a device and has two pins. */
export type DeviceUse = ContactUse | LoadUse | ThroughUse;

/** One contact of a device in a rung. `from` is its left node, `to` its right node. */
export interface ContactUse {
  kind: "contact";
  id: PartId;
  device: string;
  form: "NO" | "NC";
  /** A timer's delayed contact. */
  timed: boolean;
  /** Selector and key switches: the position in which it is closed (NO) or open (NC). */
  position?: string;
  /** Output cards: the point that drives the rung, `3` of `Q0.3`. */
  point?: string;
  /** e.g. ["13", "14"]; empty strings for a device whose contacts carry no numbers. */
  terminals: Decided<[string, string]>;
  from: NodeId;
  to: NodeId;
  rung: PartId;
  at: SourceRange;
}

export interface LoadUse {
  kind: "load";
  id: PartId;
  device: string;
  /** Which of its coils, for a device that has several: latching relays `set` and `reset`, counters `count` and `reset`. */
  coil?: "set" | "reset" | "count";
  /** Input cards: the point that is driven, `5` of `I0.5`. */
  point?: string;
  terminals: Decided<[string, string]>;
  from: NodeId;
  to: NodeId;
  rung: PartId;
  at: SourceRange;
}

/** Something the current passes through that neither opens by itself nor is driven: a fuse, a breaker, a terminal, a plug, a diode, a resistor. */
export interface ThroughUse {
  kind: "through";
  id: PartId;
  device: string;
  /** Terminal strips and plugs: the terminal or pin, `4` of `X1:4`. Both sides are then one node. */
  pin?: string;
  terminals: Decided<[string, string]>;
  from: NodeId;
  to: NodeId;
  rung: PartId;
  at: SourceRange;
}

/** A `@point` within a rung; it has no length. */
export interface PointUse {
  kind: "point";
  id: PartId;
  point: string;
  from: NodeId;
  /** Same as `from`. */
  to: NodeId;
  rung: PartId;
  at: SourceRange;
}

export type NodeId = number;

/** Everything joined by wire with no device between. */
export interface Potential {
  id: NodeId;
  /** Set for a rail. */
  rail?: string;
  /** Points that name it. */
  points: string[];
  /** Wire number, as printed over the wire. Rails and the conductors of a feed carry their own name, conductors behind a device the name of theirs. Running numbers are known here; by-line numbers are filled after layout. */
  number: Decided<string>;
}

/** Conductors drawn together: from the incoming feed over the busbars to motors and to the supplies of the ladders. */
export interface PowerCircuit {
  kind: "power";
  id: PartId;
  title: string;
  voltage?: Quantity;
  current: "AC" | "DC";
  frequency?: Quantity;
  /** What comes in and becomes the busbars. */
  feed: PowerFeed;
  branches: PowerBranch[];
  /** Branches before which the author asked for a new sheet, with its title. */
  sheetBreaks: { before: number; title?: string }[];
  at: SourceRange;
}

export interface PowerFeed {
  id: PartId;
  /** As they come in: phases, neutral, protective conductor. */
  conductors: Conductor[];
  path: MainUse[];
  /** Behind the path: the busbars. */
  bus: Conductor[];
  at: SourceRange;
}

/** One wire of those that run together. */
export interface Conductor {
  /** Which it is among them: `L1`, `N`, `PE`; behind a transformer or a power supply `X1`, `L+`. */
  phase: string;
  node: NodeId;
}

/** Elements one after another over several conductors, from where it is tapped to what it feeds. */
export interface PowerBranch {
  id: PartId;
  title?: string;
  /** The busbars, a point of an earlier branch, or the star point of a motor. */
  start: { kind: "bus" } | { kind: "point"; point: string } | { kind: "star" };
  conductors: Conductor[];
  path: (MainUse | PowerParallel | PowerPoint)[];
  end: PowerEnd;
  /** Something in it could not be understood and has its diagnostic. */
  incomplete?: boolean;
  at: SourceRange;
}

export type PowerEnd =
  /** Its last element is what it feeds: a motor, a heater, a transformer whose secondary nobody takes further. */
  | { kind: "load" }
  /** The second ends of a motor's windings. */
  | { kind: "second"; device: string; conductors: Conductor[] }
  /** The rails of a ladder's supply. */
  | { kind: "supply"; supply: string; conductors: Conductor[] }
  /** A point from which other branches go on, or nothing at all. */
  | { kind: "open"; conductors: Conductor[] };

/** Two or more ways side by side between the same conductors: a reversing pair, a bypass. */
export interface PowerParallel {
  kind: "power-parallel";
  ways: (MainUse | PowerPoint)[][];
  /** Conductors before and behind. */
  from: Conductor[];
  to: Conductor[];
}

/** A `@point` on all conductors of a branch; it has no length. */
export interface PowerPoint {
  kind: "power-point";
  id: PartId;
  point: string;
  conductors: Conductor[];
  at: SourceRange;
}

/**
 * What stands in a power circuit on behalf of a device. Where the current passes through, `ins` and `outs` pair up pole by pole;
 * a transformer, a power supply or a rectifier gives other conductors than it takes; a load has no `outs`.
 */
export interface MainUse {
  kind: "main";
  id: PartId;
  device: string;
  role: "through" | "conversion" | "load";
  ins: MainPin[];
  outs: MainPin[];
  /** Motors: the second ends of the windings, which branches that end in `NAME.2` lead to. Only on the first use of a motor. */
  second?: MainPin[];
  /** Motors and heaters: the node of the protective conductor at the frame. */
  frame?: NodeId;
  /** The first and the last phase change places behind it. */
  crossed?: boolean;
  /** The kind of current that reaches it. */
  current: "AC" | "DC";
  branch: PartId;
  at: SourceRange;
}

export interface MainPin {
  terminal: string;
  phase: string;
  node: NodeId;
}

// ---------------------------------------------------------------- fluid

export type Medium = "hydraulic" | "pneumatic";

export type FluidKind =
  | "tank"
  | "pump"
  | "electric-motor"
  | "compressor"
  | "air-supply"
  | "service-unit"
  | "filter"
  | "cylinder"
  | "valve"
  | "relief-valve"
  | "check-valve"
  | "pilot-operated-check-valve"
  | "throttle"
  | "one-way-flow-control"
  | "silencer"
  | "gauge"
  | "pressure-switch"
  | "vacuum-switch"
  | "flow-switch"
  | "level-switch"
  | "temperature-switch"
  | "shut-off-valve"
  | "exhaust";

export interface FluidCircuit {
  kind: "fluid";
  id: PartId;
  title: string;
  medium: Medium;
  components: FluidComponent[];
  nodes: FluidNode[];
  /** Stretches as written, one for each pair of neighbours, in order. */
  lines: FluidLine[];
  /** Components before which the author asked for a new sheet. */
  sheetBreaks: { before: number; title?: string }[];
  /** Some line could not be read whole and has its diagnostic: what a port is joined to is not known for certain. */
  incomplete?: boolean;
  at: SourceRange;
}

export interface FluidComponent {
  id: PartId;
  /** Absent for a component the author only called by its kind. */
  name?: string;
  kind: FluidKind;
  medium: Medium;
  text?: string;
  note?: string;
  /** The maker's order code. */
  orderCode?: string;
  location?: string;
  /** The data printed beside it: `40/16 × 60`, `5.5 bar`. */
  values: string[];
  ports: FluidPort[];
  cylinder?: CylinderSpec;
  valve?: ValveSpec;
  /** Pumps: the motor that drives it, if it has one. A motor declared as a device also stands in the circuit as an `electric-motor`. */
  drivenBy?: string;
  /** Relief valves: the pressure they open at. */
  setting?: Quantity;
  at: SourceRange;
}

/**
 * Port names by kind (the symbols use the same):
 * tank `T`; pump, compressor `S` (suction) `P`; air-supply `1`; service-unit, filter `in` `out`; cylinder `cap` `rod`;
 * hydraulic valve `P T A B X Y`; pneumatic valve `1 2 3 4 5 12 14`; 2/2 valves `P A` or `1 2`; relief-valve `P T`;
 * check-valve `in` `out` (free flow in → out); pilot-operated-check-valve `in` `out` `X`; throttle, shut-off-valve `in` `out`;
 * one-way-flow-control `in` `out` (free flow in → out); silencer, exhaust `in`; gauge and the switches that sense a fluid `P`.
 */
export interface FluidPort {
  name: string;
  node?: FluidNodeId;
  plugged: boolean;
}

export type FluidNodeId = number;

/** Everything joined by line with no component between. */
export interface FluidNode {
  id: FluidNodeId;
  points: string[];
  ports: { component: PartId; port: string }[];
}

export interface FluidLine {
  id: PartId;
  role: "working" | "pilot" | "drain" | "exhaust";
  node: FluidNodeId;
  ends: [FluidEnd, FluidEnd];
  hose: boolean;
  size?: Quantity;
  at: SourceRange;
}

export type FluidEnd = ({ kind: "port"; component: PartId; port: string } | { kind: "point"; point: string }) & { at?: SourceRange };

export interface CylinderSpec {
  action: "double-acting" | "single-acting";
  bore?: Quantity;
  rod?: Quantity;
  stroke?: Quantity;
  cushion: "none" | "fixed" | "adjustable";
  /** Single-acting: what brings it back; `load` when nothing is said. `spring-extend` pushes the rod out. */
  returnedBy?: "spring" | "spring-extend" | "load";
  /** mm from retracted. */
  start: number;
  /** Switches along the stroke, in order of place. */
  switches: { device: string; from: number; to: number }[];
}

export type ActuatorKind =
  | "solenoid"
  | "proportional-solenoid"
  | "piloted-solenoid"
  | "spring"
  | "detent"
  | "pilot"
  | "push-button"
  | "lever"
  | "pedal"
  | "roller"
  | "plunger";

export interface ValveActuator {
  kind: ActuatorKind;
  /** The coil's designation. */
  solenoid?: string;
  override: boolean;
}

export interface ValveSpec {
  ports: 2 | 3 | 4 | 5;
  positions: 2 | 3;
  /** What each box joins, left to right, in the codes of `src/symbols/valve-positions.ts`, e.g. ["P>A·B>T", "P>B·A>T"]. */
  boxes: string[];
  /** The box its lines are drawn to when nothing acts: 0 is leftmost. Absent for a valve with no normal position. */
  normal?: number;
  /** `start` as written. */
  start?: "left" | "right";
  /** Innermost first. */
  left: ValveActuator[];
  right: ValveActuator[];
}
