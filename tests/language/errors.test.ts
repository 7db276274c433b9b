import { describe, expect, test } from "vitest";
import { parse } from "../../src/language/parse.js";
import { at, findings, only, showEnd, showItem, showPath } from "./view.js";

/** Each slip alone: its text, and its one finding with its place. */
const slips: [what: string, text: string, finding: string][] = [
  ["a bracket left open", 'rung "Clamp": @run (/CR2 | -> SOL1', "branch-not-closed 1:20-1:21"],
  ["a bracket left open before the next rung", "rung: (A | B -> M\nrung: C -> N", "branch-not-closed 1:7-1:8"],
  ["a bracket closed twice", "rung: A ) -> M", "branch-not-opened 1:9-1:10"],
  ["branches without brackets", "rung: A | B -> M", "branch-without-bracket 1:9-1:10"],
  ["two arrows", "rung: A -> M -> N", "arrow-twice 1:14-1:16"],
  ["a line that stops at its arrow", "rung: A ->\nrung: B -> M", "statement-unfinished 1:9-1:11"],
  ["an arrow with nothing behind it", "ladder {\nrung: A ->\n}", "load-missing 2:9-2:11"],
  ["a branch whose arrow has nothing behind it", "rung: (A -> | B) -> M", "load-missing 1:10-1:12"],
  ["a rung without its colon", 'rung "A" B -> M', "colon-missing 1:8-1:9"],
  ["a function text without quotation marks", "rung Clamp shut: A -> M", "text-not-quoted 1:6-1:16"],
  ["a text within a path", 'rung: A "b" -> M', "unexpected-text 1:9-1:12"],
  ["a comma within a path", "rung: A, B -> M", "unexpected-symbol 1:8-1:9"],
  ["a slash before nothing", "rung: / -> M", "name-missing 1:7-1:8"],
  ["a point without a name", "rung: @ A -> M", "name-missing 1:7-1:8"],
  ["a dot before nothing", "rung: T1. A -> M", "name-missing 1:7-1:10"],
  ["square brackets", "rung: A [ -> M", "unexpected-character 1:9-1:10"],
  ["a text left open", 'relay CR1 "Run\nrelay CR2', "text-not-closed 1:11-1:15"],
  ["a text left open before a brace", 'ladder "Control {\n rung: A -> M\n}', "text-not-closed 1:8-1:16"],
  ["a text left open before a rung's colon", 'rung "Clamp: A -> M', "text-not-closed 1:6-1:12"],
  ["a backslash before another sign", String.raw`relay CR1 "C:\new"`, "unknown-escape 1:14-1:16"],
  ["quotation marks of books", "relay CR1 “Run”", "unexpected-character 1:11-1:12"],
  ["a foreign comment", "relay CR1 // old", "unexpected-character 1:11-1:13"],
  ["a semicolon", "relay CR1;", "unexpected-character 1:10-1:11"],
  ["an equals sign", "cylinder C bore = 40 mm", "unexpected-character 1:17-1:18"],
  ["a control character", "relay CR1 \u0007", "unexpected-character 1:11-1:12"],
  ["a decimal comma", "timer T1 on-delay 1,5 s", "decimal-comma 1:19-1:24"],
  ["a fraction of nothing", "cylinder C bore 1/0 in", "number-unreadable 1:17-1:23"],
  ["a typed designation dash", "relay -K1", "dash-not-typed 1:7-1:8"],
  ["an arrow in a declaration", "relay CR1 -> CR2 -> CR3", "unexpected-symbol 1:11-1:13"],
  ["a misspelt rung", 'rnug "A": B -> M', "unknown-keyword 1:1-1:5"],
  ["a keyword in capitals", 'LADDER "A" {\n}', "unknown-keyword 1:1-1:7"],
  ["a misspelt line", 'fluid "F" hydraulic {\n linne a -- b\n}', "unknown-keyword 2:2-2:7"],
  ["a statement without its first word", '"Run" CR1', "statement-expected 1:1-1:10"],
  ["a line without its first word", 'fluid "F" hydraulic {\n V1.A -- V2.P\n}', "statement-expected 2:2-2:6"],
  ["a block left open", 'ladder "A" {\n rung: A -> M', "block-not-closed 1:12-1:13"],
  ["a block left open before another", 'ladder "A" {\n rung: A -> M\nfluid "F" hydraulic {\n}', "block-not-closed 1:12-1:13"],
  ["a device's braces left open", 'relay CR1 {\n  poles 3 no\nladder "A" {\n  rung: A -> M\n}', "block-not-closed 1:11-1:12"],
  ["a power circuit left open", 'power "Main" {\n branch "x": A -> M', "block-not-closed 1:14-1:15"],
  ["a branch without its colon", 'power "P" {\n branch "x" F1 -> M\n}', "colon-missing 2:11-2:12"],
  ["a feed without its colon", 'power "P" {\n feed L1 L2 Q1 -> F1\n}', "colon-missing 2:5-2:6"],
  ["a title behind the conductors", 'power "P" {\n branch L1 "x": F1 -> M\n}', "unexpected-symbol 2:12-2:15"],
  ["a comma between things in series", 'power "P" {\n branch "x": F1, KM1 -> M\n}', "unexpected-symbol 2:16-2:17"],
  ["two arrows in a branch", 'power "P" {\n branch "x": F1 -> KM1 -> M\n}', "arrow-twice 2:24-2:26"],
  ["a branch whose arrow has nothing behind it", 'power "P" {\n branch "x": F1 ->\n}', "load-missing 2:17-2:19"],
  ["a bracket left open in a branch", 'power "P" {\n branch "x": F1 (KM1 | KM2 -> M\n}', "branch-not-closed 2:17-2:18"],
  ["a bracket closed twice in a branch", 'power "P" {\n branch "x": F1 ) -> M\n}', "branch-not-opened 2:17-2:18"],
  ["taps without a comma", 'power "P" {\n feed L1: Q -> F1 F2\n}', "comma-missing 2:19-2:21"],
  ["a comma before nothing in a feed", 'power "P" {\n feed L1: Q -> F1,\n}', "end-missing 2:18-2:19"],
  ["a comma behind nothing in a feed", 'power "P" {\n feed L1: Q -> , F1\n}', "end-missing 2:16-2:17"],
  ["a misspelt branch", 'power "P" {\n brnch "x": F1 -> M\n}', "unknown-keyword 2:2-2:7"],
  ["a misspelt feed", 'power "P" {\n fed L1 L2: Q -> F1\n}', "unknown-keyword 2:2-2:5"],
  ["a rung in a power circuit", 'power "P" {\n rung: A -> M\n}', "misplaced 2:2-2:6"],
  ["a branch in a ladder", 'ladder "A" {\n branch "x": A -> M\n}', "misplaced 2:2-2:8"],
  ["a feed at the top", "feed L1: Q1 -> F1", "misplaced 1:1-1:5"],
  ["a power circuit without its braces", 'power "P" 400 V AC\nrelay CR1', "block-missing 1:1-1:6"],
  ["a branch left open before the next", 'power "P" {\n branch "x": A ->\n branch "y": B -> M\n}', "statement-unfinished 2:16-2:18"],
  ["a brace closed twice", "relay CR1 { no 2 }\n}\nrelay CR2", "block-not-opened 2:1-2:2"],
  ["braces at a rung", "rung: A { B } -> M", "brace-not-expected 1:9-1:10"],
  ["a line in a ladder", 'ladder "A" {\n line a -- b\n}', "misplaced 2:2-2:6"],
  ["a rung in a fluid circuit", 'fluid "F" hydraulic {\n rung: A -> M\n}', "misplaced 2:2-2:6"],
  ["a line at the top", "line a -- b", "misplaced 1:1-1:5"],
  ["a sheet at the top", 'sheet "Two"', "misplaced 1:1-1:6"],
  ["a block in another", 'fluid "F" hydraulic {\n cycle "C" {\n press A\n }\n}', "misplaced 2:2-2:7"],
  ["a word too many in a block's first line", 'ladder "A" suply CTRL {\n}', "unexpected-word 1:12-1:17"],
  ["a supply without its name", 'ladder "A" supply {\n}', "name-missing 1:12-1:18"],
  ["a title without quotation marks", "drawing Stamper {\n}", "text-not-quoted 1:9-1:16"],
  ["a field without its word", 'drawing "A" {\n "x"\n}', "field-expected 2:2-2:5"],
  ["an include without its path", "include", "text-expected 1:1-1:8"],
  ["an include with two", 'include "a" "b"', "unexpected-word 1:13-1:16"],
  ["a ladder without its braces", 'ladder "L" supply CTRL\nrelay CR1', "block-missing 1:1-1:7"],
  ["a fluid circuit without its braces", 'fluid "a { b" pneumatic\nrelay CR1', "block-missing 1:1-1:6"],
  ["no dash between two ends", 'fluid "F" hydraulic {\n line V1.A V2.P\n}', "dash-missing 2:12-2:16"],
  ["a dash before nothing", 'fluid "F" hydraulic {\n line V1.A --\n}', "end-missing 2:12-2:14"],
  ["a dash behind nothing", 'fluid "F" hydraulic {\n line -- V1.A\n}', "end-missing 2:7-2:9"],
  ["a text as the end of a line", 'fluid "F" hydraulic {\n line "V1" -- V2.P\n}', "end-expected 2:7-2:11"],
  ["terminals in a fluid line", 'fluid "F" hydraulic {\n line V1:4 -- V2.P\n}', "unexpected-symbol 2:9-2:11"],
];

describe("one slip, one finding, at its place", () => {
  test.each(slips)("%s", (_what, text, finding) => {
    const found = findings(text);
    // Without one end there is nothing to join either; all other slips have one finding.
    expect(found.filter((it) => !(finding.startsWith("end-") && it.startsWith("end-missing") && it !== finding))).toEqual([finding]);
    for (const d of parse(text, "m.sprung").diagnostics) {
      expect(d.severity).toBe("error");
      expect(d.message).toMatch(/^[A-Z"].*\.$/);
      expect(`${d.message} ${d.hint ?? ""}`).not.toMatch(/token|Expecting|EOF|WORD|NEWLINE|undefined|terminal rule/);
    }
  });

  test("every code is lower case words joined with dashes", () => {
    for (const [, , finding] of slips) expect(finding).toMatch(/^[a-z]+(-[a-z]+)* \d+:\d+-\d+:\d+$/);
  });
});

describe("what follows a slip is still understood", () => {
  const rungsOf = (text: string): string[] =>
    parse(text, "m.sprung").tree.statements.flatMap((it) =>
      it.kind === "ladder" ? it.statements.map((inner) => (inner.kind === "rung" ? showPath(inner.path) : inner.kind)) : [it.kind],
    );

  test("a rung with an open bracket keeps its load", () => {
    const { tree, diagnostics } = parse('rung "Clamp": @run (/CR2 | -> SOL1', "m.sprung");
    expect(diagnostics).toMatchObject([
      { code: "branch-not-closed", at: { line: 1, column: 20 }, hint: 'Put a ")" behind the last branch.' },
    ]);
    const [rung] = only("ladder", tree.statements).statements;
    if (rung?.kind !== "rung") throw new Error("no rung");
    expect(showPath(rung.path)).toBe("@run (/CR2) -> SOL1");
    expect(rung.incomplete).toBe(true);
  });

  test("the rungs behind it are whole", () => {
    expect(rungsOf('rung "a": A (B | -> M\nrung "b": C ) -> N\nrung "c" D -> O\nrung: E -> P')).toEqual([
      "A (B) -> M",
      "C -> N",
      "D -> O",
      "E -> P",
    ]);
  });

  test("brackets in brackets left open", () => {
    expect(rungsOf("rung: (A | (B C -> M\nrung: D -> N")).toEqual(["(A | (B C)) -> M", "D -> N"]);
    expect(rungsOf("rung: A -> (M | LS5 -> N")).toEqual(["A -> (M | LS5 -> N)"]);
  });

  test("a block that is never closed ends where the next begins", () => {
    const { tree } = parse('ladder "A" {\n  rung: A -> M\nfluid "F" hydraulic {\n  line a -- b\n}\nrelay CR1', "m.sprung");
    expect(tree.statements.map((it) => it.kind)).toEqual(["ladder", "fluid", "declaration"]);
    expect(at(tree.statements[0]?.at as never)).toBe("1:1-2:15");
  });

  test("only the statements with a slip are marked incomplete", () => {
    const { tree } = parse('relay CR1 ;\nrelay CR2\nladder "A" {\n  rung: A -> M\n  rung: B -> N |\n}', "m.sprung");
    expect(tree.statements.map((it) => it.incomplete)).toEqual([true, undefined, true]);
    const ladder = tree.statements[2];
    expect(ladder?.kind === "ladder" && ladder.statements.map((it) => it.incomplete)).toEqual([undefined, true]);
  });

  test("a line with a dash missing is joined all the same", () => {
    const { tree } = parse('fluid "F" hydraulic {\n line V2.4 FC1 -- STAMP.cap\n plug V1.A V1.B\n}', "m.sprung");
    const [line, plug] = only("fluid", tree.statements).statements;
    if (line?.kind !== "line" || plug?.kind !== "plug") throw new Error("wrong statements");
    expect(line.groups.map((group) => group.map(showEnd))).toEqual([["V2.4"], ["FC1"], ["STAMP.cap"]]);
    expect(plug.ends.map(showEnd)).toEqual(["V1.A", "V1.B"]);
  });

  test("a misspelt keyword is taken as what it was meant for, and named", () => {
    const { tree, diagnostics } = parse('lader "A" {\n rung: A -> M\n}\nfluid "F" hydraulic {\n linne a -- b\n}', "m.sprung");
    expect(diagnostics.map((d) => d.hint)).toEqual(['Did you mean "ladder"?', 'Did you mean "line"?']);
    expect(tree.statements.map((it) => it.kind)).toEqual(["ladder", "fluid"]);
    const fluid = tree.statements[1];
    expect(fluid?.kind === "fluid" && fluid.statements[0]).toMatchObject({ kind: "line", role: { text: "line" } });
  });

  test("a decimal comma is read as a point", () => {
    const [timer] = parse("timer T1 on-delay 1,5 s", "m.sprung").tree.statements;
    const item = timer?.kind === "declaration" ? timer.items[1] : undefined;
    expect(item).toMatchObject({ kind: "quantity", quantity: { value: 1.5, dimension: "time" } });
  });

  test("a block left open names where it began", () => {
    const [finding] = parse('ladder "A" {\n rung: A -> M', "m.sprung").diagnostics;
    expect(finding?.seeAlso?.map((other) => `${at(other.at)} ${other.message}`)).toEqual(['1:1-1:7 "ladder" begins here.']);
  });

  test("all slips of a text are reported in one run, in the order of their places", () => {
    const all = slips.map(([, text]) => text).filter((text) => !/left open|\{|include/.test(text));
    const found = parse(all.join("\n"), "m.sprung").diagnostics;
    expect(found.length).toBeGreaterThanOrEqual(all.length);
    const order = found.map((d) => d.at.line * 10_000 + d.at.column);
    expect(order).toEqual([...order].sort((a, b) => a - b));
  });
});

describe("nesting", () => {
  const nested = (depth: number): string => `rung: ${"(".repeat(depth)}A${")".repeat(depth)} -> M\nrung: B -> N`;

  test("64 brackets deep is read", () => {
    expect(findings(nested(64))).toEqual([]);
  });

  test.each([65, 10_000])("%i deep is refused at the first bracket too many, and the next rung is read", (depth) => {
    expect(findings(nested(depth))).toEqual(["nesting-too-deep 1:71-1:72"]);
    const ladder = only("ladder", parse(nested(depth), "m.sprung").tree.statements);
    expect(ladder.statements).toHaveLength(2);
  });

  test("ten thousand brackets left open, or braces, are as clear", () => {
    expect(findings(`rung: ${"(".repeat(10_000)}A -> M\nrung: B -> N`)).toEqual(["nesting-too-deep 1:71-1:72"]);
    expect(findings(`ladder "A" ${"{".repeat(10_000)}`)).toContain("nesting-too-deep 1:76-1:77");
    expect(findings("ladder {\n".repeat(10_000)).filter((it) => it.startsWith("nesting-too-deep"))).toHaveLength(1);
  });
});

test("long texts are read in the time of reading them", () => {
  const before = performance.now();
  expect(findings(`rung: ${"A ".repeat(100_000)}-> M`)).toEqual([]);
  expect(findings(`relay CR1 "${"x".repeat(1_000_000)}"`)).toEqual([]);
  expect(findings(";a".repeat(10_000)).length).toBe(10_000);
  // Minutes, if reading took the square of the length; a second or two on a slow machine.
  expect(performance.now() - before).toBeLessThan(30_000);
});

test("items know what they are", () => {
  const [device] = parse('x y word V1.A @p "t" 5 5 mm ,', "m.sprung").tree.statements;
  expect(device?.kind === "declaration" && device.items.map(showItem)).toEqual(
    "word word,part V1.A,point p,text t,number 5,quantity 5 mm,symbol ,".split(/,(?=[a-z])/),
  );
});
