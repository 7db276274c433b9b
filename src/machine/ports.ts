import type { FluidKind, Medium, ValveSpec } from "./model.js";

/** Port names of the components whose ports do not depend on how they are declared. */
const fixedPorts: Record<Exclude<FluidKind, "cylinder" | "valve">, readonly string[]> = {
  tank: ["T"],
  pump: ["S", "P"],
  compressor: ["S", "P"],
  "electric-motor": [],
  "air-supply": ["1"],
  "service-unit": ["in", "out"],
  filter: ["in", "out"],
  "relief-valve": ["P", "T"],
  "check-valve": ["in", "out"],
  "pilot-operated-check-valve": ["in", "out", "X"],
  throttle: ["in", "out"],
  "shut-off-valve": ["in", "out"],
  "one-way-flow-control": ["in", "out"],
  silencer: ["in"],
  exhaust: ["in"],
  gauge: ["P"],
  "pressure-switch": ["P"],
  "vacuum-switch": ["P"],
  "flow-switch": ["P"],
  "level-switch": ["P"],
  "temperature-switch": ["P"],
};

export function portsOf(kind: Exclude<FluidKind, "cylinder" | "valve">): readonly string[] {
  return fixedPorts[kind];
}

/**
 * The main ports of a directional valve in the order supply, return, working ports.
 * Hydraulic letters after ISO 9461, pneumatic numbers after ISO 11727.
 */
export function valvePorts(ports: ValveSpec["ports"], medium: Medium): readonly string[] {
  if (medium === "hydraulic") return { 2: ["P", "A"], 3: ["P", "T", "A"], 4: ["P", "T", "A", "B"], 5: ["P", "T", "A", "B"] }[ports];
  return { 2: ["1", "2"], 3: ["1", "3", "2"], 4: ["1", "3", "4", "2"], 5: ["1", "5", "3", "4", "2"] }[ports];
}

/**
 * The port of a fluid pilot at one end of a valve. ISO 11727 names a pneumatic control by what it joins: 14 joins 1 to 4,
 * 12 joins 1 to 2, 10 closes 1.
 */
export function pilotPort(side: "left" | "right", medium: Medium, { ports, boxes }: Pick<ValveSpec, "ports" | "boxes">): string {
  if (medium === "hydraulic") return side === "left" ? "X" : "Y";
  if (ports > 3) return side === "left" ? "14" : "12";
  return (side === "left" ? boxes[0] : boxes.at(-1))?.startsWith("P>A") ? "12" : "10";
}

/**
 * Where a line written straight through a component goes in and comes out, or undefined where the port must be named.
 * A component with one port takes both at that port: the line goes on from it.
 */
export function throughPorts(kind: FluidKind, ports: readonly string[]): { arriving: string; leaving: string } | undefined {
  if (ports.length === 1) return { arriving: ports[0] as string, leaving: ports[0] as string };
  if (kind === "cylinder") return undefined;
  if (kind === "valve") return ports.length === 2 ? { arriving: ports[0] as string, leaving: ports[1] as string } : undefined;
  if (kind === "pilot-operated-check-valve") return { arriving: "in", leaving: "out" };
  return ports.length === 2 ? { arriving: ports[0] as string, leaving: ports[1] as string } : undefined;
}

/** For 4- and 5-port pneumatic valves the usual slip is to write the hydraulic letters, and the other way round. */
export function portInOtherScheme(port: string, ports: readonly string[]): string | undefined {
  const pairs: [string, string][] = [
    ["P", "1"],
    ["B", "2"],
    ["T", "3"],
    ["A", ports.includes("4") ? "4" : "2"],
    ["R", "5"],
  ];
  for (const [letter, digit] of pairs) {
    if (port === letter && ports.includes(digit)) return digit;
    if (port === digit && ports.includes(letter)) return letter;
  }
  if (port === "4" && ports.includes("A")) return "A";
  if (port === "2" && ports.includes("B")) return "B";
  return undefined;
}
