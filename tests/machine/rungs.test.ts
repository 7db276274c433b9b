import { describe, expect, test } from "vitest";
import { elementsOf } from "../../src/machine/walk.js";
import { device, firstLadder, ladder, machineOf, soundMachine, written } from "./machine-of.js";

const things = `
push-button PB1
push-button PB2
relay CR1
relay CR2
timer TR1 on-delay 1 s
contactor MS1
overload OL1
overload OL2
limit-switch LS1
limit-switch LS3
limit-switch LS4
limit-switch LS5
pilot-light LT1
solenoid SOL3
selector-switch S5 positions hand off auto
`;

function rung(path: string): string {
  const machine = soundMachine(ladder(`rung: ${path}`, things));
  return written(machine, firstLadder(machine).rungs[0]?.path as never);
}

describe("what stands in a rung is a contact or a load", () => {
  test.each([
    ["/PB2 (PB1 | CR1) -> CR1", "L+ /PB2 1 (PB1 | CR1) 2 -> CR1 M"],
    [
      "/PB2 (PB1 | CR1 (LS1 | LS3 LS4)) @run -> (CR1 | LT1 | LS5 -> SOL3)",
      "L+ /PB2 1 (PB1 | CR1 3 (LS1 | LS3 4 LS4)) @run 2 (-> CR1 | -> LT1 | LS5 5 -> SOL3) M",
    ],
    ["CR1 LS1 -> MS1 /OL1 /OL2", "L+ CR1 1 LS1 2 -> MS1 3 /OL1 4 /OL2 M"],
    ["PB1 -> CR1 CR2", "L+ PB1 1 -> CR1 2 CR2 M"],
    ["PB1 -> (MS1 /OL1 | LT1)", "L+ PB1 1 (-> MS1 2 /OL1 | -> LT1) M"],
    ["PB1 -> ((MS1 | LT1) /OL1 | CR1)", "L+ PB1 1 ((-> MS1 | -> LT1) 2 /OL1 | -> CR1) M"],
    ["PB1 -> LS1 CR1", "L+ PB1 1 LS1 2 -> CR1 M"],
    ["PB1 -> (LS1 | CR2) CR1", "L+ PB1 1 (LS1 | CR2) 2 -> CR1 M"],
    ["PB1 (LS1 -> CR1 | LS3 -> CR2)", "L+ PB1 1 (LS1 2 -> CR1 | LS3 3 -> CR2) M"],
    ["PB1 (LS1 -> CR1) ", "L+ PB1 1 LS1 2 -> CR1 M"],
    ["PB1 -> /CR2 CR1", "L+ PB1 1 /CR2 2 -> CR1 M"],
    ["S5.auto /S5.hand /TR1.inst TR1 -> TR1", "L+ S5 1 /S5 2 /TR1 3 TR1 4 -> TR1 M"],
  ])("%s", (path, expected) => {
    expect(rung(path)).toBe(expected);
  });

  test("a lone lamp needs its arrow, and is understood without it", () => {
    const { machine, codes } = machineOf(ladder("rung: PB1 LT1", things));
    expect(codes).toEqual(["arrow-missing"]);
    expect(device(machine, "LT1").loads).toHaveLength(1);
  });

  test("a timer's contacts are timed unless they are instantaneous, and a selector's know their position", () => {
    const machine = soundMachine(ladder("rung: S5.auto /TR1.inst TR1 -> TR1", things));
    expect(device(machine, "TR1").contacts.map(({ timed, form }) => [timed, form])).toEqual([
      [false, "NC"],
      [true, "NO"],
    ]);
    expect(device(machine, "S5").contacts[0]?.position).toBe("auto");
  });
});

describe("points", () => {
  test("one written first or last is where the rung begins or ends", () => {
    const machine = soundMachine(ladder("rung: PB1 @a -> CR1\nrung: @a LS1 @b\nrung: @b -> LT1", things));
    const [one, bridge, last] = firstLadder(machine).rungs;
    expect([one?.start.kind, one?.end.kind]).toEqual(["rail", "rail"]);
    expect(bridge?.start).toMatchObject({ kind: "point", point: "a" });
    expect(bridge?.end).toMatchObject({ kind: "point", point: "b" });
    expect(bridge?.path.from).toBe(one?.path.items[0]?.to);
    expect(last?.path.from).toBe(bridge?.path.to);
    expect(machine.potentials.map(({ rail, points }) => rail ?? points.join())).toEqual(["L+", "M", "a", "b"]);
  });

  test("those within a path have no length, and two side by side are one potential", () => {
    const machine = soundMachine(ladder("rung: PB1 @a @b -> CR1\nrung: @a LS1 @b", things));
    const [rung] = firstLadder(machine).rungs;
    const points = [...elementsOf(rung?.path as never)].filter(({ kind }) => kind === "point");
    expect(points.map(({ from, to }) => [from, to])).toEqual([
      [2, 2],
      [2, 2],
    ]);
  });

  test("ladders of one drawing share them", () => {
    const text = `${ladder("rung: PB1 @a -> CR1", things)}ladder "More" supply CTRL {\nrung: @a -> LT1\n}\n`;
    const machine = soundMachine(text);
    const [, more] = machine.circuits;
    expect(more?.kind === "ladder" && more.rungs[0]?.start.node).toBe(2);
  });
});

describe("what cannot be understood", () => {
  test.each([
    ["rung: PB9 -> CR1", ["unknown-name"]],
    ["rung: PB1 -> CR1.set", ["unknown-part"]],
    ["rung: S5 -> CR1", ["position-missing"]],
    ["rung: S5.full -> CR1", ["unknown-position"]],
    ["rung: /LT1 -> CR1", ["no-contacts"]],
    ["rung: X1:4 PB1 -> CR1", ["unknown-name"]],
    ["rung: CTRL -> CR1", ["wrong-kind"]],
    ["rung: CR1:13 -> CR2", ["terminals-wrong"]],
    ["rung: @a @b", []],
    ["rung: @a", ["rung-empty"]],
  ])("%s", (text, expected) => {
    const { machine, codes } = machineOf(ladder(text, things));
    expect([...codes].sort()).toEqual([...expected].sort());
    expect(firstLadder(machine).rungs).toHaveLength(1);
  });

  test("a rung with a gap is marked, so that nobody concludes anything from it", () => {
    const { machine } = machineOf(ladder("rung: PB9 LS1 -> CR1", things));
    expect(firstLadder(machine).rungs[0]?.incomplete).toBe(true);
    expect(device(machine, "LS1").contacts).toHaveLength(1);
  });

  test("a wire never makes one potential of two rails", () => {
    const { machine, codes } = machineOf(
      ladder("rung: @a @b\nrung: @a (PB1 | @b) -> CR1\nrung: (@a PB1 | LS1) -> LT1 (/OL1 @b | /OL2)", things),
    );
    expect(codes).toContain("rails-joined");
    expect(machine.potentials.filter(({ rail }) => rail !== undefined)).toHaveLength(2);
  });
});

test("a rung with nothing in it is told so", () => {
  expect(machineOf(ladder('rung "Empty":', things)).codes).toEqual(["rung-empty"]);
});
