import { Resvg } from "@resvg/resvg-js";
import pixelmatch from "pixelmatch";
import { PNG } from "pngjs";
import { describe, expect, test } from "vitest";
import { writePdf } from "../../src/output/pdf.js";
import { writeSvg } from "../../src/output/svg.js";
import { assets } from "../support/assets.js";
import { chromiumPicture, have, haveBrowser, pdfToPicture } from "../support/tools.js";
import { exampleSet } from "./example.js";

const set = exampleSet();
const svg = (await writeSvg(set, assets)).map(({ text }) => text);
const pdf = await writePdf(set, assets);
/** Pixels a millimetre. */
const scale = 8;

function resvgPicture(text: string, width: number): PNG {
  const fontFiles = ["Regular", "SemiBold"].map(
    (face) => new URL(`../../templates/fonts/SourceSans3-${face}.ttf`, import.meta.url).pathname,
  );
  const font = { loadSystemFonts: false, fontFiles, defaultFontFamily: "Source Sans 3" };
  return PNG.sync.read(
    Buffer.from(new Resvg(text, { fitTo: { mode: "width", value: width }, font, background: "white" }).render().asPng()),
  );
}

/** Share of the dark pixels of either picture that have nothing dark within two pixels in the other. */
function unlike(a: PNG, b: PNG): number {
  expect([a.width, a.height]).toEqual([b.width, b.height]);
  const dark = (picture: PNG, x: number, y: number) => {
    if (x < 0 || y < 0 || x >= picture.width || y >= picture.height) return false;
    return (picture.data[(y * picture.width + x) * 4] as number) < 140;
  };
  let ink = 0;
  let alone = 0;
  for (const [one, other] of [
    [a, b],
    [b, a],
  ] as const) {
    for (let y = 0; y < one.height; y++) {
      for (let x = 0; x < one.width; x++) {
        if (!dark(one, x, y)) continue;
        ink++;
        let near = false;
        for (let dy = -2; dy <= 2 && !near; dy++) for (let dx = -2; dx <= 2 && !near; dx++) near = dark(other, x + dx, y + dy);
        if (!near) alone++;
      }
    }
  }
  expect(ink).toBeGreaterThan(500);
  return alone / ink;
}

describe.each([0, 1])("sheet of index %i looks the same", (index) => {
  const sheet = set.sheets[index] as (typeof set.sheets)[number];
  const [width, height] = [sheet.size.width * scale, sheet.size.height * scale];
  const byResvg = resvgPicture(svg[index] as string, width);

  test.skipIf(!haveBrowser())(
    "in resvg and Chromium",
    () => {
      expect(unlike(byResvg, chromiumPicture(svg[index] as string, width, height))).toBeLessThan(0.005);
    },
    60_000,
  );

  test.skipIf(!have("pdftoppm"))("as SVG and as PDF", () => {
    expect(unlike(byResvg, pdfToPicture(pdf, index + 1, width, height))).toBeLessThan(0.005);
  });
});

test("the comparison notices a text that is missing", () => {
  const sheet = svg[0] as string;
  const without = sheet.replace(/<text[^>]*>Clamp[^<]*<\/text>/, "");
  expect(without).not.toBe(sheet);
  const [a, b] = [resvgPicture(sheet, 1200), resvgPicture(without, 1200)];
  expect(unlike(a, b)).toBeGreaterThan(0.005);
  expect(pixelmatch(a.data, b.data, undefined, a.width, a.height)).toBeGreaterThan(100);
});
