import { textBox } from "../drawing/extent.js";
import type { Box, Mm } from "../drawing/geometry.js";
import type { Mark } from "../drawing/marks.js";
import { polyline } from "../drawing/path.js";
import { fitText, measureText, wrapText } from "../drawing/text.js";
import { type Piece, roundabout } from "./references.js";

/** A table to be set on as many sheets as it needs. */
export interface Table {
  title: string;
  columns: { title: string; /** Share of the width. */ share: number }[];
  rows: Cell[][];
}

/** What stands in a cell: a text that may take more lines, or entries of which none is broken and each may lead somewhere. */
export type Cell = { text: string; to?: Piece["to"]; bold?: boolean } | { entries: Piece[] };

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
 * Sets tables one below the other into boxes of one size, as many as it takes, and repeats title and heads where a table
 * goes on. A row is never divided, unless it is higher than a whole box.
 * @returns the marks of each box, the first one first
 */
export function setTables(tables: readonly Table[], box: Box): Mark[][] {
  const sheets: Mark[][] = [[]];
  let y = box.y;
  const bottom = box.y + box.height;
  for (const table of tables) {
    const widths = columnWidths(table, box.width);
    const steps = entrySteps(table);
    const rows = table.rows.flatMap((row) => setRow(row, widths, steps, Math.floor((box.height - titleHeight - headHeight - 2 * padding) / pitch)));
    const [first] = rows;
    if (!first) continue;
    if (y > box.y) {
      y += gapBetween;
      if (y + titleHeight + headHeight + first.height > bottom) y = newSheet(sheets, box);
    }
    let top = startTable(sheets, table, widths, box, y, false);
    y = top + headHeight;
    for (const row of rows) {
      if (y + row.height > bottom + 0.001) {
        closeTable(sheets, widths, box, top, y);
        y = newSheet(sheets, box);
        top = startTable(sheets, table, widths, box, y, true);
        y = top + headHeight;
      }
      (sheets.at(-1) as Mark[]).push(...row.at(box.x, y));
      y += row.height;
      rule(sheets, box, y, 0.18);
    }
    closeTable(sheets, widths, box, top, y);
  }
  return sheets.filter((marks) => marks.length > 0);
}

function newSheet(sheets: Mark[][], box: Box): Mm {
  sheets.push([]);
  return box.y;
}

function columnWidths(table: Table, width: Mm): Mm[] {
  const total = table.columns.reduce((sum, column) => sum + column.share, 0);
  return table.columns.map((column) => (column.share / total) * width);
}

/** Title and heads; gives back the upper edge of the heads. */
function startTable(sheets: Mark[][], table: Table, widths: Mm[], box: Box, y: Mm, again: boolean): Mm {
  const marks = sheets.at(-1) as Mark[];
  const title = fitText(again ? `${table.title} (continued)` : table.title, 3.5, box.width, true);
  marks.push({ kind: "text", role: "heading", at: { x: box.x, y: y + 4.5 }, text: title, height: 3.5, anchor: "start", bold: true });
  const top = y + titleHeight;
  let x = box.x;
  for (const [index, column] of table.columns.entries()) {
    const room = (widths[index] as Mm) - 2 * padding;
    const height = measureText(column.title, textHeight, true) > room ? 1.8 : textHeight;
    const text = fitText(column.title, height, room, true);
    const at = { x: x + padding, y: top + (headHeight + height) / 2 };
    marks.push({ kind: "text", role: "heading", at, text, height, anchor: "start", bold: true });
    x += widths[index] as Mm;
  }
  rule(sheets, box, top, 0.5);
  rule(sheets, box, top + headHeight, 0.35);
  return top;
}

/** Columns' rules and the lower edge. */
function closeTable(sheets: Mark[][], widths: Mm[], box: Box, top: Mm, bottom: Mm): void {
  const marks = sheets.at(-1) as Mark[];
  let x = box.x;
  for (const width of [0, ...widths]) {
    x += width;
    marks.push({ kind: "stroke", role: "table", path: polyline([{ x, y: top }, { x, y: bottom }]), width: 0.18 });
  }
  rule(sheets, box, bottom, 0.5);
}

function rule(sheets: Mark[][], box: Box, y: Mm, width: Mm): void {
  const path = polyline([{ x: box.x, y }, { x: box.x + box.width, y }]);
  (sheets.at(-1) as Mark[]).push({ kind: "stroke", role: "table", path, width });
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
    return wrapText(cell.text, textHeight, room, mostLines, cell.bold).map((text) => [
      { text, x: 0, ...(cell.to === undefined ? {} : { to: cell.to }), ...(cell.bold ? { bold: true } : {}) },
    ]);
  }
  if (cell.entries.length === 0) return [];
  const perLine = Math.max(1, Math.floor((room + entryGap) / step));
  const lines: CellLine[] = [];
  for (let from = 0; from < cell.entries.length; from += perLine) {
    lines.push(
      cell.entries.slice(from, from + perLine).map((entry, index) => ({ ...entry, text: fitText(entry.text, textHeight, room), x: index * step })),
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
