import fc from "fast-check";
import { SaxesParser } from "saxes";
import { describe, expect, test } from "vitest";
import { measureText } from "../../src/drawing/text.js";
import { decimal, partElementId, pathData, writeSvg } from "../../src/output/svg.js";
import { assets } from "../support/assets.js";
import { exampleSet, oddTexts, setSaying } from "./example.js";

interface Found {
  name: string;
  attributes: Record<string, string>;
  text: string;
}

/** Every element in order, read by an XML parser that throws at anything not well-formed. */
function elements(xml: string): Found[] {
  const found: Found[] = [];
  const open: Found[] = [];
  const parser = new SaxesParser();
  parser.on("error", (error) => {
    throw error;
  });
  parser.on("opentag", ({ name, attributes }) => {
    const element = { name, attributes: attributes as Record<string, string>, text: "" };
    found.push(element);
    open.push(element);
  });
  parser.on("text", (text) => {
    const element = open.at(-1);
    if (element) element.text += text;
  });
  parser.on("closetag", () => open.pop());
  parser.write(xml).close();
  return found;
}

const sheets = await writeSvg(exampleSet(), assets);
const [first, second] = sheets.map(({ text }) => elements(text)) as [Found[], Found[]];

describe("SVG sheets", () => {
  test("one file a sheet, named after the drawing number", () => {
    expect(sheets.map(({ name }) => name)).toEqual(["CL-1_sheet-1.svg", "CL-1_sheet-2.svg"]);
  });

  test("true millimetres", () => {
    expect(first[0]?.attributes).toMatchObject({ width: "150mm", height: "105mm", viewBox: "0 0 150 105", lang: "en" });
  });

  test("the title names drawing and sheet", () => {
    expect(first.find(({ name }) => name === "title")?.text).toBe("CL-1 · Crate lifter · Control · sheet 1 of 2");
  });

  test("a part is one group with its id, its device and all that belongs to it", () => {
    const groups = first.filter(({ name, attributes }) => name === "g" && attributes["data-part"] === "CR1");
    expect(groups).toHaveLength(1);
    expect(groups[0]?.attributes).toMatchObject({ id: "part-CR1", class: "part symbol designation function", "data-device": "CR1" });
    expect(second.find(({ attributes }) => attributes["data-part"] === "CR1:13-14")?.attributes).toMatchObject({ id: "part-CR1_3a_13-14" });
  });

  test("strokes that look alike are one path", () => {
    const wires = first.filter(({ attributes }) => attributes.class === "wire");
    expect(wires.map(({ attributes }) => attributes.d)).toEqual(["M20 30L60 30L60 50"]);
  });

  test("text stays text, held to its measure", () => {
    const text = first.find((element) => element.text.startsWith("Start"));
    expect(text?.text).toBe("Start <& \"go\"> 'AV' fi");
    expect(Number(text?.attributes.textLength)).toBeCloseTo(measureText("Start <& \"go\"> 'AV' fi", 3.5), 2);
  });

  test("links lead to parts that are there, in this file and in others; one to nothing is left out", () => {
    const links = [...first, ...second].filter(({ name }) => name === "a").map(({ attributes }) => attributes.href as string);
    expect(links).toEqual(["CL-1_sheet-2.svg#part-CR1_3a_13-14", "#part-CR1", "CL-1_sheet-1.svg#part-CR1"]);
    const ids = new Map(sheets.map(({ name }, index) => [name, new Set([first, second][index]?.map(({ attributes }) => attributes.id))]));
    expect(ids.get("CL-1_sheet-2.svg")).toContain("part-CR1_3a_13-14");
    expect(ids.get("CL-1_sheet-1.svg")).toContain("part-CR1");
  });

  test("the pieces of the font that are used are in the file, and no others", () => {
    const style = first.find(({ name }) => name === "style")?.text ?? "";
    const faces = style.match(/@font-face/g) ?? [];
    // Regular latin, bold latin, and the bold Ω.
    expect(faces).toHaveLength(3);
    expect(style).not.toContain("https:");
    expect(second.find(({ name }) => name === "style")?.text.match(/@font-face/g)).toHaveLength(1);
  });

  test("the same set gives the same bytes", async () => {
    expect(await writeSvg(exampleSet(), assets)).toEqual(sheets);
  });

  test("ids are unique in a file", () => {
    const ids = first.flatMap(({ attributes }) => attributes.id ?? []);
    expect(new Set(ids).size).toBe(ids.length);
  });

  test.each(oddTexts)("stays well-formed and inert with %j in every text", async (text) => {
    const [sheet] = await writeSvg(setSaying(text), assets);
    const found = elements(sheet?.text ?? "");
    expect(new Set(found.map(({ name }) => name))).toEqual(
      new Set(["svg", "title", "style", "rect", "g", ...(found.some(({ name }) => name === "text") ? ["text"] : []), "a"]),
    );
    for (const { attributes } of found) if (attributes.href) expect(attributes.href).toMatch(/^#part-[A-Za-z0-9._%-]*$/);
  });

  test("stays well-formed whatever the texts", async () => {
    await fc.assert(
      fc.asyncProperty(fc.string({ unit: "binary", maxLength: 30 }), async (text) => {
        const [sheet] = await writeSvg(setSaying(text), assets);
        elements(sheet?.text ?? "");
      }),
      { numRuns: 40, seed: 1 },
    );
  });
});

describe("parts of it", () => {
  test("numbers have at most three decimals, no exponent and no minus zero", () => {
    expect([1 / 3, -1e-9, 1e-7, 12, 1.0005, Number.NaN, Number.POSITIVE_INFINITY].map(decimal)).toEqual([
      "0.333",
      "0",
      "0",
      "12",
      "1.001",
      "0",
      "0",
    ]);
  });

  test("different parts have different ids", () => {
    fc.assert(
      fc.property(fc.string({ unit: "binary" }), fc.string({ unit: "binary" }), (a, b) => {
        if (a !== b) expect(partElementId(a)).not.toBe(partElementId(b));
        expect(partElementId(a)).toMatch(/^part-[A-Za-z0-9._-]*$/);
      }),
    );
  });

  test("paths", () => {
    expect(pathData([{ op: "M", x: 0, y: 0 }, { op: "A", radius: 4, large: true, sweep: false, x: 8, y: 0 }, { op: "Z" }])).toBe(
      "M0 0A4 4 0 1 0 8 0Z",
    );
  });
});

test("thousands of parts are written in time that grows with their number", async () => {
  const big = (count: number) => {
    const set = exampleSet();
    const sheet = set.sheets[0] as (typeof set.sheets)[number];
    sheet.marks = Array.from({ length: count }, (_, i) => [
      {
        kind: "stroke" as const,
        part: `p${i}`,
        path: [
          { op: "M" as const, x: i, y: 0 },
          { op: "L" as const, x: i, y: 9 },
        ],
        width: 0.25,
      },
      { kind: "text" as const, part: `p${i}`, at: { x: i, y: 5 }, text: `CR${i}`, height: 2.5, anchor: "start" as const },
    ]).flat();
    return { ...set, sheets: [sheet] };
  };
  const time = async (count: number) => {
    const start = performance.now();
    await writeSvg(big(count), assets);
    return performance.now() - start;
  };
  await time(500);
  const [small, large] = [Math.min(await time(1000), await time(1000)), await time(8000)];
  // Eight times as many parts: far below the 64 times of something that goes through all for each.
  expect(large / small).toBeLessThan(30);
}, 60_000);
