import { textBox } from "../drawing/extent.js";
import type { Box, Mm } from "../drawing/geometry.js";
import type { Mark, PartId } from "../drawing/marks.js";
import { fitText, measureText } from "../drawing/text.js";
import { type CircuitSheet, type Place, type PlacedText, type Reference, rowPitch } from "../layout/placement.js";
import { linePlace, nameOf, zonePlace } from "../schedules/place-words.js";
import { type Appearance, type Appearances, operatorOf, type PointEnd } from "./appearances.js";

/** A reference put into words: texts in a row, each of which may lead somewhere. */
export interface Wording {
  pieces: Piece[];
}

export interface Piece {
  text: string;
  to?: PartId;
  underline?: boolean;
}

/** The marks of a reference: the fullest wording that fits its room, with a link on each piece that leads somewhere. */
export function referenceMarks(text: PlacedText & { text: Reference }, sheet: CircuitSheet, appearances: Appearances): Mark[] {
  const reference = text.text;
  if (reference.to === "contacts") return contactListMarks(text, reference.room, contactPieces(reference.device, sheet, appearances));
  if (reference.to === "ladder-line" && (reference.rows ?? 1) > 1) {
    const rows = ladderLineRows(reference, text.height, sheet, appearances);
    if (rows) return rows.flatMap((row, line) => rowMarks(text, row, text.height, line * rowPitch(text.height)));
  }
  const wordings = wordingsOf(reference, sheet, appearances);
  const [first] = wordings;
  if (!first) return [];
  const wide = (wording: Wording, height: Mm) => measureText(plain(wording), height) > reference.room;
  for (const height of text.height > least ? [text.height, least] : [text.height]) {
    const fitting = wordings.find((wording) => !wide(wording, height));
    if (fitting) return rowMarks(text, fitting.pieces, height, 0);
  }
  const shortest = wordings.at(-1) as Wording;
  const height = Math.min(text.height, least);
  const whole = plain(shortest);
  if (reference.to === "point" && whole.startsWith(`${reference.point} `)) {
    // Where it goes on is worth more than the end of a long name.
    const place = whole.slice(reference.point.length);
    const name = fitText(reference.point, height, reference.room - measureText(place, height));
    return rowMarks(text, [{ text: name + place, to: shortest.pieces[0]?.to }], height, 0);
  }
  return rowMarks(text, [{ text: fitText(plain(shortest), height, reference.room), to: shortest.pieces[0]?.to }], height, 0);
}

/** No reference is set smaller than this. */
const least: Mm = 1.8;

const plain = ({ pieces }: Wording) => pieces.map((piece) => piece.text).join("");

/** The ways to word a reference, fullest first; none if what it speaks of is drawn nowhere. */
function wordingsOf(reference: Reference, sheet: CircuitSheet, appearances: Appearances): Wording[] {
  switch (reference.to) {
    case "coil":
      return coilLines(reference.device, sheet, appearances);
    case "sisters": {
      const { device, from, linked = [] } = reference;
      const others = appearances.contactsOf(device).filter(({ part }) => part !== from && !linked.includes(part));
      return listed(others, sheet, appearances);
    }
    case "switch-place": {
      const device = appearances.machine.devices.get(reference.device);
      return named(device ? operatorOf(device) : undefined, appearances.fluidSideOf(reference.device), appearances);
    }
    case "valve": {
      const name = appearances.machine.devices.get(reference.device)?.valve?.name;
      const valve = name === undefined ? undefined : appearances.component(name);
      // The words name the valve, the link leads to the coil's own end of it.
      return named(name, valve && { ...valve, part: appearances.fluidSideOf(reference.device)?.part ?? valve.part }, appearances);
    }
    case "ladder-line":
      return ladderLines(reference.device, sheet, appearances);
    case "contact-place":
      return contactPlace(reference, sheet, appearances);
    case "point":
      return elsewhere(reference, sheet, appearances);
    case "driven": {
      const { device } = reference;
      const driven = [...appearances.machine.components.values()].find(({ drivenBy }) => drivenBy === device);
      return named(driven?.name, driven?.name === undefined ? undefined : appearances.component(driven.name), appearances);
    }
    case "rails":
      return railHeads(reference, sheet, appearances);
    case "source": {
      const supply = appearances.machine.supplies.find(({ name }) => name === reference.supply);
      const source = appearances.sourceOf(reference.supply);
      return source ? placed(supply?.from, source, sheet, appearances) : [];
    }
    case "contacts":
      return [{ pieces: contactPieces(reference.device, sheet, appearances) }];
  }
}

/** Something on a sheet with lines and where it stands there: `G1 1/105`, on this sheet `G1 105`, without room for the name only the place. */
function placed(name: string | undefined, { part, place }: Appearance, sheet: CircuitSheet, { machine }: Appearances): Wording[] {
  const { convention } = machine.drawing;
  const near = convention === "north-american" && place.sheet === sheet.number;
  const where =
    place.line === undefined ? zonePlace(place, convention) : near ? String(place.line) : linePlace(place.sheet, place.line, convention);
  return [...(name === undefined ? [] : [`${nameOf(name, machine)} ${where}`]), where].map((text) => ({ pieces: [{ text, to: part }] }));
}

/** Where the ladders begin whose rail this is: `L+ 2/201`. */
function railHeads({ supply, rail }: Reference & { to: "rails" }, sheet: CircuitSheet, appearances: Appearances): Wording[] {
  const [first] = appearances.headsOf(supply);
  if (!first) return [{ pieces: [{ text: rail }] }];
  const [full] = placed(undefined, first, sheet, appearances);
  return full ? [{ pieces: full.pieces.map((piece) => ({ ...piece, text: `${rail} ${piece.text}` })) }] : [];
}

/** North-american practice sets a line that is spoken of in brackets; international places begin with a slash and need none. */
const brackets = ({ machine }: Appearances): [string, string] => (machine.drawing.convention === "international" ? ["", ""] : ["(", ")"]);

function contactPlace({ device, contact }: Reference & { to: "contact-place" }, sheet: CircuitSheet, appearances: Appearances): Wording[] {
  const main = appearances.mainsOf(device).find(({ part }) => part === contact);
  const found = main ?? appearances.contactsOf(device).find(({ part }) => part === contact);
  return found ? [{ pieces: [{ text: lineName(found.place, sheet, appearances), to: found.part }] }] : [];
}

/** `CLAMP 1/B4`, and where there is no room for the name only the place. */
function named(name: string | undefined, found: Appearance | undefined, { machine }: Appearances): Wording[] {
  const printed = name === undefined ? undefined : nameOf(name, machine);
  if (!found) return printed === undefined ? [] : [{ pieces: [{ text: printed }] }];
  const where = zonePlace(found.place, machine.drawing.convention);
  return [...(printed === undefined ? [] : [`${printed} ${where}`]), where].map((text) => ({ pieces: [{ text, to: found.part }] }));
}

/** Where its coils are; what has none is worked by what flows in a power circuit. */
function coilLines(device: string, sheet: CircuitSheet, appearances: Appearances): Wording[] {
  const loads = appearances.loadsOf(device);
  return listed(loads.length > 0 ? loads : appearances.mainsOf(device).slice(0, 1), sheet, appearances);
}

/** `(204)`; for a switch with several contacts `(203, 207)`, as many as there is room for. */
function ladderLines(device: string, sheet: CircuitSheet, appearances: Appearances): Wording[] {
  const load = appearances.loadOf(device);
  const contacts = appearances.contactsOf(device);
  if (load) return listed([load], sheet, appearances);
  // A motor is worked by no line of a ladder, but fed by one of a power circuit.
  return listed(contacts.length > 0 ? contacts : appearances.mainsOf(device).slice(0, 1), sheet, appearances);
}

/** More lines than this have room beside no symbol. */
const mostListed = 16;

/** `(204)`, or several, `(203, 207)`, as many as there is room for. */
function listed(found: readonly Appearance[], sheet: CircuitSheet, appearances: Appearances): Wording[] {
  const [open, close] = brackets(appearances);
  const wordings: Wording[] = [];
  for (let shown = Math.min(found.length, mostListed); shown > 0; shown--) {
    const end = shown < found.length ? `, …${close}` : close;
    const pieces = found.slice(0, shown).map(({ part, place }, index): Piece => {
      const line = lineName(place, sheet, appearances);
      return { text: `${index === 0 ? open : ""}${line}${index === shown - 1 ? end : ", "}`, to: part };
    });
    wordings.push({ pieces });
  }
  const [first] = found;
  if (first && found.length > 1) {
    const line = lineName(first.place, sheet, appearances);
    for (const text of [`${open}${line}…${close}`, `${open}${line}${close}`]) wordings.push({ pieces: [{ text, to: first.part }] });
  }
  return wordings;
}

/**
 * A switch's contacts over several rows, each row in brackets of its own: `(204, 207)` over `(301)`. The last row ends with
 * `…` where there are more. Nothing where a single number is wider than the room.
 */
function ladderLineRows(
  { device, room, rows: most = 1 }: Reference & { to: "ladder-line" },
  height: Mm,
  sheet: CircuitSheet,
  appearances: Appearances,
): Piece[][] | undefined {
  if (appearances.loadOf(device)) return undefined;
  const contacts = appearances.contactsOf(device).map(({ part, place }) => ({ text: lineName(place, sheet, appearances), to: part }));
  const [open, close] = brackets(appearances);
  const inBrackets = (pieces: Piece[], end: string) =>
    pieces.map((piece, i) => ({ ...piece, text: `${i === 0 ? open : ""}${piece.text}${i === pieces.length - 1 ? end + close : ", "}` }));
  const wide = (pieces: Piece[], end = "") => measureText(plain({ pieces: inBrackets(pieces, end) }), height) > room;
  const rows: Piece[][] = [];
  for (const contact of contacts) {
    if (wide([contact])) return undefined;
    const row = rows.at(-1);
    if (row && !wide([...row, contact])) row.push(contact);
    else rows.push([contact]);
  }
  const shown = rows.slice(0, most);
  const last = shown.at(-1);
  const more = rows.length > most ? "…" : "";
  while (last && last.length > 1 && more !== "" && wide(last, more)) last.pop();
  return shown.map((row) => inBrackets(row, row === last ? more : ""));
}

/** A point's other ends: `run 2/204`, on a fluid sheet `P 2/B1`, and `run 104` or `P B1` where they are all on this sheet. */
function elsewhere(reference: Reference & { to: "point" }, sheet: CircuitSheet, appearances: Appearances): Wording[] {
  const all = appearances.pointEnds(sheet.kind, reference.point).filter((end) => !isOwn(end, reference, sheet));
  const ordered = neighbouringEnds(reference, sheet, appearances);
  if (ordered.length === 0) ordered.push(...all);
  if (ordered.length === 0) return [{ pieces: [{ text: reference.point }] }];
  const wordings: Wording[] = [];
  for (let shown = ordered.length; shown > 0; shown--) {
    const pieces = ordered.slice(0, shown).map(({ from, place }, index): Piece => {
      const where = pointPlace(place, sheet, appearances);
      return { text: `${index === 0 ? `${reference.point} ` : ", "}${where}`, to: from };
    });
    wordings.push({ pieces });
  }
  return wordings;
}

/**
 * Where a point comes from, or where it goes on: the nearest of its other ends above this one, or below it, reading through
 * the set. Both where it is not known which of them the end is.
 */
function neighbouringEnds(reference: Reference & { to: "point" }, sheet: CircuitSheet, appearances: Appearances): PointEnd[] {
  const leftToRight = sheet.kind === "ladder" && appearances.machine.drawing.convention === "international";
  const within = ({ place: { box } }: PointEnd) => (leftToRight ? box.x : box.y);
  const ends = [...appearances.pointEnds(sheet.kind, reference.point)].sort(
    (a, b) => a.place.sheet - b.place.sheet || (a.place.line ?? 0) - (b.place.line ?? 0) || within(a) - within(b),
  );
  const own = ends.findIndex((end) => isOwn(end, reference, sheet));
  if (own < 0) return [];
  const following = ends.slice(own).find((end) => !isOwn(end, reference, sheet));
  const preceding = ends[own - 1];
  if (reference.way === "in") return [preceding ?? following].filter((end) => end !== undefined);
  if (reference.way === "out") return [following ?? preceding].filter((end) => end !== undefined);
  return [following, preceding].filter((end) => end !== undefined);
}

/** A line that runs over several sheets bears one name on all of them, and may end twice on one: its ends there are no other place. */
function isOwn({ from, place }: PointEnd, reference: Reference & { to: "point" }, sheet: CircuitSheet): boolean {
  return from === reference.from && place.sheet === sheet.number;
}

/** Where a point goes on: north-american sheets leave out a sheet that is their own. */
function pointPlace(place: Place, sheet: CircuitSheet, { machine: { drawing } }: Appearances): string {
  const { line, zone } = place;
  if (place.sheet === sheet.number && drawing.convention === "north-american") return line === undefined ? zone : String(line);
  return line === undefined ? zonePlace(place, drawing.convention) : linePlace(place.sheet, line, drawing.convention);
}

/** A ladder line as another place speaks of it. Lines numbered by sheet name their sheet themselves; running ones need it said when it is another. */
function lineName(place: Place, from: CircuitSheet, { machine }: Appearances): string {
  const { convention, lineNumbers } = machine.drawing;
  if (place.line === undefined) return zonePlace(place, convention);
  const sheetSaid = convention === "international" || (lineNumbers === "running" && place.sheet !== from.number);
  return sheetSaid ? linePlace(place.sheet, place.line, convention) : String(place.line);
}

/** The lines of a coil's contacts, normally closed ones underlined. */
function contactPieces(device: string, sheet: CircuitSheet, appearances: Appearances): Piece[] {
  return (appearances.rows.get(device)?.contacts ?? []).map((reference) => {
    const to = appearances.contactOf(device, reference);
    const text = lineName({ sheet: reference.sheet, line: reference.line, zone: "", box: nowhere }, sheet, appearances);
    return { text, ...(to === undefined ? {} : { to }), ...(reference.type === "NC" ? { underline: true } : {}) };
  });
}

const nowhere: Box = { x: 0, y: 0, width: 0, height: 0 };

/**
 * The contact lines of a coil, beside its rung. They are wrapped about the height of the rung line and set smaller when they
 * are many; what has no room even then is left to the cross-reference sheet, and `…` says so.
 */
function contactListMarks(text: PlacedText, room: Mm, pieces: Piece[]): Mark[] {
  if (pieces.length === 0) return [];
  const settings = [
    { height: text.height, pitch: text.height * 1.6, rows: 2 },
    { height: least, pitch: 3, rows: 3 },
  ];
  for (const [index, { height, pitch, rows }] of settings.entries()) {
    const wrapped = wrapPieces(pieces, height, room);
    const last = index === settings.length - 1;
    if (wrapped.length > rows && !last) continue;
    const shown = wrapped.slice(0, rows);
    if (wrapped.length > rows) endWithMore(shown.at(-1) as Piece[], height, room);
    const rise = ((shown.length - 1) * pitch) / 2;
    return shown.flatMap((row, line) => rowMarks(text, row, height, line * pitch - rise));
  }
  return [];
}

/** Rows of pieces with `, ` between them, each row no wider than the room unless a single piece is. */
function wrapPieces(pieces: Piece[], height: Mm, room: Mm): Piece[][] {
  const rows: Piece[][] = [];
  let row: Piece[] = [];
  for (const [index, piece] of pieces.entries()) {
    const comma = index < pieces.length - 1 ? "," : "";
    // A line under the number must not run on under the comma.
    const next = piece.underline && comma ? [piece, { text: comma }] : [{ ...piece, text: piece.text + comma }];
    const longer = [...row, ...(row.length > 0 ? [{ text: " " }] : []), ...next];
    if (row.length > 0 && measureText(plain({ pieces: longer }), height) > room) {
      rows.push(row);
      row = next;
    } else row = longer;
  }
  if (row.length > 0) rows.push(row);
  return rows;
}

function endWithMore(row: Piece[], height: Mm, room: Mm): void {
  const more = { text: " …" };
  while (row.length > 1 && measureText(plain({ pieces: [...row, more] }), height) > room) row.pop();
  while (row.length > 0 && (row.at(-1) as Piece).text === " ") row.pop();
  row.push(more);
}

/** Pieces side by side at the place of a text, moved down by `drop`. */
function rowMarks(text: PlacedText, pieces: Piece[], height: Mm, drop: Mm): Mark[] {
  const marks: Mark[] = [];
  const common = { kind: "text", role: text.role, height, ...(text.part === undefined ? {} : { part: text.part }) } as const;
  const total = measureText(plain({ pieces }), height);
  const before = text.anchor === "start" ? 0 : text.anchor === "middle" ? total / 2 : total;
  // Each piece begins where the one before it ends, to the last digit.
  let { x, y } = text.rotated ? { x: text.at.x + drop, y: text.at.y + before } : { x: text.at.x - before, y: text.at.y + drop };
  for (const piece of pieces) {
    const width = measureText(piece.text, height);
    const at = { x, y };
    if (text.rotated) y -= width;
    else x += width;
    if (piece.text.trim() === "") continue;
    const mark: Mark & { kind: "text" } = { ...common, at, text: piece.text, anchor: "start" };
    if (text.rotated) mark.rotated = true;
    if (piece.underline) mark.underline = true;
    marks.push(mark);
    if (piece.to !== undefined) marks.push({ kind: "link", box: roundabout(textBox(mark)), to: piece.to });
  }
  return marks;
}

/** A finger's breadth more than the text itself. */
export function roundabout({ x, y, width, height }: Box): Box {
  const pad = 0.6;
  return { x: x - pad, y: y - pad, width: width + 2 * pad, height: height + 2 * pad };
}
