import type { Box, Mm, Point } from "../../drawing/geometry.js";
import type { PartId } from "../../drawing/marks.js";
import { isSwitchKind } from "../../machine/kinds.js";
import type { Device } from "../../machine/model.js";
import { linkDash } from "../../symbols/gang-poles.js";
import { lineWidth } from "../../symbols/notation.js";
import type { Symbol } from "../../symbols/symbol.js";
import type { CircuitSheet, PlacedSymbol, PlacedText } from "../placement.js";
import { polylinesOf } from "./reach-in-band.js";
import { around, hang, roomOf } from "./text-box.js";

/** Which way a link runs: down where rungs are level, to the right where paths are upright. */
export type LinkWay = "down" | "right";

/**
 * Joins the contacts of a button or switch that stand straight one after another, on neighbouring lines with nothing between
 * them, by a dashed mechanical link from symbol to symbol. Texts of the two that stand in its way move aside; where one cannot,
 * there is no link. Where all contacts of a device are linked, the references from each to the others are no longer wanted and
 * go; otherwise each keeps those to the contacts it is not linked with.
 * @param devices of the machine, by name
 */
export function linkContacts(sheet: CircuitSheet, devices: ReadonlyMap<string, Device>, way: LinkWay): void {
  const byDevice = new Map<string, PlacedSymbol[]>();
  for (const symbol of sheet.symbols) {
    const device = symbol.device === undefined ? undefined : devices.get(symbol.device);
    if (!device || !isSwitchKind(device.kind) || symbol.turn.quarter !== 0) continue;
    if (!device.contacts.some(({ id }) => id === symbol.part)) continue;
    byDevice.set(device.name, [...(byDevice.get(device.name) ?? []), symbol]);
  }
  for (const [name, symbols] of byDevice) {
    if (symbols.length > 1) linkDevice(sheet, devices.get(name) as Device, symbols, way);
  }
}

/** Two contacts and the dashed line between them. */
interface Pair {
  from: PlacedSymbol;
  to: PlacedSymbol;
  line: { from: Point; to: Point };
}

function linkDevice(sheet: CircuitSheet, device: Device, symbols: readonly PlacedSymbol[], way: LinkWay): void {
  let pairs = pairsOf(symbols, way).filter((pair) => isOpen(pair, sheet));
  // Which references are left depends on the links, and whether a link has room on the references.
  while (pairs.length > 0) {
    const texts = withoutLinkedReferences(sheet.texts, device, pairs);
    const blocked = pairs.find((pair) => !moveAside(texts, pair, { sheet, device, way }));
    if (!blocked) {
      sheet.texts = texts;
      for (const { from, line } of pairs)
        sheet.strokes.push({ part: from.part, role: "link", path: [line.from, line.to], width: lineWidth, dash: [...linkDash] });
      return;
    }
    pairs = pairs.filter((pair) => pair !== blocked);
  }
}

/** Neighbours that stand straight one after another. */
function pairsOf(symbols: readonly PlacedSymbol[], way: LinkWay): Pair[] {
  const along = ({ at }: PlacedSymbol): Mm => (way === "down" ? at.y : at.x);
  const ordered = [...symbols].sort((a, b) => along(a) - along(b));
  return ordered.flatMap((to, index): Pair[] => {
    // The nearest before it that stands on the same line across.
    const from = ordered.slice(0, index).findLast((other) => along(other) < along(to) && offset(other, to, way) < near);
    const line = from && lineBetween(from, to, way);
    return from && line ? [{ from, to, line }] : [];
  });
}

/** How far the places of two links lie apart across the link, mm. */
function offset(a: PlacedSymbol, b: PlacedSymbol, way: LinkWay): Mm {
  const place = ({ at, symbol }: PlacedSymbol) => (way === "down" ? at.x + linkAt(symbol, way) : at.y + linkAt(symbol, way));
  return Math.abs(place(a) - place(b));
}

/** Where the link crosses a symbol: its spot `link` where the symbol says so, else its middle. */
const linkAt = ({ spots }: Symbol, way: LinkWay): Mm => (way === "down" ? (spots.link?.x ?? 0) : (spots.link?.y ?? 0));

const near: Mm = 0.02;

/** From where the link leaves the ink of the first to where it comes to that of the second. */
function lineBetween(from: PlacedSymbol, to: PlacedSymbol, way: LinkWay): Pair["line"] | undefined {
  const leaves = Math.max(...inkOn(from, way));
  const comes = Math.min(...inkOn(to, way));
  if (!(comes - leaves > shortest)) return undefined;
  const across = (way === "down" ? from.at.x : from.at.y) + linkAt(from.symbol, way);
  const point = (along: Mm): Point => (way === "down" ? { x: across, y: along } : { x: along, y: across });
  return { from: point(leaves), to: point(comes) };
}

/** A shorter link shows no dashes. */
const shortest: Mm = 1.5;

/** Where the strokes of a symbol meet the line of its link, on the sheet. */
function inkOn({ symbol, at }: PlacedSymbol, way: LinkWay): Mm[] {
  const turned = (p: Point): Point => (way === "down" ? p : { x: p.y, y: p.x });
  const level = linkAt(symbol, way);
  const by = turned(at).y;
  const found: Mm[] = [];
  for (const shape of symbol.shapes) {
    if (shape.kind === "text") continue;
    for (const line of polylinesOf(shape.path)) {
      line.map(turned).forEach((b, index, all) => {
        const a = all[index - 1];
        if (!a || Math.min(a.x, b.x) > level + near || Math.max(a.x, b.x) < level - near) return;
        if (Math.abs(b.x - a.x) < near) found.push(by + a.y, by + b.y);
        else found.push(by + a.y + (b.y - a.y) * Math.min(1, Math.max(0, (level - a.x) / (b.x - a.x))));
      });
    }
  }
  return found;
}

/** The strip of a link: what lies in it would be crossed. */
const stripOf = ({ line: { from, to } }: Pair, gap: Mm): Box => ({
  x: from.x - (from.x === to.x ? gap : 0),
  y: from.y - (from.y === to.y ? gap : 0),
  width: to.x - from.x + (from.x === to.x ? 2 * gap : 0),
  height: to.y - from.y + (from.y === to.y ? 2 * gap : 0),
});

/** Between a link and what it passes, and what texts moved aside keep from others, mm. */
const gap = { link: 0.9, text: 0.4 } as const;

/** Whether nothing but texts of the two contacts stands between them. */
function isOpen(pair: Pair, sheet: CircuitSheet): boolean {
  const strip = stripOf(pair, gap.link);
  const own = new Set([pair.from.part, pair.to.part]);
  return (
    sheet.wires.every(({ points }) => spansOf(points).every((span) => !meet(strip, span))) &&
    sheet.strokes.every(({ path }) => spansOf(path).every((span) => !meet(strip, span))) &&
    sheet.symbols.every((other) => own.has(other.part) || !meet(strip, boxOf(other))) &&
    [pair.from, pair.to].every((placed) => ownTexts(placed).every((box) => !meet(strip, box))) &&
    sheet.texts.every((text) => (text.part !== undefined && own.has(text.part)) || !meet(strip, inkOf(text)))
  );
}

/** Moves the texts of two contacts out of the way of their link, all to one side; false if there is no room for them. */
function moveAside(
  texts: PlacedText[],
  pair: Pair,
  { sheet, device, way }: { sheet: CircuitSheet; device: Device; way: LinkWay },
): boolean {
  const strip = stripOf(pair, gap.link);
  const own = new Set([pair.from.part, pair.to.part]);
  for (const part of own) {
    const hit = texts.flatMap((text, index) => (text.part === part && meet(strip, inkOf(text)) ? [index] : []));
    if (hit.length === 0) continue;
    // The positions of a selector and its letters belong where they are; only the block of texts left of an upright path may part.
    const stays = ({ role, anchor }: PlacedText) =>
      device.selector !== undefined && role === "value" && (way === "down" || anchor === "middle");
    if (hit.some((index) => stays(texts[index] as PlacedText))) return false;
    const tries = [...(way === "right" ? [partAt(strip, part, texts)] : []), ...sides.map((side) => moveTo(side, hit, texts, strip, way))];
    const moved = tries.find((tried) => {
      const others = texts.filter((_, index) => !tried.some((one) => one.index === index));
      return tried.every(({ text }) => !stays(text) && isFree(inkOf(text), others, sheet));
    });
    if (!moved) return false;
    for (const { index, text } of moved) texts[index] = text;
  }
  return true;
}

/** Texts set to one side of a strip: over each other they close up to it one by one, beside it they keep their order. */
function moveTo(side: -1 | 1, hit: readonly number[], texts: readonly PlacedText[], strip: Box, way: LinkWay): Moved[] {
  const boxes = hit.map((index) => inkOf(texts[index] as PlacedText));
  const all = around(boxes);
  return hit.map((index, i): Moved => {
    const text = texts[index] as PlacedText;
    const box = way === "down" ? (boxes[i] as Box) : all;
    const by =
      way === "down"
        ? { x: side < 0 ? strip.x - (box.x + box.width) : strip.x + strip.width - box.x, y: 0 }
        : { x: 0, y: side < 0 ? strip.y - (box.y + box.height) : strip.y + strip.height - box.y };
    return { index, text: { ...text, at: { x: tidy(text.at.x + by.x), y: tidy(text.at.y + by.y) } } };
  });
}

const sides = [-1, 1] as const;

/** Lines of text on both sides of a level link part there: what stands over it moves up as one, what stands under it down. */
function partAt(strip: Box, part: PartId, texts: readonly PlacedText[]): Moved[] {
  const middle = strip.y + strip.height / 2;
  const beside = texts.flatMap((text, index) => {
    const box = inkOf(text);
    const within = box.x < strip.x + strip.width && strip.x < box.x + box.width;
    return text.part === part && text.anchor === "end" && within ? [{ index, text, box }] : [];
  });
  const over = beside.filter(({ box }) => box.y + box.height / 2 < middle);
  const under = beside.filter((text) => !over.includes(text));
  const up = Math.min(0, strip.y - Math.max(...over.map(({ box }) => box.y + box.height)));
  const down = Math.max(0, strip.y + strip.height - Math.min(...under.map(({ box }) => box.y)));
  const shift = (list: typeof beside, by: Mm) =>
    by === 0 ? [] : list.map(({ index, text }): Moved => ({ index, text: { ...text, at: { x: text.at.x, y: tidy(text.at.y + by) } } }));
  return [...shift(over, up), ...shift(under, down)];
}

interface Moved {
  index: number;
  text: PlacedText;
}

const tidy = (value: Mm): Mm => Math.round(value * 1000) / 1000;

function isFree(box: Box, texts: readonly PlacedText[], sheet: CircuitSheet): boolean {
  const room = { x: box.x - gap.text, y: box.y - gap.text, width: box.width + 2 * gap.text, height: box.height + 2 * gap.text };
  return (
    texts.every((text) => !meet(room, inkOf(text))) &&
    sheet.wires.every(({ points }) => spansOf(points).every((span) => !meet(room, span))) &&
    sheet.strokes.every(({ path }) => spansOf(path).every((span) => !meet(room, span))) &&
    sheet.symbols.every((symbol) => !meet(box, boxOf(symbol)))
  );
}

/** Texts with the references between contacts brought up to date: each names the contacts it is not linked with, or goes. */
function withoutLinkedReferences(texts: readonly PlacedText[], device: Device, pairs: readonly Pair[]): PlacedText[] {
  const groups: Set<PartId>[] = [];
  for (const { from, to } of pairs) {
    const group = groups.find((known) => known.has(from.part)) ?? new Set([from.part]);
    if (!groups.includes(group)) groups.push(group);
    group.add(to.part);
  }
  const gone: PlacedText[] = [];
  const left = texts.flatMap((text): PlacedText[] => {
    if (typeof text.text === "string" || text.text.to !== "sisters" || text.text.device !== device.name) return [text];
    const { from } = text.text;
    const group = groups.find((known) => known.has(from));
    if (!group) return [text];
    if (device.contacts.every(({ id }) => group.has(id))) {
      gone.push(text);
      return [];
    }
    return [{ ...text, text: { ...text.text, linked: [...group].filter((part) => part !== from) } }];
  });
  return left.map((text) => {
    // Words that shared their line with such a reference stand in the middle again.
    const other = gone.find(({ part, at, anchor }) => part === text.part && at.y === text.at.y && anchor === "start");
    if (!other || text.anchor !== "start") return text;
    const { x, width } = roomOf(other);
    return { ...text, anchor: "middle", at: { x: tidy((text.at.x + x + width) / 2), y: text.at.y } };
  });
}

/** Each stretch of a line as a box of its own. */
function spansOf(points: readonly Point[]): Box[] {
  return points.slice(1).map((b, index) => {
    const a = points[index] as Point;
    return { x: Math.min(a.x, b.x), y: Math.min(a.y, b.y), width: Math.abs(a.x - b.x), height: Math.abs(a.y - b.y) };
  });
}

function boxOf({ symbol: { box }, at }: PlacedSymbol): Box {
  return { ...box, x: box.x + at.x, y: box.y + at.y };
}

/** Texts that belong to the symbol itself. */
function ownTexts({ part, symbol, at }: PlacedSymbol): Box[] {
  return symbol.shapes.flatMap((shape) =>
    shape.kind === "text"
      ? [inkOf({ ...shape, part, role: "value", at: { x: at.x + shape.at.x, y: at.y + shape.at.y + shape.height / 2 } })]
      : [],
  );
}

/** The box of a text, with what hangs below its baseline only where something does; a reference needs all of its room. */
function inkOf(text: PlacedText): Box {
  const box = roomOf(text);
  return typeof text.text === "string" ? { ...box, height: box.height - text.height * 0.3 + hang(text.text, text.height) } : box;
}

function meet(a: Box, b: Box): boolean {
  return a.x < b.x + b.width + 1e-6 && b.x < a.x + a.width + 1e-6 && a.y < b.y + b.height + 1e-6 && b.y < a.y + a.height + 1e-6;
}
