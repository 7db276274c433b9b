import type { Box, Mm } from "../drawing/geometry.js";
import type { Mark } from "../drawing/marks.js";
import { polyline, rectangle } from "../drawing/path.js";
import { fitText, measureText, wrapText } from "../drawing/text.js";
import type { DrawingInfo } from "../machine/model.js";
import type { Page } from "./page.js";
import { fillTemplate, type Template } from "./template.js";

/** What a title block says of one sheet, by the names of the fields in a template. ISO 7200 names most of them. */
export function titleFields(drawing: DrawingInfo, sheet: { number: number; title: string; count: number }): Record<string, string> {
  return {
    title: drawing.title,
    "sheet-title": sheet.title,
    number: drawing.number,
    revision: drawing.revisions.at(-1)?.index ?? "",
    date: drawing.date || (drawing.revisions.at(-1)?.date ?? ""),
    sheet: `${sheet.number}/${sheet.count}`,
    "sheet-of": `${sheet.number} OF ${sheet.count}`,
    owner: drawing.owner,
    creator: drawing.creator,
    "approved-by": drawing.approvedBy,
    department: drawing.department,
    "document-type": drawing.documentType,
    status: drawing.status,
    language: drawing.language,
    paper: drawing.paper,
    size: drawing.paper.replace("ANSI-", ""),
  };
}

/** Everything below the circuit: title block, revision table and notes. */
export function stripMarks(
  page: Page,
  template: Template,
  drawing: DrawingInfo,
  sheet: { number: number; title: string; count: number; notes: string[] },
): Mark[] {
  const { frame, titleBlock } = page;
  const at = { x: frame.x + frame.width - template.size.width, y: frame.y + frame.height - template.size.height };
  const top = page.notes.y;
  const marks: Mark[] = [
    {
      kind: "stroke",
      role: "form",
      path: polyline([
        { x: frame.x, y: top },
        { x: frame.x + frame.width, y: top },
      ]),
      width: 0.5,
    },
    ...fillTemplate(template, at, titleFields(drawing, sheet)),
    ...revisionMarks(page.revisions, drawing.revisions),
    ...noteMarks(page.notes, sheet.notes),
  ];
  if (titleBlock.y === top) return marks;
  return [
    ...marks,
    {
      kind: "stroke",
      role: "form",
      path: polyline([
        { x: frame.x, y: titleBlock.y },
        { x: frame.x + frame.width, y: titleBlock.y },
      ]),
      width: 0.5,
    },
  ];
}

/** Distance from a rule to the text beside it. */
const inset = 1.2;

/** The revision table: as many of the latest revisions as there are rows, oldest of them first. */
function revisionMarks(box: Box, revisions: DrawingInfo["revisions"]): Mark[] {
  const rowHeight = 5;
  const rows = Math.floor(box.height / rowHeight) - 1;
  const header = box.height - rows * rowHeight;
  const columns = [
    { title: "Rev.", width: 9, value: (r: DrawingInfo["revisions"][number]) => r.index },
    { title: "Date", width: 21, value: (r: DrawingInfo["revisions"][number]) => r.date },
    { title: "Change", width: box.width - 30, value: (r: DrawingInfo["revisions"][number]) => r.text },
  ];
  const marks: Mark[] = [{ kind: "stroke", role: "form", path: rectangle(box), width: 0.5 }];
  const right = box.x + box.width;
  for (let row = 0; row < rows; row++) {
    const y = box.y + header + row * rowHeight;
    marks.push({
      kind: "stroke",
      role: "form",
      path: polyline([
        { x: box.x, y },
        { x: right, y },
      ]),
      width: 0.25,
    });
  }
  const shown = revisions.slice(-rows);
  let x = box.x;
  for (const column of columns) {
    if (x > box.x)
      marks.push({
        kind: "stroke",
        role: "form",
        path: polyline([
          { x, y: box.y },
          { x, y: box.y + box.height },
        ]),
        width: 0.25,
      });
    marks.push({
      kind: "text",
      role: "label",
      at: { x: x + inset, y: box.y + header - 1.6 },
      text: column.title,
      height: 1.8,
      anchor: "start",
    });
    for (const [row, revision] of shown.entries()) {
      const room = column.width - 2 * inset;
      const height = measureText(column.value(revision), 2.5) > room ? 1.8 : 2.5;
      const text = fitText(column.value(revision), height, room);
      const y = box.y + header + (row + 1) * rowHeight - 1.3;
      if (text !== "") marks.push({ kind: "text", role: "field", at: { x: x + inset, y }, text, height, anchor: "start" });
    }
    x += column.width;
  }
  return marks;
}

const noteIndent: Mm = 4.2;

/** The most lines of notes a box takes, at the size they are set in when they are many; and how wide each may be. */
function noteRoom(box: Box, { height, pitch }: { height: Mm; pitch: Mm }): { first: Mm; room: number; columns: number; width: Mm } {
  const first = box.y + 4.6 + height;
  // Long lines of small text are hard to follow: notes stand in two columns where the strip is wide.
  const columns = box.width > 240 ? 2 : 1;
  const room = Math.floor((box.y + box.height - 1.2 - first) / pitch) + 1;
  return { first, room, columns, width: box.width / columns - 2 * inset - noteIndent };
}

const noteSizes = [
  { height: 2.5, pitch: 4.2 },
  { height: 1.8, pitch: 3.1 },
] as const;

/** How many of these notes, from the first, a strip holds whole; when not all, with a line to spare that says where the others are. */
export function notesHeld(page: Page, notes: readonly string[]): number {
  const [, small] = noteSizes;
  const { room, columns, width } = noteRoom(page.notes, small);
  const lines = notes.map((note) => wrapText(note, small.height, width, 99).length);
  const total = lines.reduce((sum, each) => sum + each, 0);
  if (total <= room * columns) return notes.length;
  let used = 1;
  const held = lines.findIndex((each) => {
    used += each;
    return used > room * columns;
  });
  return Math.max(0, held);
}

/** Notes one below the other, each with its number; set smaller when they are many, and the last shortened when even so they do not fit. */
function noteMarks(box: Box, notes: string[]): Mark[] {
  if (notes.length === 0) return [];
  const marks: Mark[] = [
    { kind: "text", role: "label", at: { x: box.x + inset, y: box.y + 2.8 }, text: "Notes", height: 1.8, anchor: "start" },
  ];
  for (const { height, pitch } of noteSizes) {
    const { first, room, columns, width } = noteRoom(box, { height, pitch });
    const columnWidth = box.width / columns;
    const wrapped = notes.map((note) => wrapText(note, height, width, 99));
    const lines = wrapped.flatMap((note, index) => note.map((text, line) => ({ text, number: line === 0 ? `${index + 1}` : "" })));
    if (lines.length > room * columns && height > 1.8) continue;
    const shown = lines.slice(0, room * columns);
    const last = shown.at(-1);
    if (last && lines.length > shown.length) last.text = fitText(`${last.text} …`, height, width);
    for (const [index, { text, number }] of shown.entries()) {
      const x = box.x + inset + Math.floor(index / room) * columnWidth;
      const y = first + (index % room) * pitch;
      if (number) marks.push({ kind: "text", role: "note", at: { x, y }, text: number, height, anchor: "start" });
      marks.push({ kind: "text", role: "note", at: { x: x + noteIndent, y }, text, height, anchor: "start" });
    }
    break;
  }
  return marks;
}
