import { expect, test } from "vitest";
import { nearest } from "../../src/language/nearest.js";

const names = ["CLAMP", "STAMP", "CR1", "CR12", "SOL1", "V1", "rung", "ladder"];

test.each([
  ["CLMP", "CLAMP"],
  ["CLAMPP", "CLAMP"],
  ["CALMP", "CLAMP"],
  ["clamp", "CLAMP"],
  ["SOL2", "SOL1"],
  ["rnug", "rung"],
  ["v1", "V1"],
])("%s is meant for %s", (written, meant) => {
  expect(nearest(written, names)).toBe(meant);
});

test.each(["PUMP7", "X1", "V2", "", "relay", "x".repeat(10_000)])("%s is near to nothing", (written) => {
  expect(nearest(written, names)).toBeUndefined();
});

test("a name is never near to itself, and the first of two equally near wins", () => {
  expect(nearest("CR1", ["CR1"])).toBeUndefined();
  expect(nearest("LS3", ["LS1", "LS2"])).toBe("LS1");
});
