import type { Mm, Point } from "../drawing/geometry.js";
import type { Mark } from "../drawing/marks.js";
import { polyline, rectangle } from "../drawing/path.js";
import { centringReach, fieldBorders, fieldName, type Page } from "./page.js";
import type { Paper } from "./paper.js";

const frameWidth: Mm = 0.7;
const zoneWidth: Mm = 0.35;
const zoneText: Mm = 3.5;
/** Breadth of the band with the zone names around the frame, ISO 5457. */
const isoBand: Mm = 5;

/** The frame of a sheet with its centring marks and zones. */
export function frameMarks(page: Page): Mark[] {
  const { frame, paper } = page;
  const marks: Mark[] = [{ kind: "stroke", role: "frame", path: rectangle(frame), width: frameWidth }];
  const band = bandOf(paper);
  const outer = {
    x: frame.x - band.left,
    y: frame.y - band.top,
    width: frame.width + band.left + band.right,
    height: frame.height + band.top + band.bottom,
  };
  if (paper.standard === "iso") marks.push({ kind: "stroke", role: "zone", path: rectangle(outer), width: zoneWidth });
  marks.push(...zoneMarks(page, band), ...centringMarks(page, outer));
  return marks;
}

/** Breadth of the zone band on each side. */
function bandOf(paper: Paper): Paper["margin"] {
  if (paper.standard === "iso") return { left: isoBand, right: isoBand, top: isoBand, bottom: isoBand };
  const { left, right, top, bottom } = paper.margin;
  // Y14.1 puts the names between the border and the edge of the sheet.
  const most = 8;
  return { left: Math.min(left, most), right: Math.min(right, most), top: Math.min(top, most), bottom: Math.min(bottom, most) };
}

function zoneMarks({ frame, paper }: Page, band: Paper["margin"]): Mark[] {
  const marks: Mark[] = [];
  const right = frame.x + frame.width;
  const bottom = frame.y + frame.height;
  // Small ISO sheets name their zones at the top and the right only.
  const bothSides = paper.name !== "A4";
  const tick = (from: Point, to: Point): Mark => ({ kind: "stroke", role: "zone", path: polyline([from, to]), width: zoneWidth });
  const name = (text: string, x: Mm, y: Mm): Mark => ({
    kind: "text",
    role: "zone",
    at: { x, y: y + zoneText / 2 },
    text,
    height: zoneText,
    anchor: "middle",
  });
  // Ticks of the inch sheets stop short of the trimmed edge, where a cut could make them ragged.
  const reach = paper.standard === "iso" ? 1 : 0.6;

  const across = fieldBorders(paper, "across").filter((x) => x > frame.x && x < right);
  for (const x of across) {
    marks.push(tick({ x, y: frame.y }, { x, y: frame.y - band.top * reach }));
    if (bothSides) marks.push(tick({ x, y: bottom }, { x, y: bottom + band.bottom * reach }));
  }
  for (const { index, middle } of fields(paper, "across", frame.x, right)) {
    marks.push(name(fieldName(paper, "across", index), middle, frame.y - band.top / 2));
    if (bothSides) marks.push(name(fieldName(paper, "across", index), middle, bottom + band.bottom / 2));
  }
  const down = fieldBorders(paper, "down").filter((y) => y > frame.y && y < bottom);
  for (const y of down) {
    marks.push(tick({ x: right, y }, { x: right + band.right * reach, y }));
    if (bothSides) marks.push(tick({ x: frame.x, y }, { x: frame.x - band.left * reach, y }));
  }
  for (const { index, middle } of fields(paper, "down", frame.y, bottom)) {
    marks.push(name(fieldName(paper, "down", index), right + band.right / 2, middle));
    if (bothSides) marks.push(name(fieldName(paper, "down", index), frame.x - band.left / 2, middle));
  }
  return marks;
}

/** The fields of a side that the frame shows, with the middle of what it shows. */
function fields(paper: Paper, side: "across" | "down", from: Mm, to: Mm): { index: number; middle: Mm }[] {
  const borders = [Number.NEGATIVE_INFINITY, ...fieldBorders(paper, side), Number.POSITIVE_INFINITY];
  const shown: { index: number; middle: Mm }[] = [];
  for (let index = 0; index + 1 < borders.length; index++) {
    const start = Math.max(from, borders[index] as Mm);
    const end = Math.min(to, borders[index + 1] as Mm);
    if (end - start >= zoneText) shown.push({ index, middle: (start + end) / 2 });
  }
  return shown;
}

/** At the middles of the sheet's sides; the lower one stops at the frame, for the strip with the title block stands on it. */
function centringMarks(page: Page, outer: { x: Mm; y: Mm; width: Mm; height: Mm }): Mark[] {
  const { frame, paper } = page;
  const x = paper.size.width / 2;
  const y = paper.size.height / 2;
  const right = frame.x + frame.width;
  const bottom = frame.y + frame.height;
  const inward = paper.standard === "iso" ? centringReach : 0;
  const mark = (from: Point, to: Point): Mark => ({ kind: "stroke", role: "centring", path: polyline([from, to]), width: frameWidth });
  return [
    mark({ x, y: outer.y }, { x, y: frame.y + inward }),
    mark({ x, y: outer.y + outer.height }, { x, y: bottom }),
    mark({ x: outer.x, y }, { x: frame.x + inward, y }),
    mark({ x: outer.x + outer.width, y }, { x: right - inward, y }),
  ];
}
