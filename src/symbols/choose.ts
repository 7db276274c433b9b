import type { StartState } from "../behaviour/start-state.js";
import type { CylinderSpec, Device, DeviceKind, DeviceUse, DrawingInfo, FluidComponent, FluidKind } from "../machine/model.js";
import { composeCylinder } from "./cylinder.js";
import { lampColourCode } from "./lamp-colours.js";
import type { SymbolLibrary } from "./library.js";
import { closedIn, selectorOf } from "./selector-states.js";
import type { Symbol } from "./symbol.js";
import { composeValve } from "./valve.js";
import { withTexts } from "./with-texts.js";

/** What something in a rung looks like depends on its device, on the use itself and on whether the machine holds it operated at the start. */
interface Drawn {
  device: Device;
  use: DeviceUse;
  held: boolean;
}

/** The symbol of a contact, a load or something the current passes through, in the state drawn: its ports are `in` and `out`. */
export function symbolForDevice(
  use: DeviceUse,
  device: Device,
  start: StartState,
  convention: DrawingInfo["convention"],
  library: SymbolLibrary,
): Symbol {
  const drawn = { device, use, held: start.held.has(device.name) };
  const symbol = library.get(`${convention}/${deviceSymbols[device.kind](drawn)}`);
  const texts = deviceTexts[device.kind]?.(drawn, convention);
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

/** An auxiliary contact, or the device itself where the current passes through it. */
const passed =
  (name: string) =>
  ({ use }: Drawn): string =>
    use.kind === "contact" ? `contact-${form(use)}` : name;

/** A contactor's main contacts are known by their numbers of one digit (EN 50005, from memory) or by L and T. */
const contactor = (drawn: Drawn): string => {
  const { use } = drawn;
  const main = use.kind === "contact" && use.form === "NO" && /^(\d|[1-5]?\/?L[1-3]|[2-6]?\/?T[1-3])$/.test(use.terminals.value[0]);
  return main ? "contact-power" : relay(drawn);
};

/** Two coils, each in a rung of its own. */
const coils =
  (first: string, reset: string) =>
  (drawn: Drawn): string => {
    const { use } = drawn;
    return use.kind === "load" ? (use.coil === "reset" ? reset : first) : relay(drawn);
  };

/** A switch that the machine may hold: its name and terminals stay those of its form, its arm shows the state. */
const heldSwitch = (name: string, { use, held }: Drawn): string => {
  const state = form(use) === "no" ? "no-held-closed" : "nc-held-open";
  return `${name}-${held ? state : form(use)}`;
};

/** A switch turned by hand, drawn in the position it has at the start. */
const selector =
  (name: string) =>
  ({ device, use }: Drawn): string => {
    const { positions, at } = selectorOf(device);
    const state = closedIn(use, device)[at] ? "closed" : "open";
    const count = positions.length;
    return count === 2 || count === 3 ? `${name}-${count}-at-${at + 1}-${state}` : `${name}-many-${state}`;
  };

/** Symbols of each kind, the same names in the folders of both conventions. */
const deviceSymbols: Record<DeviceKind, (drawn: Drawn) => string> = {
  relay,
  contactor,
  timer: (drawn) => {
    const { device, use } = drawn;
    if (use.kind === "load") return device.delay?.mode === "off-delay" ? "coil-off-delay" : "coil-on-delay";
    return use.kind === "contact" && use.timed ? `timed-${form(use)}-${device.delay?.mode === "off-delay" ? "off" : "on"}` : relay(drawn);
  },
  "latching-relay": coils("coil-latch", "coil-unlatch"),
  counter: coils("counter", "counter-reset"),
  "push-button": ({ device, use }) => {
    const { action, mushroom, lamp } = device.button ?? { action: "momentary", mushroom: false };
    const style = mushroom ? "-mushroom" : action === "maintained" ? "-maintained" : "";
    return `push-button${style}${lamp === undefined ? "" : "-illuminated"}-${form(use)}`;
  },
  "emergency-stop": contact("emergency-stop"),
  "selector-switch": selector("selector"),
  "key-switch": selector("key-switch"),
  "foot-switch": contact("foot-switch"),
  "cable-pull": contact("pull-switch"),
  "door-switch": contact("door-switch"),
  "limit-switch": (drawn) => heldSwitch("limit", drawn),
  "proximity-switch": (drawn) => heldSwitch(drawn.device.wires === 3 ? "proximity-3-wire" : "proximity", drawn),
  "pressure-switch": contact("pressure"),
  "vacuum-switch": contact("vacuum"),
  "flow-switch": contact("flow"),
  "level-switch": contact("level"),
  "temperature-switch": contact("temperature"),
  overload: contact("overload"),
  solenoid: () => "solenoid",
  "pilot-light": ({ device }) => (device.lamp?.pushToTest ? "pilot-light-push-to-test" : "pilot-light"),
  horn: () => "horn",
  bell: () => "bell",
  heater: () => "heater",
  motor: () => "motor-3ph",
  fuse: () => "fuse",
  "circuit-breaker": passed("circuit-breaker-1p"),
  disconnect: passed("disconnect-1p"),
  transformer: () => "transformer-control",
  "power-supply": () => "power-supply-dc",
  rectifier: () => "rectifier",
  "terminal-strip": () => "terminal",
  plug: () => "plug",
  // The current enters at the cathode where the terminals say so.
  diode: ({ use }) => (use.terminals.value[0].startsWith("K") ? "diode-turned" : "diode"),
  resistor: () => "resistor",
  "input-card": () => "plc-input",
  "output-card": () => "plc-output",
};

interface OwnTexts {
  words: Record<string, string>;
  height: number;
}

/** Target letters for each position, X where this contact is closed and O where it is open; for many positions there is no room in the symbol. */
const targets = ({ device, use }: Drawn): OwnTexts | undefined => {
  const states = closedIn(use, device);
  if (use.kind !== "contact" || states.length > 3) return undefined;
  return { words: Object.fromEntries(states.map((closed, index) => [`state-${index + 1}`, closed ? "X" : "O"])), height: 1.8 };
};

/** What is written into a symbol; designations and terminals are the layout's. */
const deviceTexts: Partial<Record<DeviceKind, (drawn: Drawn, convention: DrawingInfo["convention"]) => OwnTexts | undefined>> = {
  "pilot-light": ({ device }, convention) => {
    if (!device.colour) return undefined;
    const code = lampColourCode(device.colour, convention);
    // In the circle where it is empty, beside it where it has its cross.
    return { words: { letter: code, colour: code }, height: convention === "north-american" ? 2.5 : 1.8 };
  },
  "selector-switch": targets,
  "key-switch": targets,
};

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
  "vacuum-switch": byMedium("pressure-switch"),
  "flow-switch": file("flow-switch"),
  "level-switch": file("level-switch"),
  "temperature-switch": file("temperature-switch"),
  "shut-off-valve": file("shut-off-valve"),
  exhaust: file("exhaust"),
};
