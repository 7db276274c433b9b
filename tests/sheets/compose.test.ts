import { describe, expect, test } from "vitest";
import { textBox } from "../../src/drawing/extent.js";
import type { DrawingSet, Mark } from "../../src/drawing/marks.js";
import { measureText } from "../../src/drawing/text.js";
import type { Reference } from "../../src/layout/placement.js";
import type { Device } from "../../src/machine/model.js";
import { writePdf } from "../../src/output/pdf.js";
import { writeSvg } from "../../src/output/svg.js";
import { switchReference } from "../../src/schedules/cross-reference.js";
import type { ContactReference } from "../../src/schedules/rows.js";
import { composeSheets } from "../../src/sheets/compose.js";
import { assets } from "../support/assets.js";
import { readPdf } from "../support/read-pdf.js";
import { handMade } from "./hand-made.js";

type Made = ReturnType<typeof handMade>;
const compose = ({ machine, layout, rows }: Made) => composeSheets(machine, layout, rows, assets);
const sheetOf = (set: DrawingSet, number: number) => set.sheets.find((sheet) => sheet.number === number) as DrawingSet["sheets"][number];
const texts = (marks: readonly Mark[], role?: string) =>
  marks.filter((mark): mark is Mark & { kind: "text" } => mark.kind === "text" && (role === undefined || mark.role === role));
const said = (set: DrawingSet, number: number, role?: string) => texts(sheetOf(set, number).marks, role).map(({ text }) => text);
const links = (set: DrawingSet, number: number) => sheetOf(set, number).marks.flatMap((mark) => (mark.kind === "link" ? [mark] : []));

/** The only reference to something on a sheet, to be changed by a test. */
function reference(made: Made, to: Reference["to"]): Reference {
  for (const sheet of made.layout.sheets) for (const { text } of sheet.texts) if (typeof text !== "string" && text.to === to) return text;
  throw new Error(to);
}

test("the cross-reference shows declared contacts that no rung uses as spare", () => {
  const made = handMade();
  const [row] = made.rows;
  if (!row) throw new Error("no row");
  row.spare = [
    { type: "NO", terminals: "43-44" },
    { type: "NC", timed: true, terminals: "55-56" },
  ];
  const set = compose(made);
  const last = set.sheets.at(-1)?.number ?? 0;
  expect(said(set, last).join(" ")).toContain("43-44  spare");
  expect(said(set, last).join(" ")).toContain("55-56 timed  spare");
});

describe("references", () => {
  const set = compose(handMade());

  test("under a contact stands its coil's line in brackets", () => {
    expect(said(set, 1, "reference")).toContain("(101)");
    expect(said(set, 2, "reference")).toContain("(101)");
  });

  test("at a switch the cylinder that works it, with sheet and zone", () => {
    // The cam mark stands at (150, 64) on A3: third row of 50 mm fields about 148.5 mm, fourth column about 210 mm.
    expect(said(set, 1, "reference")).toContain("LIFT 3/B3");
  });

  test("at a solenoid its valve, and at the valve the line of the coil", () => {
    expect(said(set, 2, "reference")).toContain("V1 3/C3");
    expect(said(set, 3, "reference")).toEqual(["(201)", "(103)"]);
  });

  test("at a coil the lines of its contacts, the normally closed ones underlined", () => {
    const margin = texts(sheetOf(set, 1).marks, "margin");
    expect(margin.map(({ text, underline }) => [text, underline === true])).toEqual([
      ["102,", false],
      ["201", true],
      [",", false],
      ["202", false],
    ]);
  });

  test("a point names the other sheet on which it goes on", () => {
    expect(said(set, 1, "reference")).toContain("run 2/A2");
    expect(said(set, 2, "reference")).toContain("run 1/C2");
  });

  test("a line that bears one name on all its sheets names its ends on the others, never its own", () => {
    const made = handMade();
    const [first, second] = made.layout.sheets as [Made["layout"]["sheets"][number], Made["layout"]["sheets"][number]];
    for (const { texts } of [first, second])
      for (const { text } of texts) if (typeof text !== "string" && text.to === "point") text.from = "header P";
    const both = second.texts.find(({ text }) => typeof text !== "string" && text.to === "point") as (typeof second.texts)[number];
    second.texts.push({ ...both, at: { ...both.at, y: both.at.y + 20 } });
    const composed = compose(made);
    expect(said(composed, 1, "reference").filter((text) => text.startsWith("run"))).toEqual(["run 2/A2"]);
    expect(said(composed, 2, "reference").filter((text) => text.startsWith("run"))).toEqual(["run 1/C2", "run 1/C2"]);
  });

  test("running line numbers name the sheet only where it is another", () => {
    const running = compose(handMade({ lineNumbers: "running" }));
    expect(said(running, 1, "reference")).toContain("(101)");
    expect(said(running, 2, "reference")).toContain("(1/101)");
  });

  test("a point that goes on on the same sheet names only the line there", () => {
    const made = handMade();
    const [first, second] = made.layout.sheets as [Made["layout"]["sheets"][number], Made["layout"]["sheets"][number]];
    for (const text of second.texts) if (typeof text.text !== "string" && text.text.to === "point") first.texts.push(text);
    made.layout.sheets.splice(1, 1);
    expect(said(compose(made), 1, "reference")).toEqual(expect.arrayContaining(["run A2", "run C2"]));
  });

  test("an end that comes in names the nearest end before it, one that goes out the nearest after it", () => {
    const made = handMade();
    const [first] = made.layout.sheets as [Made["layout"]["sheets"][number]];
    const end = (sheet: number, from: string, y: number, way?: "in" | "out") => ({
      role: "reference" as const,
      at: { x: 65, y },
      anchor: "start" as const,
      height: 2.5,
      text: { to: "point" as const, point: "on", from, room: 30, ...(way ? { way } : {}) },
      part: from,
      sheet,
    });
    const ends = [
      end(1, "1 foot", 170, "out"),
      end(2, "2 foot", 180, "out"),
      end(2, "2 head", 30, "in"),
      end(2, "2 side", 60),
      end(3, "3 head", 40, "in"),
    ];
    const sheets = [1, 2, 3].map((number) => ({ ...first, number, texts: ends.filter(({ sheet }) => sheet === number) }));
    const set = compose({ ...made, layout: { ...made.layout, sheets } });
    expect([1, 2, 3].map((number) => said(set, number, "reference"))).toEqual([
      ["on 2/A2"],
      ["on 3/A2", "on 1/D2", "on D2", ", A2"],
      ["on 2/D2"],
    ]);
  });

  test("a point's line is named where the layout knows it", () => {
    const made = handMade();
    const places = made.layout.places as Map<
      string,
      { sheet: number; line?: number; zone: string; box: { x: number; y: number; width: number; height: number } }
    >;
    places.set("run 2", { sheet: 2, line: 204, zone: "A1", box: { x: 0, y: 0, width: 1, height: 1 } });
    expect(said(compose(made), 1, "reference")).toContain("run 2/204");
  });

  test("keeps within its room: first without the name, then smaller", () => {
    const made = handMade();
    const place = reference(made, "switch-place");
    place.room = measureText("3/B3", 2.5);
    expect(said(compose(made), 1, "reference")).toContain("3/B3");
    place.room = measureText("3/B3", 1.8);
    expect(texts(sheetOf(compose(made), 1).marks, "reference").find(({ text }) => text === "3/B3")?.height).toBe(1.8);
  });

  test("a switch with more contacts than there is room for says that there are more", () => {
    const made = handMade();
    const ls1 = made.machine.devices.get("LS1");
    const [contact] = ls1?.contacts ?? [];
    if (!contact) throw new Error("LS1 has no contact");
    const places = made.layout.places as Map<string, Made["layout"]["places"] extends ReadonlyMap<string, infer Place> ? Place : never>;
    for (const line of [104, 105]) {
      ls1?.contacts.push({ ...contact, id: `LS1 ${line}` });
      places.set(`LS1 ${line}`, { sheet: 1, line, zone: "B2", box: { x: 0, y: 0, width: 1, height: 1 } });
    }
    const cam = made.layout.sheets[2]?.texts[1]?.text as Reference;
    const sayIn = (room: number) => {
      cam.room = room;
      return said(compose(made), 3, "reference").slice(1).join("");
    };
    expect(sayIn(40)).toBe("(103, 104, 105)");
    expect(sayIn(measureText("(103, 104, …)", 2.5))).toBe("(103, 104, …)");
    expect(sayIn(measureText("(103…)", 2.5))).toBe("(103…)");
    expect(sayIn(measureText("(103)", 2.5))).toBe("(103)");
  });

  test("what is drawn nowhere is not referred to", () => {
    const made = handMade();
    (made.layout.places as Map<string, unknown>).delete("CR1");
    const without = compose(made);
    expect(said(without, 2, "reference")).not.toContain("(101)");
    expect(links(without, 2).map(({ to }) => to)).not.toContain("CR1");
  });
});

describe("a coil with many contacts", () => {
  const withContacts = (lines: (number | -1)[][], room = 40) => {
    const made = handMade();
    const row = made.rows[0] as (typeof made.rows)[number];
    row.contacts = lines.map(
      ([line, closed]): ContactReference => ({ type: closed ? "NC" : "NO", terminals: "13-14", sheet: 1, line: line as number }),
    );
    reference(made, "contacts").room = room;
    return texts(sheetOf(compose(made), 1).marks, "margin");
  };

  test("a coil with contacts on 7, 11 (open) and 39 (closed) shows them with 39 underlined (RSES, Electricity for HVACR Technicians, Ladder Diagram Locators)", () => {
    const margin = withContacts([[7], [11], [39, 1]]);
    expect(margin.map(({ text }) => text)).toEqual(["7,", "11,", "39"]);
    expect(margin.filter(({ underline }) => underline).map(({ text }) => text)).toEqual(["39"]);
  });

  test("a coil with one open contact on 33 shows 33 (same source)", () => {
    expect(withContacts([[33]])).toMatchObject([{ text: "33" }]);
  });

  test.each([3, 6, 9, 14, 18, 60])("%d contacts stay within the room and within a rung's height, and none is over another", (count) => {
    const margin = withContacts(Array.from({ length: count }, (_, i) => [100 + i, i % 3 === 0 ? 1 : 0]));
    const boxes = margin.map(textBox);
    const [left, right] = [Math.min(...boxes.map((b) => b.x)), Math.max(...boxes.map((b) => b.x + b.width))];
    const [top, bottom] = [Math.min(...boxes.map((b) => b.y)), Math.max(...boxes.map((b) => b.y + b.height))];
    expect(right - left).toBeLessThanOrEqual(40.001);
    expect(bottom - top).toBeLessThanOrEqual(9);
    for (const [i, a] of boxes.entries()) {
      for (const b of boxes.slice(i + 1))
        expect(Math.abs(a.y - b.y) > 2.4 || a.x + a.width <= b.x + 0.001 || b.x + b.width <= a.x + 0.001).toBe(true);
    }
    const numbers = margin.flatMap(({ text }) => text.match(/\d+/g) ?? []);
    const all = numbers.length === count;
    expect(all || margin.at(-1)?.text.includes("…")).toBe(true);
    if (count <= 14) expect(all).toBe(true);
    expect(numbers).toEqual(Array.from({ length: numbers.length }, (_, i) => `${100 + i}`));
  });
});

describe("links", () => {
  const set = compose(handMade());
  const pairs: [string, number, string, number, string][] = [
    ["contact and coil", 2, "CR1", 1, "CR1:21-22"],
    ["solenoid and valve", 2, "V1/left", 3, "SOL1"],
    ["switch and cam", 1, "LIFT/LS1", 3, "LS1:21-22"],
  ];

  test.each(pairs)("%s, there and back", (_, from, to, back, home) => {
    expect(links(set, from).map((link) => link.to)).toContain(to);
    expect(links(set, back).map((link) => link.to)).toContain(home);
  });

  test("every link lies on its sheet and leads to something drawn", () => {
    let count = 0;
    for (const sheet of set.sheets) {
      for (const link of links(set, sheet.number)) {
        count++;
        expect(set.anchors.has(link.to), link.to).toBe(true);
        expect(link.box.x).toBeGreaterThan(0);
        expect(link.box.x + link.box.width).toBeLessThan(sheet.size.width);
      }
    }
    expect(count).toBeGreaterThan(20);
  });

  test("all of them land in the PDF and in the SVG files", async () => {
    const pdf = await readPdf(await writePdf(set, assets));
    expect(pdf.pages.map((page) => page.links.length)).toEqual(set.sheets.map((sheet) => links(set, sheet.number).length));
    const files = await writeSvg(set, assets);
    for (const { name, text } of files) {
      for (const [, href] of text.matchAll(/href="([^"]+)"/g)) {
        const [file, id] = decodeURIComponent(href as string).split("#") as [string, string];
        const target = files.find((other) => other.name === (file || name));
        expect(target?.text, href).toContain(`id="${id}"`);
      }
    }
  });
});

describe("sheets", () => {
  const set = compose(handMade());

  test("circuit sheets come first, then the cross-reference, numbered through", () => {
    expect(set.sheets.map(({ number, title }) => [number, title])).toEqual([
      [1, "Control"],
      [2, "Outputs"],
      [3, "Pneumatics"],
      [4, "Cross-reference"],
    ]);
  });

  test("every circuit sheet states the state drawn and the caution, with the notes of its layout", () => {
    for (const number of [1, 2, 3]) {
      expect(said(set, number, "note")).toContain("Drawn de-energized, unpressurized, at start of cycle.");
      expect(said(set, number, "note")).toContain("Not a certification. Isolate and verify before work.");
    }
    expect(said(set, 3, "note")).toContain("V1 is drawn as it stands at the start.");
    expect(said(set, 1, "note")).not.toContain("V1 is drawn as it stands at the start.");
  });

  test("notes that do not fit the strip stand whole on the first table sheet, and every strip says so", () => {
    const notes = Array.from(
      { length: 12 },
      (_, i) => `Caution ${i + 1}: ${"release the trapped pressure before any hose is loosened; ".repeat(2)}end.`,
    );
    const made = compose(handMade({ notes }));
    const table = said(made, 4, "cell").join(" ");
    for (const note of notes) expect(table.replace(/\s+/g, " ")).toContain(note);
    expect(sheetOf(made, 4).title).toBe("Notes, cross-reference");
    for (const number of [1, 2, 3]) {
      const strip = said(made, number, "note");
      expect(strip.at(-1)).toBe("All notes of the drawing: sheet 4.");
      expect(strip.join(" ")).toContain("Caution 1:");
      expect(strip.join(" ")).not.toContain("…");
      expect(strip).not.toContain("…");
    }
    expect(said(made, 3, "note")).toContain("V1 is drawn as it stands at the start.");
    const few = compose(handMade({ notes: ["One."] }));
    expect(said(few, 4, "heading")).not.toContain("Notes");
  });

  test("a symbol's own text stands with its middle where the symbol says", () => {
    const letter = texts(sheetOf(set, 1).marks, "symbol").find(({ text }) => text === "K");
    // The coil stands at y 55; capitals of 2.5 mm about it reach 1.25 mm below.
    expect(letter?.at).toEqual({ x: 155, y: 56.25 });
  });

  test("each part carries its device", () => {
    expect(set.parts.get("CR1:21-22")).toEqual({ device: "CR1", title: "CR1 21-22 – Cycle running" });
    expect(set.parts.get("LIFT/LS1")).toMatchObject({ device: "LS1" });
  });

  test("the outline lists every device in natural order with its uses", () => {
    expect(set.outline.map(({ device }) => device)).toEqual(["CR1", "LIFT", "LS1", "PB1", "SOL1", "V1"]);
    expect(set.outline[0]?.uses.map(({ title }) => title)).toEqual([
      "NO 13-14, sheet 1, line 102",
      "NC 21-22, sheet 2, line 201",
      "NO 33-34, sheet 2, line 202",
    ]);
    expect(set.outline[4]).toMatchObject({ device: "SOL1", home: "SOL1", uses: [{ part: "V1/left" }] });
  });

  test("the cross-reference has every coil and every switch, with what works it", () => {
    expect(said(set, 4, "heading")).toEqual(
      expect.arrayContaining(["Coils and other loads", "Switches and other contacts", "Valve", "Operated by"]),
    );
    const cells = said(set, 4, "cell");
    expect(cells).toEqual(expect.arrayContaining(["CR1", "1/101", "13-14  1/102", "33-34  2/202", "21-22  2/201", "V1 3/C3"]));
    expect(cells).toEqual(expect.arrayContaining(["PB1", "Push button", 'Start <& "go">', "LS1", "LIFT retracted 3/B3", "21-22  1/103"]));
  });

  test.each([
    ["metric", { from: 39, to: 41, written: "at" }, "LIFT at 40 mm 3/B3"],
    ["metric", { from: 28, to: 32.5, written: "from-to" }, "LIFT 28 to 32.5 mm 3/B3"],
    // 19.5 and 20 inches of 25.4 mm.
    ["inch", { from: 495.3, to: 508, written: "from-to" }, "LIFT 19.5 to 20 in 3/B3"],
  ] as const)("a place along the stroke is printed in the %s units of the drawing", (units, place, cell) => {
    const made = handMade({ units });
    (made.machine.devices.get("LS1") as Device).place = { cylinder: "LIFT", ...place };
    expect(said(compose(made), 4, "cell")).toContain(cell);
  });

  test("a function text of any length is set", () => {
    const made = handMade();
    (made.rows[0] as Made["rows"][number]).text = "on and on ".repeat(200_000);
    expect(said(compose(made), 4, "cell")).toContain("CR1");
  });

  test("a column with nothing in it is left out", () => {
    const made = handMade();
    for (const row of made.rows) delete row.valve;
    expect(said(compose(made), 4, "heading")).not.toContain("Valve");
  });

  test("a drawing with nothing in it is one empty sheet that can be written", async () => {
    const { machine } = handMade();
    const empty = composeSheets(
      { ...machine, circuits: [], devices: new Map(), components: new Map() },
      { sheets: [], places: new Map() },
      [],
      assets,
    );
    expect(empty.sheets).toHaveLength(1);
    expect((await readPdf(await writePdf(empty, assets))).pages).toHaveLength(1);
  });

  test("a template of another name is taken, an unknown one is not missed", () => {
    expect(said(compose(handMade({ template: "asme" })), 1, "label")).toContain("DRAWING NUMBER");
    expect(said(compose(handMade({ template: "none such" })), 1, "label")).toContain("Identification number");
  });
});

describe.each(["A4", "A3", "A1", "ANSI-A", "ANSI-D"] as const)("the cross-reference of a large machine on %s", (paper) => {
  const made = handMade({ paper });
  const [relay, solenoid] = made.rows as [Made["rows"][number], Made["rows"][number]];
  const rows = [...made.rows];
  for (let i = 0; i < 70; i++) {
    const contacts = Array.from(
      { length: i % 17 },
      (_, k): ContactReference => ({
        type: k % 3 ? "NO" : "NC",
        terminals: `${k + 1}3-${k + 1}4`,
        sheet: (k % 9) + 1,
        line: 100 * ((k % 9) + 1) + k,
        timed: k === 4,
      }),
    );
    rows.push({ ...(i % 2 ? relay : solenoid), text: "Holds the carriage until both grippers have let go".slice(0, 12 + i), contacts });
  }
  const set = compose({ ...made, rows });
  const tables = set.sheets.filter(({ title }) => title === "Cross-reference");

  test("goes on over several sheets, with the heads on each", () => {
    for (const { marks } of tables) expect(texts(marks, "heading").some(({ text }) => text === "NO contacts")).toBe(true);
    if (paper === "A4") expect(tables.length).toBeGreaterThan(3);
  });

  test("no text is over another or over a rule, and all are clear of the strip", () => {
    for (const { marks } of tables) {
      const set = texts(marks).filter(({ role }) => role === "cell" || role === "heading");
      const boxes = set.map((mark) => ({ ...textBox(mark), text: mark.text })).sort((a, b) => a.y - b.y);
      const rules = marks.flatMap((mark) => (mark.kind === "stroke" && mark.role === "table" ? [mark.path] : []));
      for (const [i, a] of boxes.entries()) {
        for (const b of boxes.slice(i + 1)) {
          if (b.y >= a.y + a.height) break;
          expect(a.x + a.width <= b.x || b.x + b.width <= a.x, `${a.text} over ${b.text}`).toBe(true);
        }
        for (const [from, to] of rules) {
          if (from?.op !== "M" || to?.op !== "L" || from.x !== to.x) continue;
          const crossed = from.x > a.x && from.x < a.x + a.width && from.y < a.y + a.height && to.y > a.y;
          expect(crossed, `a rule through ${a.text}`).toBe(false);
        }
      }
    }
  });

  test("every contact is named in full, once for each row it belongs to", () => {
    const cells = tables.flatMap(({ marks }) => texts(marks, "cell")).map(({ text }) => text);
    for (const terminals of ["13-14", "103-104"]) {
      const wanted = [...rows, ...switchReference(made.machine, made.layout)]
        .flatMap(({ contacts }) => contacts)
        .filter((contact) => contact.terminals === terminals).length;
      expect(cells.filter((text) => text.startsWith(`${terminals} `))).toHaveLength(wanted);
    }
    expect(cells.filter((text) => /^\d+-\d+.*…/.test(text))).toEqual([]);
  });
});
