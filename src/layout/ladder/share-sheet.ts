import type { Box, Mm } from "../../drawing/geometry.js";
import type { DrawingInfo } from "../../machine/model.js";
import type { RungSheet } from "./break-sheets.js";

/** A place for a ladder: which sheet, counted from the circuit's first, and which of the places on it. */
export interface Slot {
  sheet: number;
  place: number;
}

/**
 * How many ladders a sheet has room for. North-american ones stand side by side on a wide sheet, international ones one above
 * the other on a tall one: a rung or path as long as a large sheet is followed with a finger only.
 */
export function mostLadders({ width, height }: Box, convention: DrawingInfo["convention"]): number {
  const [length, least] = convention === "international" ? [height, leastHeight] : [width, leastWidth];
  return Math.max(1, Math.floor((length + between) / (least + between)));
}

/** The room of each of `count` ladders on a sheet, in the order in which they are filled: from the left, or from above. */
export function roomsFor(area: Box, count: number, convention: DrawingInfo["convention"]): Box[] {
  return Array.from({ length: count }, (_, place) => {
    if (convention === "international") {
      const height = (area.height - (count - 1) * between) / count;
      return { ...area, height, y: area.y + place * (height + between) };
    }
    const width = (area.width - (count - 1) * between) / count;
    return { ...area, width, x: area.x + place * (width + between) };
  });
}

/** Gives every ladder its place: the next on its sheet, or the first of a new one where the sheet is full or the author asks. */
export function shareSlots(ladders: readonly RungSheet[], perSheet: number): Slot[] {
  const slots: Slot[] = [];
  for (const { asked } of ladders) {
    const last = slots.at(-1);
    if (!last) slots.push({ sheet: 0, place: 0 });
    else if (asked || last.place === perSheet - 1) slots.push({ sheet: last.sheet + 1, place: 0 });
    else slots.push({ sheet: last.sheet, place: last.place + 1 });
  }
  return slots;
}

/** Less than about an A3 sheet's width for rungs, or a lying A4 sheet's height for paths, is too little for a ladder of its own, mm. */
const leastWidth: Mm = 340;
const leastHeight: Mm = 165;
/** Between the rooms of two ladders, mm. */
const between: Mm = 8;
