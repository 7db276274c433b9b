import type { Box, Mm, Point } from "../../drawing/geometry.js";
import type { FluidCircuit } from "../../machine/model.js";
import { turnSymbol } from "../../symbols/turn.js";
import type { CircuitSheet } from "../placement.js";
import { boxAt, textExtent, textHeight } from "./block.js";
import type { HeaderLine } from "./compose-sheet.js";
import type { HeaderKind } from "./divide.js";
import { module } from "./modules.js";

/** Least distances of the name from lines, and from anything else, mm. */
const fromLines: Mm = 0.8;
const fromOthers: Mm = 0.5;

/** Letters of lines the author gave no name, by common practice the same as those of the ports they join. */
const letters: Partial<Record<HeaderKind, string>> = { supply: "P", return: "T" };

/** Writes the name of each shared line at one of its ends, where there is room for it. */
export function nameHeaders(headers: readonly HeaderLine[], circuit: FluidCircuit, origin: Point, sheet: CircuitSheet): void {
  const written = new Set<string>();
  for (const header of headers) {
    // A line that goes on elsewhere is named where it leaves the sheet.
    if (!header.shared || header.fromLeft || header.toRight) continue;
    const point = circuit.nodes.find(({ id }) => id === header.node)?.points[0];
    const text = point ?? (circuit.medium === "hydraulic" ? letters[header.kind] : undefined);
    if (text === undefined || written.has(text)) continue;
    const y = origin.y + header.y * module;
    const [left, right] = [origin.x + header.from * module, origin.x + header.to * module];
    const [over, under, level] = [y - 1.3, y + textHeight + 1.3, y + textHeight / 2];
    const spots = [
      { at: { x: left - 1.4, y: level }, anchor: "end" },
      { at: { x: right + 1.4, y: level }, anchor: "start" },
      { at: { x: left + 1.4, y: over }, anchor: "start" },
      { at: { x: right - 1.4, y: over }, anchor: "end" },
      { at: { x: left + 1.4, y: under }, anchor: "start" },
      { at: { x: right - 1.4, y: under }, anchor: "end" },
    ] as const;
    for (const { at, anchor } of spots) {
      const place = { x: Math.round(at.x * 1e4) / 1e4, y: Math.round(at.y * 1e4) / 1e4 };
      const name = { role: "designation", text, at: place, anchor, height: textHeight } as const;
      if (!isFree(boxOf(name), sheet)) continue;
      sheet.texts.push(name);
      written.add(text);
      break;
    }
  }
}

function boxOf({ at, ...text }: CircuitSheet["texts"][number]): Box {
  return boxAt(textExtent({ ...text, at: { x: 0, y: 0 } }), { x: at.x / module, y: at.y / module }, { x: 0, y: 0 });
}

function isFree(box: Box, { wires, strokes, texts, symbols }: CircuitSheet): boolean {
  const clear = (other: Box, by: Mm) =>
    other.x >= box.x + box.width + by ||
    other.x + other.width <= box.x - by ||
    other.y >= box.y + box.height + by ||
    other.y + other.height <= box.y - by;
  // Lines run level or upright, so each stretch is a box of its own.
  const clearOf = (points: readonly Point[], by: Mm) => points.slice(1).every((b, i) => clear(spanOf(points[i] as Point, b), by));
  return (
    wires.every(({ points, width }) => clearOf(points, fromLines + width / 2)) &&
    strokes.every(({ path, width }) => clearOf(path, fromOthers + width / 2)) &&
    texts.every((text) => clear(boxOf(text), fromOthers)) &&
    symbols.every(({ symbol, turn, at }) => {
      const { box: own } = turnSymbol(symbol, turn);
      return clear({ ...own, x: own.x + at.x, y: own.y + at.y }, fromOthers);
    })
  );
}

function spanOf(a: Point, b: Point): Box {
  return { x: Math.min(a.x, b.x), y: Math.min(a.y, b.y), width: Math.abs(a.x - b.x), height: Math.abs(a.y - b.y) };
}
