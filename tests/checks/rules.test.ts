import { describe, expect, test } from "vitest";
import { rules } from "../../src/checks/rules.js";
import { announcedIn, diagnosticsOf, foundIn } from "../support/announced.js";
import { filesBelow, readText } from "../support/sources.js";

const folder = "tests/checks/fixtures";
const fixtures = filesBelow(folder, ".sprung");

test.each(fixtures)("%s is found to have what it announces and nothing else", (path) => {
  const text = readText(path);
  expect(foundIn(text)).toEqual(announcedIn(text));
});

describe.each(rules)("the rule $code", ({ code, severity }) => {
  test("has a fixture that raises it and a near miss that does not", () => {
    expect(
      announcedIn(readText(`${folder}/${code}.sprung`)).filter((words) => words.includes(` ${severity} ${code} `)).length,
    ).toBeGreaterThan(0);
    expect(announcedIn(readText(`${folder}/${code}.near-miss.sprung`)).filter((words) => words.includes(` ${code} `))).toEqual([]);
  });

  test("speaks in whole sentences", () => {
    const found = diagnosticsOf(readText(`${folder}/${code}.sprung`)).filter((diagnostic) => diagnostic.code === code);
    for (const { message, hint } of found) {
      expect(message).toMatch(/^[A-Z@].*\.$/);
      if (hint !== undefined) expect(hint).toMatch(/^[A-Z]/);
      expect(`${message} ${hint ?? ""}`).not.toMatch(/undefined|NaN|\[object|null/);
    }
  });
});

test("no two rules share a code", () => {
  expect(new Set(rules.map(({ code }) => code)).size).toBe(rules.length);
});

test("every fixture belongs to a rule", () => {
  const names = fixtures.map((path) => path.slice(folder.length + 1).replace(/(\.near-miss)?\.sprung$/, ""));
  expect(names.filter((name) => !rules.some(({ code }) => code === name))).toEqual([]);
});
