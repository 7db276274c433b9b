import { parse } from "../../src/language/parse.js";
import { buildMachine } from "../../src/machine/build.js";
import type { Device, DeviceUse, FluidCircuit, LadderCircuit, Machine, ParallelPath, SeriesPath } from "../../src/machine/model.js";
import { designationOf } from "../../src/machine/walk.js";

/** The machine of a text, and the codes of what was found while reading it. */
export function machineOf(text: string): { machine: Machine; codes: string[] } {
  const { tree, diagnostics } = parse(text, "test.sprung");
  const built = buildMachine(tree);
  return { machine: built.machine, codes: [...diagnostics, ...built.diagnostics].map(({ code }) => code) };
}

/** The machine of a text that must be faultless. */
export function soundMachine(text: string): Machine {
  const { machine, codes } = machineOf(text);
  if (codes.length > 0) throw new Error(`found ${codes.join(", ")}`);
  return machine;
}

/** A ladder with 24 V between L+ and M. */
export function ladder(rungs: string, declarations = ""): string {
  return `supply CTRL 24 V DC { rails L+ M }\n${declarations}\nladder "Control" supply CTRL {\n${rungs}\n}\n`;
}

export function device(machine: Machine, name: string): Device {
  const found = machine.devices.get(name);
  if (!found) throw new Error(`no device ${name}`);
  return found;
}

export function firstLadder({ circuits }: Machine): LadderCircuit {
  return circuits.find((circuit) => circuit.kind === "ladder") as LadderCircuit;
}

export function firstFluid({ circuits }: Machine): FluidCircuit {
  return circuits.find((circuit) => circuit.kind === "fluid") as FluidCircuit;
}

/** A path in the language's own writing, with the wire numbers between the devices: `L+ /PB2 1 (PB1 | CR1) 2 -> CR1 M`. */
export function written(machine: Machine, path: SeriesPath): string {
  const number = (node: number) => machine.potentials[node]?.number.value ?? "?";
  const name = (use: DeviceUse) =>
    `${use.kind === "load" ? "-> " : use.kind === "contact" && use.form === "NC" ? "/" : ""}${designationOf(use)}`;
  const inner = (series: SeriesPath): string =>
    series.items
      .map((item, index) => {
        const last = index === series.items.length - 1;
        const after = last || series.items[index + 1]?.kind === "point" ? "" : ` ${number(item.to)}`;
        if (item.kind === "parallel") return `${parallel(item)}${after}`;
        return item.kind === "point" ? `@${item.point}${after}` : `${name(item)}${after}`;
      })
      .join(" ");
  const parallel = (part: ParallelPath) => `(${part.branches.map(inner).join(" | ")})`;
  return `${number(path.from)} ${inner(path)} ${number(path.to)}`;
}

/** The ports on each fluid node, in order: `["AIR1.1 FRL1.in", …]`. */
export function nodesOf({ nodes }: FluidCircuit): string[] {
  return nodes.map(({ ports }) => ports.map(({ component, port }) => `${component}.${port}`).join(" "));
}
