import type { DeviceUse, NodeId, Rung, SeriesPath } from "../../machine/model.js";
import type { Item } from "./place-parts.js";

/** The rung read from its end to its start. Its parts stand the other way round: what was their first terminal is their second. */
export function reverseRung(rung: Rung): Rung {
  return { ...rung, start: rung.end, end: rung.start, path: reversePath(rung.path) };
}

function reversePath(path: SeriesPath): SeriesPath {
  const items = path.items.map(reverseItem).reverse() as SeriesPath["items"];
  return { kind: "series", items, from: path.to, to: path.from };
}

function reverseItem(item: Item): Item {
  switch (item.kind) {
    case "point":
      return item;
    case "parallel":
      return { ...item, branches: item.branches.map(reversePath), from: item.to, to: item.from };
    case "gap":
      return { ...item, points: [item.points[1], item.points[0]], from: item.to, to: item.from };
    default:
      return reverseUse(item);
  }
}

function reverseUse<Use extends DeviceUse>(use: Use): Use {
  const [first, second] = use.terminals.value;
  return { ...use, from: use.to, to: use.from, terminals: { ...use.terminals, value: [second, first] } };
}

/**
 * A rung read so that as many of its ends as can be lie on the rail of their side: one whose first point is the return rail
 * or whose last is the live one is turned round.
 */
export function alongRails(rung: Rung, [live, back]: readonly NodeId[]): Rung {
  const onRails = ({ start, end }: Rung) => Number(start.node === live) + Number(end.node === back);
  const turned = reverseRung(rung);
  const { start, end, ...rest } = onRails(turned) > onRails(rung) ? turned : rung;
  return {
    ...rest,
    start: start.node === live ? { kind: "rail", node: start.node } : start,
    end: end.node === back ? { kind: "rail", node: end.node } : end,
  };
}
