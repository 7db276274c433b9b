import type {
  DeviceUse,
  DrawingInfo,
  FluidCircuit,
  LadderCircuit,
  LoadUse,
  Machine,
  MainUse,
  ParallelPath,
  RungElement,
  SeriesPath,
} from "./model.js";

export function laddersOf({ circuits }: Pick<Machine, "circuits">): LadderCircuit[] {
  return circuits.filter((circuit) => circuit.kind === "ladder");
}

export function fluidsOf({ circuits }: Machine): FluidCircuit[] {
  return circuits.filter((circuit) => circuit.kind === "fluid");
}

/** The fluid circuits of which every line could be read. */
export function wholeFluidsOf(machine: Machine): FluidCircuit[] {
  return fluidsOf(machine).filter(({ incomplete }) => !incomplete);
}

/** Everything that stands in a path, in reading order. */
export function* elementsOf(path: SeriesPath | ParallelPath): Generator<RungElement> {
  for (const part of path.kind === "series" ? path.items : path.branches) {
    if (part.kind === "series" || part.kind === "parallel") yield* elementsOf(part);
    else yield part;
  }
}

/** The contacts, loads and things passed through of a path: what has length. */
export function* usesOf(path: SeriesPath | ParallelPath): Generator<DeviceUse> {
  for (const element of elementsOf(path)) if (element.kind !== "point") yield element;
}

/** What a use is called on the sheet and in tables: `CR1`, `Q0.3`, `X1:4`. */
export function designationOf(use: DeviceUse): string {
  if (use.kind === "through") return use.pin === undefined ? use.device : `${use.device}:${use.pin}`;
  return use.point === undefined ? use.device : `${use.device}.${use.point}`;
}

/** An electrical designation as it is printed: the international convention puts a dash before it, the text never has one. */
export function printedName(designation: string, convention: DrawingInfo["convention"]): string {
  return convention === "international" ? `-${designation}` : designation;
}

/** What a load is called where its coils are told apart: `KL1.set`, else as `designationOf`. */
export function coilOf(load: LoadUse): string {
  return load.coil === undefined ? designationOf(load) : `${load.device}.${load.coil}`;
}

/** The terminals of what stands in a power circuit, pole by pole: `1-2 3-4 5-6`. */
export function polesOf({ ins, outs }: MainUse): string {
  return ins.map(({ terminal }, index) => [terminal, outs[index]?.terminal ?? ""].filter((one) => one !== "").join("-")).join(" ");
}
