import { describe, expect, test } from "vitest";
import type { Mark } from "../../src/drawing/marks.js";
import { boundsByPart } from "../../src/sheets/bounds.js";
import { frameMarks } from "../../src/sheets/frame.js";
import { fieldBorders, pageArea, pageOf, zoneOf } from "../../src/sheets/page.js";
import { type Paper, papers } from "../../src/sheets/paper.js";
import { handMade } from "./hand-made.js";

const all = Object.values(papers);
const bounds = (marks: Mark[]) => boundsByPart(marks.map((mark) => ({ ...mark, part: "all" }))).get("all");

describe("sheet sizes", () => {
  test.each([
    ["A4", 210, 297],
    ["A3", 420, 297],
    ["A2", 594, 420],
    ["A1", 841, 594],
    ["A0", 1189, 841],
  ] as const)("%s is %d × %d mm (ISO 216, trimmed sizes of ISO 5457)", (name, width, height) => {
    expect(papers[name].size).toEqual({ width, height });
  });

  test.each([
    ["ANSI-A", 11, 8.5],
    ["ANSI-B", 17, 11],
    ["ANSI-C", 22, 17],
    ["ANSI-D", 34, 22],
    ["ANSI-E", 44, 34],
  ] as const)("%s is %d × %d in (ASME Y14.1)", (name, width, height) => {
    expect(papers[name].size.width / 25.4).toBeCloseTo(width, 9);
    expect(papers[name].size.height / 25.4).toBeCloseTo(height, 9);
  });
});

describe("frames after ISO 5457 (from memory)", () => {
  const iso = all.filter((paper) => paper.standard === "iso");

  test.each(iso.map((paper) => [paper.name, paper] as const))(
    "%s: 20 mm at the filing side, 10 mm elsewhere, drawn 0.7 mm wide",
    (_, paper) => {
      const { frame } = pageOf(paper);
      expect(frame).toEqual({ x: 20, y: 10, width: paper.size.width - 30, height: paper.size.height - 20 });
      expect(frameMarks(pageOf(paper)).find(({ role }) => role === "frame")).toMatchObject({ width: 0.7 });
    },
  );

  test.each([
    ["A0", 24, 16],
    ["A1", 16, 12],
    ["A2", 12, 8],
    ["A3", 8, 6],
  ] as const)("%s has %d × %d fields", (name, across, down) => {
    expect(papers[name].zones).toEqual({ across, down });
  });

  test("A4 upright has 4 × 6 fields", () => {
    expect(papers.A4.zones).toEqual({ across: 4, down: 6 });
  });

  test.each(iso.map((paper) => [paper.name, paper] as const))("%s: fields are 50 mm, counted from the centring marks", (_, paper) => {
    for (const [side, length] of [
      ["across", paper.size.width],
      ["down", paper.size.height],
    ] as const) {
      const borders = fieldBorders(paper, side);
      expect(borders).toContain(length / 2);
      for (let i = 1; i < borders.length; i++) expect((borders[i] as number) - (borders[i - 1] as number)).toBeCloseTo(50, 9);
    }
  });

  test("letters run down from the top and leave out I and O, numbers run from the left", () => {
    expect(zoneOf(papers.A3, { x: 25, y: 15 })).toBe("A1");
    expect(zoneOf(papers.A3, { x: 405, y: 285 })).toBe("F8");
    const letters = new Set(Array.from({ length: 841 }, (_, y) => zoneOf(papers.A0, { x: 30, y }).charAt(0)));
    expect([...letters].join("")).toBe("ABCDEFGHJKLMNPQR");
  });

  test("four centring marks at the middles of the sides", () => {
    const marks = frameMarks(pageOf(papers.A3)).filter(({ role }) => role === "centring");
    expect(marks).toHaveLength(4);
    const ends = marks.map((mark) => (mark.kind === "stroke" ? mark.path[0] : undefined));
    expect(ends).toMatchObject([
      { x: 210, y: 5 },
      { x: 210, y: 292 },
      { x: 15, y: 148.5 },
      { x: 415, y: 148.5 },
    ]);
  });
});

describe("frames after ASME Y14.1 (from memory)", () => {
  test.each([
    ["ANSI-B", 0.62, 0.38, 4, 2],
    ["ANSI-C", 0.5, 0.75, 4, 4],
    ["ANSI-D", 1, 0.5, 8, 4],
    ["ANSI-E", 0.5, 1, 8, 8],
  ] as const)("%s has margins of %d and %d in and %d × %d zones", (name, sides, ends, across, down) => {
    const { margin, zones } = papers[name];
    expect(margin.left / 25.4).toBeCloseTo(sides, 9);
    expect(margin.top / 25.4).toBeCloseTo(ends, 9);
    expect(zones).toEqual({ across, down });
  });

  test("zones start at the title block: A1 is at the lower right", () => {
    const { width, height } = papers["ANSI-D"].size;
    expect(zoneOf(papers["ANSI-D"], { x: width - 30, y: height - 20 })).toBe("A1");
    expect(zoneOf(papers["ANSI-D"], { x: 30, y: 20 })).toBe("D8");
  });
});

describe.each(all.map((paper) => [paper.name, paper] as [string, Paper]))("%s", (_, paper) => {
  const page = pageOf(paper);

  test("nothing of the frame leaves the sheet", () => {
    const box = bounds(frameMarks(page));
    expect(box?.x).toBeGreaterThanOrEqual(0);
    expect(box?.y).toBeGreaterThanOrEqual(0);
    expect((box?.x ?? 0) + (box?.width ?? 0)).toBeLessThanOrEqual(paper.size.width);
    expect((box?.y ?? 0) + (box?.height ?? 0)).toBeLessThanOrEqual(paper.size.height);
  });

  test("the circuit's area is clear of the frame, its marks and the strip below", () => {
    const { area, frame, notes, titleBlock } = page;
    expect(area.x).toBeGreaterThanOrEqual(frame.x + 5);
    expect(area.x + area.width).toBeLessThanOrEqual(frame.x + frame.width - 5);
    expect(area.y + area.height).toBeLessThanOrEqual(Math.min(notes.y, titleBlock.y) - 4);
    expect(area.height).toBeGreaterThan(120);
    expect(area.width).toBeGreaterThan(150);
  });

  test("notes, revisions and title block stand side by side without a gap", () => {
    const { notes, revisions, titleBlock, frame } = page;
    expect(notes.x).toBe(frame.x);
    expect(revisions.x).toBeCloseTo(notes.x + notes.width, 9);
    expect(titleBlock.x + titleBlock.width).toBeCloseTo(frame.x + frame.width, 9);
    const width = notes.width + revisions.width;
    expect(width).toBeCloseTo(paper.titleBlock.wholeWidth ? frame.width : frame.width - titleBlock.width, 9);
  });

  test("every zone name that the frame shows names the zone beside it", () => {
    for (const mark of frameMarks(page)) {
      if (mark.kind !== "text") continue;
      const inside = {
        x: Math.min(Math.max(mark.at.x, page.frame.x), page.frame.x + page.frame.width),
        y: Math.min(Math.max(mark.at.y - 1.75, page.frame.y), page.frame.y + page.frame.height),
      };
      expect(zoneOf(paper, inside)).toContain(mark.text);
    }
  });
});

test("the area of a drawing is that of its paper", () => {
  const { drawing } = handMade({ paper: "A2" }).machine;
  expect(pageArea(drawing).area).toEqual(pageOf(papers.A2).area);
  expect(pageArea(drawing).zoneOf({ x: 25, y: 15 })).toBe("A1");
});
