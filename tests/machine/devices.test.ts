import { describe, expect, test } from "vitest";
import { compile } from "../../src/compile.js";
import { deviceRoles } from "../../src/machine/kinds.js";
import { diagnosticsOf } from "../support/announced.js";
import { memoryWorld } from "../support/memory-world.js";
import { readText } from "../support/sources.js";
import { device, firstFluid, firstLadder, ladder, machineOf, soundMachine } from "./machine-of.js";

/** What is read of one declaration. */
function read(declaration: string) {
  return device(soundMachine(declaration), declaration.split(/\s+/)[1] as string);
}

describe("a drawing with every electrical kind", () => {
  const text = readText("tests/machine/every-kind.sprung");
  test("has each of them", () => {
    const kinds = new Set([...soundMachine(text).devices.values()].map(({ kind }) => kind));
    expect(Object.keys(deviceRoles).filter((kind) => !kinds.has(kind as never))).toEqual([]);
  });
  test("is faultless", () => {
    const told = diagnosticsOf(text).map(({ code, at, message }) => `${at.line}: ${code} ${message}`);
    expect(told).toEqual([]);
  });
  test.each(["north-american", "international"])("is drawn in the %s convention", async (convention) => {
    const drawing = `drawing "D" { convention ${convention} }\n${text}`;
    const { set, diagnostics } = await compile("a.sprung", memoryWorld({ "a.sprung": drawing }));
    expect(diagnostics).toEqual([]);
    expect(set?.sheets.length).toBeGreaterThan(3);
  });
});

describe("properties of each kind", () => {
  test.each([
    ["counter C1 preset 12", { preset: 12, values: ["12"] }],
    ["latching-relay KL1 poles 2 no coil 3 W", { poles: { no: 2, nc: 0 }, coil: { power: { value: 3 } } }],
    ["key-switch S1 positions hand off auto", { selector: { positions: ["hand", "off", "auto"], start: "off" } }],
    ["key-switch S1 positions 1 2 start 2", { selector: { positions: ["1", "2"], start: "2" } }],
    ["proximity-switch PX1 wires 2", { wires: 2 }],
    ["pilot-light LT1 push-to-test red 24 V DC", { lamp: { pushToTest: true }, colour: "red", values: ["24 V DC"] }],
    ["pilot-light LT1 24 V", { voltage: { voltage: { value: 24 } }, values: ["24 V"] }],
    ["horn HN1 24 V DC 5 W", { voltage: { voltage: { value: 24 }, current: "DC" }, values: ["24 V DC", "5 W"] }],
    ["heater HTR1 500 W 230 V AC", { voltage: { current: "AC" }, values: ["500 W", "230 V AC"] }],
    ["motor M1 90 W 24 V DC", { voltage: { current: "DC" }, values: ["90 W", "24 V DC"] }],
    ["fuse FU1 poles 3 10 A", { ways: 3, values: ["10 A"] }],
    ["contactor KM1 poles 3 1 no 1 nc", { ways: 3, poles: { no: 1, nc: 1 } }],
    ["contactor KM1 poles 3 no 1 nc", { poles: { no: 3, nc: 1 } }],
    ["resistor R1 4.7 kohm 2 W", { values: ["4.7 kΩ", "2 W"] }],
    ["resistor R1 470 Ω", { values: ["470 Ω"] }],
    ["input-card I0 8 points 24 V DC", { points: 8, voltage: { voltage: { value: 24 }, current: "DC" }, values: ["24 V DC"] }],
    ["output-card Q0 16 points", { points: 16, values: [] }],
    ["transformer T1 primary 400 V secondary 230 V 250 VA", { values: ["400 V AC / 230 V AC", "250 VA"] }],
    ["power-supply G1 primary 400 V secondary 24 V 5 A", { values: ["400 V AC / 24 V DC", "5 A"] }],
    ["power-supply G1 primary 110 V DC secondary 24 V DC", { values: ["110 V DC / 24 V DC"] }],
    ["rectifier REC1 primary 24 V secondary 22 V", { conversion: { primary: { current: "AC" }, secondary: { current: "DC" } } }],
    ["level-switch FS1 rising 80 % falling 60 %", { values: ["80 % / 60 %"], senses: { rising: { value: 80, dimension: "share" } } }],
    ["level-switch FS1 falling 12 cm", { senses: { falling: { value: 120 } } }],
    ["temperature-switch TAS1 rising -5 °C falling -12 °C", { senses: { rising: { value: -5 }, falling: { value: -12 } } }],
    ["flow-switch FLS1 falling 2 gpm", { senses: { falling: { dimension: "flow" } } }],
    ["vacuum-switch VS1 rising -0.6 bar falling -0.4 bar", { values: ["-0.6 bar / -0.4 bar"] }],
    ["vacuum-switch VS1 rising 600 mbar falling 400 mbar", { values: ["600 mbar / 400 mbar"] }],
    [
      'foot-switch FTS1 "Go" poles 1 no location "floor" part "FT-1" note "Hooded"',
      { location: "floor", orderCode: "FT-1", note: "Hooded" },
    ],
    ['plug XP1 "Door" { location door\n part "XP-12" }', { text: "Door", location: "door", orderCode: "XP-12" }],
  ])("%s", (declaration, expected) => {
    expect(read(declaration)).toMatchObject(expected);
  });
});

describe("switches that sense a fluid", () => {
  const fluid = `fluid "Oil" hydraulic {
  tank TK1 "Oil" 100 l
  pump P1 40 l/min
  cylinder RAM
  line TK1 -- P1 -- @P
  line @P -- RAM.cap
  plug RAM.rod
}
`;
  test.each(["pressure-switch", "vacuum-switch", "flow-switch", "level-switch", "temperature-switch"] as const)(
    "a %s stands at the point it senses",
    (kind) => {
      const machine = soundMachine(`${kind} S1 "Sensor" on @P\n${kind} S2 on RAM.cap\n${fluid}`);
      const { components, nodes } = firstFluid(machine);
      expect(components.filter((component) => component.kind === kind).map(({ name }) => name)).toEqual(["S1", "S2"]);
      const ports = nodes.find(({ points }) => points.includes("P"))?.ports.map(({ component, port }) => `${component}.${port}`);
      expect(ports).toEqual(expect.arrayContaining(["S1.P", "S2.P", "P1.P", "RAM.cap"]));
      expect(device(machine, "S1").senses).toMatchObject({ point: "P" });
      expect(device(machine, "S2").senses).toMatchObject({ component: "RAM", port: "cap" });
    },
  );
  test("a level or temperature switch may stand in the tank, and is named beside it", () => {
    const machine = soundMachine(`level-switch FS1 on TK1 rising 80 %\ntemperature-switch TAS1 on TK1\n${fluid}`);
    expect(device(machine, "FS1").senses).toMatchObject({ component: "TK1", rising: { value: 80 } });
    expect(machine.components.get("TK1")?.values).toEqual(["100 l", "FS1", "TAS1"]);
    expect(firstFluid(machine).components.some(({ name }) => name === "FS1")).toBe(false);
  });
  test("one that is declared in its circuit has its symbol there", () => {
    const machine = soundMachine(
      `fluid "Air" pneumatic {\n vacuum-switch VS1 rising 0.6 bar\n cylinder C\n line C.cap -- VS1\n plug C.rod\n}`,
    );
    expect(firstFluid(machine).components.map(({ kind }) => kind)).toContain("vacuum-switch");
  });
});

describe("what the rails come from", () => {
  const supply = (text: string, source: string) => {
    const { machine, codes } = machineOf(`${source}\nsupply CTRL ${text}`);
    return { supply: machine.supplies[0], codes };
  };
  const source = "power-supply G1 primary 230 V secondary 24 V DC";
  test("is a transformer, a power supply or a rectifier", () => {
    expect(supply("24 V DC { rails L+ M from G1 fuse FU1 4 A }", source)).toMatchObject({
      codes: [],
      supply: { from: "G1", rails: ["L+", "M"], fuse: { name: "FU1", rating: "4 A" } },
    });
    expect(supply("24 V DC from M1", "motor M1").codes).toEqual(["wrong-kind"]);
    expect(supply("24 V DC from G2", source).codes).toEqual(["unknown-name"]);
  });
  test("says what the supply does not say of itself", () => {
    expect(supply("from G1", source).supply).toMatchObject({ voltage: { value: 24 }, current: "DC", rails: ["L+", "M"] });
    expect(supply("from T1", "transformer T1 secondary 120 V").supply).toMatchObject({
      voltage: { value: 120 },
      current: "AC",
      rails: ["L1", "L2"],
    });
    expect(supply("48 V AC from G1", source).supply).toMatchObject({ voltage: { value: 48 }, current: "AC" });
  });
});

describe("what a card's points are in a rung", () => {
  const machine = soundMachine(
    ladder(
      "rung: PB1 -> I0.5\nrung: Q0.3 -> CR1",
      "push-button PB1\nrelay CR1\ninput-card I0 8 points 24 V DC\noutput-card Q0 8 points 24 V DC",
    ),
  );
  test("an input is driven, an output drives", () => {
    expect(device(machine, "I0").loads).toMatchObject([{ point: "5", id: "I0.5:load" }]);
    expect(device(machine, "Q0").contacts).toMatchObject([{ point: "3", form: "NO", id: "Q0.3:contact", terminals: { value: ["", ""] } }]);
    expect(firstLadder(machine).rungs).toHaveLength(2);
  });
});

test("a load with what quenches it beside is the load, and what follows is on the return side", () => {
  const machine = soundMachine(ladder("rung: PB1 -> (CR1 | D1) CR2\nrung: PB1 -> CR2", "push-button PB1\nrelay CR1\nrelay CR2\ndiode D1"));
  expect(device(machine, "CR1").loads).toHaveLength(1);
  expect(device(machine, "CR2").contacts).toHaveLength(1);
});

test("a plug is a declaration outside a fluid circuit and a stopped port within", () => {
  const machine = soundMachine(
    `${ladder("plug XP1\nrung: PB1 XP1:1 -> CR1", "push-button PB1\nrelay CR1")}fluid "Air" pneumatic {\n cylinder C1\n plug C1.cap, C1.rod\n}\n`,
  );
  expect(device(machine, "XP1").kind).toBe("plug");
  expect(machine.components.get("C1")?.ports.every(({ plugged }) => plugged)).toBe(true);
});
