import type { Box, Point } from "../drawing/geometry.js";
import type { Mark } from "../drawing/marks.js";
import { circle, movePath, polyline } from "../drawing/path.js";
import type { CircuitSheet, PlacedSymbol, PlacedText, Reference } from "../layout/placement.js";
import { turnSymbol } from "../symbols/turn.js";
import type { Appearances } from "./appearances.js";
import { referenceMarks } from "./references.js";

/** Everything of a circuit sheet as marks: lines first, then symbols, dots, texts and at last what can be followed. */
export function circuitMarks(sheet: CircuitSheet, appearances: Appearances): Mark[] {
  const marks: Mark[] = [];
  for (const { part, role, path, width, dash } of sheet.strokes) {
    marks.push({ kind: "stroke", role, path: polyline(path), width, ...(part === undefined ? {} : { part }), ...(dash ? { dash } : {}) });
  }
  for (const { part, role, points, width, dash } of sheet.wires) {
    marks.push({ kind: "stroke", part, role, path: polyline(points), width, ...(dash ? { dash } : {}) });
  }
  for (const symbol of sheet.symbols) marks.push(...symbolMarks(symbol));
  for (const { part, at, diameter } of sheet.dots) marks.push({ kind: "fill", part, role: "dot", path: circle(at, diameter / 2) });
  for (const text of sheet.texts) marks.push(...textMarks(text, sheet, appearances));
  for (const symbol of sheet.symbols) marks.push(...symbolLinks(symbol, appearances));
  return marks;
}

function symbolMarks({ part, symbol, at, turn }: PlacedSymbol): Mark[] {
  return turnSymbol(symbol, turn).shapes.map((shape): Mark => {
    if (shape.kind !== "text") return { ...shape, part, role: "symbol", path: movePath(shape.path, at) };
    // A symbol's text is placed by its middle, a mark by its baseline.
    return { ...shape, part, role: "symbol", at: { x: at.x + shape.at.x, y: at.y + shape.at.y + shape.height / 2 } };
  });
}

function textMarks(text: PlacedText, sheet: CircuitSheet, appearances: Appearances): Mark[] {
  if (isReference(text)) return referenceMarks(text, sheet, appearances);
  const { part, role, at, anchor, height, rotated } = text;
  if (typeof text.text !== "string" || text.text.trim() === "") return [];
  return [
    { kind: "text", role, at, anchor, height, text: text.text, ...(part === undefined ? {} : { part }), ...(rotated ? { rotated } : {}) },
  ];
}

function isReference(text: PlacedText): text is PlacedText & { text: Reference } {
  return typeof text.text !== "string";
}

/** The symbol itself leads where its reference does: a contact to its coil or to what works it, a solenoid to its valve. */
function symbolLinks({ part, symbol, at, turn }: PlacedSymbol, appearances: Appearances): Mark[] {
  const contactOrLoad = appearances.deviceOf(part);
  if (contactOrLoad === undefined) return [];
  const { device, use } = contactOrLoad;
  // Main contacts lead to their coil, an overload to its contacts and its contacts to it, a motor to the pump it drives.
  const to =
    (use === "load" ? undefined : appearances.loadOf(device)) ??
    (use === "main" ? appearances.contactsOf(device)[0] : undefined) ??
    appearances.fluidSideOf(device) ??
    (use === "contact" ? appearances.mainsOf(device)[0] : undefined);
  if (!to || to.part === part) return [];
  const { box } = turnSymbol(symbol, turn);
  return [{ kind: "link", box: movedBox(box, at), to: to.part }];
}

function movedBox(box: Box, by: Point): Box {
  return { ...box, x: box.x + by.x, y: box.y + by.y };
}
