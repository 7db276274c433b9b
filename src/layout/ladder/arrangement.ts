import type { Box, Mm, Point } from "../../drawing/geometry.js";
import type { Anchor } from "../../drawing/marks.js";
import type { DeviceUse, LoadUse, NodeId } from "../../machine/model.js";
import type { Symbol, Turn } from "../../symbols/symbol.js";
import type { CircuitSheet, PlacedText } from "../placement.js";

/**
 * How a ladder lies on the sheet. The grid, the columns and the wires are worked out along the current and across it; what
 * that means on paper, and where texts go, is the arrangement's affair alone. `above` and `below` are across, before and
 * behind a line: over and under a level rung, left and right of an upright path.
 */
export interface Arrangement {
  /** A point of the sheet from its distance along the current and across it, both from the ladder's origin. */
  orient(along: Mm, across: Mm): Point;
  columns: ColumnPitch;
  lines: LinePitch;
  /** The room every line needs across whatever stands on it. */
  bareLine: { above: Mm; below: Mm };
  /** The symbol of a part with its texts about the middle of its line. `tight`: the texts are set so as not to widen its column. */
  dress(use: DeviceUse, tight: boolean): Dressed;
  /** What stands outside the return rail at the line of a load or at a rung's first line; its origin is on the rail. */
  margin(entry: MarginEntry): Block;
  /** The number at a wire that begins on a boundary, if it has one. `beside`: wire from another line comes to the boundary there. */
  wireNumber(node: NodeId, beside: boolean): WireNumber | undefined;
  /** The text at the arrow where a point breaks off. */
  ending(kind: EndingKind, point: string): EndingText;
  /** The text at the arrow of wire that goes on on another sheet: at the rails' heads or at their feet. */
  broken(end: "head" | "foot", point: string): EndingText & { fromRailEnd: Mm };
  /** The number of a line, from where the line meets the live rail. */
  lineNumber: { at: Point; anchor: Anchor; height: Mm };
}

export interface ColumnPitch {
  /** Distances along, mm: the usual column, the widest it is stretched to, and the least gap between pins of neighbours. */
  usual: Mm;
  widest: Mm;
  gap: Mm;
}

/** Least distance between lines, and the grid that distances keep to, mm. */
export interface LinePitch {
  least: Mm;
  step: Mm;
}

/** `start` and `end`: an arrow before or behind a rung on its line. `drop`: it hangs behind a line, across. */
export type EndingKind = "start" | "end" | "drop";

/** A part ready to be set down. Distances are from the middle of its line. */
export interface Dressed {
  symbol: Symbol;
  turn: Turn;
  /** What to add to the middle of the line to get the symbol's origin. */
  shift: Point;
  texts: PlacedText[];
  /** From the middle to either pin. */
  reach: Mm;
  /** From the middle to where its wire may carry a number. */
  body: Mm;
  /** The farthest any text reaches along, to either side. */
  label: Mm;
  /** How far it reaches across, before and behind the line. */
  above: Mm;
  below: Mm;
  box: Box;
}

/** What stands outside the return rail at a line. */
export interface MarginEntry {
  title?: string;
  load?: LoadUse;
}

/** Texts about a line with the room they take across. */
export interface Block {
  texts: PlacedText[];
  /** Plain strokes, such as the lines of a table. */
  strokes?: CircuitSheet["strokes"];
  above: Mm;
  below: Mm;
}

/** The number at a wire; its text is placed from the boundary. */
export interface WireNumber {
  words: string;
  height: Mm;
  at: Point;
  anchor: Anchor;
  /** Room to keep before and behind the boundary, along. */
  before: Mm;
  behind: Mm;
  /** How far behind the boundary it reaches. */
  end: Mm;
  /** Across. */
  above: Mm;
}

/** A text at an arrow; it is placed from the arrow's far end. */
export interface EndingText {
  height: Mm;
  /** The width kept for the reference. */
  room: Mm;
  at: Point;
  anchor: Anchor;
  /** What it takes along: beyond the arrow, for one that hangs across to either side. */
  along: Mm;
  /** What it takes across: to either side, for one that hangs across beyond the arrow. */
  across: Mm;
}
