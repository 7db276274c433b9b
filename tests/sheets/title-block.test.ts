import { describe, expect, test } from "vitest";
import { textBox } from "../../src/drawing/extent.js";
import type { Box } from "../../src/drawing/geometry.js";
import type { Mark } from "../../src/drawing/marks.js";
import { pageOf } from "../../src/sheets/page.js";
import { papers } from "../../src/sheets/paper.js";
import { fillTemplate, parseTemplate, readTemplate, templateNames } from "../../src/sheets/template.js";
import { stripMarks, titleFields } from "../../src/sheets/title-block.js";
import { assets } from "../support/assets.js";
import { handMade } from "./hand-made.js";

type TextMark = Mark & { kind: "text" };
const texts = (marks: Mark[]) => marks.filter((mark): mark is TextMark => mark.kind === "text");
const overlap = (a: Box, b: Box) => a.x < b.x + b.width && b.x < a.x + a.width && a.y < b.y + b.height && b.y < a.y + a.height;

describe("templates", () => {
  test("all that are carried can be read and are no larger than their place", () => {
    expect(templateNames(assets)).toEqual(["asme", "asme-large", "iso"]);
    for (const paper of Object.values(papers)) {
      const { size } = readTemplate(paper.titleBlock.template, assets);
      expect(size.width).toBeCloseTo(paper.titleBlock.size.width, 1);
      expect(size.height).toBeCloseTo(paper.titleBlock.size.height, 1);
    }
  });

  test("the A-size block is 180 mm wide and has the eight fields ISO 7200 asks for (from memory)", () => {
    const { size, texts } = readTemplate("iso", assets);
    expect(size.width).toBe(180);
    const fields = texts.map(({ field }) => field);
    for (const field of ["owner", "number", "date", "sheet", "title", "approved-by", "creator", "document-type"])
      expect(fields).toContain(field);
  });

  test("every field of every template is one that is filled", () => {
    const known = Object.keys(titleFields(handMade().machine.drawing, { number: 1, title: "", count: 1 }));
    for (const name of templateNames(assets)) {
      for (const { field } of readTemplate(name, assets).texts) if (field !== undefined) expect(known).toContain(field);
    }
  });

  test("what cannot stand in a template is named", () => {
    expect(() => parseTemplate("mine", '<svg viewBox="0 0 9 9"><circle r="2"/></svg>')).toThrow(
      "Template mine: <circle> cannot stand in a template.",
    );
    expect(() => parseTemplate("mine", '<svg viewBox="0 0 9 9"><path d="M0 0Q1 1 2 2"/></svg>')).toThrow("path command Q");
    expect(() => parseTemplate("mine", "<svg viewBox='0 0 9 9'><text>")).toThrow("Template mine");
    expect(() => parseTemplate("mine", "<svg/>")).toThrow("no size");
  });

  test("a text is set smaller before it is shortened", () => {
    const template = parseTemplate(
      "mine",
      '<svg viewBox="0 0 60 9"><text font-size="7.576" data-field="title" data-width="50" data-smallest="2.5">x</text></svg>',
    );
    const filled = (title: string) => texts(fillTemplate(template, { x: 0, y: 0 }, { title }))[0];
    expect(filled("Tray stamper")).toMatchObject({ text: "Tray stamper", height: 5 });
    expect(filled("Tray stamper, station 2")).toMatchObject({ text: "Tray stamper, station 2", height: 2.5 });
    expect(filled("Tray stamper, station 2, upper and lower half")).toMatchObject({ text: expect.stringMatching(/…$/), height: 2.5 });
    expect(filled("")).toBeUndefined();
  });

  test("lines of a path go where they say", () => {
    const { strokes } = parseTemplate("mine", '<svg viewBox="0 0 9 9"><path d="M1 2H5V6L0 0Z" stroke-width="0.5"/></svg>');
    expect(strokes).toEqual([
      {
        width: 0.5,
        path: [{ op: "M", x: 1, y: 2 }, { op: "L", x: 5, y: 2 }, { op: "L", x: 5, y: 6 }, { op: "L", x: 0, y: 0 }, { op: "Z" }],
      },
    ]);
  });
});

const long = "A very long text that no cell of any title block was ever made to hold in one line, and longer still";

describe.each(Object.values(papers).map((paper) => [paper.name, paper] as const))("the strip of %s", (name, paper) => {
  const page = pageOf(paper);
  const template = readTemplate(paper.titleBlock.template, assets);
  const strip = (say: string, revisions: number, notes: string[]) => {
    const drawing = handMade({
      paper: name,
      title: say,
      number: say,
      owner: say,
      creator: say,
      approvedBy: say,
      department: say,
      documentType: say,
      status: say,
      language: "en",
      revisions: Array.from({ length: revisions }, (_, i) => ({ index: String.fromCharCode(65 + i), date: "2026-04-09", text: say })),
    }).machine.drawing;
    return stripMarks(page, template, drawing, { number: 12, title: say, count: 148, notes });
  };

  test.each([
    ["short texts", "Lift", 2, ["One note."]],
    ["long texts", long, 30, Array.from({ length: 30 }, (_, i) => `${long} ${i}`)],
  ])("holds %s: none over another, none over a line, none outside the frame", (_, say, revisions, notes) => {
    const marks = strip(say, revisions, notes);
    const boxes = texts(marks).map((mark) => ({ mark, box: textBox(mark) }));
    expect(boxes.length).toBeGreaterThan(15);
    for (const [i, { mark, box }] of boxes.entries()) {
      for (const other of boxes.slice(i + 1)) expect(overlap(box, other.box), `${mark.text} over ${other.mark.text}`).toBe(false);
      expect(box.x).toBeGreaterThan(page.frame.x);
      expect(box.x + box.width).toBeLessThan(page.frame.x + page.frame.width);
      expect(box.y + box.height).toBeLessThan(page.frame.y + page.frame.height);
      expect(box.y).toBeGreaterThan(page.notes.y);
      for (const stroke of marks) {
        if (stroke.kind !== "stroke") continue;
        for (let s = 1; s < stroke.path.length; s++) {
          const [a, b] = [stroke.path[s - 1], stroke.path[s]];
          if (!a || !b || a.op === "Z" || b.op !== "L") continue;
          const line = { x: Math.min(a.x, b.x), y: Math.min(a.y, b.y), width: Math.abs(a.x - b.x), height: Math.abs(a.y - b.y) };
          expect(overlap(box, line), `${mark.text} over a line`).toBe(false);
        }
      }
    }
  });

  test("shows the latest revisions when there are more than rows", () => {
    const shown = texts(strip("Lift", 30, [])).map(({ text }) => text);
    expect(shown).toContain(String.fromCharCode(65 + 29));
    expect(shown).not.toContain("G");
  });

  test("says which sheet of how many", () => {
    const shown = texts(strip("Lift", 1, [])).map(({ text }) => text);
    expect(shown).toContain(paper.standard === "iso" ? "12/148" : "12 OF 148");
  });
});
