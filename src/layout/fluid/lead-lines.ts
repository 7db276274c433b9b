import type { Point } from "../../drawing/geometry.js";
import { isMeasuring } from "../../machine/kinds.js";
import type { FluidCircuit, FluidLine, FluidNodeId } from "../../machine/model.js";
import type { Direction } from "../../symbols/symbol.js";
import { forbidden, type Placed } from "./block.js";
import type { Composition, HeaderLine } from "./compose-sheet.js";
import type { FluidGraph } from "./graph.js";
import type { Extent } from "./modules.js";
import { type LineStyle, Router, type Step } from "./router.js";

/** The lines of a sheet by node, and the ports no way was found for. */
export interface LedLines {
  steps: Map<FluidNodeId, Step[]>;
  lost: Terminal[];
}

/** A port on the sheet that its node must reach. */
export interface Terminal extends Point {
  node: FluidNodeId;
  component: string;
  port: string;
  direction: Direction;
  style: LineStyle;
  /** A gauge or switch, which stands on a line rather than in it. */
  leaf: boolean;
}

/** Free space round the drawing in which lines may run, modules. */
const margin = 4;

/**
 * Leads every line of a sheet: shared lines straight across, then one net after another, the short ones first and control
 * lines last. A net that finds no way is led before the others in the next try.
 */
export function leadLines(composition: Composition, graph: FluidGraph, softly: boolean): LedLines {
  const terminals = terminalsOf(composition.placed, graph.circuit);
  const first: FluidNodeId[] = [];
  let best: LedLines | undefined;
  for (let tries = 0; tries < 4; tries++) {
    const led = attempt(composition, terminals, first, softly);
    if (!best || led.lost.length < best.lost.length) best = led;
    if (led.lost.length === 0) break;
    for (const { node } of led.lost) {
      if (first.includes(node)) first.splice(first.indexOf(node), 1);
      first.unshift(node);
    }
  }
  return best as LedLines;
}

function attempt(
  composition: Composition,
  terminals: ReadonlyMap<FluidNodeId, Terminal[]>,
  first: readonly FluidNodeId[],
  softly: boolean,
): LedLines {
  const { extent, placed, headers } = composition;
  const router = new Router({
    left: Math.floor(extent.left) - margin,
    top: Math.floor(extent.top) - margin,
    right: Math.ceil(extent.right) + margin,
    bottom: Math.ceil(extent.bottom) + margin,
  });
  for (const one of placed) {
    const { body, texts } = forbidden(one);
    router.keepOut(
      body,
      one.block.ports.map(({ x, y, direction }) => ({ x: x + one.at.x, y: y + one.at.y, direction })),
    );
    for (const text of texts) router.keepOutOfText(text);
    one.block.ports.forEach(({ name, x, y }, index) => {
      const node = one.block.component.ports.find((port) => port.name === name)?.node;
      router.reserve(node ?? -2 - index, { x: x + one.at.x, y: y + one.at.y });
    });
  }
  const headerOf = new Map(headers.map((header) => [header.node, header]));
  const nodes = inOrder(terminals, headerOf, first);
  const lost: Terminal[] = [];
  for (const header of headers) {
    const style = terminals.get(header.node)?.[0]?.style;
    if (header.to > header.from && style) layHeader(router, header, { ...style, header: header.shared });
  }
  for (const { node, points } of composition.risers) {
    const mine = terminals.get(node)?.find(({ x, y }) => x === points[0]?.x && y === points[0]?.y);
    if (mine) layPath(router, node, points, mine.style);
  }
  for (const node of nodes) {
    const mine = terminals.get(node) ?? [];
    layFacing(router, node, mine);
    for (const terminal of mine) router.begin(node, terminal);
    lost.push(...joinUp(router, node, mine, softly));
    const header = headerOf.get(node);
    const ends: Point[] = [...mine];
    if (header?.fromLeft) ends.push({ x: header.from, y: header.y });
    if (header?.toRight) ends.push({ x: header.to, y: header.y });
    router.prune(node, ends);
  }
  return { steps: new Map(nodes.map((node) => [node, router.steps(node)])), lost };
}

/** Lays a line with known bends as far as nothing is in its way. */
function layPath(router: Router, node: FluidNodeId, points: readonly Point[], style: LineStyle): void {
  for (let i = 1; i < points.length; i++) {
    const [a, b] = [points[i - 1] as Point, points[i] as Point];
    if ((a.x !== b.x || a.y !== b.y) && !router.lay(node, a, b, style)) return;
  }
}

function isControl({ role }: LineStyle): boolean {
  return role === "pilot" || role === "drain";
}

/** As much of a header as can be laid without meeting anything. */
function layHeader(router: Router, { node, y, from, to }: HeaderLine, style: LineStyle): void {
  if (router.lay(node, { x: from, y }, { x: to, y }, style)) return;
  for (let x = from; x < to; x++) router.lay(node, { x, y }, { x: x + 1, y }, style);
}

/** Headers, then what failed before, then nets by how far they reach; those with control lines only come last. */
function inOrder(
  terminals: ReadonlyMap<FluidNodeId, Terminal[]>,
  headers: ReadonlyMap<FluidNodeId, HeaderLine>,
  first: readonly FluidNodeId[],
): FluidNodeId[] {
  const reach = (list: readonly Terminal[]) => {
    const xs = list.map(({ x }) => x);
    const ys = list.map(({ y }) => y);
    return Math.max(...xs) - Math.min(...xs) + Math.max(...ys) - Math.min(...ys);
  };
  return [...terminals]
    .map(([node, list]) => {
      const early = first.indexOf(node);
      const stage = early >= 0 ? 0 : headers.has(node) ? 1 : list.every(({ style }) => isControl(style)) ? 3 : 2;
      return { node, stage, key: early >= 0 ? early : reach(list) };
    })
    .sort((a, b) => a.stage - b.stage || a.key - b.key || a.node - b.node)
    .map(({ node }) => node);
}

/** Lines between ports that look straight at each other. */
function layFacing(router: Router, node: FluidNodeId, list: readonly Terminal[]): void {
  const working = list.filter(({ style }) => !isControl(style));
  for (const one of working) {
    const down = one.direction === "down";
    if (!down && one.direction !== "right") continue;
    const opposite = down ? "up" : "left";
    const facing = working
      .filter(
        (other) => other.direction === opposite && (down ? other.x === one.x && other.y > one.y : other.y === one.y && other.x > one.x),
      )
      .sort((a, b) => a.y - b.y || a.x - b.x)[0];
    if (facing) router.lay(node, one, facing, one.style);
  }
}

/** What is joined first: lines between ports, then gauges and switches that stand on them, then control lines. */
function stageOf({ style, leaf }: Terminal): number {
  return isControl(style) ? 2 : leaf ? 1 : 0;
}

/** Joins the pieces of a net, the nearest first; gives the ports no way was found for. */
function joinUp(router: Router, node: FluidNodeId, list: readonly Terminal[], softly: boolean): Terminal[] {
  const lost: Terminal[] = [];
  const given = new Set<Terminal>();
  for (;;) {
    const pieces = router
      .pieces(node)
      .map((piece) => {
        const members = list.filter((terminal) => piece.has(terminal));
        const stage = Math.min(...members.map(stageOf), members.length === 0 ? 0 : 3);
        return { piece, members, stage, lone: piece.points.size === 1 };
      })
      .filter(({ members }) => !members.some((member) => given.has(member)));
    if (pieces.length < 2) return lost;
    // The lowest stage at which there are two pieces to join.
    const stages = pieces.map(({ stage }) => stage).sort((a, b) => a - b);
    const stage = stages[1] as number;
    const ready = pieces.filter((one) => one.stage <= stage);
    let best: { from: (typeof ready)[number]; way: number } | undefined;
    for (const from of ready) {
      // What stands higher on the sheet waits for the line to come up to it; a lone port is led to a line rather than the other way round.
      const way =
        Math.min(...ready.filter((to) => to !== from).map((to) => apart(from.piece.box, to.piece.box))) +
        (from.lone ? 0 : 0.5) -
        from.piece.box.top * 1e-4 +
        (from.stage < stage ? 1000 : 0);
      if (!best || way < best.way) best = { from, way };
    }
    const { from } = best as { from: (typeof ready)[number] };
    const style = (from.members.find((member) => !isControl(member.style)) ?? from.members[0] ?? list[0])?.style;
    const port = from.lone ? from.members[0] : undefined;
    const others = ready.filter((to) => to !== from).map(({ piece }) => piece);
    if (style && router.connect(node, from.piece, others, style, port, softly)) continue;
    // From the other side, where this one is shut in.
    lost.push(...(from.members.length > 0 ? from.members : []));
    for (const member of from.members) given.add(member);
    if (from.members.length === 0) return lost;
  }
}

/** How far two extents lie apart, along the grid. */
function apart(a: Extent, b: Extent): number {
  return Math.max(0, a.left - b.right, b.left - a.right) + Math.max(0, a.top - b.bottom, b.top - a.bottom);
}

/** Every joined port on the sheet, by node. */
function terminalsOf(placed: readonly Placed[], circuit: FluidCircuit): Map<FluidNodeId, Terminal[]> {
  const lines = new Map<string, FluidLine[]>();
  const onNode = new Map<FluidNodeId, FluidLine>();
  for (const line of circuit.lines) {
    if (!onNode.has(line.node)) onNode.set(line.node, line);
    for (const end of line.ends) {
      if (end.kind !== "port") continue;
      const key = `${end.component} ${end.port}`;
      lines.set(key, [...(lines.get(key) ?? []), line]);
    }
  }
  const found = new Map<FluidNodeId, Terminal[]>();
  for (const { block, at } of placed) {
    for (const { name, x, y, direction } of block.ports) {
      const node = block.component.ports.find((port) => port.name === name)?.node;
      if (node === undefined) continue;
      const mine = lines.get(`${block.component.id} ${name}`) ?? [];
      // A port that a working line comes to is on a working line, whatever else branches off there.
      const line = mine.find(({ role }) => role === "working") ?? mine[0] ?? onNode.get(node);
      const style: LineStyle = { part: line?.id ?? `${circuit.id}/node${node}`, role: line?.role ?? "working", header: false };
      found.set(node, [
        ...(found.get(node) ?? []),
        {
          node,
          component: block.component.id,
          port: name,
          x: x + at.x,
          y: y + at.y,
          direction,
          style,
          leaf: isMeasuring(block.component.kind),
        },
      ]);
    }
  }
  return found;
}
