import type { Box, Mm, Point } from "../drawing/geometry.js";
import type { DrawingSet, Mark } from "../drawing/marks.js";
import { circle, movePath, polyline } from "../drawing/path.js";
import { measureText, wrapText } from "../drawing/text.js";
import { readDrawingInfo } from "../machine/drawing.js";
import type { ActuatorKind, DrawingInfo, Medium, ValveActuator, ValveSpec } from "../machine/model.js";
import { Report } from "../machine/report.js";
import { boxesOf, centreWords, fivePortCentreWords } from "../machine/valve-boxes.js";
import { composeCylinder } from "../symbols/cylinder.js";
import type { SymbolLibrary, symbolFolders } from "../symbols/library.js";
import type { Symbol } from "../symbols/symbol.js";
import { composeValve } from "../symbols/valve.js";
import type { World } from "../world.js";
import { type Content, framed } from "./compose.js";
import { pageOf } from "./page.js";
import { papers } from "./paper.js";

interface Section {
  title: string;
  symbols: { symbol: Symbol; label: string }[];
}

/** Room around a symbol in its cell, and the least width of a cell for its label. */
const margin: Mm = 5;
const leastWidth: Mm = 32;
const labelHeight: Mm = 1.8;
const labelLine: Mm = 3;
const labelLines = 3;
const grid: Mm = 2;
const pale = "#c8c8c8";
const portInk = "#b00000";

/**
 * A chart of every symbol there is, at true size on the module grid with its ports ringed: the files of `symbols/`, then
 * valves and cylinders as they are composed, one for each rule.
 */
export function composeSymbolChart(symbols: SymbolLibrary, world: World): DrawingSet {
  const drawing: DrawingInfo = {
    ...readDrawingInfo([], "symbols", new Report()),
    title: "Symbols",
    number: "symbols",
    documentType: "Symbol chart",
  };
  const page = pageOf(papers[drawing.paper]);
  const notes = ["Grid 2 mm. A ring marks where a line joins."];
  const contents: Content[] = [];
  for (const section of [...filed(symbols), ...composed()]) {
    for (const marks of setSection(section, page.area)) contents.push({ number: contents.length + 1, title: section.title, marks, notes });
  }
  return {
    info: {
      title: drawing.title,
      number: drawing.number,
      author: "",
      subject: drawing.documentType,
      revision: "",
      language: drawing.language,
      date: "",
    },
    sheets: framed(contents, page, { drawing }, world),
    anchors: new Map(),
    parts: new Map(),
    outline: [],
  };
}

function filed(symbols: SymbolLibrary): Section[] {
  const titles: Record<(typeof symbolFolders)[number], string> = {
    "north-american": "Ladder symbols, north-american",
    international: "Ladder symbols, international",
    fluid: "Fluid symbols",
  };
  const names = symbols.names();
  return (["north-american", "international", "fluid"] as const)
    .map((folder) => ({
      title: titles[folder],
      symbols: names
        .filter((name) => name.startsWith(`${folder}/`))
        .map((name) => ({ symbol: symbols.get(name), label: `${symbols.get(name).title}\n${name.slice(folder.length + 1)}` })),
    }))
    .filter((section) => section.symbols.length > 0);
}

function composed(): Section[] {
  const valve = (label: string, medium: Medium, spec: ValveSpec) => ({
    label,
    symbol: composeValve(spec, medium, spec.normal ?? spec.positions - 1),
  });
  const end = (kind: ActuatorKind, override = false): ValveActuator => ({ kind, override });
  const bySpring = (ports: ValveSpec["ports"], kind: ActuatorKind, normally?: "open" | "closed"): ValveSpec => ({
    ports,
    positions: 2,
    boxes: boxesOf(ports, 2, { normally, springAt: "right" }),
    normal: 1,
    left: [end(kind)],
    right: [end("spring")],
  });
  const threePositions = (ports: 4 | 5, centre: (typeof centreWords)[number] | (typeof fivePortCentreWords)[number]): ValveSpec => ({
    ports,
    positions: 3,
    boxes: boxesOf(ports, 3, { centre }),
    normal: 1,
    left: [end("spring"), end("solenoid")],
    right: [end("spring"), end("solenoid")],
  });
  // A record, so that a new way to work a valve is not forgotten here.
  const acting: Record<Exclude<ActuatorKind, "spring" | "detent">, string> = {
    solenoid: "solenoid",
    "proportional-solenoid": "proportional solenoid",
    "piloted-solenoid": "solenoid with pilot stage",
    pilot: "pilot",
    "push-button": "push-button",
    lever: "lever",
    pedal: "pedal",
    roller: "roller",
    plunger: "plunger",
  };
  const detented: ValveSpec = {
    ...bySpring(5, "solenoid"),
    normal: undefined,
    left: [end("solenoid", true)],
    right: [end("solenoid", true)],
  };
  const valves = [
    ...([2, 3] as const).flatMap((ports) =>
      (["closed", "open"] as const).map((normally) =>
        valve(`${ports}/2 normally ${normally}`, "pneumatic", bySpring(ports, "solenoid", normally)),
      ),
    ),
    valve("4/2", "hydraulic", bySpring(4, "solenoid")),
    valve("5/2", "pneumatic", bySpring(5, "solenoid")),
    valve("5/2, two solenoids with override", "pneumatic", detented),
    valve("4/2, two solenoids, detent", "hydraulic", {
      ...bySpring(4, "solenoid"),
      normal: undefined,
      right: [end("detent"), end("solenoid")],
    }),
    ...centreWords.map((centre) => valve(`4/3 centre ${centre}`, "hydraulic", threePositions(4, centre))),
    ...fivePortCentreWords.map((centre) => valve(`5/3 centre ${centre}`, "pneumatic", threePositions(5, centre))),
    ...(Object.keys(acting) as (keyof typeof acting)[]).map((kind) =>
      valve(`worked by ${acting[kind]}`, "pneumatic", bySpring(3, kind, "closed")),
    ),
  ];
  const cylinders = [
    { label: "double-acting", symbol: composeCylinder({ action: "double-acting", cushion: "none" }, 0, "hydraulic") },
    { label: "double-acting, starts extended", symbol: composeCylinder({ action: "double-acting", cushion: "none" }, 1, "hydraulic") },
    { label: "fixed cushions", symbol: composeCylinder({ action: "double-acting", cushion: "fixed" }, 0, "hydraulic") },
    { label: "adjustable cushions", symbol: composeCylinder({ action: "double-acting", cushion: "adjustable" }, 0, "hydraulic") },
    ...(["spring", "spring-extend", "load"] as const).map((returnedBy) => ({
      label: {
        spring: "single-acting, spring return",
        "spring-extend": "single-acting, spring extend",
        load: "single-acting, load return",
      }[returnedBy],
      symbol: composeCylinder(
        { action: "single-acting", cushion: "none", returnedBy },
        returnedBy === "spring-extend" ? 1 : 0,
        "pneumatic",
      ),
    })),
  ];
  return [
    { title: "Directional valves, composed", symbols: valves },
    { title: "Cylinders, composed", symbols: cylinders },
  ];
}

/** Sets cells in rows from the upper left, as many sheets as are needed. */
function setSection({ symbols }: Section, area: Box): Mark[][] {
  const sheets: Mark[][] = [];
  let marks: Mark[] = [];
  let [x, y, rowHeight] = [area.x, area.y, 0];
  for (const { symbol, label } of symbols) {
    const width = snap(Math.max(leastWidth, symbol.box.width + 2 * margin));
    const height = snap(symbol.box.height + 2 * margin + labelLines * labelLine);
    if (x + width > area.x + area.width) [x, y, rowHeight] = [area.x, y + rowHeight, 0];
    if (y + height > area.y + area.height && marks.length > 0) {
      sheets.push(marks);
      marks = [];
      [x, y, rowHeight] = [area.x, area.y, 0];
    }
    marks.push(...cellMarks(symbol, label, { x, y, width, height }));
    x += width;
    rowHeight = Math.max(rowHeight, height);
  }
  sheets.push(marks);
  return sheets;
}

function snap(length: Mm): Mm {
  return Math.ceil(length / grid) * grid;
}

function cellMarks(symbol: Symbol, label: string, cell: Box): Mark[] {
  const { box } = symbol;
  const room = { ...cell, height: cell.height - labelLines * labelLine };
  // The symbol's origin is a point of the grid, its middle about the cell's.
  const at: Point = {
    x: cell.x + Math.round((room.width / 2 - box.x - box.width / 2) / grid) * grid,
    y: cell.y + Math.round((room.height / 2 - box.y - box.height / 2) / grid) * grid,
  };
  const marks: Mark[] = [gridMark({ x: room.x + 2, y: room.y + 2, width: room.width - 4, height: room.height - 4 }, at)];
  for (const shape of symbol.shapes) {
    if (shape.kind === "text") {
      marks.push({ ...shape, role: "symbol", at: { x: at.x + shape.at.x, y: at.y + shape.at.y + shape.height / 2 } });
    } else marks.push({ ...shape, role: "symbol", path: movePath(shape.path, at) });
  }
  for (const port of symbol.ports) {
    marks.push({ kind: "stroke", role: "port", path: circle({ x: at.x + port.x, y: at.y + port.y }, 0.6), width: 0.13, ink: portInk });
  }
  wrapLabel(label, cell.width - 2).forEach((text, index) => {
    const baseline = cell.y + room.height + labelLine * index + labelHeight;
    marks.push({
      kind: "text",
      role: "label",
      at: { x: cell.x + cell.width / 2, y: baseline },
      text,
      height: labelHeight,
      anchor: "middle",
    });
  });
  return marks;
}

/** The title on as many lines as it needs, the file's name on the last. */
function wrapLabel(label: string, width: Mm): string[] {
  const [title = "", name] = label.split("\n");
  const lines = wrapText(title, labelHeight, width, name === undefined ? labelLines : labelLines - 1);
  if (name !== undefined) lines.push(...wrapText(name, measureText(name, labelHeight) > width ? 1.5 : labelHeight, width, 1));
  return lines;
}

function gridMark(box: Box, origin: Point): Mark {
  const path = [];
  for (let x = origin.x - Math.floor((origin.x - box.x) / grid) * grid; x <= box.x + box.width + 1e-6; x += grid) {
    path.push(
      ...polyline([
        { x, y: box.y },
        { x, y: box.y + box.height },
      ]),
    );
  }
  for (let y = origin.y - Math.floor((origin.y - box.y) / grid) * grid; y <= box.y + box.height + 1e-6; y += grid) {
    path.push(
      ...polyline([
        { x: box.x, y },
        { x: box.x + box.width, y },
      ]),
    );
  }
  return { kind: "stroke", role: "grid", path, width: 0.05, ink: pale };
}
