import type { Point } from "../../drawing/geometry.js";
import type { Direction } from "../../symbols/symbol.js";
import type { Extent } from "./modules.js";

/** How a stretch of line is drawn; the router only keeps it with the stretch. */
export interface LineStyle {
  part: string;
  role: "working" | "pilot" | "drain" | "exhaust";
  header: boolean;
}

/** One module of line between two neighbouring grid points, `a` left of or above `b`. */
export interface Step {
  a: Point;
  b: Point;
  style: LineStyle;
}

/** Part of a net that hangs together. */
export interface Piece {
  points: ReadonlySet<number>;
  /** Its extent on the router's own grid. */
  box: Extent;
  has(point: Point): boolean;
}

/** What each turn of a line costs. One module of line costs `pace`. */
const pace = 2;
const bendCost = 12;
const crossingCost = 16;
/** A line that runs beside another one module apart. */
const besideCost = 1.5;
/** Running through a text, where there is no other way. */
const throughTextCost = 60;

const right = 0;
const up = 1;
const left = 2;
const down = 3;
const headings: Record<Direction, number> = { right, up, left, down };

/**
 * Finds ways for lines on the module grid, round what stands there. Lines of different nets never share a stretch, a bend or
 * an end; they may cross where both run straight.
 */
export class Router {
  private readonly width: number;
  private readonly height: number;
  /** Per point, for the edge to its right and the edge below it. */
  private readonly blocked: [Uint8Array, Uint8Array];
  private readonly texts: [Uint8Array, Uint8Array];
  private readonly taken: [Int32Array, Int32Array];
  /** Which net passes a point level and upright, and whether it stops or bends there. */
  private readonly passing: [Int32Array, Int32Array];
  private readonly stop: Int32Array;
  private readonly nets = new Map<number, { points: Set<number>; steps: Map<string, Step> }>();
  // The search's own tables, stamped so that they need no clearing.
  private readonly cost: Float64Array;
  private readonly from: Int32Array;
  private readonly seen: Int32Array;
  private stamp = 0;

  constructor(private readonly bounds: Extent) {
    this.width = bounds.right - bounds.left + 1;
    this.height = bounds.bottom - bounds.top + 1;
    const size = this.width * this.height;
    this.blocked = [new Uint8Array(size), new Uint8Array(size)];
    this.texts = [new Uint8Array(size), new Uint8Array(size)];
    this.taken = [new Int32Array(size), new Int32Array(size)];
    this.passing = [new Int32Array(size), new Int32Array(size)];
    this.stop = new Int32Array(size);
    this.cost = new Float64Array(size * 4);
    this.from = new Int32Array(size * 4);
    this.seen = new Int32Array(size * 4);
  }

  /** Keeps lines out of a rectangle, but for the ways straight out of these ports. */
  keepOut(extent: Extent, ports: readonly (Point & { direction: Direction })[]): void {
    const open = new Set<number>();
    for (const port of ports) {
      let at: Point = { x: port.x, y: port.y };
      for (let i = 0; i < 40; i++) {
        const next = ahead(at, headings[port.direction]);
        open.add(this.edgeKey(at, next));
        at = next;
        if (at.x <= extent.left || at.x >= extent.right || at.y <= extent.top || at.y >= extent.bottom) break;
      }
    }
    this.cover(extent, this.blocked, open);
  }

  /** Keeps lines out of a text, unless there is no other way. */
  keepOutOfText(extent: Extent): void {
    this.cover(extent, this.texts, new Set());
  }

  /** Gives a port to its net: no other line may come there. */
  reserve(net: number, at: Point): void {
    if (this.inside(at)) this.stop[this.index(at)] = net + 1;
  }

  /** Begins a net at a point. */
  begin(net: number, at: Point): void {
    this.netOf(net).points.add(this.index(at));
  }

  steps(net: number): Step[] {
    return [...(this.nets.get(net)?.steps.values() ?? [])];
  }

  /** Lays a straight line without looking for a way. Gives false, and lays nothing, where something is in its way. */
  lay(net: number, a: Point, b: Point, style: LineStyle): boolean {
    const points = straight(a, b);
    if (!points.every((point) => this.inside(point))) return false;
    const axis = a.y === b.y ? 0 : 1;
    for (let i = 0; i < points.length; i++) {
      const point = points[i] as Point;
      const p = this.index(point);
      const stop = this.stop[p] as number;
      if (stop !== 0 && stop !== net + 1) return false;
      const next = points[i + 1];
      if (next) {
        const edge = Math.min(p, this.index(next));
        if (this.blocked[axis][edge] || this.texts[axis][edge] || (this.taken[axis][edge] as number) !== 0) return false;
      }
      const across = this.passing[1 - axis]?.[p] as number;
      if (across !== 0 && across !== net + 1 && (i === 0 || i === points.length - 1)) return false;
    }
    this.commit(net, points, style);
    return true;
  }

  /** The pieces of a net that do not hang together yet, each as its points, in the order they were begun. */
  pieces(net: number): Piece[] {
    const known = this.nets.get(net);
    if (!known) return [];
    const near = new Map<number, number[]>();
    for (const { a, b } of known.steps.values()) {
      const [p, q] = [this.index(a), this.index(b)];
      near.set(p, [...(near.get(p) ?? []), q]);
      near.set(q, [...(near.get(q) ?? []), p]);
    }
    const seen = new Set<number>();
    const pieces: Piece[] = [];
    for (const start of known.points) {
      if (seen.has(start)) continue;
      const piece = new Set([start]);
      for (const p of piece) {
        seen.add(p);
        for (const q of near.get(p) ?? []) piece.add(q);
      }
      pieces.push({ points: piece, box: this.boxOf(piece), has: (point) => piece.has(this.index(point)) });
    }
    return pieces;
  }

  /**
   * Finds the best way from one piece of a net to any of others, and lays it.
   * @param port where the piece is a port and nothing more: lines leave it that way
   * @param softly may run through a text where nothing else is possible
   * @returns false where there is no way
   */
  connect(
    net: number,
    from: Piece,
    to: readonly Piece[],
    style: LineStyle,
    port: { direction: Direction } | undefined,
    softly = false,
  ): boolean {
    const goal = new Set(to.flatMap(({ points }) => [...points]));
    if (goal.size === 0) return false;
    const seeds: number[] = [];
    for (const p of from.points) {
      if (port) seeds.push(p * 4 + headings[port.direction]);
      else if (this.ways(p) > 0 && !this.shared(p, net + 1)) for (let d = 0; d < 4; d++) seeds.push(p * 4 + d);
    }
    const path = this.search(net, seeds, goal, softly);
    if (!path) return false;
    this.commit(net, path, style);
    return true;
  }

  /** Takes away stretches that lead nowhere: those whose end is none of the given points. */
  prune(net: number, ends: readonly Point[]): void {
    const known = this.nets.get(net);
    if (!known) return;
    const kept = new Set(ends.map((end) => this.index(end)));
    const at = new Map<number, string[]>();
    for (const [key, { a, b }] of known.steps) {
      for (const p of [this.index(a), this.index(b)]) at.set(p, [...(at.get(p) ?? []), key]);
    }
    const loose = [...at].filter(([p, keys]) => keys.length === 1 && !kept.has(p)).map(([p]) => p);
    while (loose.length > 0) {
      const p = loose.pop() as number;
      const [key] = at.get(p) ?? [];
      if (key === undefined) continue;
      const step = known.steps.get(key);
      if (!step) continue;
      const axis = step.a.y === step.b.y ? 0 : 1;
      known.steps.delete(key);
      known.points.delete(p);
      this.taken[axis][this.index(step.a)] = 0;
      this.passing[axis][p] = 0;
      this.stop[p] = 0;
      at.delete(p);
      const other = this.index(step.a) === p ? this.index(step.b) : this.index(step.a);
      const rest = (at.get(other) ?? []).filter((one) => one !== key);
      at.set(other, rest);
      if (rest.length === 1 && !kept.has(other)) loose.push(other);
    }
  }

  private search(net: number, seeds: readonly number[], goal: ReadonlySet<number>, softly: boolean): Point[] | undefined {
    const { width } = this;
    const mark = net + 1;
    const box = this.boxOf(goal);
    const distance = (p: number) => {
      const x = p % width;
      const y = (p - x) / width;
      return pace * (Math.max(box.left - x, x - box.right, 0) + Math.max(box.top - y, y - box.bottom, 0));
    };
    this.stamp++;
    const heap = new Heap();
    for (const seed of seeds) {
      const p = (seed - (seed % 4)) / 4;
      // Where a line ends the way may go straight on; elsewhere it branches off.
      const spent = this.ways(p) > 2 ? bendCost : 0;
      this.cost[seed] = spent;
      this.seen[seed] = this.stamp;
      this.from[seed] = -1;
      heap.push(spent + distance(p), seed);
    }
    for (let state = heap.pop(); state !== undefined; state = heap.pop()) {
      const d = state % 4;
      const p = (state - d) / 4;
      const spent = this.cost[state] as number;
      const first = this.from[state] === -1;
      if (!first && goal.has(p)) return this.trace(state);
      if (heap.lastKey > spent + distance(p) + 1e-9) continue;
      for (let turn = 0; turn < 4; turn++) {
        if (turn === ((d + 2) & 3) || (first && turn !== d)) continue;
        const axis = turn & 1;
        const q = turn === right ? p + 1 : turn === left ? p - 1 : turn === down ? p + width : p - width;
        if (turn === right ? p % width === width - 1 : turn === left ? p % width === 0 : q < 0 || q >= this.stop.length) continue;
        const edge = Math.min(p, q);
        if (this.blocked[axis]?.[edge] || (this.taken[axis]?.[edge] as number) !== 0) continue;
        let spend = spent + pace;
        if (this.texts[axis]?.[edge]) {
          if (!softly) continue;
          spend += throughTextCost;
        }
        if (turn !== d) {
          if ((this.passing[0][p] as number) !== 0 || (this.passing[1][p] as number) !== 0) continue;
          // Of ways with as many bends the one that bends soon is taken.
          spend += bendCost + Math.min(3, spent * 0.01);
        }
        const stop = this.stop[q] as number;
        if (stop !== 0 && stop !== mark) continue;
        const across = this.passing[1 - axis]?.[q] as number;
        if (goal.has(q)) {
          if (this.shared(q, mark)) continue;
          // Two lines that meet a third do so one after the other, not at one point.
          if (this.ways(q) > 2) spend += bendCost;
        } else if (across !== 0) spend += crossingCost;
        const side = axis === 0 ? width : 1;
        for (const beside of [edge - side, edge + side]) {
          const other = this.taken[axis]?.[beside] ?? 0;
          if (other !== 0 && other !== mark) spend += besideCost;
        }
        const next = q * 4 + turn;
        if (this.seen[next] === this.stamp && (this.cost[next] as number) <= spend) continue;
        this.seen[next] = this.stamp;
        this.cost[next] = spend;
        this.from[next] = state;
        heap.push(spend + distance(q), next);
      }
    }
    return undefined;
  }

  /** How many stretches of line come together at a point. */
  private ways(p: number): number {
    const [level, upright] = this.taken;
    return [level[p], level[p - 1], upright[p], upright[p - this.width]].filter((net) => net !== undefined && net !== 0).length;
  }

  /** Whether another net runs through a point. */
  private shared(p: number, mark: number): boolean {
    return this.passing.some((table) => table[p] !== 0 && table[p] !== mark);
  }

  private trace(state: number): Point[] {
    const points: Point[] = [];
    for (let at = state; at >= 0; at = this.from[at] as number) points.push(this.point((at - (at % 4)) / 4));
    return points.reverse();
  }

  private commit(net: number, points: readonly Point[], style: LineStyle): void {
    const { points: own, steps } = this.netOf(net);
    const mark = net + 1;
    points.forEach((point, i) => {
      const p = this.index(point);
      own.add(p);
      const before = points[i - 1];
      const after = points[i + 1];
      const axes = [before, after].flatMap((near) => (near ? [near.y === point.y ? 0 : 1] : []));
      for (const axis of axes) (this.passing[axis] as Int32Array)[p] = mark;
      if (!before || !after || axes[0] !== axes[1]) this.stop[p] = mark;
      if (!after) return;
      const axis = after.y === point.y ? 0 : 1;
      const forward = this.index(after) > p;
      (this.taken[axis] as Int32Array)[forward ? p : this.index(after)] = mark;
      steps.set(`${axis} ${forward ? p : this.index(after)}`, forward ? { a: point, b: after, style } : { a: after, b: point, style });
    });
  }

  private netOf(net: number) {
    const known = this.nets.get(net) ?? { points: new Set<number>(), steps: new Map<string, Step>() };
    this.nets.set(net, known);
    return known;
  }

  private cover({ left: l, top, right: r, bottom }: Extent, tables: [Uint8Array, Uint8Array], open: ReadonlySet<number>): void {
    const { bounds, width, height } = this;
    for (let y = Math.max(0, Math.floor(top) - bounds.top - 1); y <= Math.min(height - 1, Math.ceil(bottom) - bounds.top); y++) {
      for (let x = Math.max(0, Math.floor(l) - bounds.left - 1); x <= Math.min(width - 1, Math.ceil(r) - bounds.left); x++) {
        const sx = x + bounds.left;
        const sy = y + bounds.top;
        const p = y * width + x;
        if (sy > top && sy < bottom && sx < r && sx + 1 > l && !open.has(p * 2)) tables[0][p] = 1;
        if (sx > l && sx < r && sy < bottom && sy + 1 > top && !open.has(p * 2 + 1)) tables[1][p] = 1;
      }
    }
  }

  private edgeKey(a: Point, b: Point): number {
    return Math.min(this.index(a), this.index(b)) * 2 + (a.y === b.y ? 0 : 1);
  }

  private boxOf(points: ReadonlySet<number>): Extent {
    const box = {
      left: Number.POSITIVE_INFINITY,
      top: Number.POSITIVE_INFINITY,
      right: Number.NEGATIVE_INFINITY,
      bottom: Number.NEGATIVE_INFINITY,
    };
    for (const p of points) {
      const x = p % this.width;
      const y = (p - x) / this.width;
      box.left = Math.min(box.left, x);
      box.right = Math.max(box.right, x);
      box.top = Math.min(box.top, y);
      box.bottom = Math.max(box.bottom, y);
    }
    return box;
  }

  private inside({ x, y }: Point): boolean {
    const { bounds } = this;
    return x >= bounds.left && x <= bounds.right && y >= bounds.top && y <= bounds.bottom;
  }

  private index({ x, y }: Point): number {
    return (y - this.bounds.top) * this.width + (x - this.bounds.left);
  }

  private point(index: number): Point {
    const x = index % this.width;
    return { x: x + this.bounds.left, y: (index - x) / this.width + this.bounds.top };
  }
}

function ahead({ x, y }: Point, heading: number): Point {
  return heading === right ? { x: x + 1, y } : heading === left ? { x: x - 1, y } : heading === up ? { x, y: y - 1 } : { x, y: y + 1 };
}

function straight(a: Point, b: Point): Point[] {
  const length = Math.abs(b.x - a.x) + Math.abs(b.y - a.y);
  const dx = Math.sign(b.x - a.x);
  const dy = Math.sign(b.y - a.y);
  return Array.from({ length: length + 1 }, (_, i) => ({ x: a.x + dx * i, y: a.y + dy * i }));
}

/** A binary heap of states by key; of equal keys the one put in first comes out first. */
class Heap {
  private keys: number[] = [];
  private orders: number[] = [];
  private states: number[] = [];
  private count = 0;
  /** The key of the state taken last. */
  lastKey = 0;

  push(key: number, state: number): void {
    let i = this.keys.length;
    const order = this.count++;
    this.keys.push(key);
    this.orders.push(order);
    this.states.push(state);
    while (i > 0) {
      const parent = (i - 1) >> 1;
      if (!this.before(i, parent)) break;
      this.swap(i, parent);
      i = parent;
    }
  }

  pop(): number | undefined {
    const top = this.states[0];
    if (top === undefined) return undefined;
    this.lastKey = this.keys[0] as number;
    this.swap(0, this.keys.length - 1);
    this.keys.pop();
    this.orders.pop();
    this.states.pop();
    const size = this.keys.length;
    for (let i = 0; ; ) {
      const one = 2 * i + 1;
      if (one >= size) break;
      const child = one + 1 < size && this.before(one + 1, one) ? one + 1 : one;
      if (!this.before(child, i)) break;
      this.swap(child, i);
      i = child;
    }
    return top;
  }

  private before(i: number, j: number): boolean {
    const difference = (this.keys[i] as number) - (this.keys[j] as number);
    return difference !== 0 ? difference < 0 : (this.orders[i] as number) < (this.orders[j] as number);
  }

  private swap(i: number, j: number): void {
    for (const list of [this.keys, this.orders, this.states]) {
      const kept = list[i] as number;
      list[i] = list[j] as number;
      list[j] = kept;
    }
  }
}
