import { describe, expect, test } from "vitest";
import { laddersOf } from "../../src/machine/walk.js";
import { firstLadder, ladder, soundMachine, written } from "./machine-of.js";

function numbered(rungs: string, rails: string, drawing = ""): string[] {
  const text = `${drawing}supply CTRL 120 V AC { rails ${rails} }\npush-button PB1\npush-button PB2\nrelay CR1\npilot-light LT1\noverload OL1\nladder supply CTRL {\n${rungs}\n}\n`;
  const machine = soundMachine(text);
  return firstLadder(machine).rungs.map(({ path }) => written(machine, path));
}

describe("running wire numbers", () => {
  // Basic Motor Control (BCcampus open textbook), chapter "Numbering System": 1 from the line to the stop button, 2 between
  // stop, start and holding contact, 3 from start and holding contact to the coil.
  test("stop, start and holding contact are numbered as the textbook does", () => {
    expect(numbered("rung: /PB2 (PB1 | CR1) -> CR1", "1 N")).toEqual(["1 /PB2 2 (PB1 | CR1) 3 -> CR1 N"]);
  });

  // Same source: the number rises across each device, an overload contact behind the coil included.
  test("the number rises across the coil too", () => {
    expect(numbered("rung: /PB2 (PB1 | CR1) -> CR1 /OL1", "1 N")).toEqual(["1 /PB2 2 (PB1 | CR1) 3 -> CR1 4 /OL1 N"]);
  });

  // North-american practice: rails 1 and 2, then 3, 4, 5 in reading order.
  test("with both rails numbered the first wire is 3", () => {
    expect(numbered("rung: PB1 PB2 -> CR1\nrung: CR1 -> LT1", "1 2")).toEqual(["1 PB1 3 PB2 4 -> CR1 2", "1 CR1 5 -> LT1 2"]);
  });

  test("named rails leave the numbers to begin at 1", () => {
    expect(numbered("rung: PB1 -> CR1\nrung: CR1 -> LT1", "L+ M")).toEqual(["L+ PB1 1 -> CR1 M", "L+ CR1 2 -> LT1 M"]);
  });

  // Common practice: a number belongs to the potential; it stays across terminals, plugs and splices and changes at every device.
  test("a terminal or plug leaves the number, a fuse, a diode or a resistor changes it", () => {
    const path = "PB1 X1:1 XP1:2 FU2 X1:3 D1 R1 -> CR1";
    expect(numbered(`rung: ${path}`, "L+ M", "terminal-strip X1\nplug XP1\nfuse FU2 1 A\ndiode D1\nresistor R1 47 ohm\n")).toEqual([
      "L+ PB1 1 X1:1 1 XP1:2 1 FU2 2 X1:3 2 D1 3 R1 4 -> CR1 M",
    ]);
  });

  test("a terminal at a rail is on the rail, and one in two rungs is one wire only where both are on one potential", () => {
    const [first, second] = numbered("rung: X1:1 PB1 @a -> CR1\nrung: @a X1:2 PB2 X1:9 -> LT1", "L+ M", "terminal-strip X1\n");
    expect([first, second]).toEqual(["L+ X1:1 L+ PB1 @a 1 -> CR1 M", "1 X1:2 1 PB2 2 X1:9 2 -> LT1 M"]);
  });

  test("two ladders on one supply share its rails; the numbers go on", () => {
    const machine = soundMachine(`supply CTRL 24 V DC { rails L+ M }
push-button PB1
relay CR1
pilot-light LT1
ladder "One" supply CTRL {
  rung: PB1 -> CR1
}
ladder "Two" supply CTRL {
  rung: CR1 -> LT1
}
`);
    expect(laddersOf(machine).flatMap(({ rungs }) => rungs.map(({ path }) => written(machine, path)))).toEqual([
      "L+ PB1 1 -> CR1 M",
      "L+ CR1 2 -> LT1 M",
    ]);
  });

  test("several supplies have rails of their own, and no number stands twice", () => {
    const machine = soundMachine(`transformer T1 primary 400 V secondary 230 V
power-supply G1 primary 230 V secondary 24 V DC
supply MAIN 230 V AC { rails 1 2 from T1 fuse FU1 2 A }
supply CTRL 24 V DC { rails L+ M from G1 }
push-button PB1
relay CR1
horn HN1
ladder "Control" supply CTRL {
  rung: PB1 -> CR1
}
ladder "Loads" supply MAIN {
  rung: CR1 -> HN1
}
`);
    expect(machine.potentials.map(({ rail, number }) => [rail, number.value])).toEqual([
      ["L+", "L+"],
      ["M", "M"],
      ["1", "1"],
      ["2", "2"],
      [undefined, "3"],
      [undefined, "4"],
    ]);
  });

  test("a point keeps its number wherever it is used", () => {
    expect(numbered("rung: PB1 @a -> CR1\nrung: CR1 PB2 @b\nrung: @b PB2 @a\nrung: @b -> LT1", "L1 L2")).toEqual([
      "L1 PB1 @a 1 -> CR1 L2",
      "L1 CR1 2 PB2 3",
      "3 PB2 1",
      "3 -> LT1 L2",
    ]);
  });
});

test("numbers by line hold the room of the longest until the lines are known", () => {
  const drawing = 'drawing "X" { wire-numbers by-line }\n';
  expect(numbered("rung: PB1 -> CR1\nrung: CR1 -> LT1", "L1 L2", drawing)[0]).toBe("L1 PB1 0000W -> CR1 L2");
});

test("every wire of a number is one potential, and no number is on two", () => {
  const machine = soundMachine(ladder("rung: PB1 (PB2 | CR1) -> CR1", "push-button PB1\npush-button PB2\nrelay CR1"));
  const numbers = machine.potentials.map(({ number }) => number.value);
  expect(new Set(numbers).size).toBe(numbers.length);
  expect(machine.potentials.map(({ id }) => id)).toEqual(numbers.map((_, index) => index));
});
