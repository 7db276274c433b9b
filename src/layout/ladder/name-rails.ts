import type { Mm, Point } from "../../drawing/geometry.js";
import { fitText, measureText } from "../../drawing/text.js";
import { wrapNameAt, wrappedPitch } from "../../drawing/wrap-name.js";
import type { LadderCircuit } from "../../machine/model.js";
import type { CircuitSheet, PlacedText } from "../placement.js";
import { hang } from "./text-box.js";

/** How the names of both rails are set at their heads: above them, or beside the live rail behind the supply's fuse. */
export interface RailHead {
  live: WrappedName;
  back: WrappedName;
  /** The live rail's name stands beside it, to this side. */
  beside?: "left" | "right";
  /** Room for notes between the names and the rails, where there is none beside the names. */
  noteRow: Mm;
  /** What the names take above the rails beyond one line, and below the fuse beyond one line. */
  above: Mm;
  below: Mm;
}

interface WrappedName {
  lines: string[];
  height: Mm;
}

/**
 * Measures the heads of the rails.
 * @param room left of the live rail, between the rails, and right of the return rail
 * @param sheet `fused`: the live rail begins with the supply's fuse, and its name belongs behind that; `next`: the rails come from a sheet before
 */
export function measureRailHead(circuit: LadderCircuit, room: RailRoom, sheet: "first" | "fused" | "next"): RailHead {
  const inward = room.span / 2 - apart;
  const [live, back] = circuit.supply.rails;
  const backName = wrapNameAt(heights, back, inward + room.right, most);
  const left = measureText(live, nameHeight) <= room.left - 2 * besideGap;
  const liveName =
    sheet !== "fused"
      ? wrapNameAt(heights, live, inward + room.left, most)
      : left
        ? { lines: [live], height: nameHeight }
        : wrapNameAt(heights, live, room.span - 2 * apart, most);
  const over = sheet === "fused" ? [] : [inwardReach(liveName, room.left)];
  const reach = Math.max(...over, inwardReach(backName, room.right));
  const words =
    sheet === "next" ? 2 * (measureText("from sheet 888, line 88888", noteHeight) + 1) : measureText(voltsOf(circuit), noteHeight);
  const noteRow = 2 * (reach + apart) + words > room.span ? noteHeight * 1.7 : 0;
  const above = Math.max(rise(backName), sheet === "fused" ? 0 : rise(liveName)) + noteRow;
  return {
    live: liveName,
    back: backName,
    noteRow,
    above,
    below: sheet === "fused" ? rise(liveName) : 0,
    ...(sheet === "fused" ? { beside: left ? "left" : "right" } : {}),
  };
}

/** The room about the rails, mm. */
export interface RailRoom {
  left: Mm;
  span: Mm;
  right: Mm;
}

const heights: [Mm, ...Mm[]] = [3.5, 2.5];
const [nameHeight, noteHeight] = heights as [Mm, Mm];
/** A name takes no more lines than this. */
const most = 3;
/** From a rail to the name beside it. */
const besideGap: Mm = 2;
/** From a name to what stands beside it; half of what is kept between the names of both rails. */
const apart: Mm = 2;

const rise = ({ lines, height }: WrappedName) => Math.max(0, (lines.length - 1) * wrappedPitch(height));
const halfOf = ({ lines, height }: WrappedName) => Math.max(0, ...lines.map((line) => measureText(line, height))) / 2;

/** How far a name over its rail reaches towards the other: half its width, and what it is moved inward by to stay in the room. */
const inwardReach = (name: WrappedName, outward: Mm): Mm => halfOf(name) + Math.max(0, halfOf(name) - outward);

function voltsOf({ supply: { voltage, current } }: LadderCircuit): string {
  return voltage ? `${voltage.text}${/[AD]C/.test(voltage.text) ? "" : ` ${current}`}` : current;
}

/** The supply with its voltage, `CTRL  24 V DC`. */
export function supplyWords(circuit: LadderCircuit): string {
  return `${circuit.supply.name}  ${voltsOf(circuit)}`;
}

/** Behind those words: what the rails come from and where that is drawn, if a power circuit feeds them and there is room. */
export function sourceOf({ supply }: LadderCircuit, room: Mm): Omit<PlacedText, "at"> | undefined {
  if (supply.branch === undefined || room < leastSource) return undefined;
  const text = { to: "source", supply: supply.name, room: Math.min(room, mostSource) } as const;
  return { role: "reference", anchor: "start", height: noteHeight, text };
}

/** From the words to the reference, and its room at the least and at the most, mm. */
export const sourceGap: Mm = 3;
const leastSource: Mm = 12;
const mostSource: Mm = 32;

export interface RailNaming {
  head: RailHead;
  /** Where the live rail crosses the first line's room. */
  origin: Point;
  room: RailRoom;
  /** Ends of the rails, across from the origin. */
  from: Mm;
  to: Mm;
  /** Where the live rail begins behind its fuse, across from the origin. */
  behindFuse?: Mm;
  /** Where the rails come from and go on. */
  comesFrom?: string;
  goesTo?: string;
}

/** Names the rails at their heads, and says where they come from and go on. */
export function nameRails(sheet: CircuitSheet, circuit: LadderCircuit, naming: RailNaming): void {
  const { head, origin, room, from, to, behindFuse } = naming;
  const { span } = room;
  const say = (x: Mm, y: Mm, anchor: PlacedText["anchor"], height: Mm, role: PlacedText["role"], text: string) =>
    sheet.texts.push({ role, at: { x: origin.x + x, y: origin.y + y }, anchor, height, text });
  const foot = from - 1.3;
  const above = (name: WrappedName, rail: Mm, outward: Mm) => {
    const { lines, height } = name;
    const shift = (inwardReach(name, outward) - halfOf(name)) * (rail === 0 ? 1 : -1);
    const lowest = foot - head.noteRow - (hang(lines.at(-1) ?? "", height) > 0 ? 0.6 : 0);
    lines.forEach((line, index) => {
      say(rail + shift, lowest - (lines.length - 1 - index) * wrappedPitch(height), "middle", height, "rail", line);
    });
  };
  if (head.beside === undefined) above(head.live, 0, room.left);
  else {
    const { lines, height } = head.live;
    const [x, anchor] = head.beside === "left" ? ([-besideGap, "end"] as const) : ([besideGap, "start"] as const);
    lines.forEach((line, index) => {
      say(x, (behindFuse ?? from) + 1.2 + height + index * wrappedPitch(height), anchor, height, "rail", line);
    });
  }
  above(head.back, span, room.right);

  const over = head.beside === undefined ? [inwardReach(head.live, room.left)] : [];
  const inset = head.noteRow > 0 ? 0 : Math.max(...over, inwardReach(head.back, room.right)) + apart;
  if (naming.comesFrom === undefined) {
    const volts = voltsOf(circuit);
    const named = supplyWords(circuit);
    const free = span - 2 * inset;
    const words = measureText(named, noteHeight) <= free ? named : fitText(volts, noteHeight, free);
    say(span / 2, foot, "middle", noteHeight, "note", words);
    const behind = measureText(words, noteHeight) / 2 + sourceGap;
    const source = sourceOf(circuit, free / 2 - behind);
    if (source) sheet.texts.push({ ...source, at: { x: origin.x + span / 2 + behind, y: origin.y + foot } });
  } else {
    say(inset, foot, "start", noteHeight, "note", `from ${naming.comesFrom}`);
    say(span - inset, foot, "end", noteHeight, "note", `from ${naming.comesFrom}`);
  }
  if (naming.goesTo !== undefined) {
    say(2, to, "start", noteHeight, "note", `to ${naming.goesTo}`);
    say(span - 2, to, "end", noteHeight, "note", `to ${naming.goesTo}`);
  }
}
