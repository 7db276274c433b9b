import { expect, test } from "vitest";
import { filesBelow, readText } from "../support/sources.js";

/** Words of workshops, not of the project; each is spelt so that this file does not contain it. */
const foreign: [what: string, pattern: RegExp][] = [
  ["a path outside the project", /\/[w]ork\/|\.\.\/[s]hared\b|\/[t]mp\/team/],
  ["a number of a task", /\b(issue|ticket|task) ?#\d/i],
  ["a registry", /registry\.[n]pmjs|[v]erdaccio|[a]rtifactory/i],
  ["a working paper", /\b(check-[v]alues|road[m]ap|architectu[r]e|langua[g]e|symbo[l]s|drawin[g]|sty[l]e)\.md\b/],
];

const texts = [
  ...["src", "tests", "samples", "symbols", "templates"].flatMap((folder) =>
    filesBelow(folder, ".ts", ".mjs", ".md", ".svg", ".sprung", ".langium", ".txt"),
  ),
  "README.md",
  "DEVELOPERS.md",
  "CHANGELOG.md",
  "package.json",
];

test("the project speaks of itself alone", () => {
  const found = texts.flatMap((path) => {
    const text = readText(path);
    return foreign.filter(([, pattern]) => pattern.test(text)).map(([what, pattern]) => `${path}: ${what}: ${pattern.exec(text)?.[0]}`);
  });
  expect(found).toEqual([]);
});
