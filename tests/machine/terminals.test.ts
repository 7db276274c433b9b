import { describe, expect, test } from "vitest";
import { device, ladder, machineOf, soundMachine } from "./machine-of.js";

function terminals(declaration: string, uses: string[]): { numbers: string[]; codes: string[] } {
  const rungs = uses.map((use, index) => `rung: ${use} -> LT${index}`).join("\n");
  const lamps = uses.map((_, index) => `pilot-light LT${index}`).join("\n");
  const { machine, codes } = machineOf(ladder(`${rungs}\n`, `${declaration}\n${lamps}`));
  const name = declaration.split(" ")[1] as string;
  return { numbers: device(machine, name).contacts.map(({ terminals }) => terminals.value.join("-")), codes };
}

// EN 50005: the units digit is the function (1-2 opens, 3-4 closes, 5-6 and 7-8 with special function), the tens digit the place.
describe("contact terminals by EN 50005", () => {
  test("places rise in the order of use, whatever the form", () => {
    expect(terminals("relay K1", ["K1", "/K1", "K1", "/K1"]).numbers).toEqual(["13-14", "21-22", "33-34", "41-42"]);
  });
  test("a timer's delayed contacts are 5-6 and 7-8, its instantaneous ones plain", () => {
    expect(terminals("timer T1 on-delay 1 s", ["/T1", "T1", "T1.inst", "/T1.inst"]).numbers).toEqual(["15-16", "27-28", "33-34", "41-42"]);
  });
  // EN 50005: overloads have place 9, and 0 for a second set (from memory).
  test("an overload's are 95-96 and 97-98", () => {
    expect(terminals("overload OL1 poles 2 no 2 nc", ["/OL1", "OL1", "OL1", "/OL1"]).numbers).toEqual(["95-96", "97-98", "07-08", "05-06"]);
  });
  // EN 50013
  test("control switches are numbered like relays", () => {
    expect(terminals("limit-switch LS1", ["LS1", "/LS1"]).numbers).toEqual(["13-14", "21-22"]);
  });
  // IEC 60947-5-2: 1 supply, 4 output that makes, 2 output that breaks.
  test("a sensor has its supply on 1 and its outputs on 4 and 2", () => {
    expect(terminals("proximity-switch PRS1 wires 3", ["PRS1", "/PRS1"]).numbers).toEqual(["1-4", "1-2"]);
    expect(terminals("proximity-switch PRS1 wires 3", ["PRS1", "PRS1", "/PRS1"]).numbers).toEqual(["1-4", "1-4", "1-2"]);
  });
  test("coils are A1-A2, lamps X1-X2, a horn is unmarked", () => {
    const machine = soundMachine(ladder("rung: PB1 -> (K1 | LT1 | HN1)", "push-button PB1\nrelay K1\npilot-light LT1\nhorn HN1"));
    expect(["K1", "LT1", "HN1"].map((name) => device(machine, name).loads[0]?.id)).toEqual(["K1:A1-A2", "LT1:X1-X2", "HN1:load"]);
  });
  test("behind place 9 the numbers go on with 103-104", () => {
    const { numbers } = terminals("relay K1", Array(11).fill("K1"));
    expect(numbers.slice(8)).toEqual(["93-94", "103-104", "113-114"]);
  });
});

describe("terminals the author pins", () => {
  test("keep their place; the others go round them", () => {
    expect(terminals("relay K1", ["K1", "K1:13-14", "/K1", "/K1:21-22"]).numbers).toEqual(["33-34", "13-14", "41-42", "21-22"]);
  });
  test("a changeover may share its common terminal", () => {
    expect(terminals("relay K1", ["K1:11-14", "/K1:11-12"]).codes).toEqual([]);
  });
  test.each([
    [["K1:13-14", "K1:13-14"], ["terminals-twice"]],
    [
      ["K1:13-14", "K1:14-15"],
      ["terminals-twice", "terminals-unlike-contact"],
    ],
    [
      ["K1:11-14", "K1:11-13"],
      ["terminals-twice", "terminals-unlike-contact"],
    ],
    [["K1:21-22"], ["terminals-unlike-contact"]],
    [["/K1:13-14"], ["terminals-unlike-contact"]],
    // Sockets have numbers of their own.
    [["K1:1-3", "/K1:8-5"], []],
  ])("%j", (uses, codes) => {
    expect(terminals("relay K1", uses).codes).toEqual(codes);
  });
  test("every contact has an id of its own even then", () => {
    const { machine } = machineOf(ladder("rung: K1:13-14 K1:13-14 -> LT1", "relay K1\npilot-light LT1"));
    expect(device(machine, "K1").contacts.map(({ id }) => id)).toEqual(["K1:13-14", "K1:13-14/2"]);
  });
});
