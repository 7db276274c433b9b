import type { StartState } from "../behaviour/start-state.js";
import type { CylinderSpec, Device, DeviceKind, DeviceUse, DrawingInfo, FluidComponent, FluidKind } from "../machine/model.js";
import { composeCylinder } from "./cylinder.js";
import type { SymbolLibrary } from "./library.js";
import type { Symbol } from "./symbol.js";
import { composeValve } from "./valve.js";
import { withTexts } from "./with-texts.js";

/** What a contact or load looks like depends on its device, on the contact and on whether the machine holds it operated at the start. */
interface Drawn {
  device: Device;
  use: DeviceUse;
  held: boolean;
}

/** The symbol of a contact or load in the state drawn. */
export function symbolForDevice(
  use: DeviceUse,
  device: Device,
  start: StartState,
  convention: DrawingInfo["convention"],
  library: SymbolLibrary,
): Symbol {
  const drawn = { device, use, held: start.held.has(device.name) };
  const symbol = library.get(`${convention}/${deviceSymbols[device.kind](drawn)}`);
  const texts = deviceTexts[device.kind]?.(drawn);
  return texts ? withTexts(symbol, texts.words, texts.height) : symbol;
}

/** `no` or `nc`. */
const form = (use: DeviceUse): "no" | "nc" => (use.kind === "contact" && use.form === "NC" ? "nc" : "no");

const contact =
  (name: string) =>
  ({ use }: Drawn): string =>
    `${name}-${form(use)}`;

/** A contact of a relay, a coil otherwise. */
const relay = ({ use }: Drawn): string => (use.kind === "load" ? "coil" : `contact-${form(use)}`);

/** A switch that the machine may hold: its name and terminals stay those of its form, its arm shows the state. */
const heldSwitch =
  (name: string) =>
  ({ use, held }: Drawn): string => {
    const state = form(use) === "no" ? "no-held-closed" : "nc-held-open";
    return `${name}-${held ? state : form(use)}`;
  };

/** Symbols of each kind, the same names in the folders of both conventions. */
const deviceSymbols: Record<DeviceKind, (drawn: Drawn) => string> = {
  relay,
  contactor: relay,
  timer: (drawn) => {
    const { device, use } = drawn;
    if (use.kind === "load") return device.delay?.mode === "off-delay" ? "coil-off-delay" : "coil-on-delay";
    return use.kind === "contact" && use.timed ? `timed-${form(use)}-${device.delay?.mode === "off-delay" ? "off" : "on"}` : relay(drawn);
  },
  "push-button": ({ device, use }) => {
    const { action, mushroom } = device.button ?? { action: "momentary", mushroom: false };
    const style = mushroom ? "-mushroom" : action === "maintained" ? "-maintained" : "";
    return `push-button${style}-${form(use)}`;
  },
  "emergency-stop": ({ use }) => `emergency-stop-${form(use)}`,
  "selector-switch": (drawn) => {
    const { positions, at } = selectorOf(drawn);
    const state = closedIn(drawn)[at] ? "closed" : "open";
    return positions.length === 2 || positions.length === 3
      ? `selector-${positions.length}-at-${at + 1}-${state}`
      : `selector-many-${state}`;
  },
  "limit-switch": heldSwitch("limit"),
  "proximity-switch": heldSwitch("proximity"),
  "pressure-switch": ({ use }) => `pressure-${form(use)}`,
  overload: ({ use }) => `overload-${form(use)}`,
  solenoid: () => "solenoid",
  "pilot-light": () => "pilot-light",
  horn: () => "horn",
  motor: () => "motor-3ph",
  "latching-relay": relay,
  counter: relay,
  "key-switch": relay,
  "foot-switch": contact("foot-switch"),
  "cable-pull": contact("pull-switch"),
  "door-switch": contact("limit"),
  "vacuum-switch": contact("vacuum"),
  "flow-switch": contact("flow"),
  "level-switch": contact("level"),
  "temperature-switch": contact("temperature"),
  bell: () => "bell",
  heater: () => "heater",
  fuse: () => "fuse",
  "circuit-breaker": () => "circuit-breaker-1p",
  disconnect: () => "circuit-breaker-1p",
  transformer: () => "transformer-control",
  "power-supply": () => "transformer-control",
  rectifier: () => "transformer-control",
  "terminal-strip": () => "terminal",
  plug: () => "plug",
  diode: () => "diode",
  resistor: () => "resistor",
  "input-card": () => "plc-input",
  "output-card": () => "plc-output",
};

/** What is written into a symbol; designations and terminals are the layout's. */
const deviceTexts: Partial<Record<DeviceKind, (drawn: Drawn) => { words: Record<string, string>; height: number } | undefined>> = {
  "pilot-light": ({ device }) => (device.colour ? { words: { letter: colourLetter(device.colour) }, height: 2.5 } : undefined),
  "selector-switch": (drawn) => {
    if (drawn.use.kind !== "contact") return undefined;
    const states = closedIn(drawn);
    const { positions } = selectorOf(drawn);
    if (states.length > 3) return { words: { "state-1": positions.filter((_, index) => states[index]).join(", ") }, height: 1.8 };
    // Target letters: X where the contact is closed, O where it is open.
    return { words: Object.fromEntries(states.map((closed, index) => [`state-${index + 1}`, closed ? "X" : "O"])), height: 1.8 };
  },
};

/** Letters in pilot lights as the trade writes them in north-american drawings (common practice); C is clear. */
function colourLetter(colour: string): string {
  return colour.slice(0, 1).toUpperCase();
}

/** The positions of a selector and the index of the one drawn. */
function selectorOf({ device }: Drawn): { positions: readonly string[]; at: number } {
  const { positions, start } = device.selector ?? { positions: ["0", "1"], start: "0" };
  return { positions, at: Math.max(0, positions.indexOf(start)) };
}

/** Whether this contact is closed, for each position of its selector. */
function closedIn(drawn: Drawn): boolean[] {
  const { use } = drawn;
  const { positions } = selectorOf(drawn);
  const normallyOpen = form(use) === "no";
  return positions.map((position) => (use.kind === "contact" && position === use.position) === normallyOpen);
}

/** The symbol of a fluid component in the state drawn. */
export function symbolForComponent(component: FluidComponent, start: StartState, library: SymbolLibrary): Symbol {
  return componentSymbols[component.kind](component, start, library);
}

/** mm, for a cylinder whose stroke is not given: the same as the machine takes for places along it. */
const unstatedStroke = 100;

type Choice = (component: FluidComponent, start: StartState, library: SymbolLibrary) => Symbol;

const file =
  (name: string): Choice =>
  (_component, _start, library) =>
    library.get(`fluid/${name}`);

const byMedium =
  (name: string): Choice =>
  ({ medium }, _start, library) =>
    library.get(`fluid/${name}-${medium}`);

const componentSymbols: Record<FluidKind, Choice> = {
  tank: file("tank"),
  pump: file("pump-fixed"),
  "electric-motor": file("electric-motor"),
  compressor: file("compressor"),
  "air-supply": byMedium("pressure-source"),
  "service-unit": file("service-unit"),
  filter: file("filter"),
  cylinder: ({ id, name, cylinder, medium }, start) => {
    const spec: CylinderSpec = cylinder ?? { action: "double-acting", cushion: "none", start: 0, switches: [] };
    const at = start.cylinders.get(name ?? id) ?? spec.start;
    return composeCylinder(spec, at / (spec.stroke?.value ?? unstatedStroke), medium);
  },
  valve: ({ id, name, valve, medium, ports }, start) => {
    if (!valve) throw new Error(`The valve ${name ?? id} has no positions.`);
    const shown = start.valveBoxes.get(name ?? id) ?? valve.normal ?? valve.boxes.length - 1;
    const pilots = ports.map((port) => port.name).filter((port) => ["X", "Y", "14", "12", "10"].includes(port));
    return composeValve(valve, medium, shown, pilots);
  },
  "relief-valve": file("relief-valve"),
  "check-valve": file("check-valve"),
  "pilot-operated-check-valve": file("pilot-operated-check-valve"),
  throttle: file("throttle"),
  "one-way-flow-control": file("one-way-flow-control"),
  silencer: file("silencer"),
  gauge: file("gauge"),
  "pressure-switch": byMedium("pressure-switch"),
  "shut-off-valve": file("shut-off-valve"),
  exhaust: file("exhaust"),
};
