import { startOfCycle } from "../../src/behaviour/start-of-cycle.js";
import type { Point } from "../../src/drawing/geometry.js";
import { parse } from "../../src/language/parse.js";
import { type LadderLayout, layOutLadder } from "../../src/layout/ladder/lay-out-ladder.js";
import type { CircuitSheet, PageArea } from "../../src/layout/placement.js";
import { buildMachine } from "../../src/machine/build.js";
import type { Device, DeviceUse, LadderCircuit, Machine, NodeId } from "../../src/machine/model.js";
import { usesOf } from "../../src/machine/walk.js";
import { nodeWorld } from "../../src/node-world.js";
import { pageArea } from "../../src/sheets/page.js";
import { symbolForDevice } from "../../src/symbols/choose.js";
import { openSymbols } from "../../src/symbols/library.js";
import {
  crossings,
  looseEnds,
  netlistOf,
  outside,
  portsOf,
  slantedWires,
  symbolOverlaps,
  textOverlaps,
  textsOnWires,
  wiresThroughSymbols,
} from "./facts.js";

export interface LaidLadder {
  machine: Machine;
  circuit: LadderCircuit;
  sheets: CircuitSheet[];
  places: Map<string, LadderLayout["places"][number][1]>;
  page: PageArea;
  /** Lays it out once more, for timing. */
  again(): LadderLayout;
}

const library = openSymbols(nodeWorld);

/** Lays the first ladder of a text out, from the text to millimetres, in the text's own convention unless another is given. */
export function ladderOf(text: string, convention?: Machine["drawing"]["convention"]): LaidLadder {
  const { tree, diagnostics } = parse(text, "test.sprung");
  const built = buildMachine(tree);
  const errors = [...diagnostics, ...built.diagnostics].filter(({ severity }) => severity === "error");
  if (errors.length > 0) throw new Error(errors.map(({ message, at }) => `${at.line}: ${message}`).join("\n"));
  const { machine } = built;
  if (convention) machine.drawing.convention = convention;
  const circuit = machine.circuits.find(({ kind }) => kind === "ladder") as LadderCircuit;
  const page = pageArea(machine.drawing);
  const start = startOfCycle(machine);
  const symbolOf = (use: DeviceUse) =>
    symbolForDevice(use, machine.devices.get(use.device) as Device, start, machine.drawing.convention, library);
  const again = () => {
    const laid = layOutLadder(circuit, machine, symbolOf, library, page, { sheet: 1, line: 1 });
    laid.finish();
    return laid;
  };
  const laid = again();
  return { machine, circuit, sheets: laid.sheets, places: new Map(laid.places), page, again };
}

/**
 * Everything a careful reader would mark on the sheets, as sentences.
 * @param crossed how many plain crossings bridges may make
 */
export function faults({ sheets, page, circuit }: LaidLadder, crossed = 0): string[] {
  const plain = sheets.flatMap(crossings).filter((fault) => / cross at /.test(fault));
  return [
    ...sheets.flatMap((sheet) =>
      [
        ...textOverlaps(sheet),
        ...textsOnWires(sheet),
        ...wiresThroughSymbols(sheet),
        ...symbolOverlaps(sheet),
        ...looseEnds(sheet),
        ...crossings(sheet).filter((fault) => plain.length > crossed || !plain.includes(fault)),
        ...slantedWires(sheet),
        ...outside(sheet, page.area),
      ].map((fault) => `sheet ${sheet.number}: ${fault}`),
    ),
    ...misplacedParts(circuit, sheets),
    ...wrongNets(circuit, sheets),
  ];
}

interface Part {
  id: string;
  from: NodeId;
  to: NodeId;
  terminals: readonly [string, string];
  /** A terminal or a pin of a plug. */
  pin: string | undefined;
}

/** What stands in the rungs of the ladder, with the nodes on both sides. */
export function partsOf(circuit: LadderCircuit): Part[] {
  return circuit.rungs.flatMap(({ path }) =>
    [...usesOf(path)].map((use) => ({
      id: use.id,
      from: use.from,
      to: use.to,
      terminals: use.terminals.value,
      pin: use.kind === "through" ? use.pin : undefined,
    })),
  );
}

/** Parts that are not drawn exactly once. */
function misplacedParts(circuit: LadderCircuit, sheets: readonly CircuitSheet[]): string[] {
  const fuse = circuit.supply.fuse?.name;
  const drawn = sheets.flatMap((sheet) => sheet.symbols.map(({ part }) => part)).filter((part) => part !== fuse);
  const wanted = partsOf(circuit).map(({ id }) => id);
  return [
    ...wanted.filter((id) => drawn.filter((part) => part === id).length !== 1).map((id) => `${id} is not drawn exactly once`),
    ...drawn.filter((part) => !wanted.includes(part)).map((part) => `${part} is drawn but not in the ladder`),
  ];
}

/**
 * Where the wires, read back by geometry alone, join other pins than the machine does. Which side of a part is which is told
 * by the terminal numbers printed there, and where it has none either way round will do. Both sides of a terminal are one
 * node. Parts joined by references count as joined.
 */
function wrongNets(circuit: LadderCircuit, sheets: readonly CircuitSheet[]): string[] {
  const found: string[] = [];
  const fuse = circuit.supply.fuse?.name;
  const parts = new Map(partsOf(circuit).map((part) => [part.id, part]));
  const islands = new Map<NodeId, { referred: boolean; ports: string[] }[]>();
  for (const sheet of sheets) {
    const referring = sheet.strokes.filter(({ role }) => role === "continuation").map(({ path }) => path);
    const groups = netlistOf(sheet);
    const nodeOfPin = new Map<string, NodeId>();
    for (const placed of sheet.symbols) {
      const part = parts.get(placed.part);
      if (!part) continue;
      const { from, to, terminals } = part;
      const [one, other] = portsOf(placed);
      if (!one || !other) continue;
      const printed = [one, other].map(({ at }) => terminalAt(sheet, placed.part, at, one.at, other.at));
      if (terminals[0] !== "" && (printed[0] === undefined || printed[0] === printed[1] || !terminals.includes(printed[0])))
        found.push(`${placed.part} has ${printed.join(" and ")} printed at its pins`);
      const drawnAt = (name: string) => groups.find(({ ports }) => ports.includes(`${placed.part}.${name}`))?.nodes[0];
      const turned = terminals[0] !== "" ? printed[0] === terminals[1] : drawnAt(one.name) === to && from !== to;
      nodeOfPin.set(`${placed.part}.${one.name}`, turned ? to : from);
      nodeOfPin.set(`${placed.part}.${other.name}`, turned ? from : to);
    }
    // A terminal joins what is wired to both its sides.
    const passed = new Map<string, string>();
    for (const { id, pin } of parts.values()) if (pin !== undefined) passed.set(`${id}.in`, `${id}.out`);
    const joined = groups.slice();
    for (const [one, other] of passed) {
      const a = joined.findIndex(({ ports }) => ports.includes(one));
      const b = joined.findIndex(({ ports }) => ports.includes(other));
      if (a < 0 || b < 0 || a === b) continue;
      const [first, second] = [joined[a], joined[b]] as [(typeof groups)[number], (typeof groups)[number]];
      joined[a] = {
        nodes: [...new Set([...first.nodes, ...second.nodes])],
        ports: [...first.ports, ...second.ports],
        wires: [...first.wires, ...second.wires],
      };
      joined.splice(b, 1);
    }
    for (const group of joined) {
      const ports = group.ports.filter((pin) => pin !== `${fuse}.in` && pin !== `${fuse}.out`);
      const nodes = [...new Set(ports.map((pin) => nodeOfPin.get(pin)).concat(group.nodes))];
      if (nodes.length > 1) found.push(`sheet ${sheet.number}: nodes ${nodes.join(", ")} are wired together (${ports.join(" ")})`);
      const [node] = nodes;
      if (node === undefined) continue;
      const referred = group.wires.some(
        ({ role, points }) =>
          role === "rail" ||
          points.some((point) => referring.some((path) => path.some(({ x, y }) => Math.hypot(x - point.x, y - point.y) < 0.02))),
      );
      islands.set(node, [...(islands.get(node) ?? []), { referred, ports }]);
    }
  }
  for (const [node, parts] of islands) {
    if (parts.length < 2) continue;
    for (const { referred, ports } of parts)
      if (!referred) found.push(`node ${node} is drawn in ${parts.length} parts, and ${ports.join(" ")} does not say where it goes on`);
  }
  return found;
}

/** The terminal number of a part printed nearer to this pin than to its other one. */
function terminalAt(sheet: CircuitSheet, part: string, at: Point, ...pins: Point[]): string | undefined {
  const away = (point: Point, text: Point) => Math.hypot(point.x - text.x, point.y - text.y);
  const found = sheet.texts.find(
    (text) => text.role === "terminal" && text.part === part && pins.every((pin) => away(at, text.at) <= away(pin, text.at)),
  );
  return typeof found?.text === "string" ? found.text : undefined;
}
