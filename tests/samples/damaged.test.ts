import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { compile } from "../../src/compile.js";
import { formatDiagnostic } from "../../src/language/format-diagnostic.js";
import { memoryWorld } from "../support/memory-world.js";
import { filesBelow, readText } from "../support/sources.js";

/** Whatever the text, the program ends with a drawing or with errors that have their place in it. */
async function endsWell(text: string): Promise<void> {
  const { set, diagnostics, sources } = await compile("damaged.sprung", memoryWorld({ "damaged.sprung": text }));
  const errors = diagnostics.filter(({ severity }) => severity === "error");
  expect(set === undefined, "errors and a drawing").toBe(errors.length > 0);
  const lines = text.split("\n");
  for (const diagnostic of diagnostics) {
    const { line, column, endLine, endColumn } = diagnostic.at;
    expect(line).toBeGreaterThanOrEqual(1);
    expect(endLine).toBeLessThanOrEqual(lines.length);
    expect(endLine > line || endColumn >= column).toBe(true);
    expect(column).toBeLessThanOrEqual((lines[line - 1] as string).length + 1);
    expect(diagnostic.message).not.toMatch(/undefined|NaN|\[object/);
    expect(formatDiagnostic(diagnostic, sources, { color: false })).toContain(diagnostic.message);
  }
}

describe.each(filesBelow("samples", ".sprung"))("%s, damaged", { timeout: 300_000 }, (path) => {
  const text = readText(path);
  const lines = text.split("\n");
  const words = [...new Set(text.replace(/#.*/g, "").match(/"[^"]*"|[\w./+-]+|[^\s\w]/g))];

  test("with each of its lines missing in turn", async () => {
    for (const [index, line] of lines.entries()) {
      if (/^\s*(#|$)/.test(line)) continue;
      await endsWell(lines.filter((_, other) => other !== index).join("\n"));
    }
  });

  test("cut off anywhere", async () => {
    await fc.assert(
      fc.asyncProperty(fc.nat(text.length), (end) => endsWell(text.slice(0, end))),
      { numRuns: 60 },
    );
  });

  test("with words exchanged", async () => {
    const change = fc.record({ at: fc.nat(words.length - 1), by: fc.nat(words.length - 1), which: fc.nat(5) });
    await fc.assert(
      fc.asyncProperty(fc.array(change, { minLength: 1, maxLength: 4 }), (changes) => {
        let damaged = text;
        for (const { at, by, which } of changes) {
          const pieces = damaged.split(words[at] as string);
          if (pieces.length < 2) continue;
          const cut = 1 + (which % (pieces.length - 1));
          damaged = pieces.slice(0, cut).join(words[at]) + (words[by] as string) + pieces.slice(cut).join(words[at]);
        }
        return endsWell(damaged);
      }),
      { numRuns: 80 },
    );
  });
});
