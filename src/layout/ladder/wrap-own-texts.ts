import type { Mm } from "../../drawing/geometry.js";
import { measureText } from "../../drawing/text.js";
import { wrapName, wrappedPitch } from "../../drawing/wrap-name.js";
import { extentOf } from "../../symbols/extent.js";
import type { Shape, Symbol } from "../../symbols/symbol.js";

/** The symbol with those of its own texts that are wider than `width` set in lines one under the other, the first in its place. */
export function wrapOwnTexts(symbol: Symbol, width: Mm): Symbol {
  if (!symbol.shapes.some((shape) => shape.kind === "text" && measureText(shape.text, shape.height) > width)) return symbol;
  const shapes = symbol.shapes.flatMap((shape): Shape[] => {
    if (shape.kind !== "text") return [shape];
    return wrapName(shape.text, shape.height, width, 3).map((text, line) => ({
      ...shape,
      text,
      at: { x: shape.at.x, y: shape.at.y + line * wrappedPitch(shape.height) },
    }));
  });
  return { ...symbol, shapes, box: extentOf(shapes, symbol.ports) };
}
