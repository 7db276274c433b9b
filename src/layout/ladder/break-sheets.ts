import type { Mm } from "../../drawing/geometry.js";
import type { Arrangement } from "./arrangement.js";
import type { MeasuredRung } from "./measure-rungs.js";
import { type ColumnNeeds, type ColumnPitch, leastSpan, noNeeds, withNeeds } from "./set-columns.js";

/** The rungs of one sheet with the distance of every line from the first line's room, across. */
export interface RungSheet {
  /** Index of its first rung. */
  first: number;
  rungs: { rung: MeasuredRung; lines: Mm[] }[];
  /** The author's title for it. */
  title?: string;
  /** All room its lines take. */
  depth: Mm;
  /** What its rungs ask of its columns. */
  needs: ColumnNeeds;
}

/** Least distance between lines, and the grid that distances keep to, mm. */
export interface LinePitch {
  least: Mm;
  step: Mm;
}

/** What a sheet offers: across for its lines, along from rail to rail. */
export interface SheetRoom {
  depth: Mm;
  /** Across on the first sheet, which may carry the supply's fuse. */
  first: Mm;
  span: Mm;
  columns: ColumnPitch;
}

/**
 * Shares the rungs out over sheets: each rung whole on one sheet, a new sheet where the author asks and where the next rung
 * has no room left, below the others or with its columns among theirs. Distances between lines grow with what stands on them.
 */
export function breakSheets(
  rungs: readonly MeasuredRung[],
  breaks: readonly { before: number; title?: string }[],
  room: SheetRoom,
  pitch: LinePitch,
  arrangement: Arrangement,
): RungSheet[] {
  const sheets: RungSheet[] = [];
  const asked = new Map(breaks.map((wanted) => [wanted.before, wanted]));
  let sheet: RungSheet | undefined;
  let below: Mm = 0;
  const open = (first: number, title: string | undefined) => {
    sheet = { first, rungs: [], depth: 0, needs: noNeeds(), ...(title === undefined ? {} : { title }) };
    sheets.push(sheet);
    below = 0;
    return sheet;
  };
  rungs.forEach((rung, index) => {
    const wanted = asked.get(index);
    if (!sheet || (wanted && sheet.rungs.length > 0)) sheet = open(index, wanted?.title);
    else if (wanted?.title !== undefined) sheet.title = wanted.title;
    let placed = stack(rung, sheet.depth, below, pitch);
    const tooWide = leastSpan(withNeeds(sheet.needs, rung, arrangement), room.columns) > room.span;
    if ((placed.depth > (sheets.length === 1 ? room.first : room.depth) || tooWide) && sheet.rungs.length > 0) {
      sheet = open(index, sheet.title);
      placed = stack(rung, 0, 0, pitch);
    }
    sheet.rungs.push({ rung, lines: placed.lines });
    sheet.depth = placed.depth;
    sheet.needs = withNeeds(sheet.needs, rung, arrangement);
    below = placed.below;
  });
  return sheets;
}

/** Sets a rung's lines below what is there already. `depth` is where room is used up; the last line there keeps `below` of it. */
export function stack(rung: MeasuredRung, depth: Mm, below: Mm, pitch: LinePitch): { lines: Mm[]; depth: Mm; below: Mm } {
  let last: Mm | undefined = depth > 0 ? depth - below : undefined;
  let hang = below;
  const lines = rung.lines.map((room) => {
    const at: Mm =
      last === undefined ? room.above : last + Math.max(pitch.least, Math.ceil((hang + room.above + between) / pitch.step) * pitch.step);
    last = at;
    hang = room.below;
    return at;
  });
  return { lines, depth: (last ?? 0) + hang, below: hang };
}

/** Kept free between what hangs from one line and what stands on the next, mm. */
const between: Mm = 1.2;
