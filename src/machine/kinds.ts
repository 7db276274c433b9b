import type { DeviceKind, FluidKind, Medium } from "./model.js";

/** What a device of each kind can be in a rung. */
export const deviceRoles: Record<DeviceKind, { contacts: boolean; load: boolean }> = {
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
};

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
  "shut-off-valve": ["hydraulic", "pneumatic"],
  exhaust: ["pneumatic"],
};

/** Words of the language for things this edition does not draw yet. */
export const laterKinds: ReadonlySet<string> = new Set([
  // electrical
  "latching-relay",
  "counter",
  "key-switch",
  "foot-switch",
  "cable-pull",
  "door-switch",
  "vacuum-switch",
  "flow-switch",
  "level-switch",
  "temperature-switch",
  "bell",
  "fuse",
  "circuit-breaker",
  "disconnect",
  "transformer",
  "power-supply",
  "terminal-strip",
  "plug",
  "diode",
  "resistor",
  "input-card",
  "output-card",
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
  // blocks
  "power",
]);

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
