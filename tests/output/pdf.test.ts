import { SaxesParser } from "saxes";
import { describe, expect, test } from "vitest";
import { writePdf } from "../../src/output/pdf.js";
import { assets } from "../support/assets.js";
import { readPdf } from "../support/read-pdf.js";
import { have, pdfToText, qpdfCheck } from "../support/tools.js";
import { exampleSet, oddTexts, setSaying } from "./example.js";

const bytes = await writePdf(exampleSet(), assets);
const pdf = await readPdf(bytes);

describe("a PDF read back by pdfjs", () => {
  test("has a page of true size for each sheet", () => {
    const sizes = pdf.pages.map(({ sizeMm }) => sizeMm.map((length) => Math.round(length * 100) / 100));
    expect(sizes).toEqual([
      [150, 105],
      [105, 150],
    ]);
  });

  test("says what it is", () => {
    expect(pdf).toMatchObject({
      title: "CL-1, Crate lifter",
      author: "T. Varga",
      subject: "Circuit diagram",
      keywords: "CL-1, revision B, circuit diagram",
      language: "en",
      labels: ["1", "2"],
    });
    expect(pdf.created).toMatch(/^D:20260409000000/);
  });

  test("without a date of the drawing the clock is not asked", async () => {
    const set = exampleSet();
    set.info.date = "";
    expect((await readPdf(await writePdf(set, assets))).created).toMatch(/^D:20000101000000/);
  });

  test("keeps its text", () => {
    // pdfjs gives text back in compatibility form, the micro sign as mu.
    const texts = pdf.pages[0]?.texts;
    for (const text of ["CR1", "Start <& \"go\"> 'AV' fi", "207", "6 bar upward", "Clamp, größer Ωµ"])
      expect(texts).toContain(text.normalize("NFKC"));
  });

  test("links coil and contact both ways, and leaves out a link to nothing", () => {
    const there = pdf.pages[0]?.links ?? [];
    expect(there).toHaveLength(2);
    expect(there[0]?.page).toBe(2);
    expect(there[0]?.box.map(Math.round)).toEqual([130, 46, 6, 5]);
    const back = pdf.pages[1]?.links ?? [];
    expect(back).toHaveLength(1);
    expect(back[0]?.page).toBe(1);
    // The reader lands a little up and left of the coil at (76, 26).
    expect(back[0]?.at.map(Math.round)).toEqual([56, 6]);
  });

  test("has an outline by sheet and by device", () => {
    expect(pdf.outline).toEqual([
      { title: "Sheet 1 – Control", page: 1, items: [] },
      { title: "Sheet 2 – Outputs", page: 2, items: [] },
      {
        title: "Devices",
        page: 1,
        items: [{ title: "CR1 – Running", page: 1, items: [{ title: "NO 13-14, sheet 2, line 201", page: 2, items: [] }] }],
      },
    ]);
  });

  test("is the same, byte for byte, each time", async () => {
    expect(Buffer.compare(bytes, await writePdf(exampleSet(), assets))).toBe(0);
  });

  test.each(oddTexts)("can be read with %j in every text", async (text) => {
    const read = await readPdf(await writePdf(setSaying(text), assets));
    expect(read.pages).toHaveLength(1);
    expect(read.pages[0]?.links).toHaveLength(1);
  });

  test.each(oddTexts)("has well-formed metadata with %j in every text", async (text) => {
    const xml =
      /<\?xpacket begin[\s\S]*<\?xpacket end[^>]*>/.exec(Buffer.from(await writePdf(setSaying(text), assets)).toString("utf8"))?.[0] ?? "";
    const said: string[] = [];
    const parser = new SaxesParser();
    parser.on("text", (part) => said.push(part));
    parser.on("error", (error) => {
      throw error;
    });
    parser.write(xml).close();
    const plain = text.replace(/[\p{Cc}\p{Cs}\ufffe\uffff]/gu, " ").trim();
    expect(said.join(" ").replace(/\s+/g, " ")).toContain(plain.replace(/\s+/g, " "));
  });
});

describe.skipIf(!have("qpdf"))("by qpdf --check (general-purpose reference tool)", () => {
  test("is clean", () => {
    expect(qpdfCheck(bytes)).toContain("No syntax or stream encoding errors found");
  });

  test.each(oddTexts)("is clean with %j in every text", async (text) => {
    expect(qpdfCheck(await writePdf(setSaying(text), assets))).toContain("No syntax or stream encoding errors found");
  });
});

describe.skipIf(!have("pdftotext"))("by pdftotext (general-purpose reference tool)", () => {
  test("designations and functions are found", () => {
    const text = pdfToText(bytes);
    for (const each of ["CR1", "Start <& \"go\"> 'AV' fi", "(101)", "Clamp, größer Ωµ"]) expect(text).toContain(each);
  });
});
