import type { Mm, Point, Size } from "../../drawing/geometry.js";
import type { DeviceUse, LadderCircuit, Machine } from "../../machine/model.js";
import type { SymbolLibrary } from "../../symbols/library.js";
import type { Symbol } from "../../symbols/symbol.js";
import type { CircuitSheet } from "../placement.js";
import type { Arrangement } from "./arrangement.js";

/** What the page of a ladder is shared out for. */
export interface PlanGiven {
  circuit: LadderCircuit;
  machine: Machine;
  symbolOf(use: DeviceUse): Symbol;
  /** For what stands in no rung: the supply's fuse. */
  symbols: SymbolLibrary;
  /** The room for one ladder with everything about it. */
  room: Size;
}

/** How the room of one ladder is shared out between rungs, rails and what stands beside them, and how it is finished. */
export interface Plan {
  /** From rail to rail at the least. */
  span: Mm;
  /** Across for the lines of the circuit's first ladder, which may carry the supply's fuse, and of those that follow. */
  first: Mm;
  next: Mm;
  arrange(scale: number): Arrangement;
  /** Where the live rail and the room of the first line meet, from the corner of the ladder's room. */
  origin(first: boolean): Point;
  /** Ends of the rails across, from there. `depth`: what its lines take. */
  rails(first: boolean, depth: Mm): { from: Mm; to: Mm };
  /** Sets the supply's fuse and names the rails. */
  finish(sheet: CircuitSheet, ladder: FinishedLadder): void;
}

/** A ladder with its rungs and rails set down. */
export interface FinishedLadder {
  /** It is the first of its circuit. */
  first: boolean;
  origin: Point;
  /** From rail to rail. */
  span: Mm;
  rails: { from: Mm; to: Mm };
  /** Where the rails come from and go on. */
  comesFrom?: RailEnd;
  goesTo?: RailEnd;
}

/** Where a rail is met again. The sheet is left out when it is the same. */
export interface RailEnd {
  sheet?: number;
  line: number;
}
