import type { Element, Svg } from "@svgdotjs/svg.js";
import { underline } from "../drawing/extent.js";
import type { DrawingSet, DrawnSheet, Mark, PartId, Segment } from "../drawing/marks.js";
import { fontSize, measureText, printable } from "../drawing/text.js";
import type { World } from "../world.js";
import { type Bucket, gather, mergeAlike } from "./bucket.js";
import { sheetFileName } from "./file-name.js";
import { family, fontFaces } from "./fonts.js";

/**
 * Writes each sheet as one SVG file in true millimetres: `TS-2040_sheet-1.svg`. Each part is a group whose id, `data-part`
 * and `data-device` stay the same as long as the part keeps its name; text stays text; links lead within and between the files.
 */
export async function writeSvg(set: DrawingSet, world: World): Promise<{ name: string; text: string }[]> {
  const [{ SVG, registerWindow }, { createSVGWindow }] = await Promise.all([import("@svgdotjs/svg.js"), import("svgdom")]);
  return set.sheets.map((sheet) => {
    const window = createSVGWindow();
    registerWindow(window, window.document);
    const root = SVG(window.document.documentElement) as Svg;
    drawSheet(root, sheet, set, world);
    return { name: sheetFileName(set.info, sheet.number), text: `<?xml version="1.0" encoding="UTF-8"?>\n${root.svg()}\n` };
  });
}

function drawSheet(root: Svg, sheet: DrawnSheet, set: DrawingSet, world: World): void {
  const { width, height } = sheet.size;
  root.attr({
    width: `${decimal(width)}mm`,
    height: `${decimal(height)}mm`,
    viewBox: `0 0 ${decimal(width)} ${decimal(height)}`,
    lang: set.info.language || "en",
  });
  const heading = [set.info.number, set.info.title, sheet.title, `sheet ${sheet.number} of ${set.sheets.length}`];
  say(add(root, "title"), heading.filter((part) => part !== "").join(" · "));
  newLine(root);
  say(add(root, "style"), styleFor(sheet, world));
  newLine(root);
  add(root, "rect").attr({ class: "paper", width: decimal(width), height: decimal(height) });
  for (const bucket of gather(sheet.marks)) {
    newLine(root);
    drawBucket(root, bucket, set);
  }
  for (const mark of sheet.marks) {
    if (mark.kind !== "link") continue;
    const href = target(mark.to, sheet, set);
    if (href === undefined) continue;
    newLine(root);
    const link = add(root, "a").attr({ class: "link", href });
    const title = set.parts.get(mark.to)?.title;
    if (title) say(add(link, "title"), title);
    const { x, y, width, height } = mark.box;
    add(link, "rect").attr({ x: decimal(x), y: decimal(y), width: decimal(width), height: decimal(height) });
  }
  newLine(root);
}

/** Fonts, and the few looks that would otherwise be repeated on every element. */
function styleFor(sheet: DrawnSheet, world: World): string {
  const characters = { regular: new Set<string>(), bold: new Set<string>() };
  for (const mark of sheet.marks) {
    if (mark.kind === "text") for (const character of printable(mark.text)) characters[mark.bold ? "bold" : "regular"].add(character);
  }
  return [
    fontFaces(world, characters),
    `text{font-family:"${family}",sans-serif;font-kerning:none;font-variant-ligatures:none;white-space:pre;fill:#000}`,
    "path{fill:none;stroke:#000;stroke-linecap:round;stroke-linejoin:round}",
    "path.fill{fill:#000;stroke:none}",
    "path.dashed{stroke-linecap:butt}",
    ".paper{fill:#fff}",
    ".link rect{fill:none;pointer-events:all}",
  ].join("\n");
}

function drawBucket(root: Svg, bucket: Bucket, set: DrawingSet): void {
  const group = add(root, "g");
  if (bucket.part === undefined) {
    if (bucket.role) group.attr({ class: className(bucket.role) });
  } else {
    const { device, title } = set.parts.get(bucket.part) ?? {};
    const roles = [...new Set(bucket.marks.flatMap((mark) => (mark.role ? [className(mark.role)] : [])))];
    group.attr({ id: partElementId(bucket.part), class: ["part", ...roles].join(" "), "data-part": xmlText(bucket.part) });
    if (device) group.attr({ "data-device": xmlText(device) });
    if (title) say(add(group, "title"), title);
  }
  for (const mark of mergeAlike(bucket.marks)) {
    const role = mark.role && bucket.part !== undefined ? className(mark.role) : undefined;
    if (mark.kind === "text") {
      drawText(group, mark, role);
    } else {
      // Round ends would close the gaps of a dashed line.
      const look = mark.kind === "fill" ? "fill" : mark.dash ? "dashed" : undefined;
      const path = add(group, "path");
      const names = [look, role].filter((name) => name !== undefined);
      if (names.length > 0) path.attr({ class: names.join(" ") });
      path.attr({ d: pathData(mark.path) });
      if (mark.kind === "stroke") {
        path.attr({ "stroke-width": decimal(mark.width) });
        if (mark.dash) path.attr({ "stroke-dasharray": mark.dash.map(decimal).join(" ") });
      }
      if (mark.ink) path.attr({ style: `${mark.kind === "fill" ? "fill" : "stroke"}:${colour(mark.ink)}` });
    }
  }
}

function drawText(group: Element, mark: Mark & { kind: "text" }, role: string | undefined): void {
  const shown = printable(mark.text);
  if (shown.trim() === "") return;
  const text = add(group, "text");
  if (role) text.attr({ class: role });
  text.attr({ x: decimal(mark.at.x), y: decimal(mark.at.y), "font-size": decimal(fontSize(mark.height)) });
  if (mark.bold) text.attr({ "font-weight": "600" });
  if (mark.anchor !== "start") text.attr({ "text-anchor": mark.anchor });
  if (mark.rotated) text.attr({ transform: `rotate(-90 ${decimal(mark.at.x)} ${decimal(mark.at.y)})` });
  // Holds the text to its measure in a viewer that shows another font.
  text.attr({ textLength: decimal(measureText(shown, mark.height, mark.bold)), lengthAdjust: "spacingAndGlyphs" });
  if (mark.ink) text.attr({ style: `fill:${colour(mark.ink)}` });
  if (/^ | $| {2}/.test(shown)) text.attr({ "xml:space": "preserve" });
  say(text, shown);
  if (mark.underline) {
    const line = underline(mark);
    const path = add(group, "path").attr({ class: "underline", d: pathData(line.path), "stroke-width": decimal(line.width) });
    if (mark.ink) path.attr({ style: `stroke:${colour(mark.ink)}` });
  }
}

/** Where a link to a part leads from this sheet, or undefined if the part is drawn nowhere. */
function target(to: PartId, from: DrawnSheet, set: DrawingSet): string | undefined {
  const anchor = set.anchors.get(to);
  if (!anchor) return undefined;
  const file = anchor.sheet === from.number ? "" : encodeURIComponent(sheetFileName(set.info, anchor.sheet));
  return `${file}#${encodeURIComponent(partElementId(to))}`;
}

/** The id of a part's group: the part's name, with each character that an id may not hold written as `_` and its code. */
export function partElementId(part: PartId): string {
  return `part-${part.replace(/[^A-Za-z0-9.-]/gu, (character) => `_${(character.codePointAt(0) as number).toString(16)}_`)}`;
}

function className(role: string): string {
  return role.replace(/[^A-Za-z0-9_ -]/g, "-");
}

/** Only a plain colour may reach the file; anything else is black. */
function colour(ink: string): string {
  return /^(#[0-9a-f]{3,8}|[a-z]+)$/i.test(ink) ? ink : "#000";
}

/** SVG path data of a path. */
export function pathData(path: readonly Segment[]): string {
  return path.map(segmentData).join("");
}

function segmentData(s: Segment): string {
  switch (s.op) {
    case "M":
    case "L":
      return `${s.op}${decimal(s.x)} ${decimal(s.y)}`;
    case "C":
      return `C${[s.x1, s.y1, s.x2, s.y2, s.x, s.y].map(decimal).join(" ")}`;
    case "A":
      return `A${decimal(s.radius)} ${decimal(s.radius)} 0 ${s.large ? 1 : 0} ${s.sweep ? 1 : 0} ${decimal(s.x)} ${decimal(s.y)}`;
    case "Z":
      return "Z";
  }
}

/** At most three decimals, never an exponent, never `-0`. A number that is none is written as 0 so that the file stays readable. */
export function decimal(value: number): string {
  const rounded = Math.round(value * 1000) / 1000;
  return Number.isFinite(rounded) ? String(rounded === 0 ? 0 : Math.abs(rounded) >= 1e15 ? 0 : rounded) : "0";
}

function add(parent: Element, tag: string): Element {
  return (parent as Svg).element(tag);
}

function say(element: Element, text: string): void {
  element.node.textContent = xmlText(text);
}

/** Without the characters that XML 1.0 cannot hold. */
function xmlText(text: string): string {
  return text.replace(/[^\t\n\r\u0020-\ud7ff\ue000-\ufffd\u{10000}-\u{10ffff}]/gu, "");
}

/** A group a line, so that two versions of a file can be compared by eye. */
function newLine(root: Svg): void {
  root.node.appendChild(root.node.ownerDocument.createTextNode("\n"));
}
