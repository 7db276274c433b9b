import type { Machine, MainPin, MainUse, PowerBranch, PowerCircuit } from "../../src/machine/model.js";

export function firstPower({ circuits }: Machine): PowerCircuit {
  return circuits.find((circuit) => circuit.kind === "power") as PowerCircuit;
}

/** Every use in a path, the ways of brackets one after another. */
export function mainsOf(path: PowerBranch["path"]): MainUse[] {
  return path.flatMap((item) => {
    if (item.kind === "power-parallel") return item.ways.flatMap(mainsOf);
    return item.kind === "main" ? [item] : [];
  });
}

/** A path with the conductors at every terminal: `KM1[1=1L1 3=1L2|2=2L1 4=2L2]`. */
export function writtenPower(machine: Machine, path: PowerBranch["path"]): string {
  const number = (node: number) => machine.potentials[node]?.number.value ?? "?";
  const pins = (list: readonly MainPin[]) => list.map(({ terminal, node }) => `${terminal}=${number(node)}`).join(" ");
  return path
    .map((item) => {
      if (item.kind === "power-point") return `@${item.point}`;
      if (item.kind === "power-parallel") return `(${item.ways.map((way) => writtenPower(machine, way)).join(" | ")})`;
      const groups = [item.ins, item.outs, item.second ?? []].filter((list) => list.length > 0).map(pins);
      return `${item.device}[${groups.join("|")}]${item.frame === undefined ? "" : ` ${number(item.frame)}`}`;
    })
    .join(" ");
}
