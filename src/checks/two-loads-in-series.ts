import type { LoadUse, ParallelPath, SeriesPath } from "../machine/model.js";
import { usesOf } from "../machine/walk.js";
import { rule } from "./rule.js";

export const twoLoadsInSeries = rule<{ first: string; second: string }>({
  code: "two-loads-in-series",
  severity: "warning",
  says: ({ first, second }) => `${first} and ${second} share the voltage: two loads in one path.`,
  hint: ({ first, second }) => `Side by side they each get all of it: -> (${first} | ${second}).`,
  find: ({ networks }) => networks.rungs.flatMap(({ path }) => pairsIn(path)),
});

/** Each load that stands behind another in one series. */
export function pairsIn(path: SeriesPath): { first: string; second: string; at: LoadUse["at"] }[] {
  const pairs: { first: string; second: string; at: LoadUse["at"] }[] = [];
  let before: LoadUse | undefined;
  for (const part of path.items) {
    if (part.kind !== "load" && part.kind !== "parallel") continue;
    const load = part.kind === "load" ? part : firstLoad(part);
    if (before && load) pairs.push({ first: before.device, second: load.device, at: load.at });
    before ??= load;
    if (part.kind === "parallel") pairs.push(...part.branches.flatMap(pairsIn));
  }
  return pairs;
}

function firstLoad(path: ParallelPath): LoadUse | undefined {
  for (const use of usesOf(path)) if (use.kind === "load") return use;
  return undefined;
}
