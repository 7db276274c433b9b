import { expect, test } from "vitest";
import { soundMachine } from "./machine-of.js";

test("the latest revision is in force, in whatever order they are written", () => {
  const { drawing } = soundMachine('drawing "X" {\n revision C 2026-06-01 "c"\n revision A 2026-04-01 "a"\n revision B 2026-06-01 "b"\n}');
  expect(drawing.revisions.map(({ index }) => index)).toEqual(["A", "C", "B"]);
  expect(drawing.date).toBe("2026-06-01");
});

test("a date given outright stands, whatever the revisions say", () => {
  const { drawing } = soundMachine('drawing "X" {\n date 2026-01-02\n revision A 2026-04-01 "a"\n}');
  expect(drawing.date).toBe("2026-01-02");
});
