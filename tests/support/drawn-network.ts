import type { Point } from "../../src/drawing/geometry.js";
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
 * rails, by the names at their heads, and the points that references name.
 * @param rails the names of the live and of the return rail
 */
export function drawnNetwork(sheets: readonly CircuitSheet[], rails: readonly [string, string]): DrawnNetwork {
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
    const heads = sheet.texts.filter(({ role }) => role === "rail");
    for (const group of groups)
      for (const { points: corners } of group.wires.filter(({ role }) => role === "rail")) {
        const away = ({ at }: (typeof heads)[number]) => Math.min(...corners.map((corner) => Math.hypot(corner.x - at.x, corner.y - at.y)));
        const head = heads.toSorted((one, other) => away(one) - away(other))[0]?.text;
        if (head !== rails[0] && head !== rails[1]) throw new Error(`a rail is called ${head}`);
        join(group.number, head === rails[0] ? live : back);
      }
    for (const { path, part } of sheet.strokes.filter(({ role }) => role === "continuation")) {
      const label = sheet.texts.find((text) => text.role === "reference" && text.part === part);
      if (!label || typeof label.text === "string" || label.text.to !== "point") throw new Error(`${part} names no point`);
      const { point } = label.text;
      const touches = (place: Point) => path.some((end) => Math.hypot(end.x - place.x, end.y - place.y) < 0.02);
      // An arrow ends a wire, or stands right at a pin.
      const pins = sheet.symbols.flatMap((placed) =>
        portsOf(placed).flatMap(({ name, at }) => (touches(at) ? [`${placed.part}.${name}`] : [])),
      );
      const there = groups.find(
        ({ wires, ports }) => wires.some(({ points: corners }) => corners.some(touches)) || pins.some((pin) => ports.includes(pin)),
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
