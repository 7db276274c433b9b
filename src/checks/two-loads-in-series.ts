import type { LoadUse, NodeId, ParallelPath, SeriesPath } from "../machine/model.js";
import { usesOf } from "../machine/walk.js";
import { gather } from "./gather.js";
import { nameOf } from "./names-of.js";
import type { Networks } from "./networks.js";
import { rule } from "./rule.js";

interface Pair {
  first: LoadUse;
  second: LoadUse;
}

export const twoLoadsInSeries = rule<{ first: string; second: string }>({
  code: "two-loads-in-series",
  severity: "warning",
  says: ({ first, second }) => `${first} and ${second} share the voltage: two loads in one path.`,
  hint: ({ first, second }) => `Side by side they each get all of it: -> (${first} | ${second}).`,
  find: ({ networks }) =>
    pairsIn(networks).map(({ first, second }) => ({
      first: nameOf(first),
      second: nameOf(second),
      at: second.at,
      seeAlso: first.rung === second.rung ? [] : [{ message: `${nameOf(first)} stands here.`, at: first.at }],
    })),
});

/** Each load that stands behind another, in one rung or over the points of several. */
export function pairsIn(networks: Networks): Pair[] {
  const pairs = networks.rungs.flatMap(({ path }) => pairsInPath(path));
  if (networks.gaps) return pairs;
  const told = new Set(pairs.map(({ second }) => second));
  return [...pairs, ...pairsOverPoints(networks).filter(({ second }) => !told.has(second))];
}

function pairsInPath(path: SeriesPath): Pair[] {
  const pairs: Pair[] = [];
  let before: LoadUse | undefined;
  for (const part of path.items) {
    if (part.kind !== "load" && part.kind !== "parallel") continue;
    const load = part.kind === "load" ? part : firstLoad(part);
    if (before && load) pairs.push({ first: before, second: load });
    before ??= load;
    if (part.kind === "parallel") pairs.push(...part.branches.flatMap(pairsInPath));
  }
  return pairs;
}

function firstLoad(path: ParallelPath): LoadUse | undefined {
  for (const use of usesOf(path)) if (use.kind === "load") return use;
  return undefined;
}

/** Potentials that only loads join with the rails: what is between them and the live rail, and what is beyond. */
function pairsOverPoints(networks: Networks): Pair[] {
  const live = loadsAway(networks, networks.railsAt("live"));
  const back = loadsAway(networks, networks.railsAt("return"));
  const loadsAt = new Map<NodeId, LoadUse[]>();
  for (const load of networks.loads)
    for (const group of new Set([networks.groupOf(load.from), networks.groupOf(load.to)])) gather(loadsAt, group, load);
  const pairs: Pair[] = [];
  for (const [group, loads] of loadsAt) {
    const away = live.get(group);
    if (!away || !back.get(group)) continue;
    const [before, behind]: [LoadUse[], LoadUse[]] = [[], []];
    for (const load of loads) {
      const [from, to] = [networks.groupOf(load.from), networks.groupOf(load.to)];
      if (from !== to) ((live.get(from === group ? to : from) ?? Number.POSITIVE_INFINITY) < away ? before : behind).push(load);
    }
    const [first] = before;
    if (first) pairs.push(...behind.map((second) => ({ first, second })));
  }
  return pairs;
}

/** How many loads lie between some rails and each group of potentials. */
function loadsAway(networks: Networks, rails: Iterable<NodeId>): Map<NodeId, number> {
  const away = new Map([...rails].map((rail) => [networks.groupOf(rail), 0]));
  const beyond = new Map<NodeId, NodeId[]>();
  for (const load of networks.loads) {
    const [from, to] = [networks.groupOf(load.from), networks.groupOf(load.to)];
    gather(beyond, from, to);
    gather(beyond, to, from);
  }
  const queue = [...away.keys()];
  for (let head = 0; head < queue.length; head++) {
    const here = queue[head] as NodeId;
    for (const next of beyond.get(here) ?? []) {
      if (away.has(next)) continue;
      away.set(next, (away.get(here) as number) + 1);
      queue.push(next);
    }
  }
  return away;
}
