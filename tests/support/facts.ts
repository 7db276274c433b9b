import { textBox } from "../../src/drawing/extent.js";
import type { Box, Mm, Point } from "../../src/drawing/geometry.js";
import type { Segment } from "../../src/drawing/marks.js";
import { arcCurves } from "../../src/drawing/path.js";
import { type CircuitSheet, type PlacedSymbol, type PlacedText, type PlacedWire, rowPitch } from "../../src/layout/placement.js";
import type { Direction, Turn } from "../../src/symbols/symbol.js";

/**
 * Facts about a sheet that any good drawing shares, read back from what was placed. Each finder gives sentences that name
 * the place, so that a failed `toEqual([])` says what to look at.
 */

/** Positions closer than this are the same, mm. */
const near: Mm = 0.02;

interface Stretch {
  a: Point;
  b: Point;
}

// ---------------------------------------------------------------- texts

/** Texts that overlap another text or a stroke, fill or text of a symbol. `gap` is the least distance asked for, mm. */
export function textOverlaps(sheet: CircuitSheet, gap: Mm = 0.2): string[] {
  const found: string[] = [];
  const texts = sheet.texts.map((text) => ({ name: describe(text), box: inkBox(text) })).filter(({ box }) => box.width > 0);
  const inSymbols = sheet.symbols.flatMap((placed) =>
    placed.symbol.shapes.flatMap((shape) => {
      if (shape.kind !== "text") return [];
      const at = onSheet(placed, shape.at);
      return [
        {
          name: `text “${shape.text}” of ${placed.part}`,
          box: textBox({ ...shape, at: { x: at.x, y: at.y + shape.height / 2 } }),
        },
      ];
    }),
  );
  const all = [...texts, ...inSymbols];
  texts.forEach((one, index) => {
    for (let other = index + 1; other < all.length; other++) {
      const second = all[other] as (typeof all)[number];
      if (boxesMeet(one.box, second.box, gap)) found.push(`${one.name} overlaps ${second.name}`);
    }
  });
  for (const placed of sheet.symbols) {
    const around = symbolBox(placed);
    const candidates = texts.filter(({ box }) => boxesMeet(box, around, gap));
    if (candidates.length === 0) continue;
    const strokes = symbolStretches(placed);
    for (const { name, box } of candidates) {
      if (strokes.some((stretch) => stretchMeetsBox(stretch, grow(box, gap)))) found.push(`${name} overlaps the symbol of ${placed.part}`);
    }
  }
  return found;
}

/** Texts that touch a wire, a plain stroke or a dot. */
export function textsOnWires(sheet: CircuitSheet, gap: Mm = 0.2): string[] {
  const lines = [
    ...sheet.wires.map((wire) => ({ name: `wire ${wire.part}`, stretches: stretchesOf(wire.points), half: wire.width / 2 })),
    ...sheet.strokes.map((stroke) => ({ name: `stroke ${stroke.role}`, stretches: stretchesOf(stroke.path), half: stroke.width / 2 })),
    ...sheet.dots.map((dot) => ({ name: `dot ${dot.part}`, stretches: [{ a: dot.at, b: dot.at }], half: dot.diameter / 2 })),
  ];
  return sheet.texts.flatMap((text) => {
    const box = inkBox(text);
    if (box.width <= 0) return [];
    return lines
      .filter(({ stretches, half }) => stretches.some((stretch) => stretchMeetsBox(stretch, grow(box, gap + half))))
      .map(({ name }) => `${describe(text)} touches ${name}`);
  });
}

/**
 * Texts nearer to a line than `lines`, or to another text, a symbol's stroke or a plain stroke than `others`, mm. A port's name
 * stands between the lines of its own symbol, a reference at the end of a line over that line: they are held to `others`.
 */
export function tooClose(sheet: CircuitSheet, { lines, others }: { lines: Mm; others: Mm }): string[] {
  const atEnds = new Set(sheet.strokes.filter(({ role }) => role === "continuation").map(({ part }) => part));
  const nodesOf = (part: string | undefined) => {
    const placed = sheet.symbols.filter((one) => one.part === part);
    const ports = placed.flatMap((one) => portsOf(one).map(({ at }) => at));
    return new Set(sheet.wires.filter((wire) => ports.some((port) => onWire(port, wire))).map(({ node }) => node));
  };
  const found = textOverlaps(sheet, others);
  for (const text of sheet.texts) {
    const own = text.role === "port" ? nodesOf(text.part) : undefined;
    const wires = sheet.wires.filter(({ node }) => !own?.has(node));
    const gap = text.role === "reference" && atEnds.has(text.part) ? others : lines;
    const alone = { ...sheet, texts: [text], strokes: [], dots: [] };
    found.push(...textsOnWires({ ...alone, wires }, gap));
    found.push(...textsOnWires({ ...alone, wires: [], strokes: sheet.strokes.filter(({ part }) => part !== text.part) }, others));
  }
  return found;
}

// ---------------------------------------------------------------- symbols

/** Wires that enter a symbol otherwise than straight to one of its ports. */
export function wiresThroughSymbols(sheet: CircuitSheet): string[] {
  const found: string[] = [];
  for (const placed of sheet.symbols) {
    const inner = grow(symbolBox(placed), -0.1);
    const ports = portsOf(placed);
    let strokes: Stretch[] | undefined;
    for (const wire of sheet.wires) {
      const ends = [wire.points[0] as Point, wire.points.at(-1) as Point];
      for (const stretch of stretchesOf(wire.points)) {
        if (!stretchMeetsBox(stretch, inner)) continue;
        const port = ports.find(
          ({ at, direction }) =>
            ends.some((end) => same(end, at)) &&
            (leaves(stretch.a, stretch.b, at, direction) || leaves(stretch.b, stretch.a, at, direction)),
        );
        strokes ??= symbolStretches(placed);
        const hit = strokes.some((s) => {
          const meet = meetingPoint(s, stretch);
          return meet !== undefined && (port === undefined || distance(meet, port.at) > 0.3);
        });
        if (port === undefined || hit)
          found.push(`wire ${wire.part} runs through the symbol of ${placed.part} at ${show(stretch.a)}–${show(stretch.b)}`);
      }
    }
  }
  return [...new Set(found)];
}

/** Symbols whose boxes overlap, or reach outside the given room around them. */
export function symbolOverlaps(sheet: CircuitSheet): string[] {
  const found: string[] = [];
  sheet.symbols.forEach((one, index) => {
    for (const other of sheet.symbols.slice(index + 1)) {
      if (boxesMeet(grow(symbolBox(one), -0.05), grow(symbolBox(other), -0.05), 0))
        found.push(`the symbols of ${one.part} and ${other.part} overlap`);
    }
  });
  return found;
}

// ---------------------------------------------------------------- wires

/**
 * Wire ends that meet nothing: neither a port, nor another wire of the same node (with a dot where it meets it in its
 * middle or where three come together), nor a stroke with role `continuation` that leads elsewhere.
 */
export function looseEnds(sheet: CircuitSheet): string[] {
  const ports = sheet.symbols.flatMap((placed) => portsOf(placed).map(({ at }) => at));
  return sheet.wires.flatMap((wire) =>
    [wire.points[0] as Point, wire.points.at(-1) as Point].flatMap((end) => {
      if (wire.role === "rail") return [];
      if (ports.some((port) => same(port, end))) return [];
      if (sheet.strokes.some((stroke) => stroke.role === "continuation" && stroke.path.some((point) => same(point, end)))) return [];
      const others = sheet.wires.filter((other) => other !== wire && other.node === wire.node && onWire(end, other));
      if (others.length === 0) return [`wire ${wire.part} ends in the air at ${show(end)}`];
      const ways = others.reduce((sum, other) => sum + (isEnd(end, other) ? 1 : 2), 1);
      const railed = others.some((other) => other.role === "rail");
      const dotted = sheet.dots.some((dot) => same(dot.at, end));
      return ways > 2 && !dotted && !railed ? [`wires meet without a dot at ${show(end)} (${wire.part})`] : [];
    }),
  );
}

/** Places where two wires cross, and stretches where wires of different nodes lie upon each other. */
export function crossings(sheet: CircuitSheet): string[] {
  const found = new Set<string>();
  const stretches = sheet.wires.flatMap((wire) => stretchesOf(wire.points).map((stretch) => ({ wire, ...stretch })));
  stretches.forEach((one, index) => {
    for (const other of stretches.slice(index + 1)) {
      if (one.wire === other.wire) continue;
      if (one.wire.node !== other.wire.node && overlapLength(one, other) > near) {
        found.add(`wires ${one.wire.part} and ${other.wire.part} lie on each other at ${show(one.a)}`);
        continue;
      }
      const meet = meetingPoint(one, other);
      if (!meet) continue;
      if (one.wire.node === other.wire.node) {
        const throughBoth = !atEnd(meet, one) && !atEnd(meet, other);
        if (throughBoth && !sheet.dots.some((dot) => same(dot.at, meet)))
          found.add(`wires ${one.wire.part} and ${other.wire.part} cross without a dot at ${show(meet)}`);
      } else found.add(`wires ${one.wire.part} and ${other.wire.part} cross at ${show(meet)}`);
    }
  });
  return [...found];
}

/** How many corners the wires of the sheet turn. */
export function bends(sheet: CircuitSheet): number {
  return sheet.wires.reduce((sum, wire) => {
    const stretches = stretchesOf(wire.points).filter(({ a, b }) => !same(a, b));
    return sum + stretches.slice(1).filter((stretch, i) => !parallel(stretch, stretches[i] as Stretch)).length;
  }, 0);
}

/** Parts of wires that are neither level nor upright. */
export function slantedWires(sheet: CircuitSheet): string[] {
  return sheet.wires
    .filter((wire) => stretchesOf(wire.points).some(({ a, b }) => Math.abs(a.x - b.x) > near && Math.abs(a.y - b.y) > near))
    .map((wire) => `wire ${wire.part} is slanted`);
}

/** Everything that reaches out of a region of the sheet. */
export function outside(sheet: CircuitSheet, area: Box): string[] {
  const within = (box: Box) =>
    box.x >= area.x - near &&
    box.y >= area.y - near &&
    box.x + box.width <= area.x + area.width + near &&
    box.y + box.height <= area.y + area.height + near;
  const points = (list: readonly Point[]) => list.every(({ x, y }) => within({ x, y, width: 0, height: 0 }));
  return [
    ...sheet.symbols.filter((placed) => !within(symbolBox(placed))).map((placed) => `the symbol of ${placed.part} reaches outside`),
    ...sheet.wires.filter((wire) => !points(wire.points)).map((wire) => `wire ${wire.part} runs outside`),
    ...sheet.texts.filter((text) => !within(inkBox(text))).map((text) => `${describe(text)} reaches outside`),
    ...sheet.strokes.filter((stroke) => !points(stroke.path)).map((stroke) => `a ${stroke.role} stroke runs outside`),
  ];
}

/** One group of ports that the drawn wires join. */
export interface DrawnNode {
  /** The nodes the wires say they belong to; more than one is a short. */
  nodes: number[];
  /** Joined pins as `part.port`, sorted. */
  ports: string[];
  wires: PlacedWire[];
}

/**
 * Reads the wires back: which ports are joined, judging by geometry alone (ends on ports, ends on wires, dots on
 * crossings), not by what the wires say of themselves. A port nobody wires is a group of its own.
 */
export function netlistOf(sheet: CircuitSheet): DrawnNode[] {
  const pins = sheet.symbols.flatMap((placed) => portsOf(placed).map(({ name, at }) => ({ id: `${placed.part}.${name}`, at })));
  const count = pins.length + sheet.wires.length;
  const parent = Array.from({ length: count }, (_, i) => i);
  const root = (i: number): number => {
    let at = i;
    while (parent[at] !== at) {
      parent[at] = parent[parent[at] as number] as number;
      at = parent[at] as number;
    }
    return at;
  };
  const join = (i: number, j: number) => {
    parent[root(i)] = root(j);
  };
  pins.forEach((pin, i) => {
    pins.forEach((other, j) => {
      // A tank drawn at several places is one tank.
      if (j > i && (same(pin.at, other.at) || pin.id === other.id)) join(i, j);
    });
    sheet.wires.forEach((wire, w) => {
      if (onWire(pin.at, wire)) join(i, pins.length + w);
    });
  });
  sheet.wires.forEach((wire, w) => {
    sheet.wires.forEach((other, o) => {
      if (o <= w) return;
      const ends = [wire.points[0] as Point, wire.points.at(-1) as Point];
      const otherEnds = [other.points[0] as Point, other.points.at(-1) as Point];
      const joined =
        ends.some((end) => onWire(end, other)) ||
        otherEnds.some((end) => onWire(end, wire)) ||
        sheet.dots.some((dot) => onWire(dot.at, wire) && onWire(dot.at, other));
      if (joined) join(pins.length + w, pins.length + o);
    });
  });
  const groups = new Map<number, DrawnNode>();
  for (let i = 0; i < count; i++) {
    const group = groups.get(root(i)) ?? { nodes: [], ports: [], wires: [] };
    groups.set(root(i), group);
    const pin = pins[i];
    if (pin && !group.ports.includes(pin.id)) group.ports.push(pin.id);
    else if (pin) continue;
    else {
      const wire = sheet.wires[i - pins.length] as PlacedWire;
      group.wires.push(wire);
      if (!group.nodes.includes(wire.node)) group.nodes.push(wire.node);
    }
  }
  for (const group of groups.values()) group.ports.sort();
  return [...groups.values()];
}

// ---------------------------------------------------------------- geometry

/** The box of a placed symbol on the sheet. */
export function symbolBox(placed: PlacedSymbol): Box {
  const { box } = placed.symbol;
  const one = onSheet(placed, { x: box.x, y: box.y });
  const two = onSheet(placed, { x: box.x + box.width, y: box.y + box.height });
  return boxOf([one, two]);
}

/** The ports of a placed symbol on the sheet. */
export function portsOf(placed: PlacedSymbol): { name: string; at: Point; direction: Direction }[] {
  return placed.symbol.ports.map((port) => ({
    name: port.name,
    at: onSheet(placed, port),
    direction: turnDirection(port.direction, placed.turn),
  }));
}

/** The box of a text with what hangs below its baseline; a reference takes the room kept for it. */
export function inkBox(text: PlacedText): Box {
  const words = typeof text.text === "string" ? text.text : "";
  const box = textBox({ at: text.at, text: words, height: text.height, anchor: text.anchor, ...(text.rotated ? { rotated: true } : {}) });
  const rows = typeof text.text === "string" ? 1 : (text.text.rows ?? 1);
  const descends = typeof text.text !== "string" || /[gjpqy,;()Q@_/]/.test(words) ? text.height * 0.3 : 0;
  const hangs = descends + (rows - 1) * rowPitch(text.height);
  const wide = typeof text.text === "string" ? undefined : text.text.room;
  if (text.rotated) {
    const height = wide ?? box.height;
    const below = text.anchor === "start" ? 0 : text.anchor === "middle" ? height / 2 : height;
    return { x: box.x, y: text.at.y - height + below, width: box.width + hangs, height };
  }
  const width = wide ?? box.width;
  const before = text.anchor === "start" ? 0 : text.anchor === "middle" ? width / 2 : width;
  return { x: text.at.x - before, y: box.y, width, height: box.height + hangs };
}

function onSheet(placed: PlacedSymbol, point: Point): Point {
  const turned = turnPoint(point, placed.turn);
  return { x: placed.at.x + turned.x, y: placed.at.y + turned.y };
}

function turnPoint({ x, y }: Point, turn: Turn): Point {
  let point = turn.mirrored ? { x: -x, y } : { x, y };
  for (let i = 0; i < turn.quarter; i++) point = { x: point.y, y: -point.x };
  return point;
}

const ways: Record<Direction, Point> = { up: { x: 0, y: -1 }, down: { x: 0, y: 1 }, left: { x: -1, y: 0 }, right: { x: 1, y: 0 } };

function turnDirection(direction: Direction, turn: Turn): Direction {
  const turned = turnPoint(ways[direction], turn);
  return (Object.keys(ways) as Direction[]).find((name) => same(ways[name], turned)) as Direction;
}

/** Strokes and outlines of fills of a symbol as straight pieces on the sheet. */
export function symbolStretches(placed: PlacedSymbol): Stretch[] {
  return placed.symbol.shapes.flatMap((shape) =>
    shape.kind === "text" ? [] : flatten(shape.path).map(({ a, b }) => ({ a: onSheet(placed, a), b: onSheet(placed, b) })),
  );
}

function flatten(path: readonly Segment[]): Stretch[] {
  const out: Stretch[] = [];
  let at: Point = { x: 0, y: 0 };
  let start = at;
  const curve = (c: Segment & { op: "C" }) => {
    const from = at;
    for (let i = 1; i <= 8; i++) {
      const t = i / 8;
      const u = 1 - t;
      const mix = (p0: number, p1: number, p2: number, p3: number) =>
        u * u * u * p0 + 3 * u * u * t * p1 + 3 * u * t * t * p2 + t * t * t * p3;
      const next = { x: mix(from.x, c.x1, c.x2, c.x), y: mix(from.y, c.y1, c.y2, c.y) };
      out.push({ a: at, b: next });
      at = next;
    }
  };
  for (const s of path) {
    if (s.op === "M") start = at = { x: s.x, y: s.y };
    else if (s.op === "L") {
      out.push({ a: at, b: { x: s.x, y: s.y } });
      at = { x: s.x, y: s.y };
    } else if (s.op === "C") curve(s);
    else if (s.op === "A") for (const piece of arcCurves(at, s)) curve(piece);
    else {
      out.push({ a: at, b: start });
      at = start;
    }
  }
  return out;
}

function stretchesOf(points: readonly Point[]): Stretch[] {
  return points.slice(1).map((b, i) => ({ a: points[i] as Point, b }));
}

const distance = (a: Point, b: Point) => Math.hypot(a.x - b.x, a.y - b.y);
const same = (a: Point, b: Point) => distance(a, b) < near;
const atEnd = (p: Point, s: Stretch) => same(p, s.a) || same(p, s.b);
const isEnd = (p: Point, wire: PlacedWire) => same(p, wire.points[0] as Point) || same(p, wire.points.at(-1) as Point);
const onWire = (p: Point, wire: PlacedWire) => stretchesOf(wire.points).some((s) => onStretch(p, s));
const show = ({ x, y }: Point) => `(${x.toFixed(1)}, ${y.toFixed(1)})`;

function leaves(from: Point, to: Point, port: Point, direction: Direction): boolean {
  if (!same(from, port)) return false;
  const length = distance(from, to);
  const way = ways[direction];
  return length > 0 && ((to.x - from.x) * way.x + (to.y - from.y) * way.y) / length > 0.99;
}

function onStretch(p: Point, { a, b }: Stretch): boolean {
  const length = distance(a, b);
  if (length < near) return same(p, a);
  const t = ((p.x - a.x) * (b.x - a.x) + (p.y - a.y) * (b.y - a.y)) / (length * length);
  const clamped = Math.max(0, Math.min(1, t));
  return distance(p, { x: a.x + clamped * (b.x - a.x), y: a.y + clamped * (b.y - a.y) }) < near;
}

function parallel(one: Stretch, other: Stretch): boolean {
  const cross = (one.b.x - one.a.x) * (other.b.y - other.a.y) - (one.b.y - one.a.y) * (other.b.x - other.a.x);
  return Math.abs(cross) <= 1e-6 * distance(one.a, one.b) * distance(other.a, other.b);
}

function overlapLength(one: Stretch, other: Stretch): Mm {
  if (!parallel(one, other) || distance(one.a, one.b) < near) return 0;
  const shared = [one.a, one.b].filter((p) => onStretch(p, other)).concat([other.a, other.b].filter((p) => onStretch(p, one)));
  return shared.reduce((most, p) => Math.max(most, ...shared.map((q) => distance(p, q))), 0);
}

function meetingPoint(one: Stretch, other: Stretch): Point | undefined {
  const rx = one.b.x - one.a.x;
  const ry = one.b.y - one.a.y;
  const sx = other.b.x - other.a.x;
  const sy = other.b.y - other.a.y;
  const cross = rx * sy - ry * sx;
  if (Math.abs(cross) < 1e-9) return [one.a, one.b].find((p) => onStretch(p, other)) ?? [other.a, other.b].find((p) => onStretch(p, one));
  const t = ((other.a.x - one.a.x) * sy - (other.a.y - one.a.y) * sx) / cross;
  const u = ((other.a.x - one.a.x) * ry - (other.a.y - one.a.y) * rx) / cross;
  const slackOne = near / Math.max(near, Math.hypot(rx, ry));
  const slackOther = near / Math.max(near, Math.hypot(sx, sy));
  if (t < -slackOne || t > 1 + slackOne || u < -slackOther || u > 1 + slackOther) return undefined;
  return { x: one.a.x + t * rx, y: one.a.y + t * ry };
}

function stretchMeetsBox({ a, b }: Stretch, box: Box): boolean {
  if (box.width <= 0 || box.height <= 0) return false;
  let from = 0;
  let to = 1;
  const clip = (start: number, delta: number, low: number, high: number) => {
    if (Math.abs(delta) < 1e-12) return start > low && start < high;
    const one = (low - start) / delta;
    const two = (high - start) / delta;
    from = Math.max(from, Math.min(one, two));
    to = Math.min(to, Math.max(one, two));
    return true;
  };
  return clip(a.x, b.x - a.x, box.x, box.x + box.width) && clip(a.y, b.y - a.y, box.y, box.y + box.height) && from <= to;
}

function boxesMeet(a: Box, b: Box, gap: Mm): boolean {
  return a.x < b.x + b.width + gap && b.x < a.x + a.width + gap && a.y < b.y + b.height + gap && b.y < a.y + a.height + gap;
}

function grow(box: Box, by: Mm): Box {
  return { x: box.x - by, y: box.y - by, width: box.width + 2 * by, height: box.height + 2 * by };
}

function boxOf(points: readonly Point[]): Box {
  const xs = points.map(({ x }) => x);
  const ys = points.map(({ y }) => y);
  const x = Math.min(...xs);
  const y = Math.min(...ys);
  return { x, y, width: Math.max(...xs) - x, height: Math.max(...ys) - y };
}

function describe(text: PlacedText): string {
  const words =
    typeof text.text === "string" ? `“${text.text}”` : `reference to ${text.text.to} ${"device" in text.text ? text.text.device : ""}`;
  return `${text.role} ${words} at ${show(text.at)}`;
}
