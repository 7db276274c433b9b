import type { Device, LadderCircuit, SeriesPath } from "./model.js";
import { usesOf } from "./walk.js";

/**
 * Turns the diodes that stand beside a load against the current, cathode to the live side, as the trade quenches coils: a branch
 * of nothing but diodes and resistors, beside a branch with a load or between the two ends of one. Any other diode lets current
 * through in reading order. What the author pins stays. Takes ladders whose nodes have their final numbers.
 */
export function turnDiodes(ladders: readonly LadderCircuit[], devices: ReadonlyMap<string, Device>): void {
  const loads = new Set<string>();
  for (const { path } of ladders.flatMap(({ rungs }) => rungs)) {
    for (const use of usesOf(path)) if (use.kind === "load") loads.add(`${use.from}>${use.to}`);
  }
  const turn = (series: SeriesPath, besideLoad: boolean): void => {
    const quenches = besideLoad || loads.has(`${series.from}>${series.to}`);
    if (quenches && isQuenching(series, devices)) {
      for (const use of usesOf(series)) {
        if (use.kind === "through" && devices.get(use.device)?.kind === "diode" && use.terminals.by !== "author") {
          use.terminals = { value: ["K", "A"], by: "cathode to the live side" };
        }
      }
    }
    for (const part of series.items) {
      if (part.kind !== "parallel") continue;
      const withLoad = part.branches.filter((branch) => [...usesOf(branch)].some(({ kind }) => kind === "load"));
      for (const branch of part.branches)
        turn(
          branch,
          withLoad.some((other) => other !== branch),
        );
    }
  };
  for (const { path } of ladders.flatMap(({ rungs }) => rungs)) turn(path, false);
}

/** Whether a branch holds a diode, and besides diodes, resistors, terminals and plugs nothing. */
function isQuenching(series: SeriesPath, devices: ReadonlyMap<string, Device>): boolean {
  const kinds = [...usesOf(series)].map(({ device }) => devices.get(device)?.kind);
  return (
    kinds.includes("diode") &&
    kinds.every((kind) => kind === "diode" || kind === "resistor" || kind === "terminal-strip" || kind === "plug")
  );
}
