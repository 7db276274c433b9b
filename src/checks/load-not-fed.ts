import { nameOf } from "./names-of.js";
import { rule } from "./rule.js";
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
  find: ({ networks }) => {
    if (networks.gaps) return [];
    const [live, back] = (["live", "return"] as const).map(
      (side) => new Set([...networks.railsAt(side)].map((rail) => networks.groupOf(rail))),
    );
    if (!live || !back) return [];
    // Loads in series have a message of their own.
    const inSeries = new Set(pairsIn(networks).flatMap(({ first, second }) => [first, second]));
    return networks.loads.flatMap((load) => {
      if (inSeries.has(load)) return [];
      const ends = [networks.groupOf(load.from), networks.groupOf(load.to)];
      const [fed, returned] = [ends.some((end) => live.has(end)), ends.some((end) => back.has(end))];
      if (fed && returned) return [];
      return [{ device: nameOf(load), side: fed ? ("return" as const) : returned ? ("live" as const) : ("both" as const), at: load.at }];
    });
  },
});
