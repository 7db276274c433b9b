import { parse } from "../../src/language/parse.js";
import type { CircuitSheet, PageArea } from "../../src/layout/placement.js";
import { layOutPower, type PowerLayout } from "../../src/layout/power/lay-out-power.js";
import type { Overrides } from "../../src/machine/build.js";
import { buildMachine } from "../../src/machine/build.js";
import type { Machine, MainUse, PowerBranch, PowerCircuit } from "../../src/machine/model.js";
import { nodeWorld } from "../../src/node-world.js";
import { pageArea } from "../../src/sheets/page.js";
import { openSymbols } from "../../src/symbols/library.js";
import { looseEnds, netlistOf, outside, slantedWires, symbolOverlaps, textOverlaps, textsOnWires, wiresThroughSymbols } from "./facts.js";
import { firstPower, mainsOf } from "./power.js";

export interface LaidPower {
  machine: Machine;
  circuit: PowerCircuit;
  laid: PowerLayout;
  page: PageArea;
}

const library = openSymbols(nodeWorld);

/** Lays the first power circuit of a text out, from the text to millimetres. */
export function powerOf(text: string, overrides: Overrides = {}): LaidPower {
  const { tree, diagnostics } = parse(text, "test.sprung");
  const built = buildMachine(tree, overrides);
  const errors = [...diagnostics, ...built.diagnostics].filter(({ severity }) => severity === "error");
  if (errors.length > 0) throw new Error(errors.map(({ message, at }) => `${at.line}: ${message}`).join("\n"));
  const { machine } = built;
  const circuit = firstPower(machine);
  const page = pageArea(machine.drawing);
  return { machine, circuit, page, laid: layOutPower(circuit, machine, library, page, { sheet: 1, line: 1 }) };
}

/** Every use of a power circuit, its feed's first. */
export function usesIn({ feed, branches }: PowerCircuit): MainUse[] {
  return [...feed.path, ...branches.flatMap(({ path }: PowerBranch) => mainsOf(path))];
}

/** Everything a careful reader would mark on the sheets, as sentences. */
export function powerFaults({ laid: { sheets, places, diagnostics }, circuit, page }: LaidPower): string[] {
  const placed = new Set(places.map(([part]) => part));
  const drawn = sheets.flatMap((sheet) => sheet.symbols.map(({ part }) => part));
  return [
    ...diagnostics.map(({ message }) => message),
    ...sheets.flatMap((sheet) =>
      [
        ...textOverlaps(sheet),
        ...textsOnWires(sheet),
        ...wiresThroughSymbols(sheet),
        ...symbolOverlaps(sheet),
        ...looseEnds(sheet),
        ...slantedWires(sheet),
        ...outside(sheet, page.area),
        ...wiresOnWires(sheet),
        ...bareMeetings(sheet),
      ].map((fault) => `sheet ${sheet.number}: ${fault}`),
    ),
    ...usesIn(circuit).flatMap(({ id }) =>
      drawn.filter((part) => part === id).length === 1 && placed.has(id) ? [] : [`${id} is not drawn exactly once`],
    ),
    ...wrongNets(circuit, sheets),
  ];
}

/** Wires of different nodes that lie upon each other, or that meet in a corner or an end; they may cross. */
function wiresOnWires(sheet: CircuitSheet): string[] {
  const found: string[] = [];
  const pieces = sheet.wires.flatMap(({ part, node, points }) => points.slice(1).map((b, i) => ({ part, node, a: points[i] ?? b, b })));
  const within = (value: number, one: number, other: number) => value > Math.min(one, other) - 0.3 && value < Math.max(one, other) + 0.3;
  for (const [index, one] of pieces.entries()) {
    for (const other of pieces.slice(index + 1)) {
      if (one.node === other.node) continue;
      for (const end of [one.a, one.b])
        if (within(end.x, other.a.x, other.b.x) && within(end.y, other.a.y, other.b.y)) found.push(`${one.part} touches ${other.part}`);
      for (const end of [other.a, other.b])
        if (within(end.x, one.a.x, one.b.x) && within(end.y, one.a.y, one.b.y)) found.push(`${other.part} touches ${one.part}`);
    }
  }
  return [...new Set(found)];
}

/** Wire that ends in the middle of a busbar without a dot. */
function bareMeetings(sheet: CircuitSheet): string[] {
  const bars = sheet.wires.filter(({ role }) => role === "rail");
  const same = (a: { x: number; y: number }, b: { x: number; y: number }) => Math.hypot(a.x - b.x, a.y - b.y) < 0.02;
  return sheet.wires.flatMap(({ part, role, node, points }) =>
    [points[0], points.at(-1)].flatMap((end) => {
      if (role === "rail" || !end) return [];
      const on = bars.some(({ node: other, points: [a, b] }) => {
        if (other !== node || !a || !b || same(a, end) || same(b, end)) return false;
        const level = Math.abs(a.y - b.y) < 0.02;
        return level
          ? Math.abs(end.y - a.y) < 0.02 && end.x > a.x && end.x < b.x
          : Math.abs(end.x - a.x) < 0.02 && end.y > a.y && end.y < b.y;
      });
      return on && !sheet.dots.some(({ at }) => same(at, end)) ? [`${part} meets a busbar without a dot`] : [];
    }),
  );
}

/** The pins of a use as they are drawn, with the node each belongs to. What hangs between two conductors has them at its two ends. */
function pinsOf(use: MainUse, ports: readonly string[]): [string, number][] {
  const pins = use.ins.map(({ node }, index): [string, number] => [`in-${index + 1}`, node]);
  if (use.role === "load" && use.ins.length === 2 && !ports.includes("in-2")) pins[1] = ["out-1", use.ins[1]?.node ?? -1];
  for (const [index, { node }] of [...use.outs, ...(use.second ?? [])].entries()) pins.push([`out-${index + 1}`, node]);
  if (use.frame !== undefined && ports.includes("pe")) pins.push(["pe", use.frame]);
  return pins;
}

/** Where the wires, read back by geometry alone, join other pins than the machine does. */
function wrongNets(circuit: PowerCircuit, sheets: readonly CircuitSheet[]): string[] {
  const nodeOfPin = new Map<string, number>();
  const ports = new Map(
    sheets.flatMap((sheet) => sheet.symbols.map(({ part, symbol }) => [part, symbol.ports.map(({ name }) => name)] as const)),
  );
  for (const use of usesIn(circuit))
    for (const [port, node] of pinsOf(use, ports.get(use.id) ?? [])) nodeOfPin.set(`${use.id}.${port}`, node);
  const terminals = new Set(usesIn(circuit).flatMap(({ id, ins, outs }) => (ins[0] && ins[0].node === outs[0]?.node ? [id] : [])));
  const found: string[] = [];
  const islands = new Map<number, { referred: boolean; ports: string[] }[]>();
  for (const sheet of sheets) {
    const referring = sheet.strokes.filter(({ role }) => role === "continuation").map(({ path }) => path);
    const earths = new Set(sheet.symbols.filter(({ device }) => device === undefined).map(({ part }) => `${part}.in`));
    for (const group of netlistOf(sheet)) {
      const pins = group.ports.filter((port) => nodeOfPin.has(port));
      const nodes = [...new Set([...pins.map((pin) => nodeOfPin.get(pin) as number), ...group.nodes])];
      if (nodes.length > 1) found.push(`sheet ${sheet.number}: nodes ${nodes.join(", ")} are wired together (${pins.join(" ")})`);
      const [node] = nodes;
      if (node === undefined || node < 0) continue;
      // What a terminal has on both sides is one conductor.
      const referred =
        group.ports.some((port) => earths.has(port) || terminals.has(port.replace(/\.[^.]*$/, ""))) ||
        group.wires.some(
          ({ role, points }) =>
            role === "rail" ||
            points.some((point) => referring.some((path) => path.some(({ x, y }) => Math.hypot(x - point.x, y - point.y) < 0.02))),
        );
      islands.set(node, [...(islands.get(node) ?? []), { referred, ports: pins }]);
    }
  }
  for (const [node, parts] of islands) {
    if (parts.length < 2) continue;
    for (const { referred, ports } of parts)
      if (!referred) found.push(`node ${node} is drawn in ${parts.length} parts, and ${ports.join(" ")} does not say where it goes on`);
  }
  return found;
}
