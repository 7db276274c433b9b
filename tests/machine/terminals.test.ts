import { describe, expect, test } from "vitest";
import { sparePoles } from "../../src/machine/terminals.js";
import { device, firstLadder, ladder, machineOf, soundMachine } from "./machine-of.js";

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

/** The terminals of each declared contact, used or not, in the order of their places. */
function arrangement(declaration: string): string {
  const { machine } = machineOf(declaration);
  const name = declaration.split(" ")[1] as string;
  return sparePoles(device(machine, name))
    .map(({ terminals }) => terminals.join("-"))
    .join(" ");
}

describe("declared poles", () => {
  // EN 50011, contactor relays, from memory: the figures are make and break contacts, E the arrangement.
  test.each([
    ["40E", "poles 4 no", "13-14 23-24 33-34 43-44"],
    ["31E", "poles 3 no 1 nc", "13-14 21-22 33-34 43-44"],
    ["22E", "poles 2 no 2 nc", "13-14 21-22 31-32 43-44"],
    ["13E", "poles 1 no 3 nc", "13-14 21-22 31-32 41-42"],
    ["04E", "poles 4 nc", "11-12 21-22 31-32 41-42"],
    ["80E", "poles 8 no", "13-14 23-24 33-34 43-44 53-54 63-64 73-74 83-84"],
    ["71E", "poles 7 no 1 nc", "13-14 23-24 33-34 43-44 53-54 61-62 73-74 83-84"],
    ["62E", "poles 6 no 2 nc", "13-14 23-24 33-34 43-44 53-54 61-62 71-72 83-84"],
    ["53E", "poles 5 no 3 nc", "13-14 23-24 33-34 43-44 53-54 61-62 71-72 81-82"],
    ["44E", "poles 4 no 4 nc", "13-14 23-24 33-34 43-44 51-52 61-62 71-72 81-82"],
  ])("a %s relay has the places of EN 50011", (_, poles, places) => {
    expect(arrangement(`relay K1 ${poles}`)).toBe(places);
  });
  // EN 50013: a pair of contacts of a control switch is 13-14 and 21-22.
  test("a control switch with a pair has 13-14 and 21-22", () => {
    expect(arrangement("push-button PB1 poles 1 no 1 nc")).toBe("13-14 21-22");
  });
  // EN 50005: special functions 5-6 and 7-8, overloads at place 9, a second pair at place 0.
  test("a timer's are delayed, an overload's stand at places 9 and 0", () => {
    expect(arrangement("timer T1 on-delay 1 s poles 1 no 1 nc")).toBe("17-18 25-26");
    expect(arrangement("overload OL1 poles 2 no 2 nc")).toBe("95-96 05-06 97-98 07-08");
  });
  test("main poles and auxiliary contacts are told apart", () => {
    const { machine } = machineOf("circuit-breaker Q1 poles 3 1 no 1 nc 16 A\ndisconnect QS1 poles 1 no\nfuse FU1 poles 3 4 A");
    expect(device(machine, "Q1")).toMatchObject({ ways: 3, poles: { no: 1, nc: 1 }, values: ["16 A"] });
    expect(device(machine, "QS1")).toMatchObject({ poles: { no: 1, nc: 0 } });
    expect(device(machine, "QS1").ways).toBeUndefined();
    expect(device(machine, "FU1")).toMatchObject({ ways: 3, values: ["4 A"] });
    expect(arrangement("circuit-breaker Q1 poles 3 1 no 1 nc")).toBe("13-14 21-22");
  });

  test("each use takes the next contact of its form that the device has", () => {
    expect(terminals("relay K1 poles 3 no 1 nc", ["K1", "K1", "/K1", "K1"]).numbers).toEqual(["13-14", "33-34", "21-22", "43-44"]);
    expect(terminals("relay K1 poles 2 no 2 nc", ["/K1", "/K1", "K1"]).numbers).toEqual(["21-22", "31-32", "13-14"]);
  });
  test("what is used beyond them stands behind them", () => {
    expect(terminals("relay K1 poles 1 no 1 nc", ["/K1", "/K1", "K1", "K1"]).numbers).toEqual(["21-22", "31-32", "13-14", "43-44"]);
    expect(terminals("overload OL1 poles 1 nc", ["/OL1", "OL1", "/OL1"]).numbers).toEqual(["95-96", "97-98", "05-06"]);
  });
  test("what the author pins keeps its contact, and the others go round it", () => {
    expect(terminals("relay K1 poles 3 no 1 nc", ["K1", "K1:13-14", "K1"]).numbers).toEqual(["33-34", "13-14", "43-44"]);
    // Pinned against the arrangement: the make contact that stood at place 3 has the place of the break contact.
    expect(terminals("relay K1 poles 3 no 1 nc", ["/K1:31-32", "K1", "K1", "K1"]).numbers).toEqual(["31-32", "13-14", "23-24", "43-44"]);
    // The numbers of a socket are no places: they use a contact up all the same.
    expect(terminals("relay K1 poles 2 no", ["K1:1-3", "K1"]).numbers).toEqual(["1-3", "13-14"]);
    expect(terminals("relay K1 poles 1 no 1 nc", ["K1:11-14", "/K1:11-12"]).numbers).toEqual(["11-14", "11-12"]);
  });
  test.each([
    ["relay K1 poles 3 no 1 nc", ["K1"], ["NC 21-22", "NO 33-34", "NO 43-44"]],
    ["relay K1 poles 3 no 1 nc", ["K1:43-44", "/K1"], ["NO 13-14", "NO 33-34"]],
    ["relay K1 poles 1 no 1 nc", ["K1:11-14", "/K1:11-12"], []],
    ["relay K1 poles 2 no", ["K1:1-3"], ["NO 13-14"]],
    ["relay K1 poles 1 no", ["K1", "K1"], []],
    ["relay K1", ["K1"], []],
    ["proximity-switch K1 poles 1 no 1 nc", ["K1"], ["NC 1-2"]],
    ["overload K1 poles 1 no 1 nc", ["/K1"], ["NO 97-98"]],
  ])("%s used as %j has left %j", (declaration, uses, left) => {
    const lamps = uses.map((_, index) => `pilot-light LT${index}`).join("\n");
    const rungs = uses.map((use, index) => `rung: ${use} -> LT${index}`).join("\n");
    const { machine } = machineOf(ladder(rungs, `${declaration}\n${lamps}`));
    expect(sparePoles(device(machine, "K1")).map(({ form, terminals: pair }) => `${form} ${pair.join("-")}`)).toEqual(left);
  });
});

describe("what current passes through", () => {
  const of = (path: string, declarations: string) => {
    const machine = soundMachine(ladder(`rung: ${path}`, `push-button PB1\nrelay CR1\n${declarations}`));
    return { machine, numbers: (name: string) => device(machine, name).throughs.map(({ terminals: pair }) => pair.value.join("-")) };
  };
  // EN 50005: main poles 1-2, 3-4, 5-6.
  test("poles of a breaker are 1-2, 3-4, 5-6", () => {
    expect(of("Q1 PB1 Q1 -> CR1 Q1", "circuit-breaker Q1 poles 3").numbers("Q1")).toEqual(["1-2", "3-4", "5-6"]);
    expect(of("Q1 PB1 Q1:1-2 -> CR1", "circuit-breaker Q1").numbers("Q1")).toEqual(["3-4", "1-2"]);
  });
  test("its auxiliary contacts are numbered like others", () => {
    const { machine } = of("Q1 Q1.aux /Q1.aux -> CR1", "circuit-breaker Q1 poles 1 1 no 1 nc");
    expect(device(machine, "Q1").contacts.map(({ form, terminals: pair }) => `${form} ${pair.value.join("-")}`)).toEqual([
      "NO 13-14",
      "NC 21-22",
    ]);
    expect(device(machine, "Q1").contacts.map(({ id }) => id)).toEqual(["Q1:13-14", "Q1:21-22"]);
  });
  test("a terminal and a pin are no end of a wire", () => {
    const { machine } = of("PB1 X1:4 XP1:3 @a X1:5A -> CR1", 'terminal-strip X1\nplug XP1 "Door" location door');
    const [rung] = firstLadder(machine).rungs;
    expect(device(machine, "X1").throughs.map(({ id, from, to }) => [id, from === to])).toEqual([
      ["X1:4", true],
      ["X1:5A", true],
    ]);
    expect(device(machine, "XP1")).toMatchObject({ text: "Door", location: "door", throughs: [{ id: "XP1:3", pin: "3" }] });
    expect(rung?.path.items.at(-1)?.from).toBe(rung?.path.items[0]?.to);
  });
  test("one terminal may stand in several rungs, each with an id of its own", () => {
    const machine = soundMachine(
      ladder("rung: X1:1 PB1 -> CR1\nrung: X1:1 CR1 -> LT1", "push-button PB1\nrelay CR1\npilot-light LT1\nterminal-strip X1"),
    );
    expect(device(machine, "X1").throughs.map(({ id }) => id)).toEqual(["X1:1", "X1:1/2"]);
  });

  // Common practice: a diode across a direct-current coil stands cathode to plus; IEC 60617 names the ends A and K.
  test.each([
    ["PB1 -> (CR1 | D1)", "K-A"],
    ["PB1 -> (CR1 | D1 R1)", "K-A"],
    ["PB1 -> (CR1 | LT1 | R1 D1)", "K-A"],
    ["PB1 -> (CR1 /OL1 | D1)", "K-A"],
    ["PB1 -> (CR1 | X1:1 D1 X1:2)", "K-A"],
    ["PB1 -> (CR1 | D1:A-K)", "A-K"],
    ["PB1 D1 -> CR1", "A-K"],
    ["(PB1 | D1) -> CR1", "A-K"],
    ["PB1 (D1 | LS1) -> CR1", "A-K"],
    ["PB1 D1:K-A -> CR1", "K-A"],
    ["PB1 @a -> CR1\nrung: @a D1", "K-A"],
    ["PB1 @a D1 @b -> CR1\nrung: @b LS1 @a", "A-K"],
  ])("the diode in %s stands %s", (path, ends) => {
    const things = "diode D1 1 A\nresistor R1 47 ohm\npilot-light LT1\noverload OL1\nterminal-strip X1\nlimit-switch LS1";
    expect(of(path, things).numbers("D1")).toEqual([ends]);
  });
});

// EN 50005: A1-A2, and B1-B2 for a second coil.
test("coils that a device has two of are A1-A2 and B1-B2", () => {
  const machine = soundMachine(
    ladder(
      "rung: PB1 -> (KL1.set | C1.count)\nrung: PB1 -> (KL1.reset | C1.reset)",
      "push-button PB1\nlatching-relay KL1\ncounter C1 preset 3",
    ),
  );
  expect(device(machine, "KL1").loads.map(({ id, coil }) => [id, coil])).toEqual([
    ["KL1.set:A1-A2", "set"],
    ["KL1.reset:B1-B2", "reset"],
  ]);
  expect(device(machine, "C1").loads.map(({ id }) => id)).toEqual(["C1.count:A1-A2", "C1.reset:B1-B2"]);
});

describe("terminals the author pins", () => {
  test("keep their place; the others go round them", () => {
    expect(terminals("relay K1", ["K1", "K1:13-14", "/K1", "/K1:21-22"]).numbers).toEqual(["33-34", "13-14", "41-42", "21-22"]);
  });
  test("a changeover may share its common terminal", () => {
    expect(terminals("relay K1", ["K1:11-14", "/K1:11-12"]).codes).toEqual([]);
  });
  // EN 50005: a delayed changeover is 15-16-18, its common terminal 15.
  test("a timer's delayed changeover is 15-16-18", () => {
    expect(terminals("timer T1 on-delay 1 s", ["/T1:15-16", "T1:15-18", "T1.inst"])).toMatchObject({
      codes: [],
      numbers: ["15-16", "15-18", "23-24"],
    });
    expect(terminals("timer T1 on-delay 1 s", ["T1:15-16"]).codes).toEqual(["terminals-unlike-contact"]);
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
