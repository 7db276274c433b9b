import type { FluidComponent, FluidNodeId } from "../../machine/model.js";
import type { Direction } from "../../symbols/symbol.js";
import { type Arrangement, extentOfAll, type SymbolOf } from "./arrangement.js";
import { addWords, type Block, bareBlock, chooseTurn, type Placed, portOf, type Side } from "./block.js";
import { cylinderBlock } from "./cylinder-block.js";
import { beyond, type FluidGraph, isSink, throughPorts } from "./graph.js";
import { extentOf, meet, moved } from "./modules.js";
import { type Entered, hanging, standing } from "./standing.js";
import { valveBlock } from "./valve-block.js";

/** A component in a vertical line, with the port that looks up. */
interface Inline {
  component: FluidComponent;
  upper: string;
  lower: string;
}

/** A way down from a cylinder's port: between its parts, above the first and below the last, things may stand beside it. */
interface Lane {
  cylinder: number;
  port: string;
  inline: Inline[];
  /** What hangs on the node above part i; the last is the node that reaches the valve. */
  beside: Entered[][][];
  /** The valve's port it ends at. */
  rootPort?: string;
}

/** A way down from one of the valve's lower ports. */
export interface Drop {
  port: string;
  inline: Inline[];
  beside: Entered[][];
  sink?: FluidComponent;
  /** Its only line leads to the first thing below it, which may stand at the port itself. */
  direct: boolean;
}

/** A group as the trade draws it: one directional valve, its cylinders over it, and what stands in the lines between them. */
export interface Tower {
  root?: FluidComponent;
  cylinders: FluidComponent[];
  lanes: Lane[];
  drops: Drop[];
}

/** Reads a group as a tower, or gives nothing where it is something else. */
export function planTower(
  group: readonly FluidComponent[],
  graph: FluidGraph,
  headers: ReadonlySet<FluidNodeId>,
  symbolOf: SymbolOf,
): Tower | undefined {
  const members = new Set(group);
  const cylinders = group.filter(({ kind }) => kind === "cylinder");
  const valves = group.filter(({ kind }) => kind === "valve");
  const roots = valves.filter((valve) => !(throughPorts(valve) && cylinders.length > 0 && valves.length > 1));
  if (roots.length > 1) return undefined;
  const [root] = roots;
  const used = new Set<FluidComponent>([...cylinders, ...(root ? [root] : [])]);
  const rootPorts = new Map<string, Direction>(root ? symbolOf(root).ports.map(({ name, direction }) => [name, direction]) : []);
  const lanes: Lane[] = [];
  const walked = new Set<FluidNodeId>();

  const walkLane = (lane: Lane, from: FluidComponent, port: string): boolean => {
    let at = from;
    let node = graph.nodeOf(from, port);
    for (;;) {
      const here: Entered[][] = [];
      lane.beside.push(here);
      if (node === undefined || headers.has(node)) return true;
      if (walked.has(node)) return true;
      walked.add(node);
      const joints = graph.others(node, at).filter(({ component }) => members.has(component) && !used.has(component));
      const onward: Inline[] = [];
      for (const { component, port: entered } of joints) {
        if (used.has(component)) continue;
        const branch = branchOf(graph, component, entered, members, used);
        if (branch) {
          for (const one of branch) used.add(one.component);
          here.push(branch);
          continue;
        }
        const out = beyond(component, entered);
        // A pilot taken off here; what it belongs to stands in a line of its own.
        if (out === undefined && component.kind === "pilot-operated-check-valve") continue;
        if (out === undefined) return false;
        onward.push({ component, upper: entered, lower: out });
      }
      const reached = root && graph.at(node).find(({ component }) => component === root);
      if (reached) {
        if (onward.length > 0 || rootPorts.get(reached.port) !== "up") return false;
        lane.rootPort = reached.port;
        return true;
      }
      if (onward.length > 1) return false;
      const [next] = onward;
      if (!next) return true;
      used.add(next.component);
      lane.inline.push(next);
      at = next.component;
      node = graph.nodeOf(next.component, next.lower);
    }
  };
  for (const [index, cylinder] of cylinders.entries()) {
    for (const { name } of cylinder.ports) {
      const lane: Lane = { cylinder: index, port: name, inline: [], beside: [] };
      if (!walkLane(lane, cylinder, name)) return undefined;
      lanes.push(lane);
    }
  }
  const drops: Drop[] = [];
  if (root) {
    // What stands on a working port that no cylinder's line came down to.
    for (const [port, direction] of rootPorts) {
      const node = graph.nodeOf(root, port);
      if (direction !== "up" || node === undefined || headers.has(node) || walked.has(node)) continue;
      walked.add(node);
      const lane: Lane = { cylinder: -1, port, inline: [], beside: [[]], rootPort: port };
      for (const { component, port: entered } of graph.others(node, root)) {
        if (used.has(component)) continue;
        const branch = branchOf(graph, component, entered, members, used);
        if (!branch) return undefined;
        for (const one of branch) used.add(one.component);
        lane.beside[0]?.push(branch);
      }
      lanes.push(lane);
    }
    for (const [port, direction] of rootPorts) {
      if (direction !== "down") continue;
      const drop = walkDrop(graph, root, port, headers, members, used);
      if (drop) drops.push(drop);
    }
  }
  return group.every((component) => used.has(component)) ? { ...(root ? { root } : {}), cylinders, lanes, drops } : undefined;
}

/** A short chain that ends in a gauge, a switch or a sink; it stands beside the line. */
function branchOf(
  graph: FluidGraph,
  component: FluidComponent,
  entered: string,
  members: ReadonlySet<FluidComponent>,
  used: ReadonlySet<FluidComponent>,
): Entered[] | undefined {
  const chain: Entered[] = [];
  for (let at = component, port = entered; ; ) {
    // A valve that only lets the line off to the tank hangs from it; any other leads on.
    if (!members.has(at) || used.has(at) || at.kind === "cylinder" || chain.some((one) => one.component === at)) return undefined;
    if (at.kind === "valve" && !letsOff(graph, at, port)) return undefined;
    chain.push({ component: at, port });
    if (at.ports.filter(({ node }) => node !== undefined).length === 1) return chain;
    const out = onward(at, port);
    const node = out === undefined ? undefined : graph.nodeOf(at, out);
    const others = graph.others(node, at);
    const [next] = others;
    // A pilot of its own or a fork is not a mere branch.
    if (!next || others.length > 1 || at.ports.filter((one) => one.node !== undefined).length > 2) return undefined;
    at = next.component;
    port = next.port;
  }
}

/** The port a branch leaves a component by; a relief valve lets through as well. */
function onward(component: FluidComponent, port: string): string | undefined {
  if (component.kind === "relief-valve") return port === "P" ? "T" : "P";
  return beyond(component, port);
}

/** Whether a valve's other end stands at a tank or the open air, and nothing else. */
function letsOff(graph: FluidGraph, valve: FluidComponent, port: string): boolean {
  const out = beyond(valve, port);
  const others = out === undefined ? [] : graph.others(graph.nodeOf(valve, out), valve);
  return others.length === 1 && others.every(({ component }) => isSink(component));
}

/** Whether a branch hangs below its line, as what lets it off does, or stands on it. */
function hangs(chain: readonly Entered[]): boolean {
  return isSink((chain.at(-1) as Entered).component);
}

function walkDrop(
  graph: FluidGraph,
  root: FluidComponent,
  port: string,
  headers: ReadonlySet<FluidNodeId>,
  members: ReadonlySet<FluidComponent>,
  used: Set<FluidComponent>,
): Drop | undefined {
  const drop: Drop = { port, inline: [], beside: [], direct: false };
  let at = root;
  let node = graph.nodeOf(root, port);
  if (node === undefined) return drop;
  drop.direct = !headers.has(node) && graph.at(node).length === 2;
  while (node !== undefined && !headers.has(node)) {
    const joints = graph.others(node, at).filter(({ component }) => members.has(component) && !used.has(component));
    const sink = joints.find(({ component }) => isSink(component));
    const next = joints.find(
      ({ component, port: entered }) => !isSink(component) && component.kind !== "valve" && beyond(component, entered) !== undefined,
    );
    if (sink && !next) {
      used.add(sink.component);
      drop.sink = sink.component;
      return drop;
    }
    if (!next) return drop;
    const out = beyond(next.component, next.port) as string;
    used.add(next.component);
    drop.inline.push({ component: next.component, upper: next.port, lower: out });
    at = next.component;
    node = graph.nodeOf(next.component, out);
  }
  return drop;
}

/** Rows kept free under a cylinder's ports and over a valve's, for lines to turn in. */
const turning = 2;

/**
 * Sets a tower down: the valve at the origin, cylinders over it, working lines straight down from the cylinders' ports.
 * @param height how far the cylinders' axes stand over the valve; the least that is possible if not given
 * @param slack more room between things, where lines found no way
 */
export function placeTower(tower: Tower, graph: FluidGraph, symbolOf: SymbolOf, slack: number, height?: number): Arrangement {
  const { root, cylinders } = tower;
  const valve: Placed | undefined = root ? { block: valveBlock(root, symbolOf(root)), at: { x: 0, y: 0 } } : undefined;
  // 1. Cylinders side by side, their axes on one line, and everything on the lines below them.
  const upper: Placed[] = [];
  let edge = 0;
  const low: number[] = [];
  let lineOfFirst: ((port: string) => number | undefined) | undefined;
  for (let index = 0; index < cylinders.length; index++) {
    const part = hang(tower, index, graph, symbolOf, slack);
    const extent = extentOfAll(part.placed);
    const shift = index === 0 ? 0 : Math.ceil(edge + 4 + slack - extent.left);
    for (const one of part.placed) upper.push({ block: one.block, at: { x: one.at.x + shift, y: one.at.y } });
    edge = extent.right + shift;
    low.push(part.bottom);
    lineOfFirst ??= part.lineOf;
  }
  // 2. The first straight line down ends at the valve's port.
  const lane = tower.lanes.find(({ rootPort, cylinder }) => rootPort !== undefined && cylinder === 0);
  const first = upper[0];
  if (valve && first && lane) {
    const shift = portOf(valve.block, lane.rootPort as string).x - (lineOfFirst?.(lane.port) ?? portOf(first.block, lane.port).x);
    for (const one of upper) one.at = { x: one.at.x + shift, y: one.at.y };
  }
  const valveTop = valve ? valve.block.full.top : 0;
  const jogs = new Set(tower.lanes.filter(({ cylinder }) => cylinder >= 0).map(({ cylinder, port }) => `${cylinder} ${port}`)).size;
  const least =
    cylinders.length === 0 ? undefined : Math.ceil(Math.max(...low) - Math.min(valveTop, -3) + turning + Math.max(0, jogs - 2) * 2 + slack);
  const rise = height === undefined ? (least ?? 0) : Math.max(height, least ?? 0);
  for (const one of upper) one.at = { x: one.at.x, y: one.at.y - rise };
  const placed = [...upper, ...(valve ? [valve] : [])];
  // 3. What stands over a working port without a cylinder, and what hangs below the valve.
  if (valve) {
    for (const { cylinder, port, beside } of tower.lanes) {
      if (cylinder >= 0) continue;
      placeOver(portOf(valve.block, port), beside.flat(), valve, placed, graph, symbolOf);
    }
    placed.push(...placeDrops(tower.drops, valve, symbolOf, slack));
  }
  return { placed, extent: extentOfAll(placed), ...(least === undefined ? {} : { height: least }) };
}

/** How much further apart the lines of a cylinder stand where a pilot line passes between their parts, or one from each side. */
const pilotRoom = { one: 4, two: 8 };

/**
 * How much further out the right one of a cylinder's two lines stands. A check valve that is opened from the other line has
 * its pilot lead straight on that line, unless that has parts of its own.
 */
function roomBetween(lanes: readonly Lane[], graph: FluidGraph): number {
  const [one, two] = lanes;
  if (!one || !two || one.inline.length === 0 || two.inline.length === 0) return 0;
  const piloted = [one, two].filter((lane) => lane.inline.some((inline) => pilotNode(inline, graph) !== undefined));
  return piloted.length === 0 ? 0 : piloted.length === 1 ? pilotRoom.one : pilotRoom.two;
}

/** The node that opens a check valve from outside. */
function pilotNode({ component }: Inline, graph: FluidGraph): FluidNodeId | undefined {
  return component.kind === "pilot-operated-check-valve" ? graph.nodeOf(component, "X") : undefined;
}

/** Every node along a lane. */
function nodesOf(lane: Lane, cylinder: FluidComponent, graph: FluidGraph): Set<FluidNodeId | undefined> {
  return new Set([graph.nodeOf(cylinder, lane.port), ...lane.inline.map(({ component, lower }) => graph.nodeOf(component, lower))]);
}

/**
 * A cylinder at the origin and what stands in and beside the lines below it; `bottom` is where the lines are free again, and
 * `lineOf` says where the line of a port runs.
 */
function hang(
  tower: Tower,
  index: number,
  graph: FluidGraph,
  symbolOf: SymbolOf,
  slack: number,
): { placed: Placed[]; bottom: number; lineOf(port: string): number | undefined } {
  const component = tower.cylinders[index] as FluidComponent;
  const cylinder: Placed = { block: cylinderBlock(component, symbolOf(component), symbolOf.usesOf), at: { x: 0, y: 0 } };
  const placed: Placed[] = [cylinder];
  const lanes = tower.lanes.filter((lane) => lane.cylinder === index);
  const apart = roomBetween(lanes, graph);
  const first = Math.min(...lanes.map((lane) => portOf(cylinder.block, lane.port).x));
  const ways = lanes.map((lane) => {
    const port = portOf(cylinder.block, lane.port);
    // The lines stand outward of each other: the left one's things to its left, the right one's to its right.
    const side: "left" | "right" = lanes.length > 1 && port.x === first ? "left" : "right";
    const aside = side === "right" ? apart : 0;
    // Cylinders side by side share lines that run across below their ports.
    const y = port.y + (tower.cylinders.length > 1 ? 3 : 0) + (apart > 0 ? 2 : 0);
    return { lane, side, x: port.x + aside, y, next: 0 };
  });
  /** A pilot looks to where the other line is, if that is what it is taken from. */
  const pilotInward = (lane: Lane, inline: Inline) => {
    const node = pilotNode(inline, graph);
    const others = lanes.filter((other) => other !== lane);
    return node === undefined || others.length === 0 || others.some((other) => nodesOf(other, component, graph).has(node));
  };
  const fits = (block: Block, x: number, y: number) => {
    const extent = moved(block.full, { x, y });
    return !placed.some((other) =>
      meet(moved(other.block.full, other.at), { ...extent, left: extent.left - 1, right: extent.right + 1, top: extent.top - 1 }),
    );
  };
  for (;;) {
    const open = ways.filter(({ lane, next }) => next < lane.beside.length).sort((a, b) => a.y - b.y || a.x - b.x);
    const [way] = open;
    if (!way) break;
    const { lane, side, x } = way;
    const i = way.next++;
    const branches = lane.beside[i] ?? [];
    if (branches.length > 0) way.y = placeBeside(branches, way, placed, graph, symbolOf) + 1;
    const inline = lane.inline[i];
    if (!inline) continue;
    const block = inlineBlock(inline, side, symbolOf, pilotInward(lane, inline));
    const above = portOf(block, inline.upper);
    let y = Math.ceil(way.y + (i === 0 && branches.length === 0 ? 1 : 1) + slack / 2 - above.y);
    while (!fits(block, x - above.x, y)) y++;
    placed.push({ block, at: { x: x - above.x, y } });
    way.y = y + portOf(block, inline.lower).y;
  }
  // Pilot lines cross over below their valves.
  const pilots = lanes.reduce((sum, lane) => sum + lane.inline.filter((inline) => pilotNode(inline, graph) !== undefined).length, 0);
  const lowest = Math.max(
    ...ways.map(({ y }) => y),
    ...placed.slice(1).map(({ block, at }) => at.y + block.full.bottom),
    portOf(cylinder.block, lanes[0]?.port ?? "").y,
  );
  const bottom = lowest + (apart > 0 ? pilots : 0);
  return { placed, bottom, lineOf: (port) => ways.find(({ lane }) => lane.port === port)?.x };
}

/** A part in a vertical line: of the ways to turn it, the one that keeps the room between the lines free. */
function inlineBlock({ component, upper, lower }: Inline, side: "left" | "right", symbolOf: SymbolOf, pilotInward = true): Block {
  if (component.kind === "valve") return valveBlock(component, symbolOf(component));
  const symbol = symbolOf(component);
  const inward = side === "left" ? 1 : -1;
  const turn = chooseTurn(symbol, { [upper]: "up", [lower]: "down" }, (turned) => {
    const third = turned.ports.find(({ name }) => name !== upper && name !== lower);
    // All but a pilot keeps its bulk away from the other line.
    if (third) return (pilotInward ? -inward : inward) * third.x;
    const { left, right } = extentOf(turned.box);
    return inward > 0 ? right : -left;
  });
  const block = bareBlock(component, symbol, turn);
  addWords(block, side);
  return block;
}

/** Sets branches beside a line, from a row that leads to them: what measures stands on it, what lets off hangs from it. Gives the row. */
function placeBeside(
  branches: readonly Entered[][],
  way: { side: "left" | "right"; x: number; y: number },
  placed: Placed[],
  graph: FluidGraph,
  symbolOf: SymbolOf,
): number {
  const chains = branches.map((branch) =>
    hangs(branch)
      ? { ...hanging(branch, way.side, symbolOf, graph), down: true }
      : { ...standing(branch, way.side, symbolOf, graph), down: false },
  );
  const tallest = Math.max(0, ...chains.filter(({ down }) => !down).map(({ top }) => -top));
  const row = Math.ceil(way.y + tallest + 2);
  const sign = way.side === "left" ? -1 : 1;
  let x = way.x + sign * 2;
  for (const chain of chains) {
    const level = chain.down ? row + Math.max(2, Math.ceil(1 - chain.top)) : row - 1;
    const inner = way.side === "left" ? Math.max(chain.right, 0) : Math.max(-chain.left, 0);
    const outer = way.side === "left" ? -chain.left : chain.right;
    let at = sign > 0 ? Math.ceil(x + inner) : Math.floor(x - inner);
    const free = (to: number) =>
      !chain.placed.some((one) =>
        placed.some((other) => meet(moved(other.block.full, other.at), moved(one.block.full, { x: one.at.x + to, y: one.at.y + level }))),
      );
    for (let tries = 0; tries < 60 && !free(at); tries++) at += sign;
    for (const one of chain.placed) placed.push({ block: one.block, at: { x: one.at.x + at, y: one.at.y + level } });
    x = at + sign * (outer + 1);
  }
  return row;
}

/** Things over a valve's working port, side by side. */
function placeOver(
  port: { x: number; y: number },
  chains: readonly Entered[][],
  valve: Placed,
  placed: Placed[],
  graph: FluidGraph,
  symbolOf: SymbolOf,
): void {
  let x = port.x;
  const side: Side = "right";
  for (const chain of chains) {
    const { placed: standingUp, right } = standing(chain, side, symbolOf, graph);
    const base = Math.floor(Math.min(port.y - 3, valve.block.full.top - 1));
    const free = (to: number) =>
      !standingUp.some((one) =>
        placed.some((other) =>
          meet(moved(other.block.full, other.at), moved(one.block.full, { x: one.at.x + to - 1, y: one.at.y + base })),
        ),
      );
    while (!free(x)) x++;
    for (const one of standingUp) placed.push({ block: one.block, at: { x: one.at.x + x, y: one.at.y + base } });
    x = Math.ceil(x + right + 2);
  }
}

/** What hangs at the valve's lower ports: straight below its port where there is room, outward where neighbours need it. */
export function placeDrops(drops: readonly Drop[], valve: Placed, symbolOf: SymbolOf, slack: number): Placed[] {
  const ports = drops.map((drop) => ({ drop, port: portOf(valve.block, drop.port) })).sort((a, b) => a.port.x - b.port.x);
  const filled = ports.filter(({ drop }) => drop.sink || drop.inline.length > 0);
  const plain = ports.filter((one) => !filled.includes(one));
  // The one that stays in the middle: a plain line if there is one.
  const keep = plain.length > 0 ? plain[Math.floor((plain.length - 1) / 2)] : filled[Math.floor((filled.length - 1) / 2)];
  const placed: Placed[] = [];
  const set = (one: (typeof ports)[number], limit: number, sign: -1 | 0 | 1): number => {
    const { drop, port } = one;
    const side: Side = sign < 0 ? "left" : "right";
    const blocks = [...drop.inline.map((inline) => ({ block: dropBlock(inline, side, symbolOf), inline }))];
    const sink = drop.sink ? sinkBlock(drop.sink, side, symbolOf) : undefined;
    const all = [...blocks.map(({ block }) => block), ...(sink ? [sink] : [])];
    if (all.length === 0) return sign < 0 ? port.x - 1 : port.x + 1;
    const reachLeft = Math.min(...all.map((block) => block.full.left));
    const reachRight = Math.max(...all.map((block) => block.full.right));
    let x = port.x;
    // Room between a body and the next line is one module; a text wants no more.
    if (sign < 0) x = Math.min(x, Math.floor(limit - Math.max(...all.map((block) => block.body.right))));
    if (sign > 0) x = Math.max(x, Math.ceil(limit - Math.min(...all.map((block) => block.body.left))));
    const straight = x === port.x;
    let y = port.y + (straight ? (drop.direct ? (drop.sink?.kind === "exhaust" && drop.inline.length === 0 ? 1 : 0) : 2) : 3) + slack / 2;
    const below = valve.block.texts.reduce((most, { at }) => Math.max(most, at.y), port.y);
    if (!straight || all.some((block) => block.full.right - block.full.left > 3)) y = Math.max(y, Math.ceil(below + 1));
    y = Math.ceil(y);
    for (const { block, inline } of blocks) {
      const top = portOf(block, inline.upper);
      placed.push({ block, at: { x: x - top.x, y: y - top.y } });
      y += portOf(block, inline.lower).y - top.y + (drop.beside.length > 0 ? 2 : 0);
    }
    if (sink) {
      const [top] = sink.ports;
      placed.push({ block: sink, at: { x: x - (top?.x ?? 0), y: y - (top?.y ?? 0) } });
    }
    return sign < 0 ? x + reachLeft - 0.5 : x + reachRight + 0.5;
  };
  const index = keep ? ports.indexOf(keep) : -1;
  if (index < 0) return placed;
  const middle = ports[index] as (typeof ports)[number];
  set(middle, 0, 0);
  const own = placed.length > 0 ? extentOfAll(placed) : { left: middle.port.x - 1, right: middle.port.x + 1 };
  let limit = Math.min(own.left, middle.port.x - 1);
  for (let i = index - 1; i >= 0; i--) limit = set(ports[i] as (typeof ports)[number], limit, -1);
  limit = Math.max(own.right, middle.port.x + 1);
  for (let i = index + 1; i < ports.length; i++) limit = set(ports[i] as (typeof ports)[number], limit, 1);
  return placed;
}

function dropBlock({ component, upper, lower }: Inline, side: "left" | "right", symbolOf: SymbolOf): Block {
  return inlineBlock({ component, upper, lower }, side, symbolOf);
}

function sinkBlock(component: FluidComponent, side: Side, symbolOf: SymbolOf): Block {
  const block = bareBlock(component, symbolOf(component), { quarter: 0 });
  addWords(block, side);
  return block;
}
