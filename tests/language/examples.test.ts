import { readdirSync, readFileSync } from "node:fs";
import { describe, expect, test } from "vitest";
import { at, findings, itemsOf, only, pathOf, showEnd, showItem, showPath, statementsOf } from "./view.js";

const folder = new URL("examples/", import.meta.url);
const example = (name: string): string => readFileSync(new URL(`${name}.sprung`, folder), "utf8");

describe("every example of the language", () => {
  for (const file of readdirSync(folder).sort()) {
    test(`${file} reads without a finding`, () => {
      expect(findings(readFileSync(new URL(file, folder), "utf8"))).toEqual([]);
    });
  }
});

describe("the whole small drawing", () => {
  const statements = statementsOf(example("tray-stamper"));

  test("has its statements in reading order", () => {
    expect(statements.map((it) => (it.kind === "declaration" ? `${it.keyword.text} ${it.name?.text}` : it.kind))).toEqual([
      "drawing",
      "supply CTRL",
      "push-button PB1",
      "push-button PB2",
      "relay CR1",
      "relay CR2",
      "timer TR1",
      "limit-switch LS1",
      "limit-switch LS2",
      "limit-switch LS3",
      "limit-switch LS4",
      "pilot-light LT1",
      "ladder",
      "fluid",
      "cycle",
    ]);
  });

  test("gives the title block's fields; drawing numbers and dates are words", () => {
    const drawing = statements[0];
    if (drawing?.kind !== "drawing") throw new Error("no drawing block");
    expect(drawing.title?.text).toBe("Tray stamper, station 2");
    expect(drawing.fields.map((field) => [field.name.text, ...field.items.map(showItem)])).toEqual([
      ["number", "word TS-2040"],
      ["owner", "text Larkfield Works"],
      ["creator", "text M. Osei"],
      ["revision", "word A", "word 2026-03-02", "text First issue"],
      ["revision", "word B", "word 2026-05-11", "text Dwell timer added"],
      ["convention", "word north-american"],
      ["paper", "word A3"],
    ]);
  });

  test("gives a supply with what stands in its braces", () => {
    const supply = statements[1];
    if (supply?.kind !== "declaration") throw new Error("no supply");
    expect(supply.items.map(showItem)).toEqual([
      "quantity 24 V",
      "word DC",
      "word rails",
      "word L+",
      "word M",
      "word fuse",
      "word FU1",
      "quantity 4 A",
    ]);
    expect(at(supply.at)).toBe("11:1-11:49");
  });

  test("gives the rungs as they were meant", () => {
    const ladder = statements.find((it) => it.kind === "ladder");
    if (ladder?.kind !== "ladder") throw new Error("no ladder");
    expect([ladder.title?.text, ladder.supply?.text]).toEqual(["Control", "CTRL"]);
    expect(ladder.statements.map((it) => (it.kind === "rung" ? `${it.title?.text}: ${showPath(it.path)}` : it.kind))).toEqual([
      "Cycle running: /PB2 (PB1 | CR1 (/CR2 | /LS1)) @run -> (CR1 | LT1)",
      "Stamp done: @run (TR1 | CR2) -> CR2",
      "Clamp: @run (/CR2 | /LS3) -> SOL1",
      "Stamp: @run LS2 /CR2 -> SOL2",
      "Dwell: @run LS4 -> TR1",
    ]);
  });

  test("gives the lines as groups of ends", () => {
    const fluid = statements.find((it) => it.kind === "fluid");
    if (fluid?.kind !== "fluid") throw new Error("no fluid circuit");
    expect([fluid.title?.text, fluid.medium?.text]).toEqual(["Pneumatics", "pneumatic"]);
    const lines = fluid.statements.flatMap((it) =>
      it.kind === "line" ? [`${it.role.text} ${it.groups.map((group) => group.map(showEnd).join(", ")).join(" -- ")}`] : [],
    );
    expect(lines).toEqual([
      "line AIR1 -- FRL1 -- @P",
      "line @P -- V1.1",
      "line @P -- V2.1",
      "line V1.4 -- CLAMP.cap",
      "line V1.2 -- CLAMP.rod",
      "line V2.4 -- FC1 -- STAMP.cap",
      "line V2.2 -- STAMP.rod",
      "exhaust V1.3, V1.5, V2.3, V2.5 -- silencer",
    ]);
  });

  test("keeps the cycle as steps", () => {
    const cycle = statements.find((it) => it.kind === "cycle");
    if (cycle?.kind !== "cycle") throw new Error("no cycle");
    expect(cycle.steps.map((step) => step.items.map(showItem).join(", "))).toEqual([
      "word press, word PB1",
      "word expect, word CLAMP+, word then, word STAMP+, word then, word STAMP-, word then, word CLAMP-",
    ]);
  });
});

test("rungs outside a ladder make one of their own", () => {
  const ladder = only("ladder", statementsOf(example("rungs")));
  expect(ladder.title).toBeUndefined();
  expect(ladder.statements.map((it) => (it.kind === "rung" ? showPath(it.path) : it.kind))).toEqual([
    "/PB2 (PB1 | CR1) -> CR1",
    "/PB2 (PB1 | CR1 (LS1 | LS3 LS4)) @run -> (CR1 | LT1 | LS5 -> SOL3)",
    "CR1 LS1 -> MS1 /OL1 /OL2",
    "@run LS2 -> SOL2",
    "@a LS9 @b",
    "X1:4 LS7 X1:5 -> CR6",
  ]);
});

test("a power circuit has its feed and its branches", () => {
  const power = only("power", statementsOf(example("power")));
  expect([power.title?.text, ...power.items.map(showItem)]).toEqual([
    "Main",
    "quantity 400 V",
    "word AC",
    "number 3",
    "word phase",
    "quantity 50 Hz",
  ]);
  const lines = power.statements.map((it) => {
    if (it.kind !== "feed" && it.kind !== "branch") return it.kind;
    const words = [it.kind, ...(it.kind === "branch" ? [`"${it.title?.text}"`] : []), ...it.conductors.map(({ text }) => text)];
    const taps = it.kind === "feed" ? ` -> ${it.taps.map(({ name }) => name.text).join(", ")}` : "";
    return `${words.join(" ")}: ${showPath(it.path)}${taps}`;
  });
  expect(lines).toEqual(["feed L1 L2 L3 PE: QS1 -> Q1, T1", 'branch "Pump": FU2 KM1 OL1 -> M1']);
});

test("branches take points, brackets, a motor's second leads and conductors of their own", () => {
  const text = `power "Mill" {
  feed L1 N
  branch "Hoist": Q2 (KM2 | KM3 crossed) OL2 -> M2
  branch "Mill": FU3 @mill
  branch "Delta": @mill KM5 -> M3.2
  branch "Star": star KM6 -> M3.2
  branch "Control" L1 N: F5 X1:1-2 T1 -> CTRL
  sheet "Rest"
  motor M1
}
`;
  const power = only("power", statementsOf(text));
  const shown = power.statements.map((it) =>
    it.kind === "branch" || it.kind === "feed" ? `${it.conductors.map((word) => word.text).join(" ")}: ${showPath(it.path)}` : it.kind,
  );
  expect(shown).toEqual([
    "L1 N: ",
    ": Q2 (KM2 | KM3 crossed) OL2 -> M2",
    ": FU3 @mill",
    ": @mill KM5 -> M3.2",
    ": star KM6 -> M3.2",
    "L1 N: F5 X1:1-2 T1 -> CTRL",
    "sheet-break",
    "declaration",
  ]);
});

test("trials are kept step by step", () => {
  const sequences = statementsOf(example("sequences"));
  expect(sequences.map((it) => ("title" in it ? `${it.kind} ${it.title?.text}` : it.kind))).toEqual([
    "cycle Automatic",
    "trial Stop during the stamp stroke",
    "trial Power returns",
  ]);
  const trial = sequences[1];
  if (trial?.kind !== "trial") throw new Error("no trial");
  expect(trial.steps.map((step) => step.items.map(showItem).join(", "))).toEqual([
    "word press, word PB1",
    "word until, word STAMP, word at, quantity 60 mm",
    "word press, word PB2",
    "word expect, word STAMP-, word and, word CLAMP-",
    "word never, word SOL1, word with, word SOL2",
  ]);
});

test("device properties arrive in reading order, whether on the line or in braces", () => {
  const devices = new Map(
    statementsOf(example("devices")).map((it) => (it.kind === "declaration" ? [it.name?.text, it] : [it.kind, undefined])),
  );
  const items = (name: string) => devices.get(name)?.items.map(showItem);
  expect(items("K1")).toEqual(
    "word poles, number 3, word no, number 1, word nc, word coil, quantity 6 W, word pickup, quantity 15 ms, word dropout, quantity 10 ms".split(
      ", ",
    ),
  );
  expect(items("PS1")).toEqual("word on, part V1.A, word rising, quantity 60 bar, word falling, quantity 45 bar".split(", "));
  expect(items("VS1")).toEqual("word on, point suction, word falling, quantity -0.6 bar".split(", "));
  expect(items("M1")).toEqual("quantity 5.5 kW, quantity 400 V, number 3, word phase, quantity 1455 rpm, quantity 11.2 A".split(", "));
  expect(items("K2")).toEqual(["word part", "text RX-24", "word location", "text panel", "word note", 'text Socket with "LED"']);
});

test("hose and size follow the last end", () => {
  const fluid = only(
    "fluid",
    statementsOf('fluid "H" hydraulic {\n  line a -- b, c -- @d hose size 12 mm\n  plug V1.B, V1.A\n  sheet "Two"\n}\n'),
  );
  const [line, plug, sheet] = fluid.statements;
  if (line?.kind !== "line" || plug?.kind !== "plug" || sheet?.kind !== "sheet-break") throw new Error("wrong statements");
  expect(line.groups.map((group) => group.map(showEnd))).toEqual([["a"], ["b", "c"], ["@d"]]);
  expect(line.items.map(showItem)).toEqual(["word hose", "word size", "quantity 12 mm"]);
  expect(plug.ends.map(showEnd)).toEqual(["V1.B", "V1.A"]);
  expect(sheet.title?.text).toBe("Two");
});

test("names, parts and terminals of a rung have their own places", () => {
  const ladder = only("ladder", statementsOf("rung: /T1.inst:55-56 -> M"));
  const [rung] = ladder.statements;
  if (rung?.kind !== "rung") throw new Error("no rung");
  const [contact] = rung.path.items;
  if (contact?.kind !== "reference") throw new Error("no contact");
  expect([contact.at, contact.name.at, contact.part?.at, contact.terminals?.at].map((it) => it && at(it))).toEqual([
    "1:7-1:21",
    "1:8-1:10",
    "1:11-1:15",
    "1:16-1:21",
  ]);
  expect(at(rung.path.at)).toBe("1:7-1:26");
});

test("helpers of these tests see through what they are given", () => {
  expect(pathOf("rung: A (B|C)->D")).toBe("A (B | C) -> D");
  expect(itemsOf("relay CR1 coil 6 W")).toEqual(["word coil", "quantity 6 W"]);
});
