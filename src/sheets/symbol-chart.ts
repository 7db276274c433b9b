import type { Box, Mm, Point } from "../drawing/geometry.js";
import type { DrawingSet, Mark, Segment } from "../drawing/marks.js";
import { circle, movePath } from "../drawing/path.js";
import { measureText, wrapText } from "../drawing/text.js";
import { wrapName } from "../drawing/wrap-name.js";
import { emptyDrawingInfo } from "../machine/drawing.js";
import type { DrawingInfo } from "../machine/model.js";
import { composedExamples, type ExampleFamily } from "../symbols/examples.js";
import { openSymbols } from "../symbols/library.js";
import { powerExamples } from "../symbols/power-examples.js";
import type { Port, Symbol } from "../symbols/symbol.js";
import type { World } from "../world.js";
import { frameMarks } from "./frame.js";
import { type Page, pageOf } from "./page.js";
import { papers } from "./paper.js";
import { readTemplate } from "./template.js";
import { stripMarks } from "./title-block.js";

/** One symbol on the chart. */
interface Entry {
  name: string;
  title: string;
  symbol: Symbol;
  /** Pitch of the grid behind it. */
  module: Mm;
}

interface Family {
  title: string;
  entries: Entry[];
}

const folderTitles: Record<string, string> = {
  fluid: "Fluid power",
  international: "Electrical, international",
  "north-american": "Electrical, north-american",
};

const electricalModule: Mm = 2.5;
const fluidModule: Mm = 2;

/** The finest division of a sheet's width; a symbol takes at least two. */
const columns = 16;
const leastColumns = 2;
const nameHeight: Mm = 2.5;
const smallHeight: Mm = 1.8;
const headingHeight: Mm = 3.5;
/** Room around a symbol within its cell, where its ports are named. */
const clear: Mm = 6;
const gridInk = "#d9dde2";
const portInk = "#1a7f5a";

/**
 * All symbols there are, read and composed, by family with name and title, their ports marked and named and the module
 * grid behind them, on as many A3 sheets as it takes.
 */
export function symbolChart(world: World): DrawingSet {
  const page = pageOf(papers.A3);
  const sheets = setFamilies(families(world), page.area);
  const frame = frameMarks(page);
  const template = readTemplate(page.paper.titleBlock.template, world);
  return {
    info: {
      title: chart.title,
      number: chart.number,
      author: chart.owner,
      subject: chart.documentType,
      revision: "",
      language: chart.language,
      date: "",
    },
    sheets: sheets.map(({ title, marks }, index) => ({
      number: index + 1,
      title,
      size: page.paper.size,
      marks: [...frame, ...strip(page, template, { number: index + 1, title, count: sheets.length }), ...marks],
    })),
    anchors: new Map(),
    parts: new Map(),
    outline: [],
  };
}

const chart: DrawingInfo = { ...emptyDrawingInfo(), title: "Symbols", number: "SYMBOLS", owner: "Spoolrung", documentType: "Symbol chart" };

const notes = [
  "Grid: one module, 2.5 mm electrical and 2 mm fluid. Green: ports.",
  "Own drawings after the grammar of IEC 60617, IEEE 315 and ISO 1219-1.",
];

function strip(page: Page, template: ReturnType<typeof readTemplate>, sheet: { number: number; title: string; count: number }): Mark[] {
  return stripMarks(page, template, chart, { ...sheet, notes });
}

function families(world: World): Family[] {
  const library = openSymbols(world);
  const folders = new Map<string, Entry[]>();
  for (const path of library.names()) {
    const [folder = "", name = ""] = path.split("/");
    const symbol = library.get(path);
    const entries = folders.get(folder) ?? [];
    folders.set(folder, entries);
    entries.push({ name, title: symbol.title, symbol, module: folder === "fluid" ? fluidModule : electricalModule });
  }
  const order = ["north-american", "international", "fluid"];
  return [
    ...order
      .filter((folder) => folders.has(folder))
      .map((folder) => ({ title: folderTitles[folder] ?? folder, entries: folders.get(folder) ?? [] })),
    ...powerExamples(library).map((family) => familyOf(family, electricalModule)),
    ...composedExamples().map((family) => familyOf(family, fluidModule)),
  ];
}

function familyOf({ title, examples }: ExampleFamily, module: Mm): Family {
  return { title, entries: examples.map(({ name, symbol }) => ({ name, title: "", symbol, module })) };
}

/** Sets the families one after another in rows of cells; a row that does not fit opens a new sheet. */
function setFamilies(all: readonly Family[], area: Box): { title: string; marks: Mark[] }[] {
  const sheets: { title: string; marks: Mark[] }[] = [];
  let y = Number.POSITIVE_INFINITY;
  const bottom = area.y + area.height;
  for (const { title, entries } of all) {
    let begun = false;
    for (const row of rowsOf(entries, area.width)) {
      const heading = begun ? 0 : headingHeight * 2.4;
      if (y + heading + row.height > bottom) {
        sheets.push({ title, marks: [] });
        y = area.y;
      }
      const sheet = sheets.at(-1) as { title: string; marks: Mark[] };
      if (!sheet.title.split(" / ").includes(title)) sheet.title += ` / ${title}`;
      const { marks } = sheet;
      if (!begun || y === area.y) {
        marks.push({
          kind: "text",
          role: "heading",
          at: { x: area.x, y: y + headingHeight },
          text: title,
          height: headingHeight,
          anchor: "start",
          bold: true,
        });
        y += headingHeight * 2.4;
        begun = true;
      }
      for (const { entry, box } of row.cells) marks.push(...cellMarks(entry, { ...box, x: area.x + box.x, y }));
      y += row.height;
    }
  }
  return sheets;
}

interface Row {
  height: Mm;
  cells: { entry: Entry; box: Box }[];
}

function rowsOf(entries: readonly Entry[], width: Mm): Row[] {
  const column = width / columns;
  const rows: Row[] = [];
  let at = columns;
  for (const entry of entries) {
    const { box } = entry.symbol;
    const needed = Math.max(box.width + 2 * clear, measureText(entry.name, smallHeight, true) + 2);
    const wide = Math.min(columns, Math.max(leastColumns, Math.ceil(needed / column)));
    if (at + wide > columns) {
      rows.push({ height: 0, cells: [] });
      at = 0;
    }
    const row = rows.at(-1) as Row;
    row.cells.push({ entry, box: { x: at * column, y: 0, width: wide * column, height: 0 } });
    row.height = Math.max(row.height, box.height + 2 * clear + captionHeight(entry));
    at += wide;
  }
  for (const row of rows) for (const { box } of row.cells) box.height = row.height;
  return rows;
}

/** Room under a symbol for its name in a line, or smaller in two, and two lines of title. */
const captionHeight = ({ title }: Entry): Mm => 2 * smallHeight * 1.6 + (title === "" ? 0 : 2 * smallHeight * 1.6) + 3;

function cellMarks(entry: Entry, cell: Box): Mark[] {
  const { name, title, symbol, module } = entry;
  const { box } = symbol;
  const room: Box = { x: cell.x + 1, y: cell.y, width: cell.width - 2, height: cell.height - captionHeight(entry) };
  const origin: Point = {
    x: room.x + room.width / 2 - (box.x + box.width / 2),
    y: room.y + room.height / 2 - (box.y + box.height / 2),
  };
  const marks: Mark[] = [{ kind: "stroke", role: "grid", path: grid(room, origin, module), width: 0.13, ink: gridInk }];
  for (const shape of symbol.shapes) {
    if (shape.kind === "text") {
      const at = { x: origin.x + shape.at.x, y: origin.y + shape.at.y + shape.height / 2 };
      marks.push({ kind: "text", role: "symbol", at, text: shape.text, height: shape.height, anchor: shape.anchor });
    } else marks.push({ ...shape, role: "symbol", path: movePath(shape.path, origin) });
  }
  for (const port of symbol.ports) marks.push(...portMarks(port, origin));

  const middle = cell.x + cell.width / 2;
  let y = room.y + room.height + nameHeight * 1.3;
  // A long name is set smaller before it is broken.
  const height = measureText(name, nameHeight, true) <= room.width ? nameHeight : smallHeight;
  for (const text of wrapName(name, height, room.width, 2, true)) {
    marks.push({ kind: "text", role: "name", at: { x: middle, y }, text, height, anchor: "middle", bold: true });
    y += smallHeight * 1.6;
  }
  for (const line of wrapText(title, smallHeight, room.width, 2)) {
    marks.push({ kind: "text", role: "title", at: { x: middle, y }, text: line, height: smallHeight, anchor: "middle" });
    y += smallHeight * 1.6;
  }
  return marks;
}

/** Lines a module apart through the symbol's origin, as far as the cell goes. */
function grid(room: Box, origin: Point, module: Mm): Segment[] {
  const path: Segment[] = [];
  const right = room.x + room.width;
  const bottom = room.y + room.height;
  const first = (from: Mm, through: Mm) => through - Math.floor((through - from) / module) * module;
  for (let x = first(room.x, origin.x); x <= right; x += module) path.push({ op: "M", x, y: room.y }, { op: "L", x, y: bottom });
  for (let y = first(room.y, origin.y); y <= bottom; y += module) path.push({ op: "M", x: room.x, y }, { op: "L", x: right, y });
  return path;
}

/** A ring on the port and its name where the line would go on. */
function portMarks({ name, x, y, direction }: Port, origin: Point): Mark[] {
  const at = { x: origin.x + x, y: origin.y + y };
  const out: Mm = 1;
  const text: Record<Port["direction"], { x: Mm; y: Mm; anchor: "start" | "middle" | "end" }> = {
    up: { x: at.x, y: at.y - out, anchor: "middle" },
    down: { x: at.x, y: at.y + out + smallHeight, anchor: "middle" },
    left: { x: at.x - out, y: at.y + smallHeight / 2, anchor: "end" },
    right: { x: at.x + out, y: at.y + smallHeight / 2, anchor: "start" },
  };
  const { anchor, ...place } = text[direction];
  // A long name beside the symbol would leave the cell.
  const beside = anchor === "middle" || measureText(name, smallHeight) <= clear;
  const words: Mark[] = beside ? [{ kind: "text", role: "port", at: place, text: name, height: smallHeight, anchor, ink: portInk }] : [];
  return [{ kind: "stroke", role: "port", path: circle(at, 0.6), width: 0.18, ink: portInk }, ...words];
}
