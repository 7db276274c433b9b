import type { DeviceUse, NodeId, Rung } from "../../machine/model.js";

/**
 * The ladder grid, before any millimetre. Columns run along the current, from the live rail to the return rail; lines
 * follow each other across it. Column c lies between boundaries c and c + 1. Loads stand in `loadColumn`, what lies behind
 * them in the columns after it; how far along the sheet that is depends on the widest rung beside it.
 *
 * Before every wide column lie narrow ones for terminals and plug pins, so that contacts stay under each other however many
 * terminals stand between them. A narrow column in which nothing stands takes no room.
 */
export const loadColumn = 1_000_000;

const narrowColumns = 3;
/** From one wide column to the next. */
export const stride = narrowColumns + 1;

/** The boundary where the return rail runs. The live rail is boundary 0. */
export const returnRail = 2_000_000;

/** A contact or load in its place. */
export interface Cell {
  use: DeviceUse;
  /** Counted from the rung's first line. */
  line: number;
  column: number;
}

/** An end of a stretch of wire: a boundary, or one of the two pins of a cell. */
export type Stop = { boundary: number } | { cell: Cell; pin: 0 | 1 };

/** Wire along a line. */
export interface Run {
  line: number;
  from: Stop;
  to: Stop;
  node: NodeId;
}

/** Wire from line to line on a boundary. */
export interface Upright {
  boundary: number;
  fromLine: number;
  toLine: number;
  node: NodeId;
}

/** Where a `@point` lies in its rung. */
export interface PointSite {
  node: NodeId;
  point: string;
  line: number;
  boundary: number;
  /** The part whose place stands for it in references. */
  part: string;
  /** The wire begins or ends here unless an upright joins it. */
  open?: "start" | "end";
  /** The rung was cut here: the arrow stands whatever joins the wire. */
  cut?: boolean;
}

/** A rung in its place on the grid. */
export interface RungGrid {
  rung: Rung;
  /** How many lines it takes. */
  lines: number;
  /** The boundary it begins and ends on. */
  start: number;
  end: number;
  cells: Cell[];
  runs: Run[];
  uprights: Upright[];
  sites: PointSite[];
}

/** Wire on a boundary from a rung to a later one that shares its point. */
export interface Link {
  node: NodeId;
  boundary: number;
  from: { rung: number; line: number };
  to: { rung: number; line: number };
}

/** Whether a part takes a narrow column: a terminal or a plug pin. */
export function isNarrow(use: DeviceUse): boolean {
  return use.kind === "through" && use.pin !== undefined;
}

/** Where the columns that are counted like this one begin: at the live rail, or behind the loads. */
const regionOf = (boundary: number) => (boundary > loadColumn ? loadColumn + 1 : 0);

/** Whether a column is one of those for contacts and loads. */
export function isWideColumn(column: number): boolean {
  return column === loadColumn || (column - regionOf(column)) % stride === narrowColumns;
}

/** The next column free for a part behind a boundary. */
export function columnAfter(boundary: number, use: DeviceUse): number {
  return isNarrow(use) ? boundary : afterWide(boundary) - 1;
}

/** The boundary behind the next wide column. */
export function afterWide(boundary: number): number {
  const region = regionOf(boundary);
  return region + (Math.floor((boundary - region) / stride) + 1) * stride;
}

/** Whether a boundary is one that every rung has: a rail, or the place behind a wide column. */
export function isCommon(boundary: number): boolean {
  return (boundary - regionOf(boundary)) % stride === 0;
}

/** The boundary a stop lies on. */
export function boundaryOf(stop: Stop): number {
  return "boundary" in stop ? stop.boundary : stop.cell.column + stop.pin;
}

/** The node that lies on a boundary of a line, if anything does. */
export function nodeAt(grid: RungGrid, line: number, boundary: number): NodeId | undefined {
  return grid.runs.find((run) => run.line === line && boundaryOf(run.from) <= boundary && boundary <= boundaryOf(run.to))?.node;
}
