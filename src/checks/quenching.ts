import type { DeviceKind, LoadUse, Machine, NodeId, Rung, SeriesPath, ThroughUse } from "../machine/model.js";
import { usesOf } from "../machine/walk.js";

/** A diode or a resistor across a load, for when the load is switched off. */
export interface Quenching {
  load: LoadUse;
  /** Whether a resistor limits what flows there. */
  limited: boolean;
}

const quenches: ReadonlySet<DeviceKind | undefined> = new Set<DeviceKind>(["diode", "resistor"]);
const alongside: ReadonlySet<DeviceKind | undefined> = new Set<DeviceKind>(["diode", "resistor", "terminal-strip", "plug"]);

/** What stands across a load: a branch of nothing but diodes and resistors beside a branch with a load, or between the two ends of one. */
export function findQuenching({ devices }: Machine, rungs: readonly Rung[]): Map<ThroughUse, Quenching> {
  const found = new Map<ThroughUse, Quenching>();
  const between = new Map<string, LoadUse>();
  for (const { path } of rungs) for (const use of usesOf(path)) if (use.kind === "load") between.set(endsOf(use), use);
  const visit = (series: SeriesPath, beside: LoadUse | undefined): void => {
    const load = between.get(endsOf(series)) ?? beside;
    const uses = [...usesOf(series)].filter((use) => use.kind === "through");
    const kinds = uses.map(({ device }) => devices.get(device)?.kind);
    const nothingElse =
      series.items.every((part) => part.kind === "point" || part.kind === "through") && kinds.every((kind) => alongside.has(kind));
    if (load && nothingElse && kinds.some((kind) => quenches.has(kind)))
      for (const use of uses) found.set(use, { load, limited: kinds.includes("resistor") });
    for (const part of series.items) {
      if (part.kind !== "parallel") continue;
      const loads = part.branches.map((branch) => [...usesOf(branch)].find((use) => use.kind === "load"));
      part.branches.forEach((branch, index) => {
        visit(
          branch,
          loads.find((other, place) => other && place !== index),
        );
      });
    }
  };
  for (const { path } of rungs) visit(path, undefined);
  return found;
}

function endsOf({ from, to }: { from: NodeId; to: NodeId }): string {
  return `${Math.min(from, to)} ${Math.max(from, to)}`;
}
