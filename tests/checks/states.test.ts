import { describe, expect, test } from "vitest";
import { startOfCycle } from "../../src/behaviour/start-of-cycle.js";
import type { Condition } from "../../src/checks/conditions.js";
import { Networks } from "../../src/checks/networks.js";
import { parse } from "../../src/language/parse.js";
import { buildMachine } from "../../src/machine/build.js";

const devices = `
${[1, 2, 3, 4].map((i) => `push-button PB${i}\nrelay CR${i}\ncontactor KM${i}\npilot-light LT${i}\nlimit-switch LS${i}`).join("\n")}
timer TR1 on-delay 1 s
timer TR2 off-delay 1 s
latching-relay KL1
selector-switch S1 positions hand off auto
limit-switch LSR on CYL at retracted
limit-switch LSE on CYL at extended
diode D1
output-card Q0 8 points
fluid "Air" pneumatic {
  cylinder CYL double-acting bore 40 mm rod 16 mm stroke 60 mm
}`;

/** The networks of some rungs. */
function networksOf(rungs: string, current = "DC { rails L+ M }"): Networks {
  const { tree } = parse(`supply CTRL 24 V ${current}\n${devices}\nladder "Control" supply CTRL {\n${rungs}\n}\n`, "test.sprung");
  const { machine, diagnostics } = buildMachine(tree);
  expect(diagnostics.filter(({ severity }) => severity === "error")).toEqual([]);
  expect(startOfCycle(machine).cylinders.size).toBe(1);
  return new Networks(machine);
}

/** `CR1` is on, `/CR1` is not, `S1.auto` stands there. */
const asked = (words: string): Condition[] =>
  words
    .split(" ")
    .filter((word) => word !== "")
    .map((word) => {
      const [subject = "", part] = word.replace("/", "").split(".");
      const position = subject === "S1" ? part : undefined;
      const own = part === undefined || position !== undefined ? subject : `${subject}.${part}`;
      return { subject: own, value: position ?? "on", holds: !word.startsWith("/") };
    });

const canBe = (rungs: string, words: string, settled = false) => networksOf(rungs).states.canBe(asked(words), settled);

describe("which states a circuit can be in", () => {
  // Lessons in Electric Circuits, vol. IV, ladder logic chapter: permissive chain. Every combination of its three contacts.
  test.each(Array.from({ length: 8 }, (_, i) => [i & 4, i & 2, i & 1].map((bit) => bit !== 0)))(
    "a chain of permissives %s %s %s lets through only if all of them are closed",
    (a, b, c) => {
      const states = [`${a ? "" : "/"}PB1`, `${b ? "" : "/"}LS1`, `${c ? "" : "/"}LS2`].join(" ");
      const rungs = "rung: PB1 LS1 LS2 -> KM1";
      expect(canBe(rungs, `${states} KM1`)).toBe(a && b && c);
      expect(canBe(rungs, `${states} /KM1`)).toBe(!(a && b && c));
    },
  );

  // The same chapter, interlocks: forward and reverse with crossed normally closed contacts are never in together, any of them alone is.
  test.each([
    ["/PB1 /PB2", "/KM1 /KM2", ["KM1", "KM2", "KM1 KM2"]],
    ["PB1 /PB2", "KM1 /KM2", ["/KM1", "KM2"]],
    ["/PB1 PB2", "/KM1 KM2", ["KM1", "/KM2"]],
    ["PB1 PB2", "KM1 /KM2", ["KM1 KM2", "/KM1 /KM2"]],
    ["PB1 PB2", "/KM1 KM2", ["KM1 KM2", "/KM1 /KM2"]],
  ])("a reversing pair with %s stands at %s and never at anything else", (pressed, stands, never) => {
    const rungs = "rung: PB1 /KM2 -> KM1\nrung: PB2 /KM1 -> KM2";
    expect(canBe(rungs, `${pressed} ${stands}`)).toBe(true);
    for (const state of never) expect(canBe(rungs, `${pressed} ${state}`), state).toBe(false);
  });

  // The same chapter, motor control: a holding contact keeps the motor in after start is let go, and stop drops it out.
  test("a start-stop circuit holds itself and drops out at stop", () => {
    const rungs = "rung: /PB2 (PB1 | CR1) -> CR1";
    expect(canBe(rungs, "/PB1 /PB2 CR1")).toBe(true);
    expect(canBe(rungs, "/PB1 /PB2 /CR1")).toBe(true);
    expect(canBe(rungs, "PB1 /PB2 /CR1")).toBe(false);
    expect(canBe(rungs, "PB2 CR1")).toBe(false);
  });

  test("what relays pass on counts, over as many as there are", () => {
    const rungs = "rung: S1.auto -> CR1\nrung: CR1 -> CR2\nrung: CR2 PB1 -> KM1\nrung: S1.hand PB2 -> KM2\nrung: /CR2 PB3 -> KM3";
    expect(canBe(rungs, "KM1 KM2")).toBe(false);
    expect(canBe(rungs, "KM1 KM3")).toBe(false);
    expect(canBe(rungs, "KM2 KM3")).toBe(true);
    expect(canBe(rungs, "KM1 S1.auto PB1")).toBe(true);
  });

  test("a delayed contact follows its coil at once one way, and late the other", () => {
    const rungs = "rung: PB1 -> (TR1 | TR2)\nrung: TR1 -> KM1\nrung: TR2 -> KM2";
    expect(canBe(rungs, "/PB1 KM1")).toBe(false);
    expect(canBe(rungs, "PB1 /KM1")).toBe(true);
    expect(canBe(rungs, "/PB1 KM2")).toBe(true);
    expect(canBe(rungs, "PB1 /KM2")).toBe(false);
    // Once all delays have run out.
    expect(canBe(rungs, "PB1 /KM1", true)).toBe(false);
    expect(canBe(rungs, "/PB1 KM2", true)).toBe(false);
  });

  test("a selector stands in one position, a rod at one end; what is remembered may be either", () => {
    const rungs =
      "rung: (S1.hand | S1.auto) -> KM1\nrung: LSR -> KM2\nrung: LSE -> KM3\nrung: PB1 -> KL1.set\nrung: PB2 -> KL1.reset\nrung: KL1 -> KM4";
    expect(canBe(rungs, "S1.off KM1")).toBe(false);
    expect(canBe(rungs, "/S1.off /KM1")).toBe(false);
    expect(canBe(rungs, "KM2 KM3")).toBe(false);
    expect(canBe(rungs, "/PB1 /PB2 KM4")).toBe(true);
    expect(canBe(rungs, "/PB1 /PB2 /KM4")).toBe(true);
  });

  test("nothing is said where the ways are too many to tell", () => {
    const many = Array.from({ length: 9 }, () => "(LS1 | LS2 | LS3)").join(" ");
    expect(canBe(`rung: ${many} PB1 -> KM1`, "/PB1 KM1")).toBeUndefined();
    expect(networksOf(`rung: ${many} PB1 -> KM1`).ways.to(networksOf(`rung: ${many} PB1 -> KM1`).loads[0] as never)).toBeUndefined();
  });
});

describe("ways to a load", () => {
  const waysTo = (rungs: string, current?: string) => {
    const networks = networksOf(rungs, current);
    return networks.ways
      .to(networks.loads[0] as (typeof networks.loads)[number])
      ?.map(({ passages }) => passages.map((use) => `${use.kind === "contact" && use.form === "NC" ? "/" : ""}${use.device}`).join(" "));
  };

  test("are all there are, each through every potential once at most", () => {
    expect(waysTo("rung: (PB1 @a LS1 | PB2 @b LS2) -> KM1\nrung: @a LS3 @b")?.sort()).toEqual([
      "PB1 LS1",
      "PB1 LS3 LS2",
      "PB2 LS2",
      "PB2 LS3 LS1",
    ]);
  });

  test("do not lead through other loads, other rails or contacts that contradict each other", () => {
    expect(waysTo("rung: PB1 @a -> KM1\nrung: PB2 -> LT1 @a\nrung: @a /LS1 @b -> LT2")).toEqual(["PB1"]);
    expect(waysTo("rung: CR1 (LS1 | /CR1 LS2) -> KM1")).toEqual(["CR1 LS1"]);
    expect(waysTo("rung: S1.hand @a S1.auto -> KM1\nrung: PB1 @a")).toEqual(["PB1 S1"]);
  });

  test("pass a diode in its direction, and either way on alternating current", () => {
    const rungs = "rung: PB1 @a -> KM1\nrung: PB2 @b -> LT1\nrung: @a D1 @b";
    expect(waysTo(rungs)).toEqual(["PB1"]);
    expect(waysTo(rungs, "AC { rails L1 L2 }")?.sort()).toEqual(["PB1", "PB1", "PB2 D1"]);
    expect(waysTo(rungs.replace("D1", "D1:K-A"))?.sort()).toEqual(["PB1", "PB2 D1"]);
  });
});
