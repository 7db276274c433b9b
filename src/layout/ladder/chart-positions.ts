import type { Mm } from "../../drawing/geometry.js";
import { measureText } from "../../drawing/text.js";
import { wrapName } from "../../drawing/wrap-name.js";
import type { Device, DeviceUse } from "../../machine/model.js";
import { closedIn, selectorOf } from "../../symbols/selector-states.js";
import type { PlacedText } from "../placement.js";
import { textHeight } from "./under-words.js";

/** Texts about their upper left corner, with the room they take. */
export interface PositionChart {
  texts: PlacedText[];
  width: Mm;
  height: Mm;
}

/** With more positions than this the symbol itself has no place for their letters. */
const mostInSymbol = 3;

/**
 * The chart of a switch with many positions: each position by name and under it what this contact does there, X where it is
 * closed and O where it is open, in as many rows as the width asks for. Undefined where the symbol shows it itself.
 */
export function chartPositions(use: DeviceUse, device: Device | undefined, width: Mm): PositionChart | undefined {
  if (use.kind !== "contact" || !device?.selector) return undefined;
  const { positions } = selectorOf(device);
  if (positions.length <= mostInSymbol) return undefined;
  const height = textHeight.small;
  const states = closedIn(use, device);
  const names = positions.map((position) => wrapName(position, height, width, 1)[0] ?? position);
  // One width for all columns, so that they stand under each other.
  const column = Math.max(measureText("X", height), ...names.map((name) => measureText(name, height))) + columnGap;
  const perRow = Math.max(1, Math.min(names.length, Math.floor((width + columnGap) / column)));
  const rows = Math.ceil(names.length / perRow);
  const across = Math.ceil(names.length / rows);
  const texts = names.flatMap((name, index): PlacedText[] => {
    const x = ((index % across) + 0.5) * column - columnGap / 2;
    const top = Math.floor(index / across) * rowHeight;
    const common = { part: use.id, role: "value", anchor: "middle", height } as const;
    return [
      { ...common, at: { x, y: top + height }, text: name },
      { ...common, at: { x, y: top + 2 * height + lineGap }, text: states[index] ? "X" : "O" },
    ];
  });
  return { texts, width: across * column - columnGap, height: rows * rowHeight - rowGap };
}

const columnGap: Mm = 1.2;
/** Between a name and its letter: what hangs below the line has room. */
const lineGap: Mm = 0.8;
const rowGap: Mm = 1.1;
const rowHeight: Mm = 2 * textHeight.small + lineGap + rowGap;
