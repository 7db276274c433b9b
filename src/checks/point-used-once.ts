import type { SourceRange } from "../language/diagnostic.js";
import type { Machine } from "../machine/model.js";
import { elementsOf, laddersOf, wholeFluidsOf } from "../machine/walk.js";
import { rule } from "./rule.js";

export const pointUsedOnce = rule<{ point: string }>({
  code: "point-used-once",
  severity: "warning",
  says: ({ point }) => `@${point} is named only here: nothing else is joined to it.`,
  find: ({ machine }) => [...lonePoints(machine), ...fluid(machine)],
});

interface Use {
  point: string;
  at: SourceRange;
}

/** Points of ladders that are named once, where they are. */
export function lonePoints(machine: Machine): Use[] {
  const uses: Use[] = [];
  for (const { rungs } of laddersOf(machine)) {
    for (const { start, end, path } of rungs) {
      if (start.kind === "point") uses.push({ point: start.point, at: start.at });
      for (const element of elementsOf(path)) if (element.kind === "point") uses.push({ point: element.point, at: element.at });
      if (end.kind === "point") uses.push({ point: end.point, at: end.at });
    }
  }
  return loneOf(uses);
}

function fluid(machine: Machine): Use[] {
  return wholeFluidsOf(machine).flatMap(({ lines }) => {
    const uses: Use[] = [];
    for (const line of lines) {
      for (const end of line.ends) if (end.kind === "point") uses.push({ point: end.point, at: end.at ?? line.at });
    }
    return loneOf(uses);
  });
}

function loneOf(uses: readonly Use[]): Use[] {
  const counts = new Map<string, number>();
  for (const { point } of uses) counts.set(point, (counts.get(point) ?? 0) + 1);
  return uses.filter(({ point }) => counts.get(point) === 1);
}
