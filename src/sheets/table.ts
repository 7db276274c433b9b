import { textBox } from "../drawing/extent.js";
import type { Box, Mm } from "../drawing/geometry.js";
import type { Mark } from "../drawing/marks.js";
import { polyline } from "../drawing/path.js";
import { fitText, measureText, wrapText } from "../drawing/text.js";
import { type Piece, roundabout } from "./references.js";

/** A table to be set on as many sheets as it needs. */
export interface Table {
  title: string;
  columns: { title: string /** Share of the width. */; share: number }[];
  rows: Cell[][];
}

/** What stands in a cell: a text that may take more lines, or entries of which none is broken and each may lead somewhere. */
export type Cell =
  | { text: string; to?: Piece["to"]; bold?: boolean /** The most it may take; a few unless given. */; lines?: number }
  | { entries: Piece[] };

const textHeight: Mm = 2.5;
const pitch: Mm = 4.2;
const padding: Mm = 1.5;
const headHeight: Mm = 7;
const titleHeight: Mm = 9;
const gapBetween: Mm = 10;
const entryGap: Mm = 4;
/** Text in a cell takes no more lines than this; entries take as many as they need. */
const mostLines = 3;

/**
 * Sets tables one below the other into the boxes of a sheet, and of as many sheets like it as it takes; title and heads are
 * repeated where a table goes on. A row is never divided, unless it is higher than a whole box.
 * @param boxes where a sheet has room, all of one size, in reading order
 * @returns the marks of each sheet, the first one first
 */
export function setTables(tables: readonly Table[], boxes: readonly Box[]): Mark[][] {
  const pen = new Pen(boxes);
  for (const table of tables) {
    const { width, height } = pen.box;
    const widths = columnWidths(table, width);
    const steps = entrySteps(table);
    const most = Math.max(1, Math.floor((height - titleHeight - headHeight - 2 * padding) / pitch));
    const rows = table.rows.flatMap((row) => setRow(row, widths, steps, most));
    const [first] = rows;
    if (!first) continue;
    if (pen.used) {
      pen.y += gapBetween;
      if (!pen.hasRoom(titleHeight + headHeight + first.height)) pen.nextBox();
    }
    let top = startTable(pen, table, widths, false);
    for (const row of rows) {
      if (!pen.hasRoom(row.height)) {
        closeTable(pen, widths, top);
        pen.nextBox();
        top = startTable(pen, table, widths, true);
      }
      pen.draw(...row.at(pen.box.x, pen.y));
      pen.y += row.height;
      rule(pen, pen.y, 0.18);
    }
    closeTable(pen, widths, top);
  }
  return pen.sheets.filter((marks) => marks.length > 0);
}

/** Where setting has come to. */
class Pen {
  readonly sheets: Mark[][] = [[]];
  y: Mm;
  private index = 0;

  constructor(private readonly boxes: readonly Box[]) {
    this.y = this.box.y;
  }

  get box(): Box {
    return this.boxes[this.index] as Box;
  }

  get used(): boolean {
    return this.y > this.box.y;
  }

  hasRoom(height: Mm): boolean {
    return this.y + height <= this.box.y + this.box.height + 0.001;
  }

  nextBox(): void {
    this.index = (this.index + 1) % this.boxes.length;
    if (this.index === 0) this.sheets.push([]);
    this.y = this.box.y;
  }

  draw(...marks: Mark[]): void {
    (this.sheets.at(-1) as Mark[]).push(...marks);
  }
}

/** Every column as wide as what must not be broken in it; what is left is shared out by what each column may have. */
function columnWidths(table: Table, width: Mm): Mm[] {
  const total = table.columns.reduce((sum, column) => sum + column.share, 0);
  const least = table.columns.map(({ title }, index) => {
    const cells = table.rows.map((row) => row[index] as Cell);
    return 2 * padding + Math.max(measureText(title, textHeight, true), longest(cells.map(unbreakable))) + 0.01;
  });
  const needed = least.reduce((sum, each) => sum + each, 0);
  if (needed >= width) return least.map((each) => (each * width) / needed);
  const wishes = table.columns.map(({ share }, index) => Math.max(0, (share / total) * width - (least[index] as Mm)));
  const wished = wishes.reduce((sum, each) => sum + each, 0);
  return least.map((each, index) => each + ((width - needed) * (wishes[index] as Mm)) / wished);
}

/** Words longer than this may be broken after all. */
const longWord: Mm = 32;

/** Of any number of lengths: more than a call takes arguments. */
function longest(lengths: readonly Mm[]): Mm {
  return lengths.reduce((most, each) => Math.max(most, each), 0);
}

function unbreakable(cell: Cell): Mm {
  if ("entries" in cell) return longest(cell.entries.map((entry) => measureText(entry.text, textHeight)));
  return Math.min(longWord, longest(cell.text.split(/\s+/).map((word) => measureText(word, textHeight, cell.bold))));
}

/** Title and heads; gives back the upper edge of the heads. */
function startTable(pen: Pen, table: Table, widths: Mm[], again: boolean): Mm {
  const { box, y } = pen;
  const title = fitText(again ? `${table.title} (continued)` : table.title, 3.5, box.width, true);
  pen.draw({ kind: "text", role: "heading", at: { x: box.x, y: y + 4.5 }, text: title, height: 3.5, anchor: "start", bold: true });
  const top = y + titleHeight;
  let x = box.x;
  for (const [index, column] of table.columns.entries()) {
    const room = (widths[index] as Mm) - 2 * padding;
    const height = measureText(column.title, textHeight, true) > room ? 1.8 : textHeight;
    const text = fitText(column.title, height, room, true);
    const at = { x: x + padding, y: top + (headHeight + height) / 2 };
    pen.draw({ kind: "text", role: "heading", at, text, height, anchor: "start", bold: true });
    x += widths[index] as Mm;
  }
  rule(pen, top, 0.5);
  rule(pen, top + headHeight, 0.35);
  pen.y = top + headHeight;
  return top;
}

/** Columns' rules and the lower edge. */
function closeTable(pen: Pen, widths: Mm[], top: Mm): void {
  let { x } = pen.box;
  for (const width of [0, ...widths]) {
    x += width;
    pen.draw({
      kind: "stroke",
      role: "table",
      path: polyline([
        { x, y: top },
        { x, y: pen.y },
      ]),
      width: 0.18,
    });
  }
  rule(pen, pen.y, 0.5);
}

function rule(pen: Pen, y: Mm, width: Mm): void {
  const { x, width: across } = pen.box;
  pen.draw({
    kind: "stroke",
    role: "table",
    path: polyline([
      { x, y },
      { x: x + across, y },
    ]),
    width,
  });
}

interface SetRow {
  height: Mm;
  at(x: Mm, y: Mm): Mark[];
}

/** A row in lines; more than one row if it would be higher than a sheet. */
function setRow(cells: Cell[], widths: Mm[], steps: Mm[], most: number): SetRow[] {
  const lines = cells.map((cell, index) => cellLines(cell, (widths[index] as Mm) - 2 * padding, steps[index] as Mm));
  const count = Math.max(1, ...lines.map((cell) => cell.length));
  const rows: SetRow[] = [];
  for (let from = 0; from < count; from += most) {
    const part = lines.map((cell) => cell.slice(from, from + most));
    const height = Math.max(1, ...part.map((cell) => cell.length)) * pitch + 2 * padding - (pitch - textHeight);
    rows.push({ height, at: (x, y) => rowMarks(part, widths, x, y) });
  }
  return rows;
}

type CellLine = (Piece & { x: Mm; bold?: boolean })[];

function cellLines(cell: Cell, room: Mm, step: Mm): CellLine[] {
  if ("text" in cell) {
    return wrapText(cell.text, textHeight, room, cell.lines ?? mostLines, cell.bold).map((text) => [
      { text, x: 0, ...(cell.to === undefined ? {} : { to: cell.to }), ...(cell.bold ? { bold: true } : {}) },
    ]);
  }
  if (cell.entries.length === 0) return [];
  const perLine = Math.max(1, Math.floor((room + entryGap) / step));
  const lines: CellLine[] = [];
  for (let from = 0; from < cell.entries.length; from += perLine) {
    lines.push(
      cell.entries
        .slice(from, from + perLine)
        .map((entry, index) => ({ ...entry, text: fitText(entry.text, textHeight, room), x: index * step })),
    );
  }
  return lines;
}

/** Entries of a column stand one breadth apart in all rows, so that the eye can run down them. */
function entrySteps(table: Table): Mm[] {
  return table.columns.map((_, index) => {
    let widest = 0;
    for (const row of table.rows) {
      const cell = row[index];
      if (cell && "entries" in cell) for (const { text } of cell.entries) widest = Math.max(widest, measureText(text, textHeight));
    }
    return widest + entryGap;
  });
}

function rowMarks(lines: CellLine[][], widths: Mm[], left: Mm, top: Mm): Mark[] {
  const marks: Mark[] = [];
  let x = left;
  for (const [column, cell] of lines.entries()) {
    for (const [index, line] of cell.entries()) {
      for (const piece of line) {
        if (piece.text === "") continue;
        const at = { x: x + padding + piece.x, y: top + padding + textHeight + index * pitch };
        const mark: Mark & { kind: "text" } = { kind: "text", role: "cell", at, text: piece.text, height: textHeight, anchor: "start" };
        if (piece.bold) mark.bold = true;
        if (piece.underline) mark.underline = true;
        marks.push(mark);
        if (piece.to !== undefined) marks.push({ kind: "link", box: roundabout(textBox(mark)), to: piece.to });
      }
    }
    x += widths[column] as Mm;
  }
  return marks;
}
