import { describe, expect, test } from "vitest";
import { firstPower, mainsOf, writtenPower } from "../support/power.js";
import { device, machineOf, soundMachine } from "./machine-of.js";

/** Devices of every kind, more of each than a test needs. */
const declarations = [
  "supply CTRL 24 V DC { rails L+ M }",
  "disconnect QS1 63 A",
  ...[1, 2, 3, 4, 5].map((i) => `fuse FU${i} 16 A\ncircuit-breaker Q${i} 16 A\ncontactor KM${i}\noverload OL${i} 5 A\nmotor M${i}`),
  "transformer T1 primary 400 V secondary 230 V",
  "power-supply G1 secondary 24 V DC",
  "rectifier V1 secondary 24 V DC",
  "terminal-strip X1",
  "heater HT1",
  "pilot-light LT1",
].join("\n");

const power = (lines: string, convention: "international" | "north-american" = "north-american", head = "400 V AC 3 phase 50 Hz") =>
  `drawing "D" {\n convention ${convention}\n}\n${declarations}\npower "Main" ${head} {\n${lines}\n}\n`;

/** The branches of a power circuit without a slip, each by its conductors and its path. */
function branchesOf(text: string): string[] {
  const { machine, codes } = machineOf(text);
  expect(codes).toEqual([]);
  const number = (node: number) => machine.potentials[node]?.number.value;
  return firstPower(machine).branches.map(({ conductors, path, end }) => {
    const ends = end.kind === "load" ? "" : ` -> ${end.kind} ${end.conductors.map(({ node }) => number(node)).join(" ")}`;
    return `${conductors.map(({ node }) => number(node)).join(" ")}: ${writtenPower(machine, path)}${ends}`;
  });
}

describe("conductors and terminals", () => {
  // Main contacts 1-2 3-4 5-6 by EN 50005; motor leads U1 V1 W1 by IEC 60034-8 and T1 T2 T3 by NEMA MG 1 (from memory).
  test.each([
    ["international" as const, ["U1", "V1", "W1"]],
    ["north-american" as const, ["T1", "T2", "T3"]],
  ])("a motor's branch, %s", (convention, leads) => {
    const { machine } = machineOf(power('feed L1 L2 L3 PE: QS1\nbranch "Pump": FU1 KM1 OL1 -> M1', convention));
    const { feed, branches } = firstPower(machine);
    expect(writtenPower(machine, feed.path)).toBe("QS1[1=L1 3=L2 5=L3|2=1L1 4=1L2 6=1L3]");
    const [u, v, w] = leads;
    expect(writtenPower(machine, branches[0]?.path ?? [])).toBe(
      [
        "FU1[1=1L1 3=1L2 5=1L3|2=2L1 4=2L2 6=2L3]",
        "KM1[1=2L1 3=2L2 5=2L3|2=3L1 4=3L2 6=3L3]",
        `OL1[1=3L1 3=3L2 5=3L3|2=1${u} 4=1${v} 6=1${w}]`,
        `M1[${u}=1${u} ${v}=1${v} ${w}=1${w}] PE`,
      ].join(" "),
    );
  });

  test("a branch with one phase has its return straight through fuses, and switched by a contactor", () => {
    expect(branchesOf(power('feed L1 L2 L3 N PE\nbranch "Heater" L1 N: FU1 KM1 -> HT1'))).toEqual([
      "L1 N: FU1[1=L1|2=1L1] KM1[1=1L1 3=N|2=2L1 4=2N] HT1[1=2L1 2=2N] PE",
    ]);
  });

  test("direct current", () => {
    expect(branchesOf(power('feed L+ M\nbranch "Drive": FU1 KM1 -> M1', "north-american", "24 V DC"))).toEqual([
      "L+ M: FU1[1=L+|2=1L+] KM1[1=1L+ 3=M|2=1A1 4=1A2] M1[A1=1A1 A2=1A2]",
    ]);
  });

  test("terminals are one node on both sides", () => {
    expect(branchesOf(power('feed L1 L2 L3\nbranch "Pump": KM1 X1:4-6 -> M1'))).toEqual([
      "L1 L2 L3: KM1[1=L1 3=L2 5=L3|2=1T1 4=1T2 6=1T3] X1[4=1T1 5=1T2 6=1T3|=1T1 =1T2 =1T3] M1[T1=1T1 T2=1T2 T3=1T3]",
    ]);
  });

  test("poles as declared", () => {
    const text = power('feed L1 L2 L3 N PE: Q9\nbranch "Pump" L1 L2 L3 N: Q1 -> M1').replace("power ", "disconnect Q9 poles 4\npower ");
    const { machine } = machineOf(text);
    expect(writtenPower(machine, firstPower(machine).feed.path)).toBe("Q9[1=L1 3=L2 5=L3 7=N|2=1L1 4=1L2 6=1L3 8=1N]");
    // The neutral passes a breaker by of which nothing is said, and does not go into a motor of three phases.
    expect(writtenPower(machine, firstPower(machine).branches[0]?.path ?? [])).toBe(
      "Q1[1=1L1 3=1L2 5=1L3|2=1T1 4=1T2 6=1T3] M1[T1=1T1 T2=1T2 T3=1T3] PE",
    );
  });

  test("usual conductors where no feed is written", () => {
    expect(branchesOf(power('branch "Pump": KM1 -> M1'))[0]).toMatch(/^L1 L2 L3: .* PE$/);
    expect(branchesOf(power('branch "Fan": KM1 -> M1', "north-american", "230 V AC 1 phase"))[0]).toMatch(/^L1 N: .* PE$/);
    expect(branchesOf(power('branch "Fan": KM1 -> M1', "north-american", "24 V DC"))[0]).toMatch(/^L\+ M: /);
  });
});

describe("a reversing pair", () => {
  const text = power('feed L1 L2 L3 PE\nbranch "Hoist": Q1 (KM1 | KM2 crossed) OL1 -> M1');

  // Two phases exchanged turn a three-phase motor round: common practice, the outer two.
  test("ends on the same conductors, with the first and the last phase exchanged", () => {
    const { machine } = machineOf(text);
    const [branch] = firstPower(machine).branches;
    const [, one, other] = mainsOf(branch?.path ?? []);
    const nodes = (pins: readonly { node: number }[] | undefined) => pins?.map(({ node }) => node);
    expect(nodes(other?.ins)).toEqual(nodes(one?.ins));
    const [a, b, c] = nodes(one?.outs) ?? [];
    expect(nodes(other?.outs)).toEqual([c, b, a]);
    expect(new Set([a, b, c]).size).toBe(3);
  });

  test("keeps the neutral where it does not switch it", () => {
    const { codes } = machineOf(power('feed L1 L2 L3 N\nbranch "Hoist" L1 L2 L3 N: (KM1 | KM2 crossed) -> M1'));
    expect(codes).toEqual([]);
  });
});

describe("star-delta", () => {
  const lines =
    'feed L1 L2 L3 PE\nbranch "Mill": FU1 @mill KM1 OL1 -> M1\nbranch "Delta": @mill KM2 -> M1.2\nbranch "Star": star KM3 -> M1.2';

  // Delta joins U1-W2, V1-U2, W1-V2 (IEC 60034-8, from memory; common practice): L1 reaches U1 and W2, and so on.
  test("delta feeds each second end from the phase of the next winding, star joins all three", () => {
    // The international convention is refused while its ladders are not drawn; its power circuits are read all the same.
    const { machine } = machineOf(power(lines, "international"));
    const number = (node: number) => machine.potentials[node]?.number.value;
    const shown = firstPower(machine).branches.map(
      ({ path, end }) =>
        `${writtenPower(machine, path)}${end.kind === "second" ? ` -> ${end.conductors.map(({ node }) => number(node)).join(" ")}` : ""}`,
    );
    expect(shown).toEqual([
      "FU1[1=L1 3=L2 5=L3|2=1L1 4=1L2 6=1L3] @mill KM1[1=1L1 3=1L2 5=1L3|2=2L1 4=2L2 6=2L3] OL1[1=2L1 3=2L2 5=2L3|2=1U1 4=1V1 6=1W1] M1[U1=1U1 V1=1V1 W1=1W1|W2=1W2 U2=1U2 V2=1V2] PE",
      "KM2[1=1L1 3=1L2 5=1L3|2=1W2 4=1U2 6=1V2] -> 1W2 1U2 1V2",
      "KM3[1=1Y 3=1Y 5=1Y|2=1W2 4=1U2 6=1V2] -> 1W2 1U2 1V2",
    ]);
  });

  test("two windings for two speeds have leads of their own", () => {
    const found = branchesOf(power('feed L1 L2 L3\nbranch "Slow": KM1 -> M1\nbranch "Fast": KM2 -> M1.2', "north-american"));
    expect(found[0]).toContain("M1[T1=1T1 T2=1T2 T3=1T3|T11=1T11 T12=1T12 T13=1T13]");
  });
});

describe("supplies", () => {
  const control = (end: string, supply = "") =>
    power(`feed L1 L2 L3 PE\nbranch "Control" L1 L2: FU1 T1 FU2 G1 ${end}`).replace("rails L+ M", `rails L+ M ${supply}`);

  test("the rails are what comes out of the last device", () => {
    const { machine, codes } = machineOf(control("-> CTRL"));
    expect(codes).toEqual([]);
    const [branch] = firstPower(machine).branches;
    expect(writtenPower(machine, branch?.path ?? [])).toBe(
      "FU1[1=L1 3=L2|2=1L1 4=1L2] T1[H1=1L1 H2=1L2|X1=2X1 X2=2X2] FU2[1=2X1|2=3X1] G1[L=3X1 N=2X2|+=L+ -=M] PE",
    );
    expect(branch?.end).toMatchObject({ kind: "supply", supply: "CTRL" });
    expect(machine.supplies[0]).toMatchObject({ from: "G1", branch: "power1/branch1" });
    const rails = machine.potentials.filter(({ rail }) => rail === "L+" || rail === "M");
    expect(branch?.end.kind === "supply" && branch.end.conductors.map(({ node }) => node)).toEqual(rails.map(({ id }) => id));
  });

  test("a fuse of the supply stands between the branch and the rail", () => {
    const { machine } = machineOf(control("-> CTRL", "fuse FU9 2 A"));
    const [branch] = firstPower(machine).branches;
    const ends = branch?.end.kind === "supply" ? branch.end.conductors.map(({ node }) => machine.potentials[node]) : [];
    expect(ends.map((one) => [one?.rail, one?.number.value])).toEqual([
      [undefined, "4L+"],
      ["M", "M"],
    ]);
  });

  test("a ladder without a supply of its own shares the names of the feed", () => {
    const machine = soundMachine(
      'contactor KM1\nmotor M1\npower "P" 400 V AC 3 phase {\nbranch "x": KM1 -> M1\n}\npush-button PB1\nladder { rung: PB1 -> KM1 }\n',
    );
    const [rung] = machine.circuits.flatMap((circuit) => (circuit.kind === "ladder" ? circuit.rungs : []));
    expect(rung?.start.node).toBe(firstPower(machine).feed.bus[0]?.node);
  });
});

test("what taps the busbars without a branch of its own is one by itself", () => {
  const { machine, codes } = machineOf(power('feed L1 L2 L3 PE: QS1 -> Q1, T1, FU1\nbranch "Pump": FU1 KM1 -> M1'));
  expect(codes).toEqual(["branch-without-load"]);
  expect(
    firstPower(machine).branches.map(({ path, conductors }) => [
      mainsOf(path)
        .map((use) => use.device)
        .join(" "),
      conductors.length,
    ]),
  ).toEqual([
    ["Q1", 3],
    ["T1", 2],
    ["FU1 KM1 M1", 3],
  ]);
});

test("an overload guards the motor of its branch", () => {
  expect(device(machineOf(power('branch "Pump": KM1 OL1 -> M1')).machine, "OL1").guards).toBe("M1");
});

test("a contactor may switch single conductors in several branches as far as its poles go", () => {
  const { machine, codes } = machineOf(power("feed L1 L2 L3 N\nbranch L1 N: KM1 -> LT1\nbranch L2: KM1 @x\nbranch L1: @x -> HT1"));
  expect(codes).toEqual(["unknown-conductor", "conductors-unlike-load"]);
  expect(device(machine, "KM1").mains.map(({ id, ins }) => `${id} ${ins.map(({ terminal }) => terminal)}`)).toEqual([
    "KM1:main 1,3",
    "KM1:main/2 5",
  ]);
});

test("every conductor has a name of its own, also beside rails that are called like one", () => {
  const text = power('feed L1 L2 L3: QS1\nbranch "Pump": FU1 KM1 -> M1\nbranch "Control" L1 L2: T1 -> CTRL').replace(
    "24 V DC { rails L+ M }",
    "230 V AC { rails 1L1 0 }",
  );
  const { machine, codes } = machineOf(text);
  expect(codes).toEqual([]);
  const names = machine.potentials.map(({ number }) => number.value);
  expect(new Set(names).size).toBe(names.length);
  expect(names).toContain("2L1");
});

test("wires of the ladders are numbered as without a power circuit", () => {
  const ladder = "push-button PB1\npush-button PB2\ncontactor KA\nladder { rung: PB1 PB2 -> KA }\n";
  const numbers = (text: string) => {
    const { machine } = machineOf(text);
    const [rung] = machine.circuits.flatMap((circuit) => (circuit.kind === "ladder" ? circuit.rungs : []));
    return rung?.path.items.map((item) => machine.potentials[item.to]?.number.value);
  };
  expect(numbers(power('branch "Pump": FU1 KM1 OL1 -> M1') + ladder.replace("ladder", "ladder supply CTRL"))).toEqual(["1", "2", "M"]);
});
