import type { Mm } from "../../drawing/geometry.js";
import { measureText } from "../../drawing/text.js";
import type { CylinderSpec, FluidComponent } from "../../machine/model.js";
import type { Symbol } from "../../symbols/symbol.js";
import { rowPitch } from "../placement.js";
import type { SymbolOf } from "./arrangement.js";
import { addText, type Block, bareBlock, pitch, printedOn, smallHeight, textExtent, textHeight, titleHeight } from "./block.js";
import { module, union } from "./modules.js";

/** Room for the ladder lines of a switch under its designation. */
const referenceRoom: Mm = 9.2;

/** Height of the stroke line over the axis, and of the marks across it, modules. */
const strokeLine = -1.5;
const markHalf = 0.6;

/** The most rows that a switch's ladder lines take; `…` stands for more. */
const referenceRows = 3;

/** Where the function text stands over the axis. */
const titleLine = -8.6;

/** The least travel a rod has for marks on it, mm, when no stroke is given. */
const unknownStroke: Mm = 100;

/**
 * A cylinder with its function text, designation and size over the barrel, and the places of its switches along the way of
 * the rod's end, true to scale.
 * @param usesOf on how many ladder lines a switch has contacts
 */
export function cylinderBlock(component: FluidComponent, symbol: Symbol, usesOf: SymbolOf["usesOf"]): Block {
  const block = bareBlock(component, symbol, { quarter: 0 });
  const spec = component.cylinder;
  const barrelTop = Math.min(-2, block.body.top) + block.offset.y - 0.8;
  let y = barrelTop;
  const write = (role: "value" | "designation" | "function", text: string, height: Mm) => {
    addText(block, { part: component.id, role, text, height, anchor: "start", at: { x: block.offset.x, y } });
    y -= pitch + (height > textHeight ? 0.4 : 0);
  };
  for (const value of [...component.values].reverse()) write("value", value, textHeight);
  if (component.name !== undefined) write("designation", component.name, textHeight);
  if (spec) addCams(block, spec, usesOf);
  if (component.text !== undefined) {
    // At one height over all cylinders, clear of the marks' designations.
    if (component.name !== undefined && component.values.length > 0) y = Math.min(y, titleLine + block.offset.y);
    const title = textExtent({ at: { x: block.offset.x, y }, anchor: "start", height: titleHeight, text: component.text });
    for (const { part, extent } of block.parts) {
      if (part !== component.id && extent.left < title.right + 0.5) y = Math.min(y, extent.top - 0.6);
    }
    write("function", component.text, titleHeight);
  }
  return block;
}

function addCams(block: Block, spec: CylinderSpec, usesOf: SymbolOf["usesOf"]): void {
  const { switches } = spec;
  if (switches.length === 0) return;
  const spots = block.symbol.spots;
  const from = (spots["rod-retracted"]?.x ?? 26) / module + block.offset.x;
  const to = (spots["rod-extended"]?.x ?? 36) / module + block.offset.x;
  const axis = block.offset.y;
  const line = axis + strokeLine;
  const stroke = spec.stroke?.value ?? Math.max(unknownStroke, ...switches.map((one) => one.to));
  const along = (place: Mm) => from + (to - from) * Math.min(1, Math.max(0, stroke > 0 ? place / stroke : 0));
  const cylinder = block.component.id;
  const ends = switches.map((one) => ({ device: one.device, from: along(one.from), to: along(one.to), written: placeOf(one, stroke) }));

  block.strokes.push({
    part: cylinder,
    role: "stroke-line",
    path: [
      { x: from, y: line },
      { x: to, y: line },
    ],
    width: 0.25,
  });
  const widths = switches.map(
    ({ device }) => Math.max(measureText(printedOn(block.component, device), textHeight), referenceRoom) / module,
  );
  const wanted = ends.map((end) => (end.written === "retracted" ? from : end.written === "extended" ? to : (end.from + end.to) / 2));
  const least = 10.4 + block.offset.x;
  const labels = spread(wanted, widths, least);
  const apart = labels.map((x, i) => Math.abs(x - (wanted[i] as number)) > 1);
  const labelBottom = line - markHalf - (apart.includes(true) ? 1.6 : 0.4);
  ends.forEach((end, i) => {
    const part = `${cylinder}/${end.device}`;
    const at = wanted[i] as number;
    const label = labels[i] as number;
    const mark = { part, role: "cam", width: 0.35 } as const;
    block.strokes.push({
      ...mark,
      path: [
        { x: at, y: line + markHalf },
        { x: at, y: line - markHalf },
      ],
    });
    // A stretch of the stroke rather than a place is drawn as a bar along it.
    if (end.written === "stretch")
      block.strokes.push({
        ...mark,
        width: 0.7,
        path: [
          { x: end.from, y: line },
          { x: end.to, y: line },
        ],
      });
    if (apart[i])
      block.strokes.push({
        part,
        role: "cam-leader",
        width: 0.18,
        path: [
          { x: at, y: line - markHalf },
          { x: label, y: labelBottom + 0.15 },
        ],
      });
    const before = block.texts.length;
    const rows = Math.max(1, Math.min(referenceRows, usesOf(end.device)));
    const referenceTop = labelBottom - 0.35 - ((rows - 1) * rowPitch(smallHeight)) / module;
    addText(block, {
      part,
      role: "reference",
      text: { to: "ladder-line", device: end.device, room: referenceRoom, ...(rows > 1 ? { rows } : {}) },
      height: smallHeight,
      anchor: "middle",
      at: { x: label, y: referenceTop },
    });
    addText(block, {
      part,
      role: "designation",
      text: printedOn(block.component, end.device),
      height: textHeight,
      anchor: "middle",
      at: { x: label, y: referenceTop - 1.4 },
    });
    const extents = block.texts.slice(before).map(textExtent);
    block.parts.push({
      part,
      extent: union([...extents, { left: at - 0.5, right: at + 0.5, top: line - markHalf, bottom: line + markHalf }]),
    });
  });
  block.full = union([block.full, { left: from, right: to, top: line - markHalf, bottom: line }]);
}

function placeOf({ from, to }: { from: Mm; to: Mm }, stroke: Mm): "retracted" | "extended" | "at" | "stretch" {
  const short = Math.max(2, stroke / 10) + 1e-6;
  if (from <= 0 && to - from <= short) return "retracted";
  if (to >= stroke && to - from <= short / 2) return "extended";
  return to - from <= Math.min(2, stroke / 5) + 1e-6 ? "at" : "stretch";
}

/** Moves labels apart as little as need be, none further left than `least`. */
function spread(wanted: readonly number[], widths: readonly number[], least: number): number[] {
  const gap = 0.4;
  const places: number[] = [];
  wanted.forEach((at, i) => {
    const half = (widths[i] as number) / 2;
    const before = i === 0 ? least : (places[i - 1] as number) + (widths[i - 1] as number) / 2 + gap;
    places.push(Math.max(at, before + half));
  });
  return places;
}
