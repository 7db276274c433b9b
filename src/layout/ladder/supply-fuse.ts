import type { Mm, Point } from "../../drawing/geometry.js";
import { fitText, measureText } from "../../drawing/text.js";
import type { DrawingInfo, Supply } from "../../machine/model.js";
import { printedName } from "../../machine/walk.js";
import type { Symbol, Turn } from "../../symbols/symbol.js";
import { turnSymbol } from "../../symbols/turn.js";
import type { CircuitSheet, PlacedText } from "../placement.js";

/** The node before a fuse: no device of a ladder meets it. */
const upstream = -1;

/** The supply's fuse with the length it takes in the rail and the width of its texts. */
export interface FuseBlock {
  part: string;
  name: string;
  rating: string;
  symbol: Symbol;
  length: Mm;
  width: Mm;
}

export function fuseBlock({ name, rating }: NonNullable<Supply["fuse"]>, symbol: Symbol, convention: DrawingInfo["convention"]): FuseBlock {
  const printed = printedName(name, convention);
  const width = Math.min(Math.max(measureText(printed, textHeight), measureText(rating, textHeight)), widestText);
  return { part: name, name: printed, rating, symbol, length: Math.max(symbol.box.width, symbol.box.height), width };
}

/**
 * Sets the fuse into the live rail near its head, with its designation and rating beside it.
 * @param room for its texts: from an upright rail to what stands beside it, or along a level one
 * @returns where the rail goes on behind the fuse, mm on the sheet along the rail
 */
export function setFuse(sheet: CircuitSheet, fuse: FuseBlock, head: Point, room: Mm, lies: "upright" | "level"): Mm {
  const { part, name, rating, symbol, length } = fuse;
  const rail = sheet.wires.find(({ role, points: [first] }) => {
    return role === "rail" && first !== undefined && Math.abs(first.x - head.x) < 0.01 && Math.abs(first.y - head.y) < 0.01;
  });
  if (!rail) return lies === "upright" ? head.y : head.x;
  const along = (by: Mm): Point => (lies === "upright" ? { x: head.x, y: head.y + by } : { x: head.x + by, y: head.y });
  const [, foot] = rail.points as [Point, Point];
  const from = along(lead);
  const to = along(lead + length);
  sheet.wires.push({ ...rail, part: `${rail.part}/feed`, node: upstream, points: [head, from] });
  rail.points = [to, foot];
  // The north-american symbol lies in its file, the international one stands.
  const turn: Turn = { quarter: lies === "upright" ? 3 : 1 };
  const middle = along(lead + length / 2);
  sheet.symbols.push({ part, device: part, symbol, at: middle, turn });
  const { box } = turnSymbol(symbol, turn);
  const say = (role: PlacedText["role"], at: Point, words: string, room: Mm) =>
    sheet.texts.push({ part, role, at, anchor: "start", height: textHeight, text: fitText(words, textHeight, room) });
  if (lies === "upright") {
    const x = head.x + box.x + box.width + 1.5;
    const free = room - (x - head.x) - 2;
    say("designation", { x, y: middle.y - 0.6 }, name, free);
    say("value", { x, y: middle.y + 3.4 }, rating, free);
    return to.y;
  }
  const y = head.y + box.y + box.height + 1.2 + textHeight;
  say("designation", { x: head.x, y }, name, room);
  say("value", { x: head.x, y: y + 4 }, rating, room);
  return to.x;
}

const textHeight: Mm = 2.5;
/** A longer name or rating is shortened beside a level rail, mm. */
const widestText: Mm = 30;
/** Rail above the fuse, mm. */
const lead: Mm = 2.5;
