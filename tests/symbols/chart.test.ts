import { describe, expect, test } from "vitest";
import { textBox } from "../../src/drawing/extent.js";
import type { Mark } from "../../src/drawing/marks.js";
import { pageOf } from "../../src/sheets/page.js";
import { papers } from "../../src/sheets/paper.js";
import { symbolChart } from "../../src/sheets/symbol-chart.js";
import { composedExamples } from "../../src/symbols/examples.js";
import { openSymbols } from "../../src/symbols/library.js";
import { powerExamples } from "../../src/symbols/power-examples.js";
import { assets } from "../support/assets.js";

const set = symbolChart(assets);
const texts = (marks: readonly Mark[], ...roles: string[]) =>
  marks.flatMap((mark) => (mark.kind === "text" && roles.includes(mark.role ?? "") ? [mark] : []));

describe("the symbol chart", () => {
  test("names every symbol there is, whole", () => {
    const named = set.sheets.flatMap(({ marks }) => texts(marks, "name").map(({ text }) => text));
    const wanted = [
      ...openSymbols(assets)
        .names()
        .map((name) => name.replace(/^[^/]+\//, "")),
      ...[...powerExamples(openSymbols(assets)), ...composedExamples()].flatMap(({ examples }) => examples.map(({ name }) => name)),
    ];
    expect([...named].sort()).toEqual([...wanted].sort());
  });

  test("keeps within the frame, names and titles clear of each other", () => {
    const { area } = pageOf(papers.A3);
    for (const { marks } of set.sheets) {
      const words = texts(marks, "heading", "name", "title");
      for (const word of words) {
        const box = textBox(word);
        expect(box.x).toBeGreaterThanOrEqual(area.x - 0.01);
        expect(box.x + box.width).toBeLessThanOrEqual(area.x + area.width + 0.01);
        expect(box.y).toBeGreaterThanOrEqual(area.y - 0.01);
        expect(box.y + box.height).toBeLessThanOrEqual(area.y + area.height + 0.01);
      }
      const boxes = words.map((word) => ({ text: word.text, ...textBox(word) }));
      const overlapping = boxes.filter((a, i) =>
        boxes.slice(0, i).some((b) => a.x < b.x + b.width && b.x < a.x + a.width && a.y < b.y + b.height && b.y < a.y + a.height),
      );
      expect(overlapping).toEqual([]);
    }
  });

  test("is the same each time, its sheets numbered and headed", () => {
    expect(symbolChart(assets)).toEqual(set);
    expect(set.sheets.map(({ number }) => number)).toEqual(set.sheets.map((_, index) => index + 1));
    for (const { marks } of set.sheets) expect(texts(marks, "heading").length).toBeGreaterThan(0);
  });
});
