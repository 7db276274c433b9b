import type { Box, Mm, Point } from "../../drawing/geometry.js";
import type { Anchor, PartId } from "../../drawing/marks.js";
import { measureText, wrapText } from "../../drawing/text.js";
import { isSensorKind } from "../../machine/kinds.js";
import type { FluidComponent } from "../../machine/model.js";
import type { Direction, Symbol, Turn } from "../../symbols/symbol.js";
import { turnSymbol } from "../../symbols/turn.js";
import { type CircuitSheet, type PlacedText, type Reference, rowPitch } from "../placement.js";
import { type Extent, extentOf, grown, module, union } from "./modules.js";

/** A text of a block; its place in modules from the block's origin. */
export interface BlockText extends Omit<PlacedText, "at"> {
  at: Point;
}

/** A stroke of a block; its path in modules from the block's origin. */
export type BlockStroke = CircuitSheet["strokes"][number];

/** A component with the texts that stand by it, in modules about an origin that is set on the grid. */
export interface Block {
  component: DrawnComponent;
  symbol: Symbol;
  turn: Turn;
  /** Where the symbol's own origin lies, so that its ports are on whole modules. */
  offset: Point;
  ports: (Point & { name: string; direction: Direction })[];
  /** What the symbol covers. */
  body: Extent;
  texts: BlockText[];
  strokes: BlockStroke[];
  /** Things of their own within the block, such as cam marks and solenoids. */
  parts: { part: PartId; extent: Extent }[];
  /** Everything. */
  full: Extent;
}

/** A block set down on the grid. */
export interface Placed {
  block: Block;
  at: Point;
}

export type Side = "left" | "right" | "above" | "below" | "none";

/** Heights of texts, mm. */
export const textHeight: Mm = 2.5;
export const smallHeight: Mm = 1.8;
export const titleHeight: Mm = 3.5;

/** Lines of text below each other, modules. */
export const pitch = 2;

const allTurns: readonly Turn[] = ([0, 1, 2, 3] as const).flatMap((quarter) => [{ quarter }, { quarter, mirrored: true }]);

/**
 * The turn that sends ports the wanted ways, or the symbol as it is where none does. Of several, the one that costs least,
 * and of equals the plainest.
 */
export function chooseTurn(symbol: Symbol, wanted: Readonly<Record<string, Direction>>, cost: (turned: Symbol) => number = () => 0): Turn {
  let best: { turn: Turn; cost: number } | undefined;
  for (const turn of allTurns) {
    const turned = turnSymbol(symbol, turn);
    if (!turned.ports.every(({ name, direction }) => wanted[name] === undefined || wanted[name] === direction)) continue;
    const costs = cost(turned);
    if (!best || costs < best.cost - 1e-9) best = { turn, cost: costs };
  }
  return best?.turn ?? { quarter: 0 };
}

/** A symbol set on the grid without texts. */
export function bareBlock(component: DrawnComponent, symbol: Symbol, turn: Turn): Block {
  const turned = turnSymbol(symbol, turn);
  const [first] = turned.ports;
  const offset = first ? { x: toGrid(first.x / module), y: toGrid(first.y / module) } : { x: 0, y: 0 };
  const ports = turned.ports.map(({ name, direction, x, y }) => ({
    name,
    direction,
    x: round(x / module + offset.x),
    y: round(y / module + offset.y),
  }));
  const box = extentOf(turned.box);
  const body = { left: box.left + offset.x, right: box.right + offset.x, top: box.top + offset.y, bottom: box.bottom + offset.y };
  return { component, symbol, turn, offset, ports, body, texts: [], strokes: [], parts: [], full: body };
}

function toGrid(value: number): number {
  return round(Math.round(value) - value);
}

function round(value: number): number {
  const whole = Math.round(value * 1000) / 1000;
  return whole === 0 ? 0 : whole;
}

/** A component with the way electrical names at it are printed, where that is not as they are, and whether a power circuit feeds it. */
export type DrawnComponent = FluidComponent & { printed?: (name: string) => string; fed?: boolean };

/** A designation at a component as it is printed: its own, that of a solenoid or of a switch. */
export function printedOn(component: DrawnComponent, name: string): string {
  return component.printed?.(name) ?? name;
}

/** What is written beside a component: designation, function text, values. */
export function wordsOf(component: DrawnComponent, width: Mm = 30): { role: PlacedText["role"]; text: string }[] {
  const words: { role: PlacedText["role"]; text: string }[] = [];
  if (component.name !== undefined) words.push({ role: "designation", text: printedOn(component, component.name) });
  if (component.text !== undefined)
    for (const text of wrapText(component.text, textHeight, width, 2)) words.push({ role: "function", text });
  for (const text of joinedValues(component.values, width)) words.push({ role: "value", text });
  return words;
}

/** Values side by side as long as a line takes them. */
function joinedValues(values: readonly string[], width: Mm): string[] {
  const lines: string[] = [];
  for (const value of values) {
    const longer = lines.length > 0 ? `${lines.at(-1)}, ${value}` : value;
    if (lines.length > 0 && measureText(longer, textHeight) <= width) lines[lines.length - 1] = longer;
    else lines.push(value);
  }
  return lines;
}

/** Adds a text and the room it takes. */
export function addText(block: Block, text: BlockText): void {
  block.texts.push(text);
  block.full = union([block.full, textExtent(text)]);
}

/** Room for the ladder lines of a pressure switch or the line of a motor in its power circuit, mm, how many of them a row takes, and how many rows they take. */
const switchRoom: Mm = 16;
const switchOneRow = 2;
const switchRows = 2;

/** Writes a component's words on one side of its body, each on a line of its own. */
export function addWords(block: Block, side: Side, usesOf: (device: string) => number = () => 1): void {
  const clear = block.body;
  if (side === "none") return;
  const { kind, name } = block.component;
  const lines: { role: PlacedText["role"]; text: string | Reference }[] = wordsOf(block.component);
  if ((isSensorKind(kind) || block.component.fed) && name !== undefined) {
    const rows = usesOf(name) > switchOneRow ? { rows: switchRows } : {};
    lines.push({ role: "reference", text: { to: "ladder-line", device: name, room: switchRoom, ...rows } });
  }
  const cap = textHeight / module;
  const high = (lines.length - 1) * pitch + cap;
  const middle = { x: (clear.left + clear.right) / 2, y: (clear.top + clear.bottom) / 2 };
  const gap = 0.6;
  const first =
    side === "above"
      ? clear.top - gap - 0.4 - (lines.length - 1) * pitch
      : side === "below"
        ? clear.bottom + gap + cap
        : middle.y - high / 2 + cap;
  const anchor: Anchor = side === "left" ? "end" : side === "right" ? "start" : "middle";
  const x = side === "left" ? clear.left - gap : side === "right" ? clear.right + gap : middle.x;
  lines.forEach(({ role, text }, index) => {
    addText(block, { part: block.component.id, role, text, height: textHeight, anchor, at: { x, y: first + index * pitch } });
  });
}

/** The room a text takes, with what hangs below its baseline. */
export function textExtent({ at, anchor, height, text }: Pick<BlockText, "at" | "anchor" | "height" | "text">): Extent {
  const width = (typeof text === "string" ? measureText(text, height) : text.room) / module;
  const cap = height / module;
  const rows = typeof text === "string" ? 1 : (text.rows ?? 1);
  const hangs = (typeof text !== "string" || /[gjpqy,;()Q@_/]/.test(text) ? 0.3 * cap : 0) + ((rows - 1) * rowPitch(height)) / module;
  const left = anchor === "start" ? at.x : anchor === "middle" ? at.x - width / 2 : at.x - width;
  return { left, right: left + width, top: at.y - cap, bottom: at.y + hangs };
}

export function portOf(block: Block, name: string): Block["ports"][number] {
  return block.ports.find((port) => port.name === name) ?? (block.ports[0] as Block["ports"][number]);
}

/** How far the middle of a line keeps from a text, from a port's name beside its own lead, and from a symbol's outline, modules. */
const textClearance = 0.53;
const portNameClearance = 0.25;
const bodyClearance = 0.6;

/** What of a block lines keep out of. */
export function forbidden(placed: Placed): { body: Extent; texts: Extent[] } {
  const { block, at } = placed;
  const set = (extent: Extent, by: number) =>
    grown({ left: extent.left + at.x, right: extent.right + at.x, top: extent.top + at.y, bottom: extent.bottom + at.y }, by);
  return {
    body: set(block.body, bodyClearance),
    texts: [
      ...paragraphs(block.texts.filter(({ role }) => role !== "port").map(textExtent)).map((extent) => set(extent, textClearance)),
      ...block.texts.filter(({ role }) => role === "port").map((text) => set(textExtent(text), portNameClearance)),
      ...block.strokes.map(({ path, width }) => set(extentOfPath(path), width / 2 / module + 0.2)),
    ],
  };
}

/** Texts that stand close below each other as one: no line runs between the lines of a text. */
function paragraphs(extents: readonly Extent[]): Extent[] {
  const found: Extent[] = [];
  for (const extent of extents) {
    const last = found.at(-1);
    const close =
      last &&
      Math.max(last.top, extent.top) - Math.min(last.bottom, extent.bottom) < 1 &&
      last.left < extent.right &&
      extent.left < last.right;
    if (last && close) found[found.length - 1] = union([last, extent]);
    else found.push(extent);
  }
  return found;
}

function extentOfPath(path: readonly Point[]): Extent {
  return {
    left: Math.min(...path.map(({ x }) => x)),
    right: Math.max(...path.map(({ x }) => x)),
    top: Math.min(...path.map(({ y }) => y)),
    bottom: Math.max(...path.map(({ y }) => y)),
  };
}

/** An extent as a box in mm at a place on the sheet. */
export function boxAt(extent: Extent, at: Point, origin: Point): Box {
  return {
    x: origin.x + (extent.left + at.x) * module,
    y: origin.y + (extent.top + at.y) * module,
    width: (extent.right - extent.left) * module,
    height: (extent.bottom - extent.top) * module,
  };
}
