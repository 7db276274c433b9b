import { SaxesParser } from "saxes";
import type { Mm, Point, Size } from "../drawing/geometry.js";
import type { Anchor, Mark, Segment } from "../drawing/marks.js";
import { movePath, polyline, rectangle } from "../drawing/path.js";
import { fitText, fontSize, measureText } from "../drawing/text.js";
import type { World } from "../world.js";

/** A form read from `templates/frames`: its lines and its words, some of them to be filled. Lengths in mm from its upper left corner. */
export interface Template {
  name: string;
  size: Size;
  strokes: { path: Segment[]; width: Mm }[];
  texts: TemplateText[];
}

interface TemplateText {
  at: Point;
  anchor: Anchor;
  height: Mm;
  bold: boolean;
  text: string;
  /** What is written here in place of `text`. */
  field?: string;
  /** Room for it. */
  width?: Mm;
  /** Least height of capitals to which it may be reduced. */
  smallest?: Mm;
}

const folder = "templates/frames";

/** The names a drawing may give as its template, sorted. */
export function templateNames(world: World): string[] {
  return world
    .listAssets(folder)
    .filter((name) => name.endsWith(".svg"))
    .map((name) => name.slice(0, -".svg".length))
    .sort();
}

/** Reads a carried form. Throws if the file is missing or no form: that is a broken installation. */
export function readTemplate(name: string, world: World): Template {
  return parseTemplate(name, new TextDecoder().decode(world.readAsset(`${folder}/${name}.svg`)));
}

/** Reads a form from the text of its file. Throws naming what it cannot read. */
export function parseTemplate(name: string, text: string): Template {
  const template: Template = { name, size: { width: 0, height: 0 }, strokes: [], texts: [] };
  let open: TemplateText | undefined;
  const parser = new SaxesParser();
  parser.on("error", (error) => {
    throw new Error(`Template ${name}: ${error.message}`);
  });
  parser.on("opentag", ({ name: tag, attributes }) => {
    const given = attributes as Record<string, string>;
    const number = (key: string, otherwise = 0) => {
      const value = given[key] === undefined ? otherwise : Number.parseFloat(given[key] as string);
      if (!Number.isFinite(value)) throw new Error(`Template ${name}: ${tag} has ${key}="${given[key]}", which is no number.`);
      return value;
    };
    const stroke = (path: Segment[]) => template.strokes.push({ path, width: number("stroke-width", 0.25) });
    switch (tag) {
      case "svg": {
        const [, , width, height] = (given.viewBox ?? "").split(/[ ,]+/).map(Number);
        if (!width || !height) throw new Error(`Template ${name}: its viewBox gives no size.`);
        template.size = { width, height };
        break;
      }
      case "line":
        stroke(
          polyline([
            { x: number("x1"), y: number("y1") },
            { x: number("x2"), y: number("y2") },
          ]),
        );
        break;
      case "rect":
        stroke(rectangle({ x: number("x"), y: number("y"), width: number("width"), height: number("height") }));
        break;
      case "path":
        stroke(straightPath(given.d ?? "", name));
        break;
      case "text":
        open = {
          at: { x: number("x"), y: number("y") },
          anchor: anchors[given["text-anchor"] ?? "start"] ?? "start",
          height: number("font-size", fontSize(2.5)) / fontSize(1),
          bold: number("font-weight", 400) >= 600,
          text: "",
        };
        if (given["data-field"] !== undefined) open.field = given["data-field"];
        if (given["data-width"] !== undefined) open.width = number("data-width");
        if (given["data-smallest"] !== undefined) open.smallest = number("data-smallest");
        template.texts.push(open);
        break;
      case "title":
      case "g":
        break;
      default:
        throw new Error(`Template ${name}: <${tag}> cannot stand in a template.`);
    }
  });
  parser.on("text", (part) => {
    if (open) open.text += part;
  });
  parser.on("closetag", ({ name: tag }) => {
    if (tag === "text") open = undefined;
  });
  parser.write(text).close();
  return template;
}

const anchors: Record<string, Anchor> = { start: "start", middle: "middle", end: "end" };

/** Path data of straight lines: M, L, H, V, Z. */
function straightPath(data: string, name: string): Segment[] {
  const path: Segment[] = [];
  let at: Point = { x: 0, y: 0 };
  for (const [, op, rest] of data.matchAll(/([A-Za-z])([^A-Za-z]*)/g)) {
    const numbers = (rest as string)
      .split(/[ ,]+/)
      .filter((part) => part !== "")
      .map(Number);
    const [first = 0, second = 0] = numbers;
    if (op === "Z") {
      path.push({ op });
      continue;
    }
    if (op === "M" || op === "L") at = { x: first, y: second };
    else if (op === "H") at = { x: first, y: at.y };
    else if (op === "V") at = { x: at.x, y: first };
    else throw new Error(`Template ${name}: path command ${op} cannot stand in a template.`);
    path.push({ op: op === "M" ? "M" : "L", ...at });
  }
  return path;
}

/** The heights to which a text may be reduced, ISO 3098. */
const heights: Mm[] = [7, 5, 3.5, 2.5, 1.8];

/** The form set down with its upper left corner at a point and its fields filled; a field with no value stays empty. */
export function fillTemplate(template: Template, at: Point, values: Readonly<Record<string, string>>): Mark[] {
  const marks: Mark[] = template.strokes.map(({ path, width }) => ({ kind: "stroke", role: "form", path: movePath(path, at), width }));
  for (const text of template.texts) {
    const full = text.field === undefined ? text.text : (values[text.field] ?? "");
    if (full.trim() === "") continue;
    const { height, shown } = reduce(full, text);
    marks.push({
      kind: "text",
      role: text.field === undefined ? "label" : "field",
      at: { x: at.x + text.at.x, y: at.y + text.at.y },
      text: shown,
      height,
      anchor: text.anchor,
      ...(text.bold ? { bold: true } : {}),
    });
  }
  return marks;
}

/** The greatest height at which the text fits its room, and the text, shortened if it fits at none. */
function reduce(text: string, { height: full, width, smallest, bold }: TemplateText): { height: Mm; shown: string } {
  const height = Math.round(full * 100) / 100;
  if (width === undefined) return { height, shown: text };
  const least = smallest ?? height;
  const tried = [height, ...heights.filter((smaller) => smaller < height && smaller >= least)];
  const fits = tried.find((each) => measureText(text, each, bold) <= width);
  const last = tried[tried.length - 1] as Mm;
  return fits === undefined ? { height: last, shown: fitText(text, last, width, bold) } : { height: fits, shown: text };
}
