import type { Mm, Point } from "../../drawing/geometry.js";
import { fitText } from "../../drawing/text.js";
import type { Supply } from "../../machine/model.js";
import type { Symbol } from "../../symbols/symbol.js";
import { turnSymbol } from "../../symbols/turn.js";
import type { CircuitSheet } from "../placement.js";

export const fuseSymbol = "north-american/fuse";
/** A fuse in a rail is drawn on the smaller module, because its leads are the rail. */
export const fuseScale = 0.72;

/** The node before a fuse: no device of a ladder meets it. */
const upstream = -1;

/** The supply's fuse with the length it takes in the rail. */
export interface FuseBlock {
  name: string;
  rating: string;
  symbol: Symbol;
  length: Mm;
}

export function fuseBlock({ name, rating }: NonNullable<Supply["fuse"]>, symbol: Symbol): FuseBlock {
  return { name, rating, symbol, length: symbol.box.width };
}

/**
 * Sets the fuse into the live rail near its head, with its designation and rating beside it.
 * @param span from rail to rail
 * @returns where the rail goes on behind the fuse, mm from the top of the sheet
 */
export function setFuse(sheet: CircuitSheet, { name, rating, symbol, length }: FuseBlock, head: Point, span: Mm): Mm {
  const rail = sheet.wires.find(({ role, points }) => role === "rail" && Math.abs((points[0]?.x ?? 0) - head.x) < 0.01);
  if (!rail) return head.y;
  const turn = { quarter: 3 } as const;
  const [, foot] = rail.points as [Point, Point];
  const from = { x: head.x, y: head.y + lead };
  const to = { x: head.x, y: from.y + length };
  sheet.wires.push({ ...rail, part: `${rail.part}/feed`, node: upstream, points: [head, from] });
  rail.points = [to, foot];
  sheet.symbols.push({ part: name, device: name, symbol, at: { x: head.x, y: (from.y + to.y) / 2 }, turn });
  const { box } = turnSymbol(symbol, turn);
  const x = head.x + box.x + box.width + 1.5;
  const middle = (from.y + to.y) / 2;
  const room = span - (x - head.x) - 2;
  sheet.texts.push({
    part: name,
    role: "designation",
    at: { x, y: middle - 0.6 },
    anchor: "start",
    height: 2.5,
    text: fitText(name, 2.5, room),
  });
  sheet.texts.push({
    part: name,
    role: "value",
    at: { x, y: middle + 3.4 },
    anchor: "start",
    height: 2.5,
    text: fitText(rating, 2.5, room),
  });
  return to.y;
}

/** Rail above the fuse, mm. */
const lead: Mm = 2.5;
