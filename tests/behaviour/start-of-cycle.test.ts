import { describe, expect, test } from "vitest";
import { startOfCycle } from "../../src/behaviour/start-of-cycle.js";
import { soundMachine } from "../machine/machine-of.js";
import { readText } from "../support/sources.js";

const circuit = (body: string, medium = "pneumatic") => `fluid "F" ${medium} {\n${body}\n}\n`;

// Common practice: a switch resting on its cam at the start of the cycle is drawn held, one free of it is not.
describe("held switches", () => {
  test("are those the cylinders stand on", () => {
    const { held, cylinders } = startOfCycle(soundMachine(readText("samples/tray-stamper.sprung")));
    expect([...held]).toEqual(["LS1", "LS3"]);
    expect([...cylinders]).toEqual([
      ["CLAMP", 0],
      ["STAMP", 0],
    ]);
  });

  test.each([
    ["start extended", ["LS2"]],
    ["start 39.5 mm", ["LS3"]],
    ["start 55 mm", ["LS4"]],
    ["start 40 mm", ["LS3", "LS4"]],
    ["start 20 mm", []],
    ["single-acting spring-extend", ["LS2"]],
    ["single-acting spring-return", ["LS1"]],
  ])("%s", (start, expected) => {
    const switches =
      "limit-switch LS1 on C1 at retracted\nlimit-switch LS2 on C1 at extended\nlimit-switch LS3 on C1 at 40 mm\nproximity-switch LS4 on C1 from 40 mm to 55 mm\nlimit-switch LS5\n";
    expect([...startOfCycle(soundMachine(`${switches}${circuit(`cylinder C1 stroke 100 mm ${start}`)}`)).held]).toEqual(expected);
  });
});

describe("valves", () => {
  const rest = (text: string, medium = "pneumatic") => {
    const start = startOfCycle(soundMachine(circuit(text, medium)));
    return { box: start.valveBoxes.get("V1"), noted: start.restingByStart.has("V1") };
  };
  const lines = "line V1.4 -- C1.cap\nline V1.2 -- C1.rod";

  test("with a spring stand by it, with three positions in the middle", () => {
    expect(rest("valve V1 5/2 left solenoid SOL1 right spring")).toEqual({ box: 1, noted: false });
    expect(rest("valve V1 5/2 left spring right solenoid SOL1")).toEqual({ box: 0, noted: false });
    expect(rest("valve V1 4/3 centre closed left solenoid SOL1 right solenoid SOL2 springs", "hydraulic")).toEqual({
      box: 1,
      noted: false,
    });
  });

  test("without one stand as the author says", () => {
    const valve = "valve V1 5/2 left solenoid SOL1 right solenoid SOL2";
    expect(rest(`${valve} start left`)).toEqual({ box: 0, noted: true });
    expect(rest(`${valve} detent start right`)).toEqual({ box: 1, noted: true });
  });

  // Common practice: a bistable valve stays where it was, with the cylinder at the end it was last sent to.
  test.each([
    ["retracted", "", 1],
    ["extended", "", 0],
    ["retracted", " -- FC1", 1],
    ["extended", " -- FC1", 0],
  ])("unsaid, follow their cylinder: %s%s", (start, through, box) => {
    const text = `cylinder C1 stroke 50 mm start ${start}\none-way-flow-control FC1\nvalve V1 5/2 left solenoid SOL1 right solenoid SOL2\n`;
    expect(rest(`${text}line V1.4${through} -- C1.cap\nline V1.2 -- C1.rod`)).toEqual({ box, noted: true });
    expect(rest(`${text}line V1.2${through} -- C1.cap\nline V1.4 -- C1.rod`)).toEqual({ box: 1 - box, noted: true });
  });

  test("one that works a single-acting cylinder follows it too", () => {
    const text = (start: string) => `cylinder C1 single-acting start ${start}\nvalve V1 3/2 left pilot right pilot\nline V1.2 -- C1`;
    expect(rest(text("retracted")).box).toBe(1);
    expect(rest(text("extended")).box).toBe(0);
  });

  test("one that leads to no cylinder stands in its right position", () => {
    expect(rest("valve V1 5/2 left solenoid SOL1 right solenoid SOL2")).toEqual({ box: 1, noted: true });
    expect(rest(`cylinder C1\nvalve V1 5/2 left spring right lever\n${lines}`)).toEqual({ box: 0, noted: false });
  });
});
