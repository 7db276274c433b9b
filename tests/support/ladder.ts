import { startOfCycle } from "../../src/behaviour/start-of-cycle.js";
import { parse } from "../../src/language/parse.js";
import { type LadderLayout, layOutLadder } from "../../src/layout/ladder/lay-out-ladder.js";
import type { CircuitSheet, PageArea } from "../../src/layout/placement.js";
import { buildMachine } from "../../src/machine/build.js";
import type { Device, DeviceUse, LadderCircuit, Machine, NodeId } from "../../src/machine/model.js";
import { nodeWorld } from "../../src/node-world.js";
import { pageArea } from "../../src/sheets/page.js";
import { symbolForDevice } from "../../src/symbols/choose.js";
import { openSymbols } from "../../src/symbols/library.js";
import {
  crossings,
  looseEnds,
  netlistOf,
  outside,
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

/** Lays the first ladder of a text out, from the text to millimetres. */
export function ladderOf(text: string): LaidLadder {
  const { tree, diagnostics } = parse(text, "test.sprung");
  const built = buildMachine(tree);
  const errors = [...diagnostics, ...built.diagnostics].filter(({ severity }) => severity === "error");
  if (errors.length > 0) throw new Error(errors.map(({ message, at }) => `${at.line}: ${message}`).join("\n"));
  const { machine } = built;
  const circuit = machine.circuits.find(({ kind }) => kind === "ladder") as LadderCircuit;
  const page = pageArea(machine.drawing);
  const start = startOfCycle(machine);
  const symbolOf = (use: DeviceUse) =>
    symbolForDevice(use, machine.devices.get(use.device) as Device, start, machine.drawing.convention, library);
  const again = () => layOutLadder(circuit, machine, symbolOf, library, page, { sheet: 1, line: 1 });
  const laid = again();
  return { machine, circuit, sheets: laid.sheets, places: new Map(laid.places), page, again };
}

/** Everything a careful reader would mark on the sheets, as sentences. */
export function faults({ sheets, page, circuit }: LaidLadder): string[] {
  return [
    ...sheets.flatMap((sheet) =>
      [
        ...textOverlaps(sheet),
        ...textsOnWires(sheet),
        ...wiresThroughSymbols(sheet),
        ...symbolOverlaps(sheet),
        ...looseEnds(sheet),
        ...crossings(sheet),
        ...slantedWires(sheet),
        ...outside(sheet, page.area),
      ].map((fault) => `sheet ${sheet.number}: ${fault}`),
    ),
    ...misplacedParts(circuit, sheets),
    ...wrongNets(circuit, sheets),
  ];
}

/** Contacts and loads of the ladder with the nodes on both sides. */
export function partsOf(circuit: LadderCircuit): { id: string; kind: "contact" | "load" | "through"; from: NodeId; to: NodeId }[] {
  const found: ReturnType<typeof partsOf> = [];
  const visit = (path: LadderCircuit["rungs"][number]["path"]) => {
    for (const item of path.items) {
      if (item.kind === "parallel") item.branches.forEach(visit);
      else if (item.kind !== "point") found.push(item);
    }
  };
  for (const rung of circuit.rungs) visit(rung.path);
  return found;
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

/** Where the wires, read back by geometry alone, join other pins than the machine does. Parts joined by references count as joined. */
function wrongNets(circuit: LadderCircuit, sheets: readonly CircuitSheet[]): string[] {
  const nodeOfPin = new Map<string, NodeId>();
  const ports = new Map<string, [string, string]>();
  for (const sheet of sheets) {
    for (const { part, symbol } of sheet.symbols) {
      const left = symbol.ports.find(({ direction }) => direction === "left");
      const right = symbol.ports.find(({ direction }) => direction === "right");
      if (left && right) ports.set(part, [left.name, right.name]);
    }
  }
  for (const { id, from, to } of partsOf(circuit)) {
    const [left, right] = ports.get(id) ?? ["?", "?"];
    nodeOfPin.set(`${id}.${left}`, from);
    nodeOfPin.set(`${id}.${right}`, to);
  }
  const found: string[] = [];
  const fuse = circuit.supply.fuse?.name;
  const islands = new Map<NodeId, { referred: boolean; ports: string[] }[]>();
  for (const sheet of sheets) {
    const referring = sheet.strokes.filter(({ role }) => role === "continuation").map(({ path }) => path);
    for (const group of netlistOf(sheet)) {
      group.ports = group.ports.filter((pin) => pin !== `${fuse}.in` && pin !== `${fuse}.out`);
      const nodes = [...new Set(group.ports.map((pin) => nodeOfPin.get(pin)).concat(group.nodes))];
      if (nodes.length > 1) found.push(`sheet ${sheet.number}: nodes ${nodes.join(", ")} are wired together (${group.ports.join(" ")})`);
      const [node] = nodes;
      if (node === undefined) continue;
      const referred = group.wires.some(
        ({ role, points }) =>
          role === "rail" ||
          points.some((point) => referring.some((path) => path.some(({ x, y }) => Math.hypot(x - point.x, y - point.y) < 0.02))),
      );
      islands.set(node, [...(islands.get(node) ?? []), { referred, ports: group.ports }]);
    }
  }
  for (const [node, parts] of islands) {
    if (parts.length < 2) continue;
    for (const { referred, ports } of parts)
      if (!referred) found.push(`node ${node} is drawn in ${parts.length} parts, and ${ports.join(" ")} does not say where it goes on`);
  }
  return found;
}
