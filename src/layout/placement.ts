import type { Box, Mm, Point } from "../drawing/geometry.js";
import type { Anchor, PartId } from "../drawing/marks.js";
import type { Diagnostic } from "../language/diagnostic.js";
import type { Symbol, Turn } from "../symbols/symbol.js";

/** The part of a sheet a circuit may use: inside the frame, clear of the title block and its revision table. */
export interface PageArea {
  /** Whole usable rectangle. */
  area: Box;
  /** The corner taken by the title block within `area` (bottom right); circuits stay out of it. */
  reserved: Box;
  /** Zone name (e.g. "C3") of a point on the sheet. */
  zoneOf(point: Point): string;
}

/** A circuit sheet with everything in place. References inside it are not yet worded: room is kept for them. */
export interface CircuitSheet {
  kind: "ladder" | "fluid" | "power";
  circuit: PartId;
  /** 1-based number in the whole set. */
  number: number;
  title: string;
  symbols: PlacedSymbol[];
  wires: PlacedWire[];
  dots: PlacedDot[];
  texts: PlacedText[];
  /** What a reader of this sheet must know, e.g. that a valve is drawn as it stands at the start; printed with the general notes. */
  notes?: string[];
  /** Plain strokes that are neither symbol nor wire: cam marks, header ticks, enclosure frames. */
  strokes: { part?: PartId; role: string; path: Point[]; width: Mm; dash?: Mm[] }[];
}

/** A circuit sheet with nothing on it yet. */
export function emptySheet(kind: CircuitSheet["kind"], circuit: PartId, number: number, title: string): CircuitSheet {
  return { kind, circuit, number, title, symbols: [], wires: [], dots: [], texts: [], strokes: [] };
}

export interface PlacedSymbol {
  part: PartId;
  /** The device or component designation it belongs to, if it has one. */
  device?: string;
  symbol: Symbol;
  at: Point;
  turn: Turn;
}

/** A straight-run line from bend to bend. `node` is the electrical potential or the fluid node it belongs to. */
export interface PlacedWire {
  part: PartId;
  node: number;
  role: "wire" | "rail" | "working" | "pilot" | "drain" | "exhaust" | "link";
  points: Point[];
  width: Mm;
  dash?: Mm[];
}

export interface PlacedDot {
  part: PartId;
  at: Point;
  diameter: Mm;
}

/** Text standing on its baseline at `at`. A reference is worded later and never needs more than `room`. */
export interface PlacedText {
  part?: PartId;
  role:
    | "designation"
    | "terminal"
    | "port"
    | "wire-number"
    | "line-number"
    | "function"
    | "value"
    | "rail"
    | "reference"
    | "note"
    | "margin";
  at: Point;
  anchor: Anchor;
  height: Mm;
  rotated?: boolean;
  text: string | Reference;
}

export type Reference = ReferenceTo & {
  room: Mm;
  /** Ladder lines of a switch: how many rows may stand below each other, the first on the text's place, a `rowPitch` apart. */
  rows?: number;
};

/** From row to row of a reference that takes several. */
export function rowPitch(height: Mm): Mm {
  return (height * 4) / 3;
}

export type ReferenceTo =
  /** Under a contact: where its coil is, `(201)`; under that of an overload, where it stands in the power circuit. */
  | { to: "coil"; device: string }
  /** Under a contact of a switch: where its other contacts are, but for those it is linked with, `(205)`. */
  | { to: "sisters"; device: string; from: PartId; linked?: readonly PartId[] }
  /** At a coil: the lines of its contacts, normally closed ones underlined. */
  | { to: "contacts"; device: string }
  /** In the table under a coil: where one of its contacts is, `/2.4`. */
  | { to: "contact-place"; device: string; contact: PartId }
  /** At a switch contact: the cylinder or fluid point that operates it and where that is drawn, `CLAMP 1/B4`. */
  | { to: "switch-place"; device: string }
  /** At a solenoid on a rung: its valve and where it is drawn, `V1 1/C3`. */
  | { to: "valve"; device: string }
  /** At a solenoid or switch on a fluid sheet: the ladder line of its coil or contacts, `(204)`. */
  | { to: "ladder-line"; device: string }
  /** At a motor in a power circuit: the pump or compressor it drives and where that is drawn, `P1 3/B2`. */
  | { to: "driven"; device: string }
  /** At the end of a branch that feeds a ladder: the rail and where the ladder begins, `L+ 2/201`. */
  | { to: "rails"; supply: string; rail: string }
  /** At the head of a ladder's rails: what they come from and where that is drawn, `G1 1/105`. */
  | { to: "source"; supply: string }
  /** At a point that goes on elsewhere: name, sheet and line. */
  | {
      to: "point";
      point: string;
      from: PartId /** Whether it comes from there or goes on there, where that is known. */;
      way?: "in" | "out";
    };

/** Where each part stands in the set. */
export interface Place {
  sheet: number;
  /** The printed line number (ladder) — absent on fluid sheets. */
  line?: number;
  zone: string;
  box: Box;
}

export interface Layout {
  sheets: CircuitSheet[];
  places: ReadonlyMap<PartId, Place>;
  /** What could not be set down; with an error among them the sheets are not whole. */
  diagnostics?: Diagnostic[];
}
