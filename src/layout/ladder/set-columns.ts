import type { Mm } from "../../drawing/geometry.js";
import type { Arrangement } from "./arrangement.js";
import { boundaryOf, loadColumn, returnRail } from "./grid.js";
import { endingSize, type MeasuredRung } from "./measure-rungs.js";

/** The grid in millimetres along the current, from the live rail. */
export interface Columns {
  /** Where a boundary runs. */
  boundary(index: number): Mm;
  /** The middle of a column. */
  middle(column: number): Mm;
  /** From rail to rail. */
  span: Mm;
  /** What the content needs at the least; more than the span offered means it has no room. */
  needed: Mm;
}

/** Distances along, mm: the usual column, the widest it is stretched to, and the least gap between pins of neighbours. */
export interface ColumnPitch {
  usual: Mm;
  widest: Mm;
  gap: Mm;
}

/**
 * Sets the columns of one sheet: each wide enough for its widest part and every gap for its wire number. Contacts keep an
 * even pitch from the live rail, stretched a little where there is room to spare; loads stand against the return rail and
 * their wires run straight between.
 */
export function setColumns(rungs: readonly MeasuredRung[], span: Mm, pitch: ColumnPitch, arrangement: Arrangement): Columns {
  const bodies = new Map<number, Mm>();
  const labels = new Map<number, Mm>();
  const gaps = new Map<number, Mm>();
  const spans = new Map<number, Mm>();
  const widen = (map: Map<number, Mm>, key: number, by: Mm) => map.set(key, Math.max(map.get(key) ?? 0, by));
  let contacts = 0;
  let returns = 0;
  const reach = (boundary: number) => {
    if (boundary < loadColumn) contacts = Math.max(contacts, boundary);
    else if (boundary < returnRail) returns = Math.max(returns, boundary - loadColumn);
  };
  for (const { grid, dressed, numbers, endings } of rungs) {
    for (const [cell, { reach: half, label }] of dressed) {
      widen(bodies, cell.column, half);
      widen(labels, cell.column, label);
      reach(cell.column + 1);
    }
    for (const run of grid.runs) for (const stop of [run.from, run.to]) reach(boundaryOf(stop));
    for (const { node, boundary, beside } of numbers) {
      const { room } = arrangement.wireNumber(node);
      if (room > 0) widen(gaps, boundary, beside ? 2 * (room + 1.8) : room + 2);
    }
    for (const { kind, boundary, point } of endings) {
      const room = arrangement.endingRoom(point);
      const along = endingSize.lead + endingSize.head + endingSize.gap + room + 1.5;
      if (kind === "start") widen(spans, boundary - 1, along);
      else if (kind === "end") {
        widen(spans, boundary, along);
        reach(boundary + 1);
      } else widen(gaps, boundary, room + 1.5);
    }
  }
  const gap = (boundary: number) => Math.max(gaps.get(boundary) ?? 0, pitch.gap);
  const half = (column: number) => {
    const body = bodies.get(column) ?? pitch.usual / 2 - pitch.gap / 2;
    return Math.max(body, (labels.get(column) ?? 0) + 0.8 - Math.min(gap(column), gap(column + 1)) / 2);
  };
  const advance = (column: number) => Math.max((gap(column) + gap(column + 1)) / 2 + 2 * half(column), spans.get(column) ?? 0);

  const contactColumns = Array.from({ length: contacts }, (_, c) => advance(c));
  const loads = Array.from({ length: Math.max(returns, 1) }, (_, c) => advance(loadColumn + c));
  const sum = (list: readonly Mm[]) => list.reduce((total, width) => total + width, 0);
  const behind = sum(loads);
  const needed = sum(contactColumns) + behind;
  const length = Math.max(span, needed);
  // Even pitch first, then a share of what is left over.
  const evened = contactColumns.map((width) => Math.max(width, pitch.usual));
  const fits = sum(evened) + behind <= length;
  const base = fits ? evened : contactColumns;
  const spare = length - sum(base) - behind;
  const stretch = contacts > 0 && fits ? Math.min(spare / (contacts + 1), pitch.widest - pitch.usual) : 0;
  const widths = base.map((width) => (width >= pitch.widest ? width : Math.min(width + Math.max(0, stretch), pitch.widest)));
  const at: Mm[] = [0];
  for (const width of widths) at.push((at.at(-1) as Mm) + width);
  const loadAt: Mm[] = [length - behind];
  for (const width of loads) loadAt.push((loadAt.at(-1) as Mm) + width);

  const boundary = (index: number): Mm =>
    index >= returnRail ? length : index >= loadColumn ? (loadAt[index - loadColumn] ?? length) : (at[index] ?? 0);
  return {
    boundary,
    middle: (column) => {
      const from = boundary(column) + gap(column) / 2;
      const to = (column >= loadColumn || column + 1 < at.length ? boundary(column + 1) : length) - gap(column + 1) / 2;
      return (from + to) / 2;
    },
    span: length,
    needed,
  };
}
