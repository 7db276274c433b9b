import type { Mm } from "../drawing/geometry.js";
import { extentOf } from "./extent.js";
import { mm } from "./notation.js";
import type { Shape, Symbol } from "./symbol.js";

/**
 * The symbol with texts of its own standing on some of its spots: a lamp's letter, a selector's target letters. They count
 * in its box from then on. A spot the symbol does not have is passed over.
 * @param texts by the spot's name
 * @param height of the capitals, mm
 */
export function withTexts(symbol: Symbol, texts: Readonly<Record<string, string>>, height: Mm): Symbol {
  const added: Shape[] = [];
  for (const [name, text] of Object.entries(texts)) {
    const spot = symbol.spots[name];
    if (spot && text !== "") added.push({ kind: "text", at: { x: spot.x, y: mm(spot.y - height / 2) }, text, height, anchor: spot.anchor });
  }
  if (added.length === 0) return symbol;
  const shapes = [...symbol.shapes, ...added];
  return { ...symbol, shapes, box: extentOf(shapes, symbol.ports) };
}
