import type { Box, Mm, Point } from "../drawing/geometry.js";
import type { PageArea } from "../layout/placement.js";
import type { DrawingInfo } from "../machine/model.js";
import { type Paper, papers } from "./paper.js";

/** How a sheet is divided: the frame, and within it the strip along the bottom with notes, revisions and title block. All in mm. */
export interface Page {
  paper: Paper;
  frame: Box;
  titleBlock: Box;
  revisions: Box;
  notes: Box;
  /** Left for the circuit or table. */
  area: Box;
}

/** How far the centring marks reach into the frame: about 5 mm, ISO 5457 from memory. */
export const centringReach: Mm = 5;

/** Nothing of a circuit or table comes nearer to the frame than this, clear of the centring marks. */
const clearance: Mm = 7;

/** Height of the notes and revisions where they stand above a title block of the whole width. */
const upperStrip: Mm = 25;

/** Divides a sheet of this paper. */
export function pageOf(paper: Paper): Page {
  const { size, margin } = paper;
  const frame = {
    x: margin.left,
    y: margin.top,
    width: size.width - margin.left - margin.right,
    height: size.height - margin.top - margin.bottom,
  };
  const right = frame.x + frame.width;
  const bottom = frame.y + frame.height;
  const block = paper.titleBlock;
  const titleBlock = { x: right - block.size.width, y: bottom - block.size.height, ...block.size };
  const strip = block.wholeWidth
    ? { x: frame.x, y: titleBlock.y - upperStrip, width: frame.width, height: upperStrip }
    : { x: frame.x, y: titleBlock.y, width: titleBlock.x - frame.x, height: titleBlock.height };
  const revisionWidth = Math.min(90, strip.width / 2);
  const notes = { ...strip, width: strip.width - revisionWidth };
  const revisions = { ...strip, x: notes.x + notes.width, width: revisionWidth };
  const area = {
    x: frame.x + clearance,
    y: frame.y + clearance,
    width: frame.width - 2 * clearance,
    height: strip.y - frame.y - clearance - centringReach,
  };
  return { paper, frame, titleBlock, revisions, notes, area };
}

/**
 * Where a circuit may stand on the sheets of a drawing, and how its zones are named. The strip with the title block lies
 * wholly below the area, so the reserved corner is empty.
 */
export function pageArea(drawing: DrawingInfo): PageArea {
  const paper = papers[drawing.paper] ?? papers.A3;
  const { area } = pageOf(paper);
  return {
    area,
    reserved: { x: area.x + area.width, y: area.y + area.height, width: 0, height: 0 },
    zoneOf: (point) => zoneOf(paper, point),
  };
}

/** Letters from the top; I and O are left out because they read as digits. */
const letters = "ABCDEFGHJKLMNPQRSTUVWXYZ";

/** The borders between the fields along a side of the sheet, from 0, without the ends of the side. */
export function fieldBorders(paper: Paper, side: "across" | "down"): Mm[] {
  const count = paper.zones[side];
  const { size, margin } = paper;
  const length = side === "across" ? size.width : size.height;
  if (paper.standard === "iso") return Array.from({ length: count - 1 }, (_, i) => length / 2 + (i + 1 - count / 2) * 50);
  const start = side === "across" ? margin.left : margin.top;
  const inner = side === "across" ? length - margin.left - margin.right : length - margin.top - margin.bottom;
  return Array.from({ length: count - 1 }, (_, i) => start + ((i + 1) * inner) / count);
}

/**
 * Name of a field along a side, counting from the top left. ISO 5457 letters downwards and numbers rightwards; ASME Y14.1
 * starts both at the title block.
 */
export function fieldName(paper: Paper, side: "across" | "down", index: number): string {
  const place = paper.standard === "iso" ? index : paper.zones[side] - 1 - index;
  return side === "across" ? String(place + 1) : (letters[place] ?? "?");
}

/** The zone, like `C3`, in which a point of the sheet lies; a point outside the frame belongs to the nearest. */
export function zoneOf(paper: Paper, point: Point): string {
  const index = (side: "across" | "down", at: Mm) => fieldBorders(paper, side).filter((border) => border <= at).length;
  return fieldName(paper, "down", index("down", point.y)) + fieldName(paper, "across", index("across", point.x));
}
