import { SaxesParser } from "saxes";
import { capHeight } from "../drawing/font-metrics.js";
import type { Mm, Point } from "../drawing/geometry.js";
import type { Anchor, Segment } from "../drawing/marks.js";
import { circle, polyline } from "../drawing/path.js";
import { extentOf } from "./extent.js";
import { lineWidth, mm } from "./notation.js";
import { parsePathData } from "./path-data.js";
import type { Direction, Symbol } from "./symbol.js";

type Attributes = Record<string, string>;

/** What an element takes over from those around it. */
interface Style {
  fill: string;
  stroke: string;
  width: number | undefined;
  dash: number[] | undefined;
}

/**
 * Reads a symbol file: SVG whose `width` over its `viewBox` width gives the module in mm. Permitted within it are `g`, `path`,
 * `line`, `polyline`, `polygon`, `rect`, `circle`, `ellipse`, `text`, `title` and `desc`, without transforms or style sheets;
 * `<circle class="port" id="port-NAME" data-direction=…>` marks a port and `<circle class="spot" data-name=… data-anchor=…>`
 * a place for text. Neither is drawn.
 * @throws Error saying what is wrong with the file
 */
export function readSymbol(text: string, name: string): Symbol {
  const symbol: Symbol = { name, title: "", box: { x: 0, y: 0, width: 0, height: 0 }, ports: [], shapes: [], spots: {} };
  const parser = new SaxesParser();
  const styles: Style[] = [];
  const open: { name: string; attributes: Attributes; text: string }[] = [];
  let scale = 0;

  parser.on("error", (error) => {
    throw new Error(error.message.replace(/^[\d:]+\s*/, ""));
  });
  parser.on("opentag", (tag) => {
    const attributes = tag.attributes as Attributes;
    const outer = styles.at(-1) ?? { fill: "black", stroke: "none", width: undefined, dash: undefined };
    const style = inherit(outer, attributes);
    styles.push(style);
    open.push({ name: tag.name, attributes, text: "" });
    for (const attribute of ["transform", "style"]) {
      if (attributes[attribute] !== undefined) throw new Error(`<${tag.name}>: the attribute ${attribute} is not permitted in a symbol`);
    }
    if (open.length === 1) {
      if (tag.name !== "svg") throw new Error(`it begins with <${tag.name}> and not with <svg>`);
      scale = scaleOf(attributes);
    } else if (attributes.class === "port") {
      addPort(symbol, attributes, scale);
    } else if (attributes.class === "spot") {
      const anchor = attributes["data-anchor"] ?? "middle";
      if (!isAnchor(anchor)) throw new Error(`the anchor of a spot is start, middle or end, not "${anchor}"`);
      const spot = required(attributes, "data-name", "a spot");
      symbol.spots[spot] = { ...placeOf(attributes, scale), anchor };
    } else {
      const path = pathOf(tag.name, attributes);
      if (path)
        addPath(
          symbol,
          path.map((segment) => scaled(segment, scale)),
          style,
          scale,
        );
    }
  });
  parser.on("text", (piece) => {
    const element = open.at(-1);
    if (element) element.text += piece;
  });
  parser.on("closetag", () => {
    const element = open.pop();
    styles.pop();
    if (element?.name === "title" && open.length === 1) symbol.title = element.text.trim();
    if (element?.name === "text") addText(symbol, element.attributes, element.text.trim(), scale);
  });
  parser.write(text).close();

  if (symbol.shapes.length === 0) throw new Error("it draws nothing");
  symbol.box = extentOf(symbol.shapes, symbol.ports);
  return symbol;
}

/** Millimetres for a unit of the file. */
function scaleOf(attributes: Attributes): number {
  const width = /^(\d*\.?\d+)mm$/.exec(attributes.width ?? "")?.[1];
  const view = (attributes.viewBox ?? "")
    .trim()
    .split(/[\s,]+/)
    .map(Number);
  if (width === undefined) throw new Error("<svg>: its width must be given in mm");
  if (view.length !== 4 || view.some((n) => !Number.isFinite(n)) || !((view[2] as number) > 0))
    throw new Error("<svg>: it needs a viewBox");
  return Number(width) / (view[2] as number);
}

function inherit(outer: Style, attributes: Attributes): Style {
  const width = attributes["stroke-width"];
  const dash = attributes["stroke-dasharray"];
  return {
    fill: attributes.fill ?? outer.fill,
    stroke: attributes.stroke ?? outer.stroke,
    width: width === undefined ? outer.width : finite(width, "stroke-width"),
    dash:
      dash === undefined
        ? outer.dash
        : dash === "none"
          ? undefined
          : dash
              .trim()
              .split(/[\s,]+/)
              .map((n) => finite(n, "stroke-dasharray")),
  };
}

const compass: readonly string[] = ["up", "down", "left", "right"] satisfies Direction[];

function addPort(symbol: Symbol, attributes: Attributes, scale: Mm): void {
  const id = required(attributes, "id", "a port");
  if (!id.startsWith("port-") || id === "port-") throw new Error(`the id of a port begins with "port-", unlike "${id}"`);
  const name = id.slice("port-".length);
  const direction = attributes["data-direction"] ?? "";
  if (!compass.includes(direction)) throw new Error(`port ${name}: data-direction is up, down, left or right, not "${direction}"`);
  if (symbol.ports.some((port) => port.name === name)) throw new Error(`port ${name} is there twice`);
  symbol.ports.push({ name, ...placeOf(attributes, scale), direction: direction as Direction });
}

function placeOf(attributes: Attributes, scale: Mm): Point {
  return { x: mm(finite(attributes.cx ?? "0", "cx") * scale), y: mm(finite(attributes.cy ?? "0", "cy") * scale) };
}

/** The path of a drawing element in the file's units; undefined for one that draws nothing itself. */
function pathOf(element: string, attributes: Attributes): Segment[] | undefined {
  const n = (name: string): number => finite(attributes[name] ?? "0", name);
  switch (element) {
    case "path":
      return parsePathData(required(attributes, "d", "<path>"));
    case "line":
      return polyline([
        { x: n("x1"), y: n("y1") },
        { x: n("x2"), y: n("y2") },
      ]);
    case "polyline":
    case "polygon":
      return polyline(pointsOf(required(attributes, "points", `<${element}>`)), element === "polygon");
    case "rect":
      return roundedRectangle(n("x"), n("y"), n("width"), n("height"), n("rx") || n("ry"));
    case "circle":
      return circle({ x: n("cx"), y: n("cy") }, n("r"));
    case "ellipse":
      return ellipse(n("cx"), n("cy"), n("rx"), n("ry"));
    case "g":
    case "text":
    case "title":
    case "desc":
      return undefined;
    default:
      throw new Error(`<${element}> is not permitted in a symbol`);
  }
}

function pointsOf(text: string): Point[] {
  const numbers = text
    .trim()
    .split(/[\s,]+/)
    .map((number) => finite(number, "points"));
  if (numbers.length % 2 === 1) throw new Error("points: a coordinate is missing");
  return Array.from({ length: numbers.length / 2 }, (_, i) => ({ x: numbers[2 * i] as number, y: numbers[2 * i + 1] as number }));
}

function roundedRectangle(x: number, y: number, width: number, height: number, r: number): Segment[] {
  const right = x + width;
  const bottom = y + height;
  if (r === 0)
    return polyline(
      [
        { x, y },
        { x: right, y },
        { x: right, y: bottom },
        { x, y: bottom },
      ],
      true,
    );
  const corner = (toX: number, toY: number): Segment => ({ op: "A", radius: r, large: false, sweep: true, x: toX, y: toY });
  return [
    { op: "M", x: x + r, y },
    { op: "L", x: right - r, y },
    corner(right, y + r),
    { op: "L", x: right, y: bottom - r },
    corner(right - r, bottom),
    { op: "L", x: x + r, y: bottom },
    corner(x, bottom - r),
    { op: "L", x, y: y + r },
    corner(x + r, y),
    { op: "Z" },
  ];
}

/** A circle's four curves drawn out to an ellipse; the handles reach the usual 0.5523 of the half axes. */
function ellipse(cx: number, cy: number, rx: number, ry: number): Segment[] {
  const k = 0.5522847498;
  const curve = (x0: number, y0: number, x1: number, y1: number): Segment => {
    // From (x0,y0) to (x1,y1) on the unit circle, a quarter turn.
    const one = { x: x0 + k * x1, y: y0 + k * y1 };
    const two = { x: x1 + k * x0, y: y1 + k * y0 };
    return {
      op: "C",
      x1: cx + rx * one.x,
      y1: cy + ry * one.y,
      x2: cx + rx * two.x,
      y2: cy + ry * two.y,
      x: cx + rx * x1,
      y: cy + ry * y1,
    };
  };
  return [{ op: "M", x: cx + rx, y: cy }, curve(1, 0, 0, 1), curve(0, 1, -1, 0), curve(-1, 0, 0, -1), curve(0, -1, 1, 0), { op: "Z" }];
}

function scaled(segment: Segment, scale: Mm): Segment {
  switch (segment.op) {
    case "Z":
      return segment;
    case "C":
      return {
        op: "C",
        x1: mm(segment.x1 * scale),
        y1: mm(segment.y1 * scale),
        x2: mm(segment.x2 * scale),
        y2: mm(segment.y2 * scale),
        x: mm(segment.x * scale),
        y: mm(segment.y * scale),
      };
    case "A":
      return { ...segment, radius: mm(segment.radius * scale), x: mm(segment.x * scale), y: mm(segment.y * scale) };
    default:
      return { op: segment.op, x: mm(segment.x * scale), y: mm(segment.y * scale) };
  }
}

function addPath(symbol: Symbol, path: Segment[], style: Style, scale: Mm): void {
  if (style.fill !== "none") symbol.shapes.push({ kind: "fill", path });
  if (style.stroke === "none") return;
  const width = style.width === undefined ? lineWidth : mm(style.width * scale);
  symbol.shapes.push({ kind: "stroke", path, width, ...(style.dash ? { dash: style.dash.map((part) => mm(part * scale)) } : {}) });
}

/** Text of a file stands on its baseline; its height is that of the capitals in the font the sheets are set in. */
function addText(symbol: Symbol, attributes: Attributes, text: string, scale: Mm): void {
  const anchor = attributes["text-anchor"] ?? "start";
  if (!isAnchor(anchor)) throw new Error(`the text-anchor of "${text}" is start, middle or end, not "${anchor}"`);
  const height = Math.round(finite(required(attributes, "font-size", `the text "${text}"`), "font-size") * scale * (capHeight / 10)) / 100;
  const x = mm(finite(attributes.x ?? "0", "x") * scale);
  const y = mm(finite(attributes.y ?? "0", "y") * scale - height / 2);
  symbol.shapes.push({ kind: "text", at: { x, y }, text, height, anchor });
}

function isAnchor(text: string): text is Anchor {
  return text === "start" || text === "middle" || text === "end";
}

function required(attributes: Attributes, name: string, owner: string): string {
  const value = attributes[name];
  if (value === undefined) throw new Error(`${owner} has no ${name}`);
  return value;
}

function finite(text: string, what: string): number {
  const value = Number(text);
  if (text.trim() === "" || !Number.isFinite(value)) throw new Error(`${what}: "${text}" is not a number`);
  return value;
}
