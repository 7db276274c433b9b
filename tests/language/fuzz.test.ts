import { readFileSync } from "node:fs";
import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { formatDiagnostic } from "../../src/language/format-diagnostic.js";
import { parse } from "../../src/language/parse.js";
import { splitLines, withoutMark } from "../../src/language/source-text.js";

const examples = ["tray-stamper", "rungs", "power", "fluid-components", "sequences", "devices"].map((name) =>
  readFileSync(new URL(`examples/${name}.sprung`, import.meta.url), "utf8"),
);

/** Pieces a text is made of, and pieces that break it. */
const pieces = [
  "drawing", "include", "supply", "ladder", "rung", "sheet", "fluid", "line", "pilot", "plug", "power", "cycle", "trial", "relay", "valve",
  "CR1", "V1.A", "CR1:13-14", "S5.auto", "@run", "@", '"text"', '"', "“x”", "\\", "(", ")", "{", "}", "|", "/", "->", "--", "-", "+", ",",
  ":", ".", ";", "=", "#", "12", "1.5 s", "40mm", "1,5 mm", "3/8 in", "1/0 in", "5/2", "then", " ", "\t", "\n", "\r\n", "\r", "\u0000",
  "\ufeff", "\ufffd", "\u00a0", "é", "漢", "\u{1f600}", "\ud800", "°C", "µm", "1/min",
]; // biome-ignore format: a list to add to

/** What must hold for any text at all. */
function holds(text: string): void {
  const { tree, diagnostics } = parse(text, "m.sprung");
  const lines = splitLines(withoutMark(text));
  const sources = new Map([["m.sprung", withoutMark(text)]]);
  const inside = (at: { line: number; column: number; endLine: number; endColumn: number }): void => {
    for (const [line, column] of [
      [at.line, at.column],
      [at.endLine, at.endColumn],
    ] as const) {
      if (!(line >= 1 && line <= lines.length && column >= 1 && column <= (lines[line - 1]?.length ?? 0) + 1)) {
        throw new Error(`${line}:${column} is outside the text`);
      }
    }
    if (at.endLine < at.line || (at.endLine === at.line && at.endColumn < at.column)) throw new Error("a range ends before it begins");
  };
  const visit = (node: unknown): void => {
    if (typeof node !== "object" || node === null) return;
    if (Object.hasOwn(node, "at")) inside((node as { at: never }).at);
    for (const inner of Object.values(node)) visit(inner);
  };
  visit(tree.statements);
  for (const finding of diagnostics) {
    inside(finding.at);
    for (const other of finding.seeAlso ?? []) inside(other.at);
    formatDiagnostic(finding, sources, { color: true });
    // The lexer hands the grammar only what fits it, so this sentence, the one for the rest, is never needed.
    if (finding.message === "This has no place here.") throw new Error("a token was left over");
  }
  // A text of which nothing can be understood always says why.
  if (tree.statements.length === 0 && diagnostics.length === 0 && !text.includes("include")) throw new Error("nothing read, nothing said");
}

describe("any text at all is read", () => {
  test("made of random characters", () => {
    fc.assert(fc.property(fc.string({ unit: "binary", maxLength: 300 }), holds), { numRuns: 400, seed: 1 });
  });

  test("made of the language's own pieces", () => {
    const text = fc.array(fc.constantFrom(...pieces), { maxLength: 80 }).map((parts) => parts.join(" "));
    fc.assert(fc.property(text, holds), { numRuns: 1500, seed: 2 });
    const glued = fc.array(fc.constantFrom(...pieces), { maxLength: 60 }).map((parts) => parts.join(""));
    fc.assert(fc.property(glued, holds), { numRuns: 1500, seed: 3 });
  });

  test("made from a good drawing by random slips", () => {
    const slip = fc.record({
      where: fc.double({ min: 0, max: 1, noNaN: true }),
      remove: fc.nat(8),
      put: fc.oneof(fc.constant(""), fc.constantFrom(...pieces)),
    });
    const text = fc.tuple(fc.constantFrom(...examples), fc.array(slip, { minLength: 1, maxLength: 6 })).map(([good, slips]) =>
      slips.reduce((now, { where, remove, put }) => {
        const place = Math.floor(where * now.length);
        return now.slice(0, place) + put + now.slice(place + remove);
      }, good),
    );
    fc.assert(fc.property(text, holds), { numRuns: 600, seed: 4 });
  });

  test("found in earlier runs", () => {
    for (const text of [
      "rung",
      "line drawing -- “x”",
      "fluid “x” {\n line “",
      "relay A {\nrung: (",
      "rung: (|",
      "rung \ufeff :",
      "rung , :",
      "rung drawing / :",
      "rung \u2003 A :",
      "power {",
      "{}}",
    ])
      holds(text);
  });

  test("cut off anywhere", () => {
    for (const good of examples) for (let end = 0; end < good.length; end += 7) holds(good.slice(0, end));
  });
});

test("one slip in one rung leaves the other rungs as they were", () => {
  const rungs = Array.from({ length: 8 }, (_, i) => `  rung "R${i}": A${i} (B${i} | /C${i}) -> M${i}`);
  const read = (lines: string[]): Map<string, string> => {
    const { tree } = parse(`ladder "L" {\n${lines.join("\n")}\n}\n`, "m.sprung");
    const ladder = tree.statements[0];
    const found = ladder?.kind === "ladder" ? ladder.statements : [];
    const plain = (it: unknown): string => JSON.stringify(it, (key, value) => (key === "at" ? undefined : value));
    return new Map(found.map((it) => [it.kind === "rung" ? (it.title?.text ?? "") : it.kind, plain(it)]));
  };
  const good = read(rungs);
  const breaking = fc.constantFrom("(", ")", "|", '"', "->", "/", "@", ",", ";", ":", "(|", "((", "V1.");
  fc.assert(
    fc.property(fc.nat(7), fc.integer({ min: 14, max: 30 }), breaking, (which, column, put) => {
      const lines = rungs.map((line, i) => (i === which ? line.slice(0, column) + put + line.slice(column) : line));
      const now = read(lines);
      for (const [title, rung] of good) if (title !== `R${which}`) expect(now.get(title)).toBe(rung);
    }),
    { numRuns: 400, seed: 5 },
  );
});
