import type { Mm } from "../../drawing/geometry.js";
import type { Arrangement, LinePitch } from "./arrangement.js";
import type { MeasuredRung } from "./measure-rungs.js";
import { type ColumnNeeds, leastSpan, needsOfLoads, noNeeds, withNeeds } from "./set-columns.js";

/** The rungs between one pair of rails, with the distance of every line from the first line's room, across. */
export interface RungSheet {
  /** Index of its first rung. */
  first: number;
  rungs: { rung: MeasuredRung; lines: Mm[] }[];
  /** The author's title for it. */
  title?: string;
  /** The author asks for a new sheet here. */
  asked: boolean;
  /** All room its lines take. */
  depth: Mm;
  /** Rungs that share their columns, from one of the sheet's rungs on, with what they ask of them. */
  groups: { from: number; needs: ColumnNeeds }[];
}

/** What a sheet offers: across for its lines, along from rail to rail. */
export interface SheetRoom {
  depth: Mm;
  /** Across on the first sheet, which may carry the supply's fuse. */
  first: Mm;
  span: Mm;
}

/**
 * Shares the rungs out over sheets, as `fillSheets` does; where the last sheet before the end or before a break of the
 * author's would be nearly empty, it takes over the last rungs of the sheet before it, up to half of all that stands on both.
 */
export function breakSheets(
  rungs: readonly MeasuredRung[],
  breaks: readonly { before: number; title?: string }[],
  room: SheetRoom,
  arrangement: Arrangement,
  linked: (rung: number) => boolean,
): RungSheet[] {
  const filled = fillSheets(rungs, breaks, room, arrangement, linked);
  const evened = filled.flatMap((last, index): { before: number; shared: true }[] => {
    const full = filled[index - 1];
    const ends = index === filled.length - 1 || filled[index + 1]?.asked;
    if (!full || !ends || last.asked || last.depth >= room.depth * nearlyEmpty) return [];
    const half = (full.depth + last.depth) / 2;
    // What is joined by wire stays together where it can, rather on the fuller sheet.
    const behindHalf = ({ lines }: RungSheet["rungs"][number]) => (lines.at(-1) as Mm) > half;
    const apart = full.rungs.findIndex((rung, at) => behindHalf(rung) && !linked(full.first + at));
    const first = apart > 0 || !linked(last.first) ? apart : full.rungs.findIndex(behindHalf);
    return first > 0 ? [{ before: full.first + first, shared: true }] : [];
  });
  if (evened.length === 0) return filled;
  const shared = fillSheets(rungs, [...breaks, ...evened], room, arrangement, linked);
  // Room on the first sheet is less than on others: what was shared out must not take more sheets for that.
  return shared.length > filled.length ? filled : shared;
}

/** A sheet of which less than this share is used looks forgotten. */
const nearlyEmpty = 0.25;

/**
 * Shares the rungs out over sheets: each rung whole on one sheet, a new sheet where the author asks and where the next rung
 * has no room left. Rungs keep to the same columns as long as these go into the sheet's width; where they do not, the rungs from
 * there on have columns of their own. Distances between lines grow with what stands on them.
 * @param linked whether wire joins a rung to one before it, so that both must keep to the same columns
 */
function fillSheets(
  rungs: readonly MeasuredRung[],
  breaks: readonly { before: number; title?: string; shared?: true }[],
  room: SheetRoom,
  arrangement: Arrangement,
  linked: (rung: number) => boolean,
): RungSheet[] {
  const sheets: RungSheet[] = [];
  const asked = new Map(breaks.map((wanted) => [wanted.before, wanted]));
  let sheet: RungSheet | undefined;
  let below: Mm = 0;
  const pitch = arrangement.lines;
  const open = (first: number, title: string | undefined, asked = false) => {
    sheet = { first, asked, rungs: [], depth: 0, groups: [{ from: 0, needs: noNeeds() }], ...(title === undefined ? {} : { title }) };
    sheets.push(sheet);
    below = 0;
    return sheet;
  };
  rungs.forEach((rung, index) => {
    const wanted = asked.get(index);
    if (!sheet || (wanted && sheet.rungs.length > 0))
      sheet = open(index, wanted?.shared ? sheet?.title : wanted?.title, wanted !== undefined && !wanted.shared);
    else if (wanted?.title !== undefined) sheet.title = wanted.title;
    let placed = stack(rung, sheet.depth, below, pitch);
    const wide = (needs: ColumnNeeds) => leastSpan(needs, arrangement.columns) > room.span;
    const group = () => (sheet as RungSheet).groups.at(-1) as RungSheet["groups"][number];
    let needs = withNeeds(group().needs, rung, arrangement);
    const apart = sheet.rungs.length > 0 && wide(needs);
    if (apart && !linked(index)) {
      // The loads of a sheet stay in one column as long as that can be.
      const loads = needsOfLoads(needs);
      const own = withNeeds(loads, rung, arrangement);
      sheet.groups.push({ from: sheet.rungs.length, needs: noNeeds() });
      needs = wide(own) ? withNeeds(noNeeds(), rung, arrangement) : own;
    }
    if (sheet.rungs.length > 0 && (placed.depth > (sheets.length === 1 ? room.first : room.depth) || (apart && linked(index)))) {
      const empty = group();
      if (empty.from === sheet.rungs.length) sheet.groups.pop();
      sheet = open(index, sheet.title);
      placed = stack(rung, 0, 0, pitch);
      needs = withNeeds(noNeeds(), rung, arrangement);
    }
    sheet.rungs.push({ rung, lines: placed.lines });
    sheet.depth = placed.depth;
    group().needs = needs;
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
