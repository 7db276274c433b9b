import { beforeAll, describe, expect, test } from "vitest";
import { compile } from "../../src/compile.js";
import { joinPins } from "../../src/schedules/join-pins.js";
import type { ListName } from "../../src/schedules/list-names.js";
import { type List, listMakers } from "../../src/schedules/lists.js";
import { machineOf, soundMachine } from "../machine/machine-of.js";
import { memoryWorld } from "../support/memory-world.js";
import { filesBelow, readText } from "../support/sources.js";

const text = `drawing "Feeder" { number FD-1 }
power-supply G1 "Control" primary 230 V secondary 24 V DC 5 A { part "PS-24-5" location panel }
supply CTRL 24 V DC { rails L+ M from G1 fuse FU1 4 A }
push-button PB1 "Start" poles 2 no 1 nc
push-button PB2 "Stop"
relay CR1 "Running" poles 3 no 1 nc coil 2 W
terminal-strip X1 "Field"
plug XP1 "Cable"
limit-switch LS1 "Home" on FEED at retracted
diode D1 1 A
fuse FU2 "Lamps" 1 A
pilot-light LT1 "On" green
horn HN1 "Home"
latching-relay KL1 "Hand"
output-card Q0 8 points
timer TR1 on-delay 2 s poles 1 no
ladder "Control" supply CTRL {
  rung "Run":  /PB2 (PB1 | CR1) -> (CR1 | D1)
  rung "Lamp": FU2 CR1 -> LT1
  rung "Home": X1:1 XP1:1 LS1 XP1:2 X1:10 -> HN1
  rung "Lamp too": X1:2 CR1 @a
  rung "Hand": @a PB1 -> KL1.set
  rung "Auto": Q0.3 -> KL1.reset X1:3
  rung "Feed": KL1 -> (SOL1 | TR1)
}
fluid "Air" pneumatic {
  air-supply AIR1 6 bar
  cylinder FEED "Feeder" double-acting bore 40 mm rod 16 mm stroke 60 mm
  valve V1 "Feeder" 5/2 left solenoid SOL1 right spring
  line AIR1 -- V1.1
  line V1.4 -- FEED.cap
  line V1.2 -- FEED.rod
  exhaust V1.3, V1.5 -- silencer
}
`;

async function lists(drawing: string): Promise<Record<ListName, List>> {
  const { machine, layout, diagnostics } = await compile("a.sprung", memoryWorld({ "a.sprung": drawing }));
  if (!layout) throw new Error(diagnostics.map(({ message }) => message).join("\n"));
  return {
    devices: listMakers.devices(machine, layout),
    wires: listMakers.wires(machine, layout),
    terminals: listMakers.terminals(machine, layout),
    contacts: listMakers.contacts(machine, layout),
  };
}

let made: Record<ListName, List>;
beforeAll(async () => {
  made = await lists(text);
});

describe("the list of devices", () => {
  test("has every electrical device as declared, the fuses of supplies, then what is only fluid", () => {
    const { records } = made.devices;
    expect(records.map(([name]) => name)).toEqual("G1 PB1 PB2 CR1 X1 XP1 LS1 D1 FU2 LT1 HN1 KL1 Q0 TR1 SOL1 FU1 AIR1 FEED V1".split(" "));
  });
  test("says of each what it is, its order code, place and ratings, and where it is drawn", () => {
    const rows = new Map(made.devices.records.map((record) => [record[0], record.slice(1)]));
    expect(rows.get("G1")).toEqual(["power-supply", "Control", "PS-24-5", "panel", "230 V AC / 24 V DC, 5 A", ""]);
    expect(rows.get("CR1")).toEqual(["relay", "Running", "", "", "2 W, 3 NO 1 NC", "1/101, 1/102, 1/103, 1/105"]);
    expect(rows.get("Q0")).toEqual(["output-card", "", "", "", "8 points", "1/107"]);
    expect(rows.get("FU1")).toEqual(["fuse", "Supply CTRL", "", "", "4 A", "1"]);
    expect(rows.get("X1")?.at(-1)).toBe("1/104, 1/105, 1/107");
    // On the ladder by its line, on the fluid sheet by its zone.
    expect(rows.get("SOL1")?.at(-1)).toMatch(/^1\/108, 2\/[A-F]\d$/);
    expect(rows.get("LS1")?.at(-1)).toMatch(/^1\/104, 2\/[A-F]\d$/);
    expect(rows.get("FEED")).toMatchObject(["cylinder", "Feeder", "", "", "40/16 × 60", expect.stringMatching(/^2\/[A-F]\d$/)]);
  });
});

describe("the list of wires", () => {
  test("joins each potential pin to pin as it is wired", () => {
    const { records } = made.wires;
    const of = (wire: string) => records.filter(([number]) => number === wire).map(([, , , from, to]) => `${from} ${to}`);
    expect(of("L+")).toEqual([
      "FU1:2 PB2:11",
      "PB2:11 FU2:1",
      "FU2:1 X1:1",
      "X1:1 XP1:1",
      "XP1:1 LS1:13",
      "X1:1 X1:2",
      "X1:2 CR1:43",
      "X1:2 Q0",
      "Q0 KL1:13",
    ]);
    expect(of("1")).toEqual(["PB2:12 PB1:13", "PB1:13 CR1:13"]);
    expect(of("2")).toEqual(["PB1:14 CR1:14", "CR1:14 CR1:A1", "CR1:A1 D1:K"]);
    expect(of("M")).toEqual([
      "CR1:A2 D1:A",
      "D1:A LT1:X2",
      "LT1:X2 HN1",
      "HN1 KL1:A2",
      "KL1:B2 X1:3",
      "KL1:A2 X1:3",
      "X1:3 SOL1:A2",
      "SOL1:A2 TR1:A2",
    ]);
  });
  test("names each wire's colour and what it is called", () => {
    const { data } = made.wires;
    expect(data).toContainEqual({
      number: "6",
      colour: "blue",
      name: "@a",
      pins: ["CR1:44", "PB1:33"],
      connections: [{ from: "CR1:44", to: "PB1:33" }],
    });
  });
});

describe("the list of terminals", () => {
  test("has each strip in the order of its numbers, with the wire and what is on either side", () => {
    expect(made.terminals.records).toEqual([
      ["X1", "1", "L+", "FU2:1, X1:2", "XP1:1", "1/104"],
      ["X1", "2", "L+", "X1:1, Q0", "CR1:43", "1/105"],
      ["X1", "3", "M", "KL1:B2", "KL1:A2, SOL1:A2", "1/107"],
      ["X1", "10", "5", "XP1:2", "HN1", "1/104"],
      ["XP1", "1", "L+", "X1:1", "LS1:13", "1/104"],
      ["XP1", "2", "5", "LS1:14", "X1:10", "1/104"],
    ]);
  });
});

describe("the list of contacts", () => {
  test("has the contacts used and the spare ones of each device", () => {
    const { records } = made.contacts;
    const of = (name: string) => records.filter(([device]) => device === name).map((record) => record.slice(3).join(" ").trim());
    expect(of("CR1")).toEqual([
      "3 NO 1 NC NO  13-14 1 102",
      "3 NO 1 NC NO  33-34 1 103",
      "3 NO 1 NC NO  43-44 1 105",
      "3 NO 1 NC NC  21-22 spare",
    ]);
    expect(of("TR1")).toEqual(["1 NO NO timed 17-18 spare"]);
    expect(of("PB2")).toEqual(["NC  11-12 1 101"]);
    expect(records.some(([device]) => device === "Q0")).toBe(false);
  });

  // Main contacts 1-2, 3-4, 5-6: EN 50005.
  test("has the main contacts of a contactor before its others", async () => {
    const { records } = (await lists(readText("samples/bark-mill.sprung"))).contacts;
    expect(records.filter(([device]) => device === "KM1").map((record) => record.slice(4).join(" "))).toEqual([
      "main  1-2 3-4 5-6 1 101",
      "NO  13-14 4 405",
      "NO  23-24 4 408",
    ]);
  });
});

test("a power circuit is joined pole by pole, and a supply's fuse parts its rail from where it comes from", () => {
  const { machine, codes } = machineOf(`supply CTRL 24 V DC { rails L+ M from G1 fuse FU9 4 A }
disconnect QS1 63 A
fuse FU1 16 A
circuit-breaker Q2 4 A
contactor KM1
contactor KM2
overload OL1 on M1 5 A
motor M1 4 kW
terminal-strip X1
power-supply G1 primary 400 V secondary 24 V DC
push-button PB1
power "Main" 400 V AC 3 phase 50 Hz {
  feed L1 L2 L3 PE: QS1
  branch "Lift": FU1 (KM1 | KM2 crossed) OL1 X1:1-3 -> M1
  branch "Control" L1 L2: Q2 G1 -> CTRL
}
ladder "Control" supply CTRL {
  rung: PB1 /KM2 -> KM1
  rung: PB1 /KM1 -> KM2
}
`);
  expect(codes).toEqual([]);
  const layout = { sheets: [], places: new Map() };
  const wires = listMakers.wires(machine, layout).records.map((record) => record.join(" "));
  expect(wires).toEqual(
    expect.arrayContaining([
      "1L1 black  QS1:2 FU1:1",
      "1L1 black  FU1:1 Q2:1",
      "3L1 black  KM1:2 KM2:6",
      "3L1 black  KM2:6 OL1:1",
      "1T1 black  OL1:2 X1:1",
      "1T1 black  X1:1 M1:T1",
      "PE green-and-yellow PE M1:PE G1:PE",
      "5L+ blue  G1:+ FU9:1",
      "L+ blue L+ FU9:2 PB1:13",
      "M blue M G1:- KM1:A2",
    ]),
  );
  expect(listMakers.terminals(machine, layout).records.map((record) => record.join(" ").trim())).toEqual([
    "X1 1 1T1 OL1:2 M1:T1",
    "X1 2 1T2 OL1:4 M1:T2",
    "X1 3 1T3 OL1:6 M1:T3",
  ]);
});

test("a circuit that stays live is orange, a neutral is not", () => {
  const machine = soundMachine(`supply LIGHT 230 V AC { rails L N excepted }
push-button PB1
pilot-light LT1
ladder "Light" supply LIGHT {
  rung: PB1 -> LT1
}
`);
  const { records } = listMakers.wires(machine, { sheets: [], places: new Map() });
  expect(records.map((record) => record.join(" "))).toEqual(["L orange L PB1:13 ", "N white N LT1:X2 ", "1 orange  PB1:14 LT1:X1"]);
});

describe("every wire has two ends, and no pins are joined twice", () => {
  test.each([...filesBelow("samples", ".sprung"), ...filesBelow("tests/checks/fixtures", ".near-miss.sprung")])("%s", (path) => {
    const { machine } = machineOf(readText(path));
    for (const { pins, connections } of joinPins(machine).values()) {
      expect(new Set(pins).size).toBe(pins.length);
      // As many wires as it takes to join all pins, and all pins reached over them.
      expect(connections).toHaveLength(pins.length - 1);
      const reached = new Set(pins.slice(0, 1));
      for (let grown = true; grown; ) {
        grown = false;
        for (const { from, to } of connections) {
          if (reached.has(from) === reached.has(to)) continue;
          reached.add(from).add(to);
          grown = true;
        }
      }
      expect(reached.size).toBe(pins.length);
    }
  });
});
