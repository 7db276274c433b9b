import type { Point } from "../../drawing/geometry.js";
import type { FluidComponent, FluidNodeId } from "../../machine/model.js";
import { type Arrangement, extentOfAll, type SymbolOf } from "./arrangement.js";
import { addWords, type Block, bareBlock, chooseTurn, type Placed, portOf } from "./block.js";
import { beyond, type FluidGraph, isSink, sourcePort } from "./graph.js";
import { module } from "./modules.js";
import { type Chain, type Entered, hanging, standing } from "./standing.js";
import { uprightBlock } from "./upright-block.js";
import { valveBlock } from "./valve-block.js";

/** The power unit or air preparation, set down below the headers: y = 0 is where its lines leave upward. */
export interface PowerUnit extends Arrangement {
  /** Where lines rise to the headers, by node; the first of each is the one its header begins at. */
  risers: { node: FluidNodeId; x: number; from: Point }[];
  /** Where return lines come down. */
  returns: { node: FluidNodeId; x: number }[];
}

/** A source with what its fluid runs through up to the header, and what stands on each node on the way. */
interface SourceChain {
  source: FluidComponent;
  inline: Entered[];
  /** Node i lies before inline i; the last leads to the header. */
  nodes: (FluidNodeId | undefined)[];
  beside: Entered[][][];
  suction: Entered[];
  motor?: FluidComponent;
}

/** A line to a shared tank: the return filter and the like. */
interface ReturnChain {
  node: FluidNodeId;
  chain: Entered[];
}

export function placePowerUnit(
  unit: readonly FluidComponent[],
  graph: FluidGraph,
  headers: ReadonlySet<FluidNodeId>,
  symbolOf: SymbolOf,
  slack: number,
): PowerUnit {
  const used = new Set<FluidComponent>();
  const members = new Set(unit);
  for (const component of unit) if (sourcePort(component) !== undefined) used.add(component);
  const sources = unit
    .filter((component) => sourcePort(component) !== undefined)
    .map((source) => readSource(source, graph, headers, members, used));
  const returns = readReturns(graph, headers, members, used);
  const placed: Placed[] = [];
  const risers: PowerUnit["risers"] = [];
  const downs: PowerUnit["returns"] = [];
  let left = 0;
  const parts = sources.map((chain) =>
    chain.source.kind === "air-supply" || chain.source.kind === "compressor"
      ? lyingChain(chain, graph, symbolOf, slack)
      : standingChain(chain, graph, symbolOf, slack),
  );
  levelPumps(parts);
  for (const [index, chain] of sources.entries()) {
    const part = parts[index] as Stood;
    const extent = extentOfAll(part.placed);
    const shift = Math.ceil(left - extent.left);
    for (const one of part.placed) placed.push({ block: one.block, at: { x: one.at.x + shift, y: one.at.y } });
    const node = chain.nodes.at(-1);
    if (node !== undefined && headers.has(node))
      risers.push({ node, x: part.riser + shift, from: { x: part.from.x + shift, y: part.from.y } });
    left = extent.right + shift + 3 + slack;
  }
  const base = placed.length > 0 ? extentOfAll(placed).bottom : 0;
  for (const { node, chain } of returns) {
    const part = hanging(chain, "right", symbolOf, graph);
    const x = Math.ceil(left - part.left);
    // The tank stands level with the pump's where there is one.
    const y = Math.max(3, Math.round(base - part.bottom));
    const last = part.placed.length - 1;
    part.placed.forEach(({ block, at }, index) => {
      const drop = index === last && isSink(block.component) ? y : 3;
      placed.push({ block, at: { x: at.x + x, y: at.y + drop } });
    });
    downs.push({ node, x });
    left = x + part.right + 3 + slack;
  }
  // Whatever else belongs to the unit stands beside it, and its lines find their way.
  for (const component of unit) {
    if (used.has(component)) continue;
    used.add(component);
    const block = uprightBlock(component, graph, symbolOf);
    const x = Math.ceil(left - block.full.left);
    placed.push({ block, at: { x, y: Math.ceil(4 + slack - block.full.top) } });
    left = x + block.full.right + 3 + slack;
  }
  levelTanks(placed);
  return { placed, extent: extentOfAll(placed), risers, returns: downs };
}

function readSource(
  source: FluidComponent,
  graph: FluidGraph,
  headers: ReadonlySet<FluidNodeId>,
  members: ReadonlySet<FluidComponent>,
  used: Set<FluidComponent>,
): SourceChain {
  const chain: SourceChain = { source, inline: [], nodes: [], beside: [], suction: [] };
  const motor =
    source.drivenBy === undefined
      ? undefined
      : [...members].find(({ kind, name, id }) => kind === "electric-motor" && (name ?? id) === source.drivenBy);
  if (motor && !used.has(motor)) {
    used.add(motor);
    chain.motor = motor;
  }
  let at = source;
  let node = graph.nodeOf(source, sourcePort(source) as string);
  for (;;) {
    chain.nodes.push(node);
    const here: Entered[][] = [];
    chain.beside.push(here);
    const joints = graph.others(node, at).filter(({ component }) => members.has(component) && !used.has(component));
    let next: Entered | undefined;
    for (const { component, port } of joints) {
      if (used.has(component) || component === next?.component) continue;
      const branch = branchOf(graph, component, port, members, used);
      if (branch && !leadsOn(branch, graph, headers)) {
        for (const one of branch) used.add(one.component);
        here.push(branch);
      } else if (!next && beyond(component, port) !== undefined && !headers.has(node ?? -1)) next = { component, port };
    }
    if (!next) break;
    used.add(next.component);
    chain.inline.push(next);
    at = next.component;
    node = graph.nodeOf(at, beyond(at, next.port) as string);
  }
  let below = source;
  for (let suction = graph.nodeOf(source, "S"); suction !== undefined; ) {
    const others = graph.others(suction, below).filter(({ component }) => members.has(component) && !used.has(component));
    const sink = others.find(({ component }) => isSink(component));
    const next = sink ?? others.find(({ component, port }) => beyond(component, port) !== undefined && component.kind !== "valve");
    if (!next) break;
    used.add(next.component);
    chain.suction.push(next);
    if (sink) break;
    below = next.component;
    suction = graph.nodeOf(below, beyond(below, next.port) as string);
  }
  return chain;
}

/** A chain from a node that ends in a gauge, a switch or a sink, or at a line it does not follow further. */
function branchOf(
  graph: FluidGraph,
  component: FluidComponent,
  entered: string,
  members: ReadonlySet<FluidComponent>,
  used: ReadonlySet<FluidComponent>,
): Entered[] | undefined {
  const chain: Entered[] = [];
  for (let at = component, port = entered; ; ) {
    if (!members.has(at) || used.has(at) || chain.some((one) => one.component === at)) return chain.length > 0 ? chain : undefined;
    chain.push({ component: at, port });
    const out = at.kind === "relief-valve" ? (port === "P" ? "T" : "P") : beyond(at, port);
    const node = out === undefined ? undefined : graph.nodeOf(at, out);
    if (node === undefined) return chain;
    const others = graph.others(node, at);
    const [next] = others;
    if (!next || others.length > 1) return chain;
    at = next.component;
    port = next.port;
  }
}

/** Whether a chain goes on to where others are fed, rather than ending. */
function leadsOn(branch: readonly Entered[], graph: FluidGraph, headers: ReadonlySet<FluidNodeId>): boolean {
  const last = branch.at(-1) as Entered;
  if (last.component.kind === "relief-valve" || isSink(last.component)) return false;
  const out = beyond(last.component, last.port);
  const node = out === undefined ? undefined : graph.nodeOf(last.component, out);
  if (node === undefined) return false;
  return !graph.at(node).some(({ component }) => isSink(component)) || headers.has(node);
}

function readReturns(
  graph: FluidGraph,
  headers: ReadonlySet<FluidNodeId>,
  members: ReadonlySet<FluidComponent>,
  used: Set<FluidComponent>,
): ReturnChain[] {
  const found: ReturnChain[] = [];
  for (const node of headers) {
    const start = graph
      .at(node)
      .find(
        ({ component, port }) =>
          members.has(component) && !used.has(component) && (isSink(component) || leadsToSink(graph, component, port)),
      );
    if (!start) continue;
    const chain: Entered[] = [];
    for (let next: { component: FluidComponent; port: string } | undefined = start; next; ) {
      used.add(next.component);
      chain.push(next);
      const out = beyond(next.component, next.port);
      const beyondNode = out === undefined ? undefined : graph.nodeOf(next.component, out);
      const others: readonly { component: FluidComponent; port: string }[] = graph
        .others(beyondNode, next.component)
        .filter(({ component }) => members.has(component) && !used.has(component));
      next =
        others.find(({ component }) => isSink(component)) ??
        others.find(({ component, port }) => beyond(component, port) !== undefined && component.kind !== "valve");
    }
    found.push({ node, chain });
  }
  return found;
}

function leadsToSink(graph: FluidGraph, component: FluidComponent, port: string): boolean {
  const seen = new Set<FluidComponent>();
  for (let at: { component: FluidComponent; port: string } | undefined = { component, port }; at; ) {
    if (seen.has(at.component)) return false;
    seen.add(at.component);
    const out = beyond(at.component, at.port);
    if (out === undefined || at.component.kind === "valve") return false;
    const others: readonly { component: FluidComponent; port: string }[] = graph.others(graph.nodeOf(at.component, out), at.component);
    if (others.some((other) => isSink(other.component))) return true;
    at = others.find((other) => beyond(other.component, other.port) !== undefined);
  }
  return false;
}

interface Stood {
  placed: Placed[];
  riser: number;
  /** The port the line to the header begins at. */
  from: Point;
}

/** Whether a chain hangs below its line (it ends in a tank) or stands on it. */
function hangs(branch: readonly Entered[]): boolean {
  const last = (branch.at(-1) as Entered).component;
  return last.kind === "tank" || last.kind === "relief-valve" || last.kind === "valve";
}

/**
 * A pump over its tank with everything in one upright line: what guards it hangs to the right, what measures stands to the
 * left. Rows come nearer to the pump the lower they are, so that no line to a lower row meets what hangs from a higher one.
 */
function standingChain(chain: SourceChain, graph: FluidGraph, symbolOf: SymbolOf, slack: number): Stood {
  const placed: Placed[] = [];
  // Upward from the pump's upper port at y = 0, and moved down at the end.
  const symbol = symbolOf(chain.source);
  const pump = bareBlock(chain.source, symbol, chooseTurn(symbol, { [sourcePort(chain.source) as string]: "up" }));
  addWords(pump, "left");
  const top = portOf(pump, sourcePort(chain.source) as string);
  const pumpAt = { x: -top.x, y: -top.y };
  placed.push({ block: pump, at: pumpAt });
  let rightEdge = Math.ceil(pump.full.right + pumpAt.x) + 2;
  if (chain.motor) {
    const motor = motorBlock(chain.motor, pump, symbolOf);
    placed.push({ block: motor.block, at: { x: pumpAt.x + motor.at.x, y: pumpAt.y + motor.at.y } });
    rightEdge = Math.ceil(motor.block.full.right + pumpAt.x + motor.at.x) + 2;
  }
  // The suction line.
  if (chain.suction.length > 0) {
    const suction = hanging(chain.suction, "left", symbolOf, graph);
    const from = { x: portOf(pump, "S").x + pumpAt.x, y: portOf(pump, "S").y + pumpAt.y + 3 };
    for (const one of suction.placed) placed.push({ block: one.block, at: { x: one.at.x + from.x, y: one.at.y + from.y } });
  }
  let y = 0;
  let from = 0;
  chain.nodes.forEach((_, i) => {
    const branches = chain.beside[i] ?? [];
    const row = Math.floor(y - 2 - slack / 2);
    const up = branches.filter((branch) => !hangs(branch)).map((branch) => standing(branch, "left", symbolOf, graph));
    const down = branches.filter(hangs).map((branch) => hanging(branch, "right", symbolOf, graph));
    // Rows above have their hanging things further out, rows below their standing things.
    let x = -2;
    for (const part of up) {
      x = Math.min(x, Math.floor(-2 - part.right));
      add(placed, part, x, row - 1);
      x = Math.floor(x + part.left - 2);
    }
    for (const part of down) {
      const at = Math.ceil(rightEdge - part.left);
      add(placed, part, at, row + Math.max(2, Math.ceil(1 - part.top)));
      rightEdge = Math.ceil(at + part.right + 2);
    }
    y = branches.length > 0 ? row : y;
    if (up.length > 0) y = Math.min(y, Math.floor(row - Math.max(...up.map((part) => -part.top)) - 1));
    const inline = chain.inline[i];
    if (!inline) return;
    const symbolHere = symbolOf(inline.component);
    const out = beyond(inline.component, inline.port) as string;
    const block =
      inline.component.kind === "valve"
        ? valveBlock(inline.component, symbolHere)
        : bareBlock(inline.component, symbolHere, chooseTurn(symbolHere, { [inline.port]: "down", [out]: "up" }));
    if (inline.component.kind !== "valve") addWords(block, "left");
    const lower = portOf(block, inline.port);
    const at = { x: -lower.x, y: Math.floor(y - 2 - lower.y) };
    placed.push({ block, at });
    y = at.y + portOf(block, out).y;
    from = y;
  });
  // A node's row of its own needs the rest of the line above it.
  const rise = Math.ceil(-Math.min(y - 2, ...placed.map(({ block, at }) => block.full.top + at.y - 1)));
  levelTanks(placed);
  return { placed: placed.map(({ block, at }) => ({ block, at: { x: at.x, y: at.y + rise } })), riser: 0, from: { x: 0, y: from + rise } };
}

/** Pumps of one unit stand level, as low as the lowest, and all that belongs to each goes with it. */
function levelPumps(parts: readonly Stood[]): void {
  const pumps = parts.flatMap((part) => {
    const pump = part.placed.find(({ block }) => block.component.kind === "pump");
    return pump ? [{ part, y: pump.at.y }] : [];
  });
  const lowest = Math.max(...pumps.map(({ y }) => y));
  for (const { part, y } of pumps) {
    for (const one of part.placed) one.at = { x: one.at.x, y: one.at.y + lowest - y };
    part.from = { x: part.from.x, y: part.from.y + lowest - y };
  }
}

/** Tanks of one unit stand level, as deep as the deepest. */
function levelTanks(placed: Placed[]): void {
  const tanks = placed.filter(({ block }) => block.component.kind === "tank");
  if (tanks.length === 0) return;
  const deepest = Math.max(...tanks.map(({ at }) => at.y));
  for (const tank of tanks) tank.at = { x: tank.at.x, y: deepest };
}

function add(placed: Placed[], part: Chain, x: number, y: number): void {
  for (const { block, at } of part.placed) placed.push({ block, at: { x: at.x + x, y: at.y + y } });
}

/** The motor beside its pump, shaft to shaft. */
function motorBlock(motor: FluidComponent, pump: Block, symbolOf: SymbolOf): { block: Block; at: { x: number; y: number } } {
  const symbol = symbolOf(motor);
  const block = bareBlock(motor, symbol, { quarter: 0, mirrored: true });
  addWords(block, "right");
  const pumpShaft = pump.symbol.spots.shaft ?? { x: 12, y: 0 };
  const motorShaft = symbol.spots.shaft ?? { x: 12, y: 0 };
  const meetAt = { x: pumpShaft.x / module + pump.offset.x, y: pumpShaft.y / module + pump.offset.y };
  const at = { x: meetAt.x + motorShaft.x / module - block.offset.x, y: meetAt.y - motorShaft.y / module - block.offset.y };
  return { block, at };
}

/** A supply with its air preparation in one level line, ending at the right where the line rises. */
function lyingChain(chain: SourceChain, graph: FluidGraph, symbolOf: SymbolOf, slack: number): Stood {
  const placed: Placed[] = [];
  const symbol = symbolOf(chain.source);
  const name = sourcePort(chain.source) as string;
  const supply = chain.source.kind === "air-supply";
  const block = bareBlock(chain.source, symbol, chooseTurn(symbol, { [name]: supply ? "right" : "up" }));
  addWords(block, supply ? "below" : "left");
  const port = portOf(block, name);
  placed.push({ block, at: { x: -port.x, y: -port.y } });
  if (chain.suction.length > 0) {
    const from = portOf(block, "S");
    add(placed, hanging(chain.suction, "left", symbolOf, graph), from.x - port.x, from.y - port.y + 1);
  }
  const level = supply ? 0 : -2;
  let x = supply ? 0 : 1;
  let from = 0;
  let standsOn = false;
  let room = Math.ceil(block.full.right - port.x);
  chain.nodes.forEach((_, i) => {
    for (const branch of chain.beside[i] ?? []) {
      const part = standing(branch, "right", symbolOf, graph);
      // Clear of the words below and of the gauge on top of what comes before.
      const at = Math.ceil(Math.max(x + 1, room + 1) - part.left);
      add(placed, part, at, level - Math.max(2, Math.ceil(part.bottom + 0.6)));
      room = at + part.right;
      x = at;
      standsOn = true;
    }
    const inline = chain.inline[i];
    if (!inline) return;
    const symbolHere = symbolOf(inline.component);
    const out = beyond(inline.component, inline.port) as string;
    const here = bareBlock(inline.component, symbolHere, chooseTurn(symbolHere, { [inline.port]: "left", [out]: "right" }));
    if (inline.component.kind === "valve") addWords(here, "above");
    else addWords(here, "below");
    const entry = portOf(here, inline.port);
    const at = { x: Math.ceil(Math.max(x + 2 + slack / 2 - entry.x, room + 1.5 - here.full.left)), y: level - entry.y };
    placed.push({ block: here, at });
    x = at.x + portOf(here, out).x;
    room = at.x + here.full.right;
    standsOn = false;
    from = x;
  });
  const riser = Math.ceil(Math.max(x + 2, standsOn ? room + 1 : 0));
  const rise = Math.ceil(2 - Math.min(...placed.map(({ block: one, at }) => one.full.top + at.y), level));
  return {
    placed: placed.map(({ block: one, at }) => ({ block: one, at: { x: at.x, y: at.y + rise } })),
    riser,
    from: { x: from, y: (from === 0 ? 0 : level) + rise },
  };
}
