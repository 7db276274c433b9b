import type { ELK, ElkExtendedEdge, ElkNode } from "elkjs/lib/elk-api.js";
import type { FluidComponent, FluidNodeId } from "../../machine/model.js";
import type { Direction } from "../../symbols/symbol.js";
import { type Arrangement, extentOfAll, type SymbolOf } from "./arrangement.js";
import type { Block, Placed } from "./block.js";
import { type FluidGraph, isSink, throughPorts } from "./graph.js";
import { type Drop, placeDrops } from "./tower.js";
import { uprightBlock } from "./upright-block.js";

/** Components that stand higher the more they are at the end of the flow. */
function rank(component: FluidComponent): number {
  if (isSink(component)) return -1;
  if (component.kind === "valve") return 0;
  if (throughPorts(component)) return 1;
  return component.kind === "cylinder" ? 3 : 2;
}

const sides: Record<Direction, string> = { up: "NORTH", down: "SOUTH", left: "WEST", right: "EAST" };

/**
 * Places a group that is no plain tower: layer by layer upward along the flow, with the ports where the symbols have them.
 * Only the places are taken; its lines are led on the module grid with all others.
 */
export async function placeByLayers(
  group: readonly FluidComponent[],
  graph: FluidGraph,
  headers: ReadonlySet<FluidNodeId>,
  symbolOf: SymbolOf,
  slack: number,
): Promise<Arrangement> {
  const whole = new Map(group.map((component) => [component.id, uprightBlock(component, graph, symbolOf)]));
  const hung = hangSinks(group, whole, graph, symbolOf, slack);
  const below = new Set([...hung.values()].flatMap((placed) => placed.map(({ block }) => block.component)));
  const standing = group.filter((component) => !below.has(component));
  const blocks = new Map(standing.map(({ id }) => [id, whole.get(id) as Block]));
  const [only] = blocks.values();
  if (standing.length === 1 && only) {
    const alone: Placed[] = [{ block: only, at: { x: 0, y: 0 } }, ...(hung.get(only.component.id) ?? [])];
    return { placed: alone, extent: extentOfAll(alone), ...(only.component.kind === "cylinder" ? { height: 0 } : {}) };
  }
  /** A block with what hangs from it. */
  const fullOf = (block: Block) => extentOfAll([{ block, at: { x: 0, y: 0 } }, ...(hung.get(block.component.id) ?? [])]);
  const margin = 1.5 + slack / 2;
  const children: ElkNode[] = standing.map((component) => {
    const block = blocks.get(component.id) as Block;
    const full = fullOf(block);
    return {
      id: component.id,
      width: full.right - full.left + 2 * margin,
      height: full.bottom - full.top + 2 * margin,
      layoutOptions: { "elk.portConstraints": "FIXED_POS" },
      ports: block.ports.map((port) => {
        const side = sides[port.direction];
        const x = side === "WEST" ? 0 : side === "EAST" ? full.right - full.left + 2 * margin : port.x - full.left + margin;
        const y = side === "NORTH" ? 0 : side === "SOUTH" ? full.bottom - full.top + 2 * margin : port.y - full.top + margin;
        return { id: `${component.id} ${port.name}`, x, y, width: 0, height: 0, layoutOptions: { "elk.port.side": side as string } };
      }),
    };
  });
  const edges: ElkExtendedEdge[] = [];
  const members = new Set(standing);
  const nodes = new Set(
    standing.flatMap(({ ports }) => ports.flatMap(({ node }) => (node === undefined || headers.has(node) ? [] : [node]))),
  );
  for (const node of nodes) {
    const joints = graph.at(node).filter(({ component }) => members.has(component));
    const looking = (joint: (typeof joints)[number]) =>
      blocks.get(joint.component.id)?.ports.find(({ name }) => name === joint.port)?.direction;
    // Lines lead from ports that look up to ports that look down; where all look alike, from what lies lowest along the flow.
    const lower = joints.filter((joint) => looking(joint) === "up");
    const higher = joints.filter((joint) => looking(joint) !== "up");
    const sorted = joints
      .map((joint, index) => ({ joint, index, key: rank(joint.component) }))
      .sort((a, b) => a.key - b.key || a.index - b.index)
      .map(({ joint }) => joint);
    const pairs =
      lower.length > 0 && higher.length > 0
        ? lower.flatMap((from) => higher.map((to) => [from, to] as const))
        : sorted.slice(1).map((to) => [sorted[0] as (typeof joints)[number], to] as const);
    for (const [from, to] of pairs) {
      edges.push({
        id: `${node} ${edges.length}`,
        sources: [`${from.component.id} ${from.port}`],
        targets: [`${to.component.id} ${to.port}`],
      });
    }
  }
  const { default: Elk } = await import("elkjs/lib/elk.bundled.js");
  // The package is CommonJS and its types speak of a default export of its own.
  const elk = new (Elk as unknown as new () => ELK)();
  const laid = await elk.layout({
    id: "group",
    layoutOptions: {
      "elk.algorithm": "layered",
      "elk.direction": "UP",
      "elk.edgeRouting": "ORTHOGONAL",
      "elk.randomSeed": "1",
      "elk.layered.considerModelOrder.strategy": "NODES_AND_EDGES",
      "elk.layered.nodePlacement.strategy": "NETWORK_SIMPLEX",
      "elk.layered.nodePlacement.favorStraightEdges": "true",
      "elk.spacing.nodeNode": String(2 + slack),
      "elk.layered.spacing.nodeNodeBetweenLayers": String(4 + slack),
      "elk.spacing.edgeNode": "2",
      "elk.spacing.edgeEdge": "2",
    },
    children,
    edges,
  });
  const placed: Placed[] = (laid.children ?? []).map(({ id, x = 0, y = 0 }) => {
    const block = blocks.get(id) as Block;
    const full = fullOf(block);
    return { block, at: { x: Math.round(x + margin - full.left), y: Math.round(y + margin - full.top) } };
  });
  for (const { block, at } of [...placed]) {
    for (const one of hung.get(block.component.id) ?? []) placed.push({ block: one.block, at: { x: one.at.x + at.x, y: one.at.y + at.y } });
  }
  const valves = placed.filter(({ block }) => block.component.kind === "valve");
  const others = placed.filter(({ block }) => !isSink(block.component));
  const base = valves.length > 0 ? valves : others.length > 0 ? others : placed;
  const line = Math.max(...base.map(({ at }) => at.y));
  const leftmost = Math.min(...base.filter(({ at }) => at.y === line).map(({ at }) => at.x));
  for (const one of placed) one.at = { x: one.at.x - leftmost, y: one.at.y - line };
  const cylinders = placed.filter(({ block }) => block.component.kind === "cylinder");
  return {
    placed,
    extent: extentOfAll(placed),
    ...(cylinders.length > 0 ? { height: Math.max(...cylinders.map(({ at }) => -at.y)) } : {}),
  };
}

/** Silencers, tanks and open exhausts that only one valve of the group leads to, below its ports; places are from the valve's origin. */
function hangSinks(
  group: readonly FluidComponent[],
  blocks: ReadonlyMap<string, Block>,
  graph: FluidGraph,
  symbolOf: SymbolOf,
  slack: number,
): Map<string, Placed[]> {
  const hung = new Map<string, Placed[]>();
  for (const valve of group) {
    const block = valve.kind === "valve" ? blocks.get(valve.id) : undefined;
    if (!block) continue;
    const drops = block.ports
      .filter(({ direction, name }) => direction === "down" && graph.nodeOf(valve, name) !== undefined)
      .map(({ name }): Drop => {
        const others = graph.others(graph.nodeOf(valve, name), valve);
        const sink = others.length === 1 ? others[0]?.component : undefined;
        const own = sink && isSink(sink) && sink.ports.length === 1 && group.includes(sink) ? { sink } : {};
        return { port: name, inline: [], beside: [], direct: others.length === 1, ...own };
      });
    if (drops.some(({ sink }) => sink)) hung.set(valve.id, placeDrops(drops, { block, at: { x: 0, y: 0 } }, symbolOf, slack));
  }
  return hung;
}

/** Stands the topmost cylinders of a group higher, so that they are level with those of other groups. */
export function raiseCylinders({ placed, height }: Arrangement, to: number): Arrangement {
  if (height === undefined || to <= height) return { placed, extent: extentOfAll(placed), ...(height === undefined ? {} : { height }) };
  const raised = placed.map(({ block, at }) => ({
    block,
    at: block.component.kind === "cylinder" && at.y === -height ? { x: at.x, y: -to } : at,
  }));
  return { placed: raised, extent: extentOfAll(raised), height: to };
}
