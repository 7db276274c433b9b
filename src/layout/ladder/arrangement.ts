import type { Box, Mm, Point } from "../../drawing/geometry.js";
import type { DeviceUse, LoadUse } from "../../machine/model.js";
import type { Symbol, Turn } from "../../symbols/symbol.js";
import type { PlacedText } from "../placement.js";

/**
 * How a ladder lies on the sheet. The grid, the columns and the wires are worked out along the current and across it; what
 * that means on paper, and where texts go, is the arrangement's affair alone.
 */
export interface Arrangement {
  /** A point of the sheet from its distance along the current and across it, both from the ladder's origin. */
  orient(along: Mm, across: Mm): Point;
  /** The symbol of a part with its texts about the middle of its line. `tight`: the texts are wrapped so as not to widen its column. */
  dress(use: DeviceUse, tight: boolean): Dressed;
  /** Texts beside the return rail at the line of a load or at a rung's first line. */
  margin(entry: MarginEntry): Block;
  /** The number over a wire: how much room it takes along and above its line. */
  wireNumber(node: number): { words: PlacedText["text"]; room: Mm };
  /** Room along for the text at an arrow, and its height. */
  endingHeight: Mm;
  endingRoom(point: string): Mm;
}

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
  above: Mm;
  below: Mm;
}
