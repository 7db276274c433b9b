import type { DeviceKind, FluidKind, Medium } from "./model.js";

/**
 * What a device of each kind can be in a rung. `coils`: the names of its coils where it has several. `through`: the current passes
 * through it. `auxiliary`: it has contacts besides, written `Q1.aux`.
 */
export const deviceRoles: Record<
  DeviceKind,
  { contacts: boolean; load: boolean; through?: boolean; auxiliary?: boolean; coils?: readonly ["set" | "count", "reset"] }
> = {
  relay: { contacts: true, load: true },
  contactor: { contacts: true, load: true },
  timer: { contacts: true, load: true },
  "push-button": { contacts: true, load: false },
  "emergency-stop": { contacts: true, load: false },
  "selector-switch": { contacts: true, load: false },
  "limit-switch": { contacts: true, load: false },
  "proximity-switch": { contacts: true, load: false },
  "pressure-switch": { contacts: true, load: false },
  overload: { contacts: true, load: false },
  solenoid: { contacts: false, load: true },
  "pilot-light": { contacts: false, load: true },
  horn: { contacts: false, load: true },
  motor: { contacts: false, load: false },
  "latching-relay": { contacts: true, load: true, coils: ["set", "reset"] },
  counter: { contacts: true, load: true, coils: ["count", "reset"] },
  "key-switch": { contacts: true, load: false },
  "foot-switch": { contacts: true, load: false },
  "cable-pull": { contacts: true, load: false },
  "door-switch": { contacts: true, load: false },
  "vacuum-switch": { contacts: true, load: false },
  "flow-switch": { contacts: true, load: false },
  "level-switch": { contacts: true, load: false },
  "temperature-switch": { contacts: true, load: false },
  bell: { contacts: false, load: true },
  heater: { contacts: false, load: true },
  fuse: { contacts: false, load: false, through: true },
  "circuit-breaker": { contacts: false, load: false, through: true, auxiliary: true },
  disconnect: { contacts: false, load: false, through: true, auxiliary: true },
  transformer: { contacts: false, load: false },
  "power-supply": { contacts: false, load: false },
  rectifier: { contacts: false, load: false },
  "terminal-strip": { contacts: false, load: false, through: true },
  plug: { contacts: false, load: false, through: true },
  diode: { contacts: false, load: false, through: true },
  resistor: { contacts: false, load: false, through: true },
  "input-card": { contacts: false, load: true },
  "output-card": { contacts: true, load: false },
};

/** Buttons and switches: what works one of their contacts works them all. */
export function isSwitchKind(kind: DeviceKind): boolean {
  const { contacts, load } = deviceRoles[kind];
  return contacts && !load && kind !== "overload" && kind !== "output-card";
}

/** The circuits each fluid component belongs in. */
export const fluidMedia: Record<FluidKind, readonly Medium[]> = {
  tank: ["hydraulic"],
  pump: ["hydraulic"],
  "electric-motor": ["hydraulic", "pneumatic"],
  compressor: ["pneumatic"],
  "air-supply": ["pneumatic"],
  "service-unit": ["pneumatic"],
  filter: ["hydraulic", "pneumatic"],
  cylinder: ["hydraulic", "pneumatic"],
  valve: ["hydraulic", "pneumatic"],
  "relief-valve": ["hydraulic", "pneumatic"],
  "check-valve": ["hydraulic", "pneumatic"],
  "pilot-operated-check-valve": ["hydraulic", "pneumatic"],
  throttle: ["hydraulic", "pneumatic"],
  "one-way-flow-control": ["hydraulic", "pneumatic"],
  silencer: ["pneumatic"],
  gauge: ["hydraulic", "pneumatic"],
  "pressure-switch": ["hydraulic", "pneumatic"],
  "vacuum-switch": ["hydraulic", "pneumatic"],
  "flow-switch": ["hydraulic", "pneumatic"],
  "level-switch": ["hydraulic", "pneumatic"],
  "temperature-switch": ["hydraulic", "pneumatic"],
  "shut-off-valve": ["hydraulic", "pneumatic"],
  exhaust: ["pneumatic"],
};

/** Words of the language for things this edition does not draw yet. */
export const laterKinds: ReadonlySet<string> = new Set([
  // fluid
  "accumulator",
  "cooler",
  "heater",
  "lubricator",
  "dryer",
  "flow-meter",
  "fluid-motor",
  "rotary-actuator",
  "reducing-valve",
  "sequence-valve",
  "counterbalance-valve",
  "unloading-valve",
  "shuttle-valve",
  "quick-exhaust-valve",
  "flow-control",
  "flow-divider",
  "quick-coupling",
  "test-point",
]);

/** Switches that a fluid value works: in a fluid circuit they stand at the point they sense. */
const sensorKinds = ["pressure-switch", "vacuum-switch", "flow-switch", "level-switch", "temperature-switch"] as const;

export type SensorKind = (typeof sensorKinds)[number];

export function isSensorKind(kind: string): kind is SensorKind {
  return (sensorKinds as readonly string[]).includes(kind);
}

/** What only measures at the end of a line of its own. */
export function isMeasuring(kind: string | undefined): boolean {
  return kind === "gauge" || (kind !== undefined && isSensorKind(kind));
}

export function isDeviceKind(word: string): word is DeviceKind {
  return Object.hasOwn(deviceRoles, word);
}

export function isFluidKind(word: string): word is FluidKind {
  return Object.hasOwn(fluidMedia, word);
}

/** Every word a declaration may begin with. */
export const declarationWords: readonly string[] = [...new Set([...Object.keys(deviceRoles), ...Object.keys(fluidMedia), "supply"])];

/** Components that stand at the end of a line and may go without a name: each line end gets one of its own. */
export const unnamedEnds: ReadonlySet<FluidKind> = new Set<FluidKind>(["tank", "silencer", "exhaust", "gauge", "air-supply"]);
