import { Simulation } from "eecircuit-engine";

/** What ngspice finds: volts at each node by name, and the current the source gives, in amperes. */
export interface Solved {
  volts: ReadonlyMap<string, number>;
  amperes: number;
}

let started: Promise<Simulation> | undefined;

/**
 * Solves a network for its steady state with ngspice, a general-purpose circuit simulator.
 * @param elements lines of a netlist, one source `V1` among them; node `0` is the return
 */
export async function solve(elements: readonly string[]): Promise<Solved> {
  started ??= start();
  const simulation = await started;
  simulation.setNetList(["A network of contacts", ...elements, ".op", ".end", ""].join("\n"));
  const result = await simulation.runSim();
  const errors = simulation.getError();
  if (result.dataType !== "real" || errors.length > 0) throw new Error(`ngspice: ${errors.join(" ")}\n${elements.join("\n")}`);
  const found = new Map(result.data.map(({ name, values }) => [name, values[0] as number]));
  const volts = new Map([["0", 0]]);
  for (const [name, value] of found) {
    const node = /^v\((.*)\)$/.exec(name)?.[1];
    if (node !== undefined) volts.set(node, value);
  }
  return { volts, amperes: -(found.get("i(v1)") ?? Number.NaN) };
}

async function start(): Promise<Simulation> {
  const simulation = new Simulation();
  await simulation.start();
  return simulation;
}
