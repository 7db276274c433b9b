import { readFileSync } from "node:fs";
import fc from "fast-check";
import { create } from "fontkit";
import { describe, expect, test } from "vitest";
import * as metrics from "../../src/drawing/font-metrics.js";
import { fitText, fontSize, measureText, printable, wrapText } from "../../src/drawing/text.js";

const load = (name: string) => create(readFileSync(new URL(`../../templates/fonts/${name}`, import.meta.url)));
const faces = { regular: load("SourceSans3-Regular.ttf"), bold: load("SourceSans3-SemiBold.ttf") };

/** Width of a text by fontkit: the advances of its glyphs without kerning or ligatures. */
function widthByFontkit(text: string, height: number, bold = false): number {
  const face = bold ? faces.bold : faces.regular;
  const size = (height * face.unitsPerEm) / face.capHeight;
  return face.glyphsForString(text).reduce((sum, glyph) => sum + glyph.advanceWidth, 0) * (size / face.unitsPerEm);
}

describe("the table of widths, held against the font itself by fontkit", () => {
  test("has the font's own heights", () => {
    expect(metrics.capHeight).toBe(faces.regular.capHeight);
    expect(metrics.capHeight).toBe(faces.bold.capHeight);
    expect(metrics.ascent).toBe(faces.regular.ascent);
    expect(metrics.descent).toBe(-faces.regular.descent);
  });

  test.each(["regular", "bold"] as const)("has the advance of every character of the %s face", (name) => {
    const wrong = faces[name].characterSet
      .filter((code) => code >= 0x20 && !(code >= 0x7f && code < 0xa0))
      .map((code) => String.fromCodePoint(code))
      .filter((character) => printable(character) === character)
      .filter(
        (character) => Math.abs(measureText(character, 2.5, name === "bold") - widthByFontkit(character, 2.5, name === "bold")) > 1e-9,
      );
    expect(wrong).toEqual([]);
  });

  test("a text is as wide as fontkit's glyphs set without kerning", () => {
    for (const text of ["CR12", "AVATAR Toggle fi fl", "63 mm × 25 °C ±5 µm Ø", "Hübe Łódź Größe Ωμέγα", "13-14"]) {
      expect(measureText(text, 3.5)).toBeCloseTo(widthByFontkit(text, 3.5), 9);
      expect(measureText(text, 3.5, true)).toBeCloseTo(widthByFontkit(text, 3.5, true), 9);
    }
  });

  test("capitals are as high as asked", () => {
    const { minY, maxY } = faces.regular.glyphForCodePoint("H".codePointAt(0) as number).bbox;
    expect(((maxY - minY) / faces.regular.unitsPerEm) * fontSize(2.5)).toBeCloseTo(2.5, 1);
  });
});

describe("what is drawn for characters that cannot be", () => {
  test.each([
    ["emoji", "Go 😀!", "Go □!"],
    ["an emoji of several parts", "👩‍🔧", "□□"],
    ["right-to-left text", "שלום", "□□□□"],
    ["a direction override", "a\u202eb", "ab"],
    ["a control character", "a\u0007b", "ab"],
    ["line breaks and tabs", "a\r\nb\tc", "a b c"],
    ["a combining accent", "e\u0301", "é"],
    ["half a surrogate pair", "a\ud83d", "a□"],
    ["the diameter sign", "⌀40", "Ø40"],
    ["quotes and brackets", "\"<&>'", "\"<&>'"],
  ])("%s", (_, text, drawn) => {
    expect(printable(text)).toBe(drawn);
  });

  test("printing twice changes nothing more, and every width is a number", () => {
    fc.assert(
      fc.property(fc.string({ unit: "binary" }), (text) => {
        expect(printable(printable(text))).toBe(printable(text));
        expect(measureText(text, 2.5)).toBeGreaterThanOrEqual(0);
        expect(measureText(text, 2.5)).toBeCloseTo(measureText(printable(text), 2.5), 9);
      }),
    );
  });
});

const words = fc.array(fc.string({ minLength: 1, maxLength: 14 }), { maxLength: 12 }).map((parts) => parts.join(" "));

describe("fitting", () => {
  test("leaves a text that fits as it is", () => {
    expect(fitText("CR1", 2.5, measureText("CR1", 2.5))).toBe("CR1");
  });

  test("shortens with an ellipsis", () => {
    expect(fitText("Clamp the tray before stamping", 2.5, 20)).toMatch(/^Clamp.*[^ ]…$/);
    expect(fitText("Clamp", 2.5, 0.5)).toBe("");
  });

  test("is never wider than its room", () => {
    fc.assert(
      fc.property(words, fc.double({ min: 0, max: 60, noNaN: true }), fc.boolean(), (text, width, bold) => {
        expect(measureText(fitText(text, 2.5, width, bold), 2.5, bold)).toBeLessThanOrEqual(width + 0.002);
      }),
    );
  });
});

describe("wrapping", () => {
  test("breaks at spaces", () => {
    expect(wrapText("Clamp the tray", 2.5, measureText("Clamp the", 2.5), 3)).toEqual(["Clamp the", "tray"]);
  });

  test("keeps line breaks and shortens what is over", () => {
    expect(wrapText("one\ntwo", 2.5, 50, 5)).toEqual(["one", "two"]);
    expect(wrapText("one two three four", 2.5, measureText("three", 2.5), 2)).toEqual(["one", expect.stringMatching(/^tw.*…$/)]);
    expect(wrapText("one", 2.5, 50, 0)).toEqual([]);
  });

  test("gives lines within the room, and with lines enough loses no letter", () => {
    fc.assert(
      fc.property(words, fc.double({ min: 8, max: 60, noNaN: true }), fc.integer({ min: 1, max: 4 }), (text, width, most) => {
        const few = wrapText(text, 2.5, width, most);
        expect(few.length).toBeLessThanOrEqual(most);
        for (const line of few) expect(measureText(line, 2.5)).toBeLessThanOrEqual(width + 0.002);
        const letters = (s: string) => printable(s).replace(/\s/g, "");
        expect(letters(wrapText(text, 2.5, width, 1000).join(""))).toBe(letters(text));
      }),
    );
  });
});
