import type { Box } from "../drawing/geometry.js";
import type { DrawingSet, DrawnSheet, Mark, PartId } from "../drawing/marks.js";
import type { Layout } from "../layout/placement.js";
import type { Machine } from "../machine/model.js";
import { switchReference } from "../schedules/cross-reference.js";
import { nameOf } from "../schedules/place-words.js";
import type { CrossReferenceRow } from "../schedules/rows.js";
import type { World } from "../world.js";
import { type Appearances, findAppearances, terminalsOf } from "./appearances.js";
import { boundsByPart } from "./bounds.js";
import { circuitMarks } from "./circuit-marks.js";
import { crossReferenceTables, tableNotes } from "./cross-reference-tables.js";
import { frameMarks } from "./frame.js";
import { outlineOf } from "./outline.js";
import { type Page, pageOf, zoneOf } from "./page.js";
import { papers } from "./paper.js";
import { setTables, type Table } from "./table.js";
import { readTemplate, templateNames } from "./template.js";
import { notesHeld, stripMarks } from "./title-block.js";

/** What every circuit sheet says of the state it shows, and of what it is not. */
const circuitNotes = ["Drawn de-energized, unpressurized, at start of cycle.", "Not a certification. Isolate and verify before work."];

/**
 * Sets the whole drawing: circuit sheets with their references worded and linked, then the cross-reference, each in its
 * frame with title block, revisions and notes. A drawing without any circuit gives one empty sheet.
 * @param rows the cross-reference, from which the references are worded
 */
export function composeSheets(machine: Machine, layout: Layout, rows: readonly CrossReferenceRow[], world: World): DrawingSet {
  const { drawing } = machine;
  const page = pageOf(papers[drawing.paper] ?? papers.A3);
  const appearances = findAppearances(machine, layout, rows, (point) => zoneOf(page.paper, point));

  let next = layout.sheets.reduce((last, { number }) => Math.max(last, number), 0) + 1;
  let elsewhere = false;
  const contents: Content[] = layout.sheets.map((sheet) => {
    const own = [...circuitNotes, ...(sheet.notes ?? [])];
    const notes = [...own, ...drawing.notes];
    const held = notesHeld(page, notes);
    if (held < notes.length) {
      elsewhere = true;
      notes.splice(Math.max(held, own.length), Number.POSITIVE_INFINITY, `All notes of the drawing: sheet ${next}.`);
    }
    return { number: sheet.number, title: sheet.title, marks: circuitMarks(sheet, appearances), notes };
  });
  const tables = crossReferenceTables(rows, switchReference(machine, layout), appearances);
  if (elsewhere) tables.unshift(noteTable(drawing.notes));
  for (const marks of setTables(tables, columnsOf(page.area))) {
    const title = elsewhere && contents.length === layout.sheets.length ? "Notes, cross-reference" : "Cross-reference";
    contents.push({ number: next++, title, marks, notes: tableNotes(drawing.convention) });
  }
  if (contents.length === 0) contents.push({ number: 1, title: "", marks: [], notes: circuitNotes });
  contents.sort((a, b) => a.number - b.number);

  const anchors = anchorsOf(layout, contents);
  return {
    info: {
      title: drawing.title,
      number: drawing.number,
      author: drawing.creator || drawing.owner,
      subject: drawing.documentType,
      revision: drawing.revisions.at(-1)?.index ?? "",
      language: drawing.language,
      date: drawing.date || (drawing.revisions.at(-1)?.date ?? ""),
    },
    sheets: framed(contents, page, machine, world),
    anchors,
    parts: partNames(appearances, layout),
    outline: outlineOf(appearances).filter(({ home }) => home !== undefined && anchors.has(home)),
  };
}

/** All notes of a drawing, for when the strips of its sheets do not hold them: a caution is never left out. */
function noteTable(notes: readonly string[]): Table {
  return {
    title: "Notes",
    columns: [
      { title: "No.", share: 12 },
      { title: "Note", share: 262 },
    ],
    rows: notes.map((note, index) => [{ text: `${index + 1}` }, { text: note, lines: Number.POSITIVE_INFINITY }]),
  };
}

/** Tables on a large sheet stand in columns side by side: a line the width of the sheet is hard to follow. */
function columnsOf(area: Box): Box[] {
  const least = 260;
  const gap = 12;
  const count = Math.max(1, Math.floor((area.width + gap) / (least + gap)));
  const width = (area.width - (count - 1) * gap) / count;
  return Array.from({ length: count }, (_, i) => ({ ...area, x: area.x + i * (width + gap), width }));
}

interface Content {
  number: number;
  title: string;
  marks: Mark[];
  notes: string[];
}

/** Sheets with their frame, title block, revisions and notes. */
function framed(contents: Content[], page: Page, { drawing }: Pick<Machine, "drawing">, world: World): DrawnSheet[] {
  const own = page.paper.titleBlock.template;
  const template = readTemplate(templateNames(world).includes(drawing.template) ? drawing.template : own, world);
  const frame = frameMarks(page);
  return contents.map(({ number, title, marks, notes }) => ({
    number,
    title,
    size: page.paper.size,
    marks: [...frame, ...stripMarks(page, template, drawing, { number, title, count: contents.length, notes }), ...marks],
  }));
}

/** Where each part is drawn: as the layout says, else where its marks are. Only what is drawn can be led to. */
function anchorsOf(layout: Layout, contents: Content[]): Map<PartId, { sheet: number; box: Box }> {
  const anchors = new Map<PartId, { sheet: number; box: Box }>();
  const wires = new Set(layout.sheets.flatMap((sheet) => [...sheet.wires, ...sheet.dots].map(({ part }) => part)));
  for (const { number, marks } of contents) {
    for (const [part, box] of boundsByPart(marks)) {
      const place = layout.places.get(part);
      if (anchors.has(part) || (place && place.sheet !== number)) continue;
      if (!place && wires.has(part)) continue;
      anchors.set(part, { sheet: number, box: place?.box ?? box });
    }
  }
  return anchors;
}

/** What each part is called and to which device it belongs. */
function partNames({ machine }: Appearances, layout: Layout): Map<PartId, { device?: string; title?: string }> {
  const parts = new Map<PartId, { device?: string; title?: string }>();
  for (const sheet of layout.sheets) {
    for (const { part, device } of sheet.symbols) if (device !== undefined) parts.set(part, { device, title: nameOf(device, machine) });
    for (const { part, text } of sheet.texts) {
      if (part !== undefined && typeof text !== "string" && text.to === "ladder-line")
        parts.set(part, { device: text.device, title: nameOf(text.device, machine) });
    }
  }
  const title = (...words: (string | undefined)[]) => words.filter((word) => word !== undefined && word !== "").join(" – ");
  for (const component of machine.components.values())
    parts.set(component.id, { device: component.name, title: title(component.name && nameOf(component.name, machine), component.text) });
  for (const device of machine.devices.values()) {
    const name = nameOf(device.name, machine);
    for (const contact of device.contacts) {
      parts.set(contact.id, { device: device.name, title: title([name, terminalsOf(contact)].join(" ").trim(), device.text) });
    }
    for (const load of device.loads) parts.set(load.id, { device: device.name, title: title(name, device.text) });
  }
  return parts;
}
