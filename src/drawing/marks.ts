import type { Box, Mm, Point, Size } from "./geometry.js";

/** Names one thing that is drawn: a device, one of its contacts, a wire. Opaque to this folder and to the writers. */
export type PartId = string;

/** One step of a path, absolute, in mm. `A` is a circular arc; angles are not used so that writers need no trigonometry of their own. */
export type Segment =
  | { op: "M" | "L"; x: Mm; y: Mm }
  | { op: "C"; x1: Mm; y1: Mm; x2: Mm; y2: Mm; x: Mm; y: Mm }
  | { op: "A"; radius: Mm; large: boolean; sweep: boolean; x: Mm; y: Mm }
  | { op: "Z" };

export type Anchor = "start" | "middle" | "end";

/**
 * What a sheet consists of. Text stands on its baseline at `at`; `height` is the height of its capitals (ISO 3098), and
 * `rotated` turns it 90° counter-clockwise so that it reads from the right. `ink` is black unless given.
 */
export type Mark = { part?: PartId /** Class names for the SVG, e.g. "wire". */; role?: string } & (
  | { kind: "stroke"; path: Segment[]; width: Mm; dash?: Mm[]; ink?: string }
  | { kind: "fill"; path: Segment[]; ink?: string }
  | {
      kind: "text";
      at: Point;
      text: string;
      height: Mm;
      anchor: Anchor;
      rotated?: boolean;
      bold?: boolean;
      underline?: boolean;
      ink?: string;
    }
  /** A region that leads to where `to` is drawn. */
  | { kind: "link"; box: Box; to: PartId }
);

export interface DrawnSheet {
  /** 1-based place in the set. */
  number: number;
  title: string;
  size: Size;
  marks: Mark[];
}

/** A whole drawing set, ready for any writer. */
export interface DrawingSet {
  info: { title: string; number: string; author: string; subject: string; revision: string; language: string; date: string };
  sheets: DrawnSheet[];
  /** Where each part that can be linked to is drawn: its home (a coil, a cylinder, a valve …). */
  anchors: ReadonlyMap<PartId, { sheet: number; box: Box }>;
  /** What each part is, for `data-device` and `<title>`. */
  parts: ReadonlyMap<PartId, { device?: string; title?: string }>;
  /** Devices for the document outline, in natural order; `uses` are its other appearances. */
  outline: { device: string; title: string; home?: PartId; uses: { title: string; part: PartId }[] }[];
}
