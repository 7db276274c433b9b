import { describe, expect, test } from "vitest";
import { findings, itemsOf, only, pathOf, showEnd, showItem, statementsOf } from "./view.js";

const names = (text: string): (string | undefined)[] =>
  statementsOf(text).map((it) => (it.kind === "declaration" ? it.name?.text : it.kind));

describe("comments and texts", () => {
  test("a comment ends with its line and is none within a text", () => {
    expect(itemsOf('relay CR1 "No. #1" coil 6 W # coil 7 W\n# relay CR2')).toEqual(["word coil", "quantity 6 W"]);
    expect(only("declaration", statementsOf('relay CR1 "No. #1"')).text?.text).toBe("No. #1");
  });

  test("a text holds quotation marks and backslashes behind a backslash", () => {
    expect(only("declaration", statementsOf(String.raw`relay CR1 "a \"b\" \\"`)).text?.text).toBe(String.raw`a "b" \ `.trim());
  });
});

describe("where a statement ends", () => {
  test("with its line", () => {
    expect(names("relay CR1\nrelay CR2\r\nrelay CR3\rrelay CR4")).toEqual(["CR1", "CR2", "CR3", "CR4"]);
  });

  test("not while a bracket is open", () => {
    expect(pathOf("rung: PB1 (CR1\n  | CR2 # two\n\n  LS1\n) -> M")).toBe("PB1 (CR1 | CR2 LS1) -> M");
  });

  test.each([
    ["|", "rung: (A |\n B) -> M", "(A | B) -> M"],
    ["->", "rung: A ->\n M", "A -> M"],
    ["-> and a comment", "rung: A -> # load\n\n M", "A -> M"],
  ])("not behind %s", (_sign, text, path) => {
    expect(pathOf(text)).toBe(path);
  });

  test("not behind -- or a comma", () => {
    const [line] = only("fluid", statementsOf('fluid "F" pneumatic {\n line a --\n b,\n c -- d\n}')).statements;
    if (line?.kind !== "line") throw new Error("no line");
    expect(line.groups.map((group) => group.map(showEnd).join(","))).toEqual(["a", "b,c", "d"]);
  });

  test("not behind then", () => {
    const cycle = only("cycle", statementsOf('cycle "C" {\n expect A+ then\n B+\n press then\n}'));
    expect(cycle.steps.map((step) => step.items.map(showItem).length)).toEqual([4, 2]);
  });

  test("with its closing brace, so that short blocks may stand in one line", () => {
    expect(names("supply A 24 V { rails L+ M } supply B 230 V")).toEqual(["A", "B"]);
  });

  test("an opening brace may stand in the next line", () => {
    expect(only("ladder", statementsOf('ladder "A"\n\n# comment\n{\n rung: A -> B\n}')).statements).toHaveLength(1);
  });
});

describe("names", () => {
  test.each([
    "CR1",
    "1CR",
    "CR-12",
    "SOL1",
    "LS2A",
    "K1",
    "1A1",
    "2A",
    "1S",
    "1M",
    "a_b",
    "rod",
    "left",
    "line",
    "rung",
    "plug",
    "Schütz1",
  ])("%s is a designation", (name) => {
    expect(names(`relay ${name} "x"`)).toEqual([name]);
    expect(pathOf(`rung: /${name} ${name} -> ${name}`)).toBe(`/${name} ${name} -> ${name}`);
  });

  test("keywords are keywords only where they open a statement", () => {
    expect(itemsOf("limit-switch line on drawing at ladder")).toEqual(["word on", "word drawing", "word at", "word ladder"]);
  });

  test("numbers with letters or dashes are words", () => {
    expect(itemsOf("x y 1CR 13-14 5/2 2026-03-02 TS-2040 16X")).toEqual(
      "word 1CR,word 13-14,word 5/2,word 2026-03-02,word TS-2040,word 16X".split(","),
    );
  });

  test("parts, terminals, points, potentials and strokes", () => {
    expect(itemsOf("x y V1.14 CLAMP.cap X1:4 @run L+ 0V CLAMP+ STAMP-")).toEqual(
      "part V1.14,part CLAMP.cap,word X1:4,point run,word L+,quantity 0V,word CLAMP+,word STAMP-".split(","),
    );
  });

  test("signs need no blanks around them", () => {
    expect(pathOf("rung:/PB2(PB1|CR1)@run->(CR1|LT1)")).toBe("/PB2 (PB1 | CR1) @run -> (CR1 | LT1)");
    const [line] = only("fluid", statementsOf('fluid "F" pneumatic {\n line V1.4--FC-1--@p,C-D--E\n}')).statements;
    if (line?.kind !== "line") throw new Error("no line");
    expect(line.groups.map((group) => group.map(showEnd))).toEqual([["V1.4"], ["FC-1"], ["@p", "C-D"], ["E"]]);
  });

  test("in a rung or as the end of a line, digits are names", () => {
    expect(pathOf("rung: 5 2A 24V:1 -> 1M")).toBe("5 2A 24V:1 -> 1M");
  });

  test("a branch with nothing in it is a branch", () => {
    const ladder = only("ladder", statementsOf("rung: (A |) (| B |  | C) -> M"));
    const [rung] = ladder.statements;
    const counts =
      rung?.kind === "rung" ? rung.path.items.map((it) => (it.kind === "parallel" ? it.branches.map((b) => b.items.length) : 0)) : [];
    expect(counts).toEqual([[1, 0], [0, 1, 0, 1], 0]);
  });

  test("a plug is a device outside fluid circuits and closes ports within", () => {
    expect(names('plug X5 "Cable"')).toEqual(["X5"]);
    expect(only("fluid", statementsOf('fluid "F" hydraulic {\n plug V1.B\n}')).statements[0]?.kind).toBe("plug");
  });
});

describe("numbers and units", () => {
  test.each([
    ["40 mm", "quantity 40 mm"],
    ["40mm", "quantity 40mm"],
    ["40   mm", "quantity 40 mm"],
    ["1.5 s", "quantity 1.5 s"],
    ["-5 °C", "quantity -5 °C"],
    ["16 cm3/rev", "quantity 16 cm3/rev"],
    ["16cm³/rev", "quantity 16cm³/rev"],
    ["1455 1/min", "quantity 1455 1/min"],
    ["3/8 in", "quantity 3/8 in"],
    ["1-1/2 in", "quantity 1-1/2 in"],
    ["1 1/2 in", "quantity 1 1/2 in"],
    ["12", "number 12"],
    ["1.5", "number 1.5"],
  ])("%s", (written, item) => {
    expect(itemsOf(`x y ${written}`)).toEqual([item]);
    expect(itemsOf(`x y ${written} left`)).toEqual([item, "word left"]);
  });

  test("24VDC is a voltage and its kind", () => {
    expect(itemsOf("supply S 24VDC")).toEqual(["quantity 24V", "word DC"]);
  });

  test("a word that only begins like a unit is a word", () => {
    expect(itemsOf("x y 5 inner 5 A-side 3 V+ 2 m.cap 4 bars")).toEqual(
      "number 5,word inner,number 5,word A-side,number 3,word V+,number 2,part m.cap,number 4,word bars".split(","),
    );
  });

  test("a number with an unknown unit stays a number", () => {
    expect(itemsOf("x y 100 mm/s 7 furlongs")).toEqual(["number 100", "word mm/s", "number 7", "word furlongs"]);
  });
});

describe("the text as a file", () => {
  test("a byte order mark counts for nothing", () => {
    expect(findings("\ufeffrelay CR1\nrung A -> B").slice(0, 1)).toEqual(["colon-missing 2:4-2:5"]);
    expect(findings("\ufeff)")).toEqual(["statement-expected 1:1-1:2"]);
  });

  test("a tab is one column, and Windows line ends count once", () => {
    expect(findings('relay CR1\r\n\t\tladder "a" x {\r\n}\r\n')).toEqual(["unexpected-word 2:14-2:15"]);
  });

  test("an empty file, and one of comments only", () => {
    expect(findings("")).toEqual(["empty-file 1:1-1:1"]);
    expect(findings("\n# nothing\n")).toEqual(["empty-file 1:1-1:1"]);
  });

  test("a binary file", () => {
    expect(findings("ab\nc\0d\0")).toEqual(["not-text 2:2-2:3"]);
  });

  test("a text in another encoding", () => {
    expect(findings('drawing "M\ufffdller" { }')).toEqual(["not-text 1:11-1:12"]);
  });
});
