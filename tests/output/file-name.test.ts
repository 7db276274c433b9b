import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { fileStem, sheetFileName } from "../../src/output/file-name.js";

describe("file names", () => {
  test.each([
    ["TS-2040", "TS-2040"],
    ["../../etc/passwd", "etc-passwd"],
    ["A/B: 1*2", "A-B-1-2"],
    ["Größe 12", "Große-12"],
    ["con", "drawing-con"],
    ["  ", "Tray-stamper"],
    ["…", "Tray-stamper"],
  ])("%s gives %s", (number, stem) => {
    expect(fileStem({ number, title: "Tray stamper" })).toBe(stem);
  });

  test("a drawing without number and title still has one", () => {
    expect(sheetFileName({ number: "", title: "" }, 3)).toBe("drawing_sheet-3.svg");
  });

  test("never holds what a system could take for a path", () => {
    fc.assert(
      fc.property(fc.string({ unit: "binary" }), fc.string({ unit: "binary" }), (number, title) => {
        expect(fileStem({ number, title })).toMatch(/^[\p{L}\p{N}_][\p{L}\p{N}._-]*$/u);
        expect(fileStem({ number, title }).length).toBeLessThanOrEqual(90);
      }),
    );
  });
});
