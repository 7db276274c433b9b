import { describe, expect, test } from "vitest";
import { composeValve } from "../../src/symbols/valve.js";
import { device, firstFluid, machineOf, nodesOf, soundMachine } from "./machine-of.js";

const hydraulic = (body: string) => `fluid "Oil" hydraulic {\n${body}\n}\n`;
const pneumatic = (body: string) => `fluid "Air" pneumatic {\n${body}\n}\n`;

function nodes(text: string): string[] {
  return nodesOf(firstFluid(soundMachine(text)));
}

describe("lines join ports into nodes", () => {
  test("a line goes through what stands in the middle of it", () => {
    expect(nodes(pneumatic("air-supply AIR1 6 bar\nservice-unit FRL1\nfilter F1\nline AIR1 -- FRL1 -- F1 -- @P"))).toEqual([
      "AIR1.1 FRL1.in",
      "FRL1.out F1.in",
      "F1.out",
    ]);
  });

  test("a pump draws and delivers, a relief valve lets off from P to T, a gauge stands on the line", () => {
    const text = "tank TK1\npump P1\nrelief-valve RV1 160 bar\ngauge G1\nline TK1 -- P1 -- @P\nline @P -- RV1 -- TK1\nline @P -- G1 -- @Q";
    expect(nodes(hydraulic(text))).toEqual(["TK1.T P1.S RV1.T", "P1.P RV1.P G1.P"]);
  });

  test("several ends on one side are all joined with the other", () => {
    const text =
      "cylinder A1\ncylinder B1\ncylinder C1\nair-supply AIR1\nline AIR1 -- A1.cap, B1.cap, C1.cap\nline A1.rod, B1.rod -- C1.rod";
    const { circuits } = soundMachine(pneumatic(text));
    const [circuit] = circuits;
    expect(circuit?.kind === "fluid" && nodesOf(circuit)).toEqual(["A1.cap B1.cap C1.cap AIR1.1", "A1.rod B1.rod C1.rod"]);
    expect(circuit?.kind === "fluid" && circuit.lines).toHaveLength(5);
  });

  test("a silencer or tank without a name stands at each end", () => {
    const valve = "valve V1 5/2 left lever right spring\n";
    expect(nodes(pneumatic(`${valve}exhaust V1.3, V1.5 -- silencer`))).toEqual(["V1.3 fluid1/silencer1.in", "V1.5 fluid1/silencer2.in"]);
    expect(nodes(pneumatic(`${valve}exhaust V1.3, V1.5`))).toEqual(["V1.3 fluid1/exhaust1.in", "V1.5 fluid1/exhaust2.in"]);
    expect(nodes(hydraulic("valve V1 4/2 left lever right spring\nfilter F1\nline V1.T -- F1 -- tank\nline tank -- V1.P"))).toEqual([
      "V1.T F1.in",
      "F1.out fluid1/tank1.T",
      "V1.P fluid1/tank2.T",
    ]);
  });

  test("one silencer with a name serves all that lead to it", () => {
    expect(nodes(pneumatic("valve V1 5/2 left lever right spring\nsilencer SL1\nexhaust V1.3, V1.5 -- SL1"))).toEqual(["V1.5 V1.3 SL1.in"]);
  });

  test("a 2/2 valve may be gone through", () => {
    expect(nodes(hydraulic("valve V1 2/2 left lever right spring\npump P1\nline P1 -- V1 -- tank"))).toEqual([
      "V1.P P1.P",
      "V1.A fluid1/tank1.T",
    ]);
  });
});

describe("free flow", () => {
  const parts = "valve V1 5/2 left lever right spring\ncylinder C1\none-way-flow-control FC1 free-to";
  const ports = (text: string) => nodes(pneumatic(text)).filter((node) => node.includes("FC1"));
  test("leads to what free-to names, whichever way the line is written", () => {
    expect(ports(`${parts} C1\nline V1.4 -- FC1 -- C1.cap`)).toEqual(["V1.4 FC1.in", "C1.cap FC1.out"]);
    expect(ports(`${parts} C1\nline C1.cap -- FC1 -- V1.4`)).toEqual(["C1.cap FC1.out", "V1.4 FC1.in"]);
    expect(ports(`${parts} V1\nline V1.4 -- FC1 -- C1.cap`)).toEqual(["V1.4 FC1.out", "C1.cap FC1.in"]);
    expect(ports(`${parts} @out\nline V1.4 -- FC1 -- @out\nline @out -- C1.cap`)).toEqual(["V1.4 FC1.in", "C1.cap FC1.out"]);
  });
  test("is found through other components", () => {
    expect(ports(`throttle TH1\n${parts} C1\nline C1.cap -- TH1 -- FC1 -- V1.4`)).toEqual(["TH1.out FC1.out", "V1.4 FC1.in"]);
  });
  test("the lines name the ports that were found", () => {
    const [circuit] = soundMachine(pneumatic(`${parts} C1\nline C1.cap -- FC1 -- V1.4`)).circuits;
    expect(circuit?.kind === "fluid" && circuit.lines.flatMap(({ ends }) => ends.map((end) => end.kind === "port" && end.port))).toEqual([
      "cap",
      "out",
      "in",
      "4",
    ]);
  });
  test("must be reachable", () => {
    expect(machineOf(pneumatic(`cylinder C2\n${parts} C2\nline V1.4 -- FC1 -- C1.cap`)).codes).toEqual(["free-to-not-reached"]);
  });
});

describe("links across", () => {
  test("a valve brings in its coils, with its text and ratings, and a declaration may give them texts of their own", () => {
    const machine = soundMachine(
      `solenoid SOL2 "Slide back"\n${pneumatic('valve V1 "Slide" 5/2 left solenoid SOL1 right solenoid SOL2 coil 5 W override start right')}`,
    );
    expect(device(machine, "SOL1")).toMatchObject({ text: "Slide", values: ["5 W"], valve: { name: "V1", side: "left" } });
    expect(device(machine, "SOL2")).toMatchObject({ text: "Slide back", valve: { name: "V1", side: "right" } });
    expect(machine.components.get("V1")?.valve?.right).toEqual([{ kind: "solenoid", solenoid: "SOL2", override: true }]);
  });

  test("a pressure switch stands in the circuit on the point or port it senses", () => {
    const text = "air-supply AIR1\ncylinder C1\nline AIR1 -- @P\nline @P -- C1.cap";
    for (const on of ["@P", "C1.cap"]) {
      const machine = soundMachine(`pressure-switch PS1 "Clamped" on ${on} rising 4 bar falling 3 bar\n${pneumatic(text)}`);
      expect(nodesOf(firstFluid(machine))[0]).toBe("AIR1.1 C1.cap PS1.P");
      expect(machine.components.get("PS1")).toMatchObject({ kind: "pressure-switch", values: ["4 bar / 3 bar"] });
      expect(device(machine, "PS1").senses?.rising?.value).toBe(4);
    }
  });

  test("a motor that drives a pump stands beside it", () => {
    const machine = soundMachine(
      `motor M1 4 kW 400 V 3 phase\n${hydraulic("tank T1\npump P1 drive M1\ngauge G1\nline P1 -- G1\nline T1 -- P1")}`,
    );
    expect(firstFluid(machine).components.map(({ name }) => name)).toEqual(["T1", "P1", "M1", "G1"]);
    expect(machine.components.get("P1")?.drivenBy).toBe("M1");
  });

  test("switches stand along the stroke, in order of place", () => {
    const text = `limit-switch LS1 on C1 at extended\nlimit-switch LS2 on C1 at 40 mm\nlimit-switch LS3 on C1 from 0.5 in to 1 in\nlimit-switch LS4 on C1 at retracted\n`;
    const machine = soundMachine(text + pneumatic("cylinder C1 bore 40 mm rod 16 mm stroke 100 mm"));
    expect(machine.components.get("C1")?.cylinder?.switches).toEqual([
      { device: "LS4", from: 0, to: 1 },
      { device: "LS3", from: 12.7, to: 25.4 },
      { device: "LS2", from: 39, to: 41 },
      { device: "LS1", from: 99, to: 100 },
    ]);
    expect(machine.components.get("C1")?.values).toEqual(["40/16 × 100"]);
  });
});

describe("directional valves", () => {
  const types = [
    "2/2",
    "2/2 normally open",
    "3/2",
    "3/2 normally open",
    "4/2",
    "5/2",
    "4/3 centre closed",
    "4/3 centre open",
    "4/3 centre tandem",
    "4/3 centre float",
    "4/3 centre regenerative",
    "5/3 centre closed",
    "5/3 centre exhaust",
    "5/3 centre open",
    "5/3 centre pressure",
  ];
  const ends = [
    "left solenoid SOL1 right spring",
    "left spring right solenoid SOL1",
    "left solenoid SOL1 right solenoid SOL2 detent",
    "left pilot right pilot",
    "left piloted-solenoid SOL1 override right piloted-solenoid SOL2",
    "left lever right detent",
  ];
  const cases = (["hydraulic", "pneumatic"] as const).flatMap((medium) =>
    types
      .filter((type) => medium === "pneumatic" || !type.startsWith("5"))
      .flatMap((type) => ends.map((end) => [medium, type, end] as const)),
  );

  test.each(cases)("%s %s %s can be drawn, and its symbol has its ports", (medium, type, end) => {
    const machine = soundMachine(`fluid "F" ${medium} {\nvalve V1 ${type} ${end}\n}\n`);
    const valve = machine.components.get("V1");
    const spec = valve?.valve;
    if (!valve || !spec) throw new Error("no valve");
    for (let box = 0; box < spec.boxes.length; box++) {
      const drawn = composeValve(spec, medium, box).ports.map(({ name }) => name);
      expect(drawn.sort()).toEqual(valve.ports.map(({ name }) => name).sort());
    }
  });

  test.each([
    ["5/2 left solenoid SOL1 right spring", ["1>4·2>3·5", "1>2·4>5·3"], 1],
    ["5/2 left spring right solenoid SOL1", ["1>4·2>3·5", "1>2·4>5·3"], 0],
    ["5/2 left solenoid SOL1 right solenoid SOL2", ["1>4·2>3·5", "1>2·4>5·3"], undefined],
    ["4/3 centre tandem left solenoid SOL1 right solenoid SOL2 springs", ["P>A·B>T", "PT·A·B", "P>B·A>T"], 1],
    ["3/2 normally open left solenoid SOL1 right spring", ["P·A>T", "P>A·T"], 1],
    ["3/2 left spring right solenoid SOL1", ["P·A>T", "P>A·T"], 0],
    ["2/2 normally closed left lever right spring", ["P>A", "P·A"], 1],
  ])("%s rests by its spring", (text, boxes, normal) => {
    const spec = soundMachine(pneumatic(`valve V1 ${text}`)).components.get("V1")?.valve;
    expect(spec?.boxes).toEqual(boxes);
    expect(spec?.normal).toBe(normal);
  });

  test("an external pilot supply is a port once a line leads to it", () => {
    const text = "valve V1 4/2 left piloted-solenoid SOL1 right spring\npump P1\npilot P1.P -- V1.X\ndrain V1.Y";
    expect(nodes(hydraulic(text))).toEqual(["V1.X P1.P", "V1.Y fluid1/tank1.T"]);
  });
});
