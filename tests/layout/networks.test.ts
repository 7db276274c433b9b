import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { startOfCycle } from "../../src/behaviour/start-of-cycle.js";
import { parse } from "../../src/language/parse.js";
import { layOut } from "../../src/layout/lay-out.js";
import type { CircuitSheet } from "../../src/layout/placement.js";
import { buildMachine } from "../../src/machine/build.js";
import { nodeWorld } from "../../src/node-world.js";
import { pageArea } from "../../src/sheets/page.js";
import { openSymbols } from "../../src/symbols/library.js";
import { crossings, portsOf } from "../support/facts.js";
import { faults, ladderOf } from "../support/ladder.js";

/*
 * Random networks of everything a rung can hold: contacts of all kinds, what current passes through, loads side by side,
 * nested and in series, contacts behind loads, bridges over points in either direction. Whatever the network, the drawing is
 * held to the same facts: its wires read back join what the text joins, nothing overlaps or lies outside, every part is
 * drawn once.
 */

const declared = `
relay CR1 "Cycle running"
timer TR1 "Dwell" on-delay 2 s
counter CN1 preset 4
push-button PB1 "Start"
emergency-stop ES1 "Emergency stop"
selector-switch SS1 "Mode" { positions hand off auto }
key-switch KS1 { positions locked free }
limit-switch LS1 "Clamp open"
proximity-switch PRS1 "Part here"
pressure-switch PS1 "Air on" rising 5 bar
door-switch DS1 "Gate"
overload OL1
output-card Q0 8 points
terminal-strip X1
terminal-strip X22
plug XP1
`;

// In what follows `#` stands for a number of its own.
const contact = fc.constantFrom(
  ...[
    "CR1",
    "/CR1",
    "TR1",
    "/TR1.inst",
    "/CN1",
    "PB1",
    "/PB1",
    "/ES1",
    "SS1.auto",
    "/KS1.free",
    "LS1",
    "/LS1",
    "PRS1",
    "PS1",
    "/DS1",
    "/OL1",
  ],
);
const through = fc.oneof(fc.constantFrom("X1:#", "X22:#", "XP1:#"), fc.constantFrom("FU#", "CB#", "D#", "D#:K-A", "R#", "Q0.3"));
const point = fc.integer({ min: 0, max: 5 }).map((index) => `@p${index}`);

interface Shapes {
  series: string;
  item: string;
}

/** A path of contacts and what current passes through, with points or without. */
const pathOf = (points: boolean, longest: number) =>
  fc.letrec<Shapes>((tie) => ({
    series: fc.array(tie("item"), { minLength: 1, maxLength: longest }).map((items) => items.join(" ")),
    item: fc.oneof(
      { depthSize: "small", withCrossShrink: true },
      { arbitrary: contact, weight: 5 },
      { arbitrary: through, weight: 2 },
      ...(points ? [{ arbitrary: fc.tuple(point, contact).map(([name, device]) => `${name} ${device}`), weight: 1 }] : []),
      { arbitrary: fc.array(tie("series"), { minLength: 2, maxLength: 3 }).map((branches) => `(${branches.join(" | ")})`), weight: 3 },
    ),
  })).series;

/** What is driven. */
const driven = fc.letrec<{ load: string }>((tie) => ({
  load: fc.oneof(
    { depthSize: "small", withCrossShrink: true },
    fc.constant("LT#"),
    fc.constantFrom("LT# /OL1", "X1:# LT# X1:#", "LT# /OL1 /CR1 LS1 X1:# PB1", "LT# LT#"),
    fc.constantFrom("(LT# | D#:K-A)", "(LT# | R# D#)", "(LT# | X1:# D#:K-A)"),
    fc
      .array(
        fc.oneof(
          tie("load"),
          fc.tuple(pathOf(false, 2), tie("load")).map(([path, load]) => `${path} -> ${load}`),
        ),
        {
          minLength: 2,
          maxLength: 3,
        },
      )
      .map((branches) => `(${branches.join(" | ")})`),
    fc.tuple(fc.array(tie("load"), { minLength: 2, maxLength: 2 }), contact).map(([loads, after]) => `(${loads.join(" | ")}) ${after}`),
  ),
})).load;

const rung = fc.oneof(
  { arbitrary: fc.tuple(pathOf(false, 3), driven).map(([path, load]) => `${path} -> ${load}`), weight: 2 },
  { arbitrary: fc.tuple(pathOf(true, 4), driven).map(([path, load]) => `${path} -> ${load}`), weight: 3 },
  { arbitrary: fc.tuple(point, pathOf(true, 2), driven).map(([from, path, load]) => `${from} ${path} -> ${load}`), weight: 2 },
  { arbitrary: fc.tuple(point, pathOf(false, 2), point).map((parts) => parts.join(" ")), weight: 3 },
);

const drawing = fc.record({
  rungs: fc.array(rung, { minLength: 1, maxLength: 7 }),
  paper: fc.constantFrom("A3", "A2", "A1", "ANSI-C", "ANSI-E"),
});

function textOf({ rungs, paper }: { rungs: readonly string[]; paper: string }): string {
  let uses = 0;
  const written = rungs.map((path, index) => `rung "Rung ${index}": ${path.replace(/#/g, () => String(++uses))}`);
  const own = [...new Set(written.join(" ").match(/\b(LT|FU|CB|D|R)\d+/g))].filter((name) => !declared.includes(` ${name} `));
  const kinds = { LT: "pilot-light", FU: "fuse", CB: "circuit-breaker", D: "diode", R: "resistor" } as Record<string, string>;
  const devices = own.map((name) => `${kinds[name.replace(/\d+/, "")]} ${name}${name.startsWith("LT") ? ` "Lamp ${name}" red` : ""}`);
  return `drawing "Network" { paper ${paper} }
supply CTRL 24 V DC { rails L+ M }
${declared}${devices.join("\n")}
ladder "Control" supply CTRL {
${written.join("\n")}
}
`;
}

/** What is wrong with the drawing of a network; nothing where its points happen to join the rails. */
function faultsOf(given: { rungs: readonly string[]; paper: string }, convention: Convention): string[] {
  const bridges = given.rungs.filter((path) => !path.includes("->")).length;
  let laid: ReturnType<typeof ladderOf>;
  try {
    laid = ladderOf(textOf(given), convention);
  } catch (fault) {
    if (/rails/.test(String(fault))) return [];
    throw fault;
  }
  expect(laid.again().sheets).toEqual(laid.sheets);
  return faults(laid, bridges);
}

type Convention = "north-american" | "international";

test.each<Convention>(["north-american", "international"])(
  "any network is drawn whole and reads back as it was written, %s",
  (convention) => {
    fc.assert(
      fc.property(drawing, (given) => {
        expect(faultsOf(given, convention)).toEqual([]);
      }),
      { numRuns: 20, seed: 2 },
    );
  },
  60_000,
);

const drawn = (rungs: string, convention: Convention = "north-american") =>
  ladderOf(
    `drawing "Network" { paper A3 }
supply CTRL 24 V DC { rails L+ M }
${declared}diode D1\ndiode D2\nrelay CR2\nrelay CR3\npilot-light LT1 red
ladder "Control" supply CTRL {
${rungs}
}`,
    convention,
  );

const symbolOf = (sheet: CircuitSheet, part: string) => {
  const found = sheet.symbols.find((symbol) => symbol.part.startsWith(part));
  if (!found) throw new Error(`${part} is not on sheet ${sheet.number}`);
  return found;
};
const references = (sheets: readonly CircuitSheet[]) =>
  sheets.flatMap(({ texts }) => texts.flatMap(({ text }) => (typeof text !== "string" && text.to === "point" ? [text.point] : [])));

describe("what current passes through", () => {
  test("terminals leave contacts under each other and take less room than they do", () => {
    const laid = drawn("rung: X1:1 PB1 X1:2 X22:1 LS1 -> CR1\nrung: PB1 CR1 -> CR2");
    expect(faults(laid)).toEqual([]);
    const [sheet] = laid.sheets as [CircuitSheet];
    expect(symbolOf(sheet, "PB1:13").at.x).toBe(symbolOf(sheet, "PB1:23").at.x);
    expect(symbolOf(sheet, "LS1").at.x).toBe(symbolOf(sheet, "CR1:13").at.x);
    const steps = ["X1:2", "X22:1"].map((part) => symbolOf(sheet, part).at.x);
    expect((steps[1] as number) - (steps[0] as number)).toBeLessThan(15);
    // The wire keeps its number through a terminal, so it is written once.
    const numbers = sheet.texts.filter(({ role, at }) => role === "wire-number" && at.y < symbolOf(sheet, "X1:2").at.y);
    expect(new Set(numbers.map(({ text }) => text)).size).toBe(numbers.length);
  });

  test("what is joined behind a terminal is drawn behind it", () => {
    const laid = drawn("rung: PB1 @a X1:1 @b LS1 -> CR1\nrung: @b CR1 -> CR2");
    expect(faults(laid)).toEqual([]);
    const [sheet] = laid.sheets as [CircuitSheet];
    const begins = Math.min(...portsOf(symbolOf(sheet, "CR1:13")).map(({ at }) => at.x));
    expect(begins).toBeGreaterThan(symbolOf(sheet, "X1:1").at.x);
  });

  test.each<Convention>(["north-american", "international"])(
    "a diode stands beside its coil, its cathode where the text puts it, %s",
    (convention) => {
      const laid = drawn("rung: PB1 -> (CR1 | D1:K-A)\nrung: LS1 -> (CR2 | D2:A-K)", convention);
      expect(faults(laid)).toEqual([]);
      const [sheet] = laid.sheets as [CircuitSheet];
      const along = (part: string) => symbolOf(sheet, part).at[convention === "international" ? "y" : "x"];
      expect(along("D1")).toBeCloseTo(along("CR1:A1"), 3);
      expect(["D1", "D2"].map((part) => symbolOf(sheet, part).symbol.name)).toEqual([`${convention}/diode-turned`, `${convention}/diode`]);
    },
  );
});

describe("a bridge", () => {
  const bridged = (bridge: string) => drawn(`rung: PB1 @a LS1 @b PS1 -> CR1\nrung: ${bridge}\nrung: CR1 -> CR2`);

  test.each(["@a /DS1 @b", "@b /DS1 @a", "@a /DS1 PRS1 /OL1 @b", "@b (/DS1 | CR2 CR3) X1:1 @a"])(
    "between two points of one rung is wired without a crossing: %s",
    (bridge) => {
      const laid = bridged(bridge);
      expect(faults(laid)).toEqual([]);
      expect(references(laid.sheets)).toEqual([]);
    },
  );

  test("read from its end keeps its terminals", () => {
    const [sheet] = bridged("@b /DS1 @a").sheets as [CircuitSheet];
    const printed = sheet.texts
      .filter(({ role, part }) => role === "terminal" && part?.startsWith("DS1"))
      .sort((one, other) => one.at.x - other.at.x);
    expect(printed.map(({ text }) => text)).toEqual(["12", "11"]);
  });

  test.each([
    ["rung: PB1 @a LS1 -> CR1\nrung: /PB1 @b PS1 -> CR2\nrung: @b CR1 @a"],
    ["rung: (PB1 @a LS1 | /PB1 @b PS1) -> CR1\nrung: @a CR2 @b\nrung: CR1 -> CR2"],
  ])("over the rung between its points crosses one wire rather than refer twice", (rungs) => {
    const laid = drawn(rungs);
    expect(faults(laid, 1)).toEqual([]);
    expect(laid.sheets.flatMap(crossings)).toHaveLength(1);
    expect(references(laid.sheets)).toEqual([]);
  });

  test("that would cross more refers at both ends", () => {
    const laid = drawn("rung: PB1 @a LS1 -> CR1\nrung: /PB1 @b PS1 -> CR2\nrung: CR1 CR2 -> CR3\nrung: DS1 CR3 -> LT1\nrung: @a PRS1 @b");
    expect(faults(laid)).toEqual([]);
    expect(references(laid.sheets).sort()).toEqual(["a", "a", "b", "b"]);
  });
});

test("the rails of a second ladder on the same supply go on from the first, with no second fuse, and its points refer", async () => {
  const { tree } = parse(
    `supply CTRL 24 V DC { rails L+ M fuse FU1 4 A }
supply OTHER 24 V DC { rails L2+ M }
push-button PB1\nrelay CR1\nrelay CR2\nrelay CR3
ladder "One" supply CTRL { rung: PB1 @run -> CR1 }
ladder "Two" supply OTHER { rung: CR1 -> CR2 }
ladder "Three" supply CTRL { rung: @run CR2 -> CR3 }`,
    "test.sprung",
  );
  const { machine } = buildMachine(tree);
  const { sheets } = await layOut(machine, startOfCycle(machine), openSymbols(nodeWorld), pageArea);
  const notes = sheets.map(({ texts }) => texts.filter(({ role }) => role === "note").map(({ text }) => text));
  expect(notes[0]).toContain("to sheet 3, line 301");
  expect(notes[2]).toContain("from sheet 1, line 101");
  expect(notes[1]?.some((note) => String(note).includes("sheet"))).toBe(false);
  expect(sheets.filter(({ symbols }) => symbols.some(({ part }) => part === "FU1"))).toHaveLength(1);
  expect(sheets.map((sheet) => references([sheet]))).toEqual([["run"], [], ["run"]]);
});

test("a wire with two points goes by one of them wherever it breaks off", () => {
  const laid = drawn("rung: PB1 @p LS1 -> CR1\nrung: CR1 CR2 CR3 -> CR2\nrung: @p @q PS1 -> CR3\nrung: CR1 -> LT1\nrung: @q DS1 -> CR1");
  const names = references(laid.sheets);
  expect(faults(laid)).toEqual([]);
  for (const name of names) expect(names.filter((other) => other === name).length).toBeGreaterThan(1);
});

test("a bracket whose branches begin with points of the rail stands on the rail", () => {
  expect(faults(drawn("rung: (@p PB1 | @q LS1) -> CR1"))).toEqual([]);
});

describe.each(["north-american", "international"] as const)("points behind loads, %s", (convention) => {
  test.each([
    ["what ends there stays clear of the return rail", "rung: @p0 LS1 -> LT1 @p2\n rung: @p0 LS1 @p2 PB1 @p0\n rung: PB1 -> LT2 @p2"],
    ["a load that begins there has its wire to its own pin", "rung: PB1 -> LT1 @mid\n rung: @mid LS1\n rung: @mid -> LT2"],
    ["loads in parallel part where they stand", "rung: PB1 (LS1 | CR1) -> (CR1 | LT1 | LT2)\n rung: LS1 @a -> (LT2 | (LT1 | LT2) | CR1)"],
  ])("%s", (_, rungs) => {
    expect(
      faults(
        ladderOf(
          `relay CR1\n push-button PB1\n limit-switch LS1\n pilot-light LT1\n pilot-light LT2\n ladder "A" {\n ${rungs}\n}`,
          convention,
        ),
      ),
    ).toEqual([]);
  });
});
