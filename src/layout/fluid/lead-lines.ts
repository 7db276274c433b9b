import type { Point } from "../../drawing/geometry.js";
import type { FluidCircuit, FluidLine, FluidNodeId } from "../../machine/model.js";
import type { Direction } from "../../symbols/symbol.js";
import { forbidden, type Placed } from "./block.js";
import type { Composition, HeaderLine } from "./compose-sheet.js";
import type { FluidGraph } from "./graph.js";
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

function attempt(composition: Composition, terminals: ReadonlyMap<FluidNodeId, Terminal[]>, first: readonly FluidNodeId[], softly: boolean): LedLines {
  const { extent, placed, headers } = composition;
  const router = new Router({
    left: Math.floor(extent.left) - margin, top: Math.floor(extent.top) - margin,
    right: Math.ceil(extent.right) + margin, bottom: Math.ceil(extent.bottom) + margin,
  });
  for (const one of placed) {
    const { body, texts } = forbidden(one);
    router.keepOut(body, one.block.ports.map(({ x, y, direction }) => ({ x: x + one.at.x, y: y + one.at.y, direction })));
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
    if (header.to > header.from && style) layHeader(router, header, { ...style, header: true });
  }
  for (const node of nodes) {
    const mine = terminals.get(node) ?? [];
    for (const group of [mine.filter(({ style }) => !isControl(style)), mine.filter(({ style }) => isControl(style))]) {
      const open = [...group];
      while (open.length > 0) {
        const next = router.has(node) ? nearest(open, (point) => router.reaches(node, point), done(mine, open), headerOf.get(node)) : highest(open);
        open.splice(open.indexOf(next), 1);
        if (!router.connect(node, next, next.style, softly)) lost.push(next);
      }
    }
    const header = headerOf.get(node);
    const ends: Point[] = [...mine];
    if (header?.fromLeft) ends.push({ x: header.from, y: header.y });
    if (header?.toRight) ends.push({ x: header.to, y: header.y });
    router.prune(node, ends);
  }
  return { steps: new Map(nodes.map((node) => [node, router.steps(node)])), lost };
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
function inOrder(terminals: ReadonlyMap<FluidNodeId, Terminal[]>, headers: ReadonlyMap<FluidNodeId, HeaderLine>, first: readonly FluidNodeId[]): FluidNodeId[] {
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

function done(all: readonly Terminal[], open: readonly Terminal[]): Terminal[] {
  return all.filter((terminal) => !open.includes(terminal));
}

function highest(list: readonly Terminal[]): Terminal {
  return list.reduce((best, one) => (one.y < best.y || (one.y === best.y && one.x < best.x) ? one : best));
}

/** The port that has the least way to what is already joined. */
function nearest(open: readonly Terminal[], touches: (point: Point) => boolean, joined: readonly Terminal[], header?: HeaderLine): Terminal {
  const far = (one: Terminal) => {
    if (touches(one)) return 0;
    const ways = joined.map(({ x, y }) => Math.abs(x - one.x) + Math.abs(y - one.y));
    if (header && header.to > header.from) ways.push(Math.abs(header.y - one.y) + Math.max(header.from - one.x, one.x - header.to, 0));
    return Math.min(...ways);
  };
  return open.map((one) => ({ one, way: far(one) })).reduce((best, next) => (next.way < best.way ? next : best)).one;
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
      found.set(node, [...(found.get(node) ?? []), { node, component: block.component.id, port: name, x: x + at.x, y: y + at.y, direction, style }]);
    }
  }
  return found;
}
