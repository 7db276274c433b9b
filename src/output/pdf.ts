import { textBox, underline } from "../drawing/extent.js";
import type { Point } from "../drawing/geometry.js";
import type { DrawingSet, DrawnSheet, Mark, PartId, Segment } from "../drawing/marks.js";
import { arcCurves } from "../drawing/path.js";
import { fontSize, printable } from "../drawing/text.js";
import type { World } from "../world.js";
import { gather, mergeAlike } from "./bucket.js";
import { fontFile } from "./fonts.js";

/** Points in a millimetre. */
const pt = 72 / 25.4;

type Document = InstanceType<typeof import("pdfkit")>;

/**
 * Writes the whole set as one PDF, a page a sheet at true size: embedded font, selectable text, outline by sheet and by
 * device, links both ways, page labels that are the sheet numbers. The same set gives the same bytes.
 */
export async function writePdf(set: DrawingSet, world: World): Promise<Uint8Array> {
  const { default: PdfDocument } = await import("pdfkit");
  const { info } = set;
  const document = new PdfDocument({
    autoFirstPage: false,
    margin: 0,
    pdfVersion: "1.7",
    lang: info.language || "en",
    displayTitle: true,
    // The font is set before the first page, so that none of the built-in ones is looked for.
    font: null as unknown as string,
    info: {
      Title: metadata([info.number, info.title]),
      Author: metadata([info.author]),
      Subject: metadata([info.subject]),
      Keywords: metadata([info.number, info.revision && `revision ${info.revision}`, "circuit diagram"]),
      Creator: "Spoolrung",
      Producer: "Spoolrung",
      CreationDate: dateOf(info.date),
    },
  });
  const bytes = collect(document);
  escapeMetadata(document);
  openFonts(document, set, world);
  for (const sheet of set.sheets) drawSheet(document, sheet, set);
  addOutline(document, set);
  addPageLabels(document, set);
  document.end();
  return bytes;
}

function metadata(parts: (string | undefined)[]): string {
  return parts
    .filter((part) => part !== undefined && part !== "")
    .join(", ")
    .replace(/[\p{Cc}\p{Cs}]/gu, " ");
}

/** The library sets the texts of its XML metadata as they are; a `<` or `&` in a title would make that ill-formed. */
function escapeMetadata(document: Document): void {
  const inner = document as unknown as { info: Record<string, unknown>; _addInfo(): void };
  const addInfo = inner._addInfo;
  inner._addInfo = () => {
    const plain = inner.info;
    inner.info = Object.fromEntries(
      Object.entries(plain).map(([key, value]) => [key, typeof value === "string" ? escapeXml(value) : value]),
    );
    addInfo.call(inner);
    inner.info = plain;
  };
}

function escapeXml(text: string): string {
  return text
    .replace(/[\ufffe\uffff]/g, "")
    .replaceAll("&", "&amp;")
    .replaceAll("<", "&lt;")
    .replaceAll(">", "&gt;");
}

/** The drawing's own date; the clock is never asked. */
function dateOf(text: string): Date {
  const date = /^\d{4}-\d{2}-\d{2}$/.test(text) ? new Date(`${text}T00:00:00Z`) : new Date(Number.NaN);
  return Number.isNaN(date.getTime()) ? new Date("2000-01-01T00:00:00Z") : date;
}

function collect(document: Document): Promise<Uint8Array> {
  return new Promise((resolve, reject) => {
    const pieces: Uint8Array[] = [];
    document.on("data", (piece: Uint8Array) => pieces.push(piece));
    document.on("error", reject);
    document.on("end", () => {
      const whole = new Uint8Array(pieces.reduce((sum, piece) => sum + piece.length, 0));
      let at = 0;
      for (const piece of pieces) {
        whole.set(piece, at);
        at += piece.length;
      }
      resolve(whole);
    });
  });
}

function openFonts(document: Document, set: DrawingSet, world: World): void {
  const bold = set.sheets.some((sheet) => sheet.marks.some((mark) => mark.kind === "text" && mark.bold));
  for (const name of bold ? ["bold", "regular"] : ["regular"]) {
    document.registerFont(name, fontFile(world, name === "bold") as unknown as ArrayBuffer);
    document.font(name);
    setPlainly(document);
  }
}

/**
 * Has the font set each character by its own advance, without the kerning and ligatures that would make a text narrower
 * than it was measured. It is also ten times as quick as asking for the same through the features of each text.
 */
function setPlainly(document: Document): void {
  const { font } = (document as unknown as { _font: { font: FontkitFont } })._font;
  font.layout = (text) => {
    const glyphs = font.glyphsForString(text);
    const positions = glyphs.map(({ advanceWidth }) => ({ xAdvance: advanceWidth, yAdvance: 0, xOffset: 0, yOffset: 0 }));
    return { glyphs, positions, advanceWidth: glyphs.reduce((sum, glyph) => sum + glyph.advanceWidth, 0) };
  };
}

interface FontkitFont {
  glyphsForString(text: string): { advanceWidth: number }[];
  layout(text: string): { glyphs: { advanceWidth: number }[]; positions: object[]; advanceWidth: number };
}

function drawSheet(document: Document, sheet: DrawnSheet, set: DrawingSet): void {
  document.addPage({ size: [sheet.size.width * pt, sheet.size.height * pt], margin: 0 });
  document.lineCap("round").lineJoin("round");
  const texts: (Mark & { kind: "text" })[] = [];
  for (const { marks } of gather(sheet.marks)) {
    for (const mark of mergeAlike(marks)) {
      if (mark.kind === "text") texts.push(mark);
      else drawShape(document, mark);
    }
  }
  for (const text of texts) drawText(document, text);
  for (const mark of sheet.marks) {
    if (mark.kind !== "link" || !set.anchors.has(mark.to)) continue;
    const { x, y, width, height } = mark.box;
    const link = { Subtype: "Link", Dest: new String(destination(mark.to)) };
    document.annotate(x * pt, y * pt, width * pt, height * pt, link as object as PDFKit.Mixins.AnnotationOption);
  }
  for (const [part, anchor] of set.anchors) {
    if (anchor.sheet !== sheet.number) continue;
    const { left, top } = corner(anchor.box);
    document.addNamedDestination(destination(part), "XYZ", left, top, null as unknown as number);
  }
}

/** Where a reader lands: somewhat up and left of the part, so that it is not at the very edge of the window. */
function corner(box: Point): { left: number; top: number } {
  return { left: Math.max(0, box.x - 20) * pt, top: Math.max(0, box.y - 20) * pt };
}

/** Names in a PDF are byte strings: anything beyond ASCII is written out. */
function destination(part: PartId): string {
  return part.replace(/[^!-~]|[()\\%_]/gu, (character) => `_${(character.codePointAt(0) as number).toString(16)}_`);
}

function drawShape(document: Document, mark: Mark & { kind: "stroke" | "fill" }): void {
  let at: Point = { x: 0, y: 0 };
  for (const s of mark.path) {
    at = drawSegment(document, s, at);
  }
  if (mark.kind === "fill") {
    document.fill(colour(mark.ink));
    return;
  }
  document.lineWidth(mark.width * pt);
  if (mark.dash) {
    // Round ends would close the gaps of a dashed line.
    document.save().lineCap("butt");
    dash(document, mark.dash);
    document.stroke(colour(mark.ink)).restore();
  } else {
    document.stroke(colour(mark.ink));
  }
}

/** Sets the dash pattern; all lengths zero would be no pattern at all. */
function dash(document: Document, lengths: number[]): void {
  if (lengths.some((length) => length > 0)) document.dash(lengths.map((length) => Math.max(length * pt, 0.001)) as unknown as number, {});
}

function drawSegment(document: Document, s: Segment, at: Point): Point {
  switch (s.op) {
    case "M":
      document.moveTo(s.x * pt, s.y * pt);
      return s;
    case "L":
      document.lineTo(s.x * pt, s.y * pt);
      return s;
    case "C":
      document.bezierCurveTo(s.x1 * pt, s.y1 * pt, s.x2 * pt, s.y2 * pt, s.x * pt, s.y * pt);
      return s;
    case "A":
      for (const curve of arcCurves(at, s)) drawSegment(document, curve, at);
      return s;
    case "Z":
      document.closePath();
      return at;
  }
}

function drawText(document: Document, mark: Mark & { kind: "text" }): void {
  const shown = printable(mark.text);
  if (shown.trim() === "") return;
  document
    .font(mark.bold ? "bold" : "regular")
    .fontSize(fontSize(mark.height) * pt)
    .fillColor(colour(mark.ink));
  const box = textBox({ ...mark, text: shown });
  const start = mark.rotated ? { x: mark.at.x, y: box.y + box.height } : { x: box.x, y: mark.at.y };
  if (mark.rotated) document.save().rotate(-90, { origin: [start.x * pt, start.y * pt] });
  document.text(shown, start.x * pt, start.y * pt, { lineBreak: false, baseline: "alphabetic" });
  if (mark.rotated) document.restore();
  if (mark.underline) drawShape(document, { kind: "stroke", ink: mark.ink, ...underline({ ...mark, text: shown }) });
}

/** Only a plain colour reaches the page; anything else is black. */
function colour(ink: string | undefined): string {
  return ink !== undefined && /^(#[0-9a-f]{6}|#[0-9a-f]{3}|[a-z]+)$/i.test(ink) ? ink : "#000000";
}

type Outline = { addItem(title: string, options: object): Outline };

/** Sheets first, then every device with its other appearances below it. */
function addOutline(document: Document, set: DrawingSet): void {
  const root = document.outline as unknown as Outline;
  const pageOf = new Map(set.sheets.map((sheet, index) => [sheet.number, index]));
  const placed = (part: PartId | undefined): object => {
    const anchor = part === undefined ? undefined : set.anchors.get(part);
    const page = anchor && pageOf.get(anchor.sheet);
    if (!anchor || page === undefined) return { pageNumber: 0, fit: true };
    const { left, top } = corner(anchor.box);
    // The writer takes `left` as the distance from the right edge of the page.
    return { pageNumber: page, left: (set.sheets[page] as DrawnSheet).size.width * pt - left, top };
  };
  if (set.sheets.length === 0) return;
  for (const [index, sheet] of set.sheets.entries()) {
    root.addItem([`Sheet ${sheet.number}`, sheet.title].filter((part) => part !== "").join(" – "), { pageNumber: index, fit: true });
  }
  if (set.outline.length === 0) return;
  const devices = root.addItem("Devices", { pageNumber: 0, fit: true });
  for (const { device, title, home, uses } of set.outline) {
    const item = devices.addItem([device, title].filter((part) => part !== "").join(" – "), placed(home ?? uses[0]?.part));
    for (const use of uses) item.addItem(use.title, placed(use.part));
  }
}

function addPageLabels(document: Document, set: DrawingSet): void {
  const labels = set.sheets.flatMap((sheet, index) => [index, { S: "D", St: sheet.number }]);
  const catalogue = (document as unknown as { _root: { data: Record<string, unknown> } })._root.data;
  if (labels.length > 0) catalogue.PageLabels = document.ref({ Nums: labels });
  (catalogue.PageLabels as { end(): void } | undefined)?.end();
  catalogue.PageMode = "UseOutlines";
}
