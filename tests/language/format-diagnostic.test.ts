import { describe, expect, test } from "vitest";
import type { Diagnostic } from "../../src/language/diagnostic.js";
import { formatDiagnostic } from "../../src/language/format-diagnostic.js";
import { parse } from "../../src/language/parse.js";

function written(text: string, d: Partial<Diagnostic> & { column: number; endColumn: number; line?: number; endLine?: number }): string[] {
  const { line = 1, endLine = line, column, endColumn, ...more } = d;
  const finding: Diagnostic = {
    code: "some-code",
    severity: "error",
    message: "Something is wrong.",
    at: { file: "m.sprung", line, column, endLine, endColumn },
    ...more,
  };
  return formatDiagnostic(finding, new Map([["m.sprung", text]]), { color: false }).split("\n");
}

describe("a finding on the terminal", () => {
  test("has its place, sentence, line, underline, hint and other places", () => {
    const text = 'ladder "A" {\n rung: A -> M';
    const [finding] = parse(text, "m.sprung").diagnostics;
    expect(formatDiagnostic(finding as Diagnostic, new Map([["m.sprung", text]]), { color: false })).toBe(
      [
        'm.sprung:1:12: error[block-not-closed]: The "{" of "ladder" is never closed.',
        '  1 | ladder "A" {',
        "    |            ^",
        '  hint: Put a "}" behind its last line.',
        '  m.sprung:1:1: note: "ladder" begins here.',
        '  1 | ladder "A" {',
        "    | ^~~~~~",
      ].join("\n"),
    );
  });

  test("marks with ^~~~ from the first to the last character", () => {
    expect(written("relay CR1 abc", { column: 7, endColumn: 10 })[2]).toBe("    |       ^~~");
    expect(written("relay CR1", { column: 10, endColumn: 10 })[2]).toBe("    |          ^");
  });

  test("stays under the text behind tabs", () => {
    expect(written("\ta\tbc", { column: 4, endColumn: 6 }).slice(1)).toEqual(["  1 |     a   bc", "    |         ^~"]);
    expect(written("a\tbc", { column: 2, endColumn: 4 }).slice(1)).toEqual(["  1 | a   bc", "    |  ^~~~"]);
  });

  test("stays under the text behind wide, combined and paired characters", () => {
    expect(written('"漢字" x', { column: 6, endColumn: 7 })[2]).toBe("    |        ^");
    expect(written('"e\u0301" x', { column: 6, endColumn: 7 })[2]).toBe("    |     ^");
    expect(written('"\u{1f600}" x', { column: 6, endColumn: 7 })[2]).toBe("    |      ^");
  });

  test("a stretch over several lines is marked to the end of its first", () => {
    expect(written("relay CR1 {\n}", { column: 7, endLine: 2, endColumn: 2 })[2]).toBe("    |       ^~~~~");
  });

  test("the gutter is as wide as the line number", () => {
    expect(written(`${"\n".repeat(99)}relay`, { line: 100, column: 1, endColumn: 6 }).slice(1)).toEqual(["  100 | relay", "      | ^~~~~"]);
  });

  test("of a very long line only the part about the fault is shown", () => {
    const [, line = "", mark = ""] = written(`${"a".repeat(1000)}XYZ${"b".repeat(1000)}`, { column: 1001, endColumn: 1004 });
    expect(line.length).toBeLessThan(180);
    expect(line.slice(mark.indexOf("^"), mark.lastIndexOf("~") + 1)).toBe("XYZ");
    expect(line).toMatch(/ …a+XYZb+…$/);
  });

  test("a place outside the text, or in a text not at hand, is still told", () => {
    expect(written("x", { line: 7, column: 3, endColumn: 4 })).toEqual(["m.sprung:7:3: error[some-code]: Something is wrong."]);
    expect(written("", { column: 1, endColumn: 1 })).toHaveLength(1);
  });

  test("control characters of the text do not reach the terminal", () => {
    const out = written("a \u001b[31m b\u202e", { column: 1, endColumn: 2, message: 'Not "\u0007".' }).join("\n");
    expect(out.replaceAll("\n", "")).not.toMatch(/[\u0000-\u001f\u202e]/);
    expect(out).toContain("␛[31m");
  });

  test("colour is added only when asked for, and changes no letter", () => {
    const finding = parse("rung A -> M", "m.sprung").diagnostics[0] as Diagnostic;
    const sources = new Map([["m.sprung", "rung A -> M"]]);
    const plain = formatDiagnostic(finding, sources, { color: false });
    const coloured = formatDiagnostic(finding, sources, { color: true });
    expect(plain).not.toContain("\u001b");
    expect(coloured).toContain("\u001b[1;31m");
    expect(coloured.replace(/\u001b\[[\d;]*m/g, "")).toBe(plain);
  });
});
