import type { Conductor, Device, DeviceKind, DrawingInfo } from "./model.js";

/** What a device of each kind can be in a power circuit; kinds that are not here have no place in one. */
export const powerRoles: Partial<Record<DeviceKind, "through" | "conversion" | "load">> = {
  contactor: "through",
  fuse: "through",
  "circuit-breaker": "through",
  disconnect: "through",
  overload: "through",
  "terminal-strip": "through",
  plug: "through",
  transformer: "conversion",
  "power-supply": "conversion",
  rectifier: "conversion",
  motor: "load",
  heater: "load",
  "pilot-light": "load",
  horn: "load",
  bell: "load",
};

/** Protective conductors: they pass every device by. IEC 60445 PE; GND and GRD by north-american habit. */
export function isEarth(phase: string): boolean {
  return /^(PE|GND|GRD)$/.test(phase);
}

/** What the current comes back on: neutral, the M or minus of direct current, the second lead of a transformer. */
export function isReturn(phase: string): boolean {
  return /^(N|M|L-|X2|-)$/.test(phase);
}

/** Live conductors first, then what the current comes back on: the order of poles. */
export function inTrackOrder<One extends { phase: string }>(conductors: readonly One[]): One[] {
  return [...conductors.filter(({ phase }) => !isReturn(phase)), ...conductors.filter(({ phase }) => isReturn(phase))];
}

export const withoutReturn = (conductors: readonly Conductor[]): Conductor[] => conductors.filter(({ phase }) => !isReturn(phase));

/**
 * The conductors that pass through the poles of a device, in the order of its poles: the live ones, then what the current comes
 * back on. A device of which nothing is said has a pole for every live conductor; disconnects, contactors and terminals on a
 * single live conductor also take the return (common practice: nothing but both poles together isolates it).
 * Undefined: the device has fewer poles than live conductors.
 */
export function conductorsThrough({ kind, ways }: Device, conductors: readonly Conductor[]): Conductor[] | undefined {
  const live = withoutReturn(conductors);
  const all = inTrackOrder(conductors);
  if (kind === "terminal-strip" || kind === "plug") return [...conductors];
  if (ways !== undefined) return ways < live.length ? undefined : all.slice(0, ways);
  const isolates = kind === "disconnect" || kind === "contactor";
  return isolates && live.length === 1 ? all : live;
}

/** EN 50005: main contacts, and with them poles of breakers, fuses and overloads, are 1-2, 3-4, 5-6 … */
export function poleTerminals(ordinal: number): [string, string] {
  return [String(2 * ordinal - 1), String(2 * ordinal)];
}

/**
 * Leads of a motor. IEC 60034-8: U1 V1 W1 and the other ends W2 U2 V2 in the order in which delta joins them; two windings for two
 * speeds are 1U 1V 1W and 2U 2V 2W. NEMA MG 1: T1 T2 T3 and T6 T4 T5; the second winding T11 T12 T13. Direct current A1 A2. From memory.
 */
export function motorTerminals(
  count: number,
  current: "AC" | "DC",
  windings: "one" | "star-delta" | "two-speed",
  convention: DrawingInfo["convention"],
): { first: string[]; second: string[] } {
  if (count < 3)
    return {
      first: (current === "DC" ? ["A1", "A2"] : convention === "international" ? ["U1", "U2"] : ["T1", "T2"]).slice(0, count),
      second: [],
    };
  if (convention === "north-american") {
    return { first: ["T1", "T2", "T3"], second: windings === "star-delta" ? ["T6", "T4", "T5"] : ["T11", "T12", "T13"] };
  }
  if (windings === "two-speed") return { first: ["1U", "1V", "1W"], second: ["2U", "2V", "2W"] };
  return { first: ["U1", "V1", "W1"], second: ["W2", "U2", "V2"] };
}

/**
 * What goes in and comes out of transformers, power supplies and rectifiers. Transformers after IEC 60076 (winding 1 and 2) and
 * NEMA practice (H and X); the others by common practice.
 */
export function conversionTerminals(
  kind: DeviceKind,
  ins: readonly string[],
  outs: number,
  convention: DrawingInfo["convention"],
): { ins: string[]; outs: string[] } {
  if (kind === "transformer") {
    const letters = ["U", "V", "W"];
    const side = (winding: 1 | 2, count: number) =>
      Array.from({ length: count }, (_, i) =>
        convention === "international" ? `${winding}${letters[i]}` : `${winding === 1 ? "H" : "X"}${i + 1}`,
      );
    return { ins: side(1, ins.length), outs: side(2, outs) };
  }
  const before =
    kind === "rectifier"
      ? ins.map((_, i) => `AC${i + 1}`)
      : ins.map((phase, i) => (isReturn(phase) ? "N" : ins.length === 2 && isReturn(ins[1] as string) ? "L" : `L${i + 1}`));
  return { ins: before, outs: ["+", "-"] };
}

/** How many conductors a load of this kind may have; motors say it themselves where they do. */
export function leadsOf({ kind, values }: Device): readonly number[] {
  if (kind === "motor") return values.includes("3~") ? [3] : values.includes("1~") ? [2] : [2, 3];
  if (kind === "pilot-light" || kind === "horn" || kind === "bell") return [2];
  return [2, 3];
}
