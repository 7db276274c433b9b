import type { LoadUse } from "../machine/model.js";
import { rule, type Subject } from "./rule.js";
import { pairsIn } from "./two-loads-in-series.js";

/** A load needs a way to a live rail on one side and to a return rail on the other. */
export const loadNotFed = rule<{ device: string; side: "live" | "return" | "both" }>({
  code: "load-not-fed",
  severity: "warning",
  says: ({ device, side }) =>
    side === "return"
      ? `No wire leads from ${device} to a return rail.`
      : `No wire leads from ${side === "both" ? "the rails" : "a live rail"} to ${device}.`,
  hint: () => "Look at the points its rung begins and ends at.",
  find: (subject) => {
    const { networks } = subject;
    if (networks.gaps) return [];
    const [live, back] = (["live", "return"] as const).map(
      (side) => new Set([...networks.railsAt(side)].map((rail) => networks.groupOf(rail))),
    );
    if (!live || !back) return [];
    const inSeries = loadsInSeries(subject);
    return networks.loads.flatMap((load) => {
      if (inSeries.has(load.device)) return [];
      const ends = [networks.groupOf(load.from), networks.groupOf(load.to)];
      const [fed, returned] = [ends.some((end) => live.has(end)), ends.some((end) => back.has(end))];
      if (fed && returned) return [];
      return [{ device: load.device, side: fed ? ("return" as const) : returned ? ("live" as const) : ("both" as const), at: load.at }];
    });
  },
});

/** Loads in series have a message of their own. */
function loadsInSeries({ networks }: Subject): Set<LoadUse["device"]> {
  const pairs = networks.rungs.flatMap(({ path }) => pairsIn(path));
  return new Set(pairs.flatMap(({ first, second }) => [first, second]));
}
