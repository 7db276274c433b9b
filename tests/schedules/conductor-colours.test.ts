import { expect, test } from "vitest";
import { conductorColour } from "../../src/schedules/conductor-colours.js";

// IEC 60204-1:2005, 13.2.2 to 13.2.4: protective conductor green-and-yellow, neutral light blue; black for power circuits, red for AC
// control, blue for DC control, orange for excepted circuits.
test.each([
  ["L1", undefined, "black"],
  ["L+", undefined, "black"],
  [undefined, { current: "AC" }, "red"],
  ["L1", { current: "AC" }, "red"],
  [undefined, { current: "DC" }, "blue"],
  ["L+", { current: "DC" }, "blue"],
  ["M", { current: "DC" }, "blue"],
  ["N", { current: "AC" }, "light blue"],
  ["N", undefined, "light blue"],
  ["PE", undefined, "green-and-yellow"],
  ["PE", { current: "DC" }, "green-and-yellow"],
  [undefined, { current: "AC", excepted: true }, "orange"],
  [undefined, { current: "DC", excepted: true }, "orange"],
  ["N", { current: "AC", excepted: true }, "light blue"],
] as const)("%s of %j is %s by IEC 60204-1", (phase, supply, colour) => {
  expect(conductorColour(phase, supply, "international")).toBe(colour);
});

// NFPA 79, chapter 13, from memory: a grounded conductor is white, the rest as above.
test.each([
  ["N", { current: "AC" }, "white"],
  [undefined, { current: "AC" }, "red"],
  [undefined, { current: "DC" }, "blue"],
  ["L1", undefined, "black"],
] as const)("%s of %j is %s by NFPA 79", (phase, supply, colour) => {
  expect(conductorColour(phase, supply, "north-american")).toBe(colour);
});
