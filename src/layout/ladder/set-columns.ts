import type { Mm } from "../../drawing/geometry.js";
import type { Arrangement, ColumnPitch } from "./arrangement.js";
import { afterWide, boundaryOf, isWideColumn, loadColumn, returnRail } from "./grid.js";
import { endingSize, type MeasuredRung } from "./measure-rungs.js";

/** The grid in millimetres along the current, from the live rail. */
export interface Columns {
  /** Where a boundary runs. */
  boundary(index: number): Mm;
  /** The middle of a column. */
  middle(column: number): Mm;
  /** From rail to rail. */
  span: Mm;
}

/** What rungs ask of the columns they share: half widths of parts and of texts, room before and behind boundaries, and stretches from boundary to boundary. */
export interface ColumnNeeds {
  bodies: Map<number, Mm>;
  labels: Map<number, Mm>;
  before: Map<number, Mm>;
  behind: Map<number, Mm>;
  spans: Map<number, Mm>;
  /** Texts behind the last of a line: from their boundary, as far as the return rail at most. */
  ends: Map<number, Mm>;
  /** Texts that hang at a boundary: how far they reach to either side. */
  drops: Map<number, Mm>;
  contacts: number;
  returns: number;
}

export function noNeeds(): ColumnNeeds {
  return {
    bodies: new Map(),
    labels: new Map(),
    before: new Map(),
    behind: new Map(),
    spans: new Map(),
    ends: new Map(),
    drops: new Map(),
    contacts: 0,
    returns: 0,
  };
}

/** Of these needs, those of the loads and what lies behind them: the part of a sheet that all rungs of a ladder share. */
export function needsOfLoads(needs: ColumnNeeds): ColumnNeeds {
  const shared = (map: Map<number, Mm>) => new Map([...map].filter(([index]) => index >= loadColumn));
  return {
    bodies: shared(needs.bodies),
    labels: shared(needs.labels),
    before: shared(needs.before),
    behind: shared(needs.behind),
    spans: shared(needs.spans),
    ends: new Map(),
    drops: shared(needs.drops),
    contacts: 0,
    returns: needs.returns,
  };
}

/** The needs of a rung beside those of others. */
export function withNeeds(
  others: ColumnNeeds,
  { grid, dressed, numbers, endings, passes }: MeasuredRung,
  arrangement: Arrangement,
): ColumnNeeds {
  const needs: ColumnNeeds = {
    ...others,
    bodies: new Map(others.bodies),
    labels: new Map(others.labels),
    before: new Map(others.before),
    behind: new Map(others.behind),
    spans: new Map(others.spans),
    ends: new Map(others.ends),
    drops: new Map(others.drops),
  };
  const widen = (map: Map<number, Mm>, key: number, by: Mm) => map.set(key, Math.max(map.get(key) ?? 0, by));
  const reach = (boundary: number) => {
    if (boundary < loadColumn) needs.contacts = Math.max(needs.contacts, boundary);
    else if (boundary < returnRail) needs.returns = Math.max(needs.returns, boundary - loadColumn);
  };
  for (const [cell, { body, label }] of dressed) {
    widen(needs.bodies, cell.column, body);
    widen(needs.labels, cell.column, label);
    reach(cell.column + 1);
  }
  // What joins other wires behind the loads stands clear of the return rail.
  const clear = (boundary: number) => reach(boundary > loadColumn ? afterWide(boundary) : boundary);
  if (grid.rung.end.kind === "point") clear(grid.end);
  for (const [boundary, point] of passes) {
    clear(boundary);
    // Should a sheet end here, the wire's reference stands beside it.
    if (boundary < loadColumn) widen(needs.ends, boundary, arrangement.broken("foot", point).along + beside);
  }
  for (const run of grid.runs) for (const stop of [run.from, run.to]) reach(boundaryOf(stop));
  for (const { boundary } of [...grid.uprights, ...grid.sites]) reach(boundary);
  for (const { node, boundary, beside } of numbers) {
    const number = arrangement.wireNumber(node, beside);
    if (!number) continue;
    widen(needs.behind, boundary, number.behind);
    if (number.before > 0) widen(needs.before, boundary, number.before);
  }
  for (const { kind, boundary, point, last, lead } of endings) {
    const text = arrangement.ending(kind, point);
    const along = lead + endingSize.head + endingSize.gap + text.along + 1.5;
    if (kind === "start") widen(needs.spans, boundary - 1, along);
    else if (kind === "drop") {
      widen(needs.ends, boundary, text.along + beside);
      widen(needs.drops, boundary, text.along + beside);
    } else if (kind === "end" && last) widen(needs.ends, boundary, along);
    else if (kind === "end") {
      widen(needs.spans, afterWide(boundary) - 1, along);
      reach(afterWide(boundary));
    }
  }
  return needs;
}

/** Kept free beside the texts of a column, to either side, mm. */
const beside: Mm = 1.2;

/** The least widths of columns that meet the needs. */
function leastColumns({ bodies, labels, before, behind, spans, drops, contacts, returns }: ColumnNeeds, pitch: ColumnPitch) {
  // Narrow columns in which nothing stands have no width: the boundaries on both sides of them are one place.
  const isEmpty = (column: number) => !isWideColumn(column) && !bodies.has(column) && !spans.has(column);
  const first = (boundary: number) => {
    while (boundary > 0 && isEmpty(boundary - 1)) boundary--;
    return boundary;
  };
  const most = (map: Map<number, Mm>, boundary: number) => {
    let place = first(boundary);
    let room = map.get(place) ?? 0;
    for (; isEmpty(place); place++) room = Math.max(room, map.get(place + 1) ?? 0);
    return Math.max(room, pitch.gap / 2);
  };
  const roomBefore = (boundary: number) => most(before, boundary);
  const roomBehind = (boundary: number) => most(behind, boundary);
  const half = (column: number) => {
    const body = bodies.get(column) ?? pitch.usual * 0.3;
    // Texts may reach into the gaps, up to the uprights that may run there.
    const overhang = Math.min(roomBehind(column), roomBefore(column + 1));
    return Math.max(body, (labels.get(column) ?? 0) + beside - overhang);
  };
  // What hangs at a boundary keeps clear of uprights on the next.
  const clear = (column: number) => Math.max(drops.get(column) ?? 0, drops.get(column + 1) ?? 0);
  const advance = (column: number) =>
    isEmpty(column) ? 0 : Math.max(roomBehind(column) + 2 * half(column) + roomBefore(column + 1), spans.get(column) ?? 0, clear(column));
  return {
    roomBefore,
    roomBehind,
    // What stands over the last boundary before the loads needs its room on both sides.
    between: contacts > 0 ? Math.max(0, roomBehind(contacts) - roomBehind(loadColumn)) : 0,
    contactColumns: Array.from({ length: contacts }, (_, c) => advance(c)),
    loads: Array.from({ length: returns }, (_, c) => advance(loadColumn + c)),
  };
}

const sum = (list: readonly Mm[]) => list.reduce((total, width) => total + width, 0);

/** How far the texts behind the last of a line reach. */
function reachOfEnds({ ends }: ColumnNeeds, contactColumns: readonly Mm[]): Mm {
  return Math.max(0, ...[...ends].map(([boundary, along]) => sum(contactColumns.slice(0, boundary)) + along));
}

/** From rail to rail at the least. */
export function leastSpan(needs: ColumnNeeds, pitch: ColumnPitch): Mm {
  const { contactColumns, between, loads } = leastColumns(needs, pitch);
  return Math.max(sum(contactColumns) + between + sum(loads), reachOfEnds(needs, contactColumns));
}

/**
 * Sets the columns of one sheet: each wide enough for its widest part and every gap for its wire number. Contacts keep an
 * even pitch from the live rail, stretched a little where there is room to spare; loads stand against the return rail and
 * their wires run straight between.
 */
export function setColumns(needs: ColumnNeeds, span: Mm, pitch: ColumnPitch): Columns {
  const { roomBefore, roomBehind, contactColumns, between, loads } = leastColumns(needs, pitch);
  const behind = sum(loads);
  const length = Math.max(span, leastSpan(needs, pitch));
  // Even pitch first, then a share of what is left over.
  const wide = contactColumns.filter((_, column) => isWideColumn(column)).length;
  const evened = contactColumns.map((width, column) => (isWideColumn(column) ? Math.max(width, pitch.usual) : width));
  const fits = sum(evened) + between + behind <= length;
  const base = fits ? evened : contactColumns;
  const spare = length - sum(base) - between - behind;
  const stretch = wide > 0 && fits ? Math.min(spare / (wide + 1), pitch.widest - pitch.usual) : 0;
  const stretched = base.map((width, column) =>
    width >= pitch.widest || !isWideColumn(column) ? width : Math.min(width + Math.max(0, stretch), pitch.widest),
  );
  const widths = reachOfEnds(needs, stretched) <= length ? stretched : contactColumns;
  const at: Mm[] = [0];
  for (const width of widths) at.push((at.at(-1) as Mm) + width);
  const loadAt: Mm[] = [length - behind];
  for (const width of loads) loadAt.push((loadAt.at(-1) as Mm) + width);

  const boundary = (index: number): Mm =>
    index >= returnRail ? length : index >= loadColumn ? (loadAt[index - loadColumn] ?? length) : (at[index] ?? 0);
  return {
    boundary,
    middle: (column) => {
      const from = boundary(column) + roomBehind(column);
      const to = (column >= loadColumn || column + 1 < at.length ? boundary(column + 1) : length) - roomBefore(column + 1);
      return (from + to) / 2;
    },
    span: length,
  };
}
