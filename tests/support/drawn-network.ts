import type { CircuitSheet, PlacedSymbol } from "../../src/layout/placement.js";
import { netlistOf, portsOf } from "./facts.js";

/** A two-pin symbol as it is drawn, with the numbers of what the wires join its pins to. */
export interface DrawnPart {
  part: string;
  symbol: string;
  ends: [number, number];
}

/** A ladder read back from its sheets by what is drawn alone. */
export interface DrawnNetwork {
  parts: DrawnPart[];
  live: number;
  back: number;
}

/**
 * Reads a ladder back from its sheets: what wires, dots and pins join by geometry, and over sheets what carries the same name: the
 * rails, and the points that references name. The live rail is the left one, or the upper one.
 */
export function drawnNetwork(sheets: readonly CircuitSheet[]): DrawnNetwork {
  const parents: number[] = [];
  const find = (node: number): number => {
    let root = node;
    while (parents[root] !== root) root = parents[root] as number;
    parents[node] = root;
    return root;
  };
  const add = () => parents.push(parents.length) - 1;
  const join = (a: number, b: number) => {
    parents[find(a)] = find(b);
  };
  const [live, back] = [add(), add()];
  const points = new Map<string, number>();
  const read: { placed: PlacedSymbol; ends: [number, number] }[] = [];

  for (const sheet of sheets) {
    const groups = netlistOf(sheet).map((group) => ({ ...group, number: add() }));
    const rails = sheet.wires.filter(({ role }) => role === "rail");
    const places = rails.map(({ points: [first] }) => (first?.x ?? 0) + (first?.y ?? 0));
    for (const group of groups)
      for (const wire of group.wires)
        if (wire.role === "rail") {
          const place = (wire.points[0]?.x ?? 0) + (wire.points[0]?.y ?? 0);
          join(group.number, place === Math.min(...places) ? live : back);
        }
    for (const { path, part } of sheet.strokes.filter(({ role }) => role === "continuation")) {
      const label = sheet.texts.find((text) => text.role === "reference" && text.part === part);
      if (!label || typeof label.text === "string" || label.text.to !== "point") throw new Error(`${part} names no point`);
      const { point } = label.text;
      const there = groups.find(({ wires }) =>
        wires.some(({ points: corners }) =>
          corners.some((corner) => path.some((end) => Math.hypot(end.x - corner.x, end.y - corner.y) < 0.02)),
        ),
      );
      if (!there) throw new Error(`${part} meets no wire`);
      const known = points.get(point);
      if (known === undefined) points.set(point, there.number);
      else join(there.number, known);
    }
    for (const placed of sheet.symbols) {
      const ends = portsOf(placed).map(({ name }) => groups.find(({ ports }) => ports.includes(`${placed.part}.${name}`))?.number);
      const [one, other] = ends;
      if (one === undefined || other === undefined) throw new Error(`${placed.part} has no two pins`);
      read.push({ placed, ends: [one, other] });
    }
  }
  const parts = read.map(
    ({ placed, ends: [one, other] }): DrawnPart => ({ part: placed.part, symbol: placed.symbol.name, ends: [find(one), find(other)] }),
  );
  return { parts, live: find(live), back: find(back) };
}
