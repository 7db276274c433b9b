import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import type { CircuitSheet } from "../../../src/layout/placement.js";
import {
  bends,
  crossings,
  looseEnds,
  outside,
  portsOf,
  symbolBox,
  symbolOverlaps,
  textOverlaps,
  textsOnWires,
  tooClose,
  wiresThroughSymbols,
} from "../../support/facts.js";
import { layOutText, netsOfMachine, netsOfSheets } from "../../support/fluid-circuits.js";

const sample = (name: string) => readFileSync(new URL(`../../../samples/${name}.sprung`, import.meta.url), "utf8");

const symbol = (sheet: CircuitSheet, part: string) => {
  const found = sheet.symbols.find((one) => one.part === part);
  if (!found) throw new Error(`${part} is not drawn.`);
  return found;
};

const port = (sheet: CircuitSheet, part: string, name: string) => {
  const found = portsOf(symbol(sheet, part)).find((one) => one.name === name);
  if (!found) throw new Error(`${part} has no port ${name}.`);
  return found.at;
};

const textsOf = (sheet: CircuitSheet, part: string) => sheet.texts.filter((text) => text.part === part).map(({ text }) => text);

for (const [name, most] of [
  ["tray-stamper", { crossings: 0, bends: 6 }],
  ["billet-shear", { crossings: 2, bends: 12 }],
] as const) {
  describe(`the fluid sheet of ${name}`, () => {
    it("shows every component once and joins what the machine joins", async () => {
      const { circuit, sheets } = await layOutText(sample(name));
      expect(sheets).toHaveLength(1);
      expect(sheets[0]?.symbols.map(({ part }) => part).sort()).toEqual(circuit.components.map(({ id }) => id).sort());
      expect(netsOfSheets(sheets)).toEqual(netsOfMachine(circuit));
    });

    it("has nothing in the way of anything", async () => {
      const { sheets, area } = await layOutText(sample(name));
      const [sheet] = sheets as [CircuitSheet];
      for (const found of [symbolOverlaps, textOverlaps, textsOnWires, wiresThroughSymbols, looseEnds]) expect(found(sheet)).toEqual([]);
      expect(outside(sheet, area)).toEqual([]);
      expect(crossings(sheet).length).toBeLessThanOrEqual(most.crossings);
      expect(bends(sheet)).toBeLessThanOrEqual(most.bends);
    });

    it("comes out the same every time", async () => {
      const [one, two] = await Promise.all([layOutText(sample(name)), layOutText(sample(name))]);
      expect(JSON.stringify(one.sheets)).toBe(JSON.stringify(two.sheets));
    });
  });
}

/** After ISO 1219-2, from memory: energy flows upward, actuators stand along the top in working order. */
describe("arrangement", () => {
  it("puts cylinders level along the top, valves level below them and the supply lowest", async () => {
    const { sheets } = await layOutText(sample("tray-stamper"));
    const [sheet] = sheets as [CircuitSheet];
    const at = (part: string) => symbol(sheet, part).at;
    expect(at("CLAMP").y).toBe(at("STAMP").y);
    expect(at("V1").y).toBe(at("V2").y);
    expect(at("CLAMP").x).toBeLessThan(at("STAMP").x);
    expect(at("CLAMP").y).toBeLessThan(symbolBox(symbol(sheet, "FC1")).y);
    expect(symbolBox(symbol(sheet, "FC1")).y).toBeLessThan(at("V2").y);
    expect(at("V1").y).toBeLessThan(at("FRL1").y);
    expect(at("AIR1").x).toBeLessThan(at("FRL1").x);
  });

  it("leads a working line straight up from the valve to the cap", async () => {
    const { sheets } = await layOutText(sample("tray-stamper"));
    const [sheet] = sheets as [CircuitSheet];
    expect(port(sheet, "V1", "4").x).toBe(port(sheet, "CLAMP", "cap").x);
    expect(port(sheet, "FC1", "out").x).toBe(port(sheet, "V2", "4").x);
  });

  it("stands a silencer at its port", async () => {
    const { circuit, sheets } = await layOutText(sample("tray-stamper"));
    const [sheet] = sheets as [CircuitSheet];
    for (const silencer of circuit.components.filter(({ kind }) => kind === "silencer")) {
      const mate = circuit.nodes
        .find(({ ports }) => ports.some(({ component }) => component === silencer.id))
        ?.ports.find(({ component }) => component !== silencer.id);
      expect(port(sheet, silencer.id, "in")).toEqual(port(sheet, mate?.component ?? "", mate?.port ?? ""));
    }
  });

  it("draws the shared pressure line as one straight header, twice as wide", async () => {
    const { sheets } = await layOutText(sample("billet-shear"));
    const [sheet] = sheets as [CircuitSheet];
    const wide = sheet.wires.filter(({ width }) => width === 0.5);
    for (const node of new Set(wide.map((wire) => wire.node))) {
      const levels = new Set(wide.filter((wire) => wire.node === node).flatMap(({ points }) => points.map(({ y }) => y)));
      expect(levels.size).toBe(1);
    }
    expect(new Set(wide.map(({ node }) => node)).size).toBe(2);
  });

  it("keeps everything on the 2 mm grid", async () => {
    const { sheets } = await layOutText(sample("billet-shear"));
    const [sheet] = sheets as [CircuitSheet];
    const [first] = sheet.wires[0]?.points ?? [];
    if (!first) throw new Error("No line is drawn.");
    const off = (value: number) => Math.abs(value / 2 - Math.round(value / 2)) > 1e-3;
    const points = [...sheet.wires.flatMap((wire) => wire.points), ...sheet.symbols.flatMap((one) => portsOf(one).map(({ at }) => at))];
    expect(points.filter(({ x, y }) => off(x - first.x) || off(y - first.y))).toEqual([]);
  });
});

describe("tanks", () => {
  const two = `fluid "Two pumps" hydraulic {
    tank T1 "Reservoir" 160 l
    pump P1 displacement 10 cm3/rev
    pump P2 displacement 4 cm3/rev
    check-valve K1
    check-valve K2
    gauge G1
    relief-valve R1 100 bar
    filter F1 "Return" 10 um
    line T1 -- P1 -- K1 -- @P
    line T1 -- P2 -- K2 -- @P
    line @P -- G1
    line P1.P -- R1 -- T1
    cylinder A double-acting bore 50 mm rod 28 mm stroke 200 mm
    cylinder B single-acting load-return bore 50 mm stroke 100 mm
    valve V1 4/3 centre float left solenoid SA right solenoid SB springs
    valve V2 3/2 normally open left solenoid SC right spring
    valve V3 2/2 normally closed left push-button right spring
    line @P -- V1.P, V2.P
    line V1.T, V2.T -- F1 -- T1
    line V1.A -- A.cap
    line V1.B -- A.rod
    line V2.A -- B.cap
    line B.cap -- V3.P
    line V3.A -- T1
  }`;

  it("stand straight below each pump, the pumps level", async () => {
    const { circuit, sheets } = await layOutText(two);
    const [sheet] = sheets as [CircuitSheet];
    const tanks = sheet.symbols.filter(({ part }) => part === "T1").flatMap(portsOf);
    for (const pump of ["P1", "P2"]) {
      const suction = port(sheet, pump, "S");
      expect(tanks.filter(({ at }) => Math.abs(at.x - suction.x) < 0.01 && at.y > suction.y)).toHaveLength(1);
    }
    expect(symbol(sheet, "P1").at.y).toBe(symbol(sheet, "P2").at.y);
    expect(netsOfSheets(sheets)).toEqual(netsOfMachine(circuit));
    for (const found of [symbolOverlaps, textOverlaps, textsOnWires, wiresThroughSymbols, looseEnds]) expect(found(sheet)).toEqual([]);
  });

  it("carry their designation wherever they are drawn, their data once", async () => {
    const { circuit, sheets } = await layOutText(two);
    const [sheet] = sheets as [CircuitSheet];
    const drawn = sheet.symbols.filter(({ part }) => part === "T1").length;
    // Two pumps, the relief valve, the return filter and the lowering valve.
    expect(drawn).toBe(5);
    expect(sheet.texts.filter(({ text }) => text === "T1")).toHaveLength(drawn);
    expect(sheet.texts.filter(({ text }) => text === "Reservoir")).toHaveLength(1);
    const nodes = new Set(circuit.nodes.map(({ id }) => id));
    expect(sheet.wires.filter(({ node }) => !nodes.has(node))).toEqual([]);
  });

  it("stand below a valve that lets a cylinder's line off", async () => {
    const { sheets } = await layOutText(two);
    const [sheet] = sheets as [CircuitSheet];
    const [inlet, outlet] = [port(sheet, "V3", "P"), port(sheet, "V3", "A")];
    expect(inlet.y).toBeLessThan(outlet.y);
    const tank = sheet.symbols
      .filter(({ part }) => part === "T1")
      .flatMap(portsOf)
      .find(({ at }) => at.x === outlet.x && at.y >= outlet.y);
    expect(tank).toBeDefined();
  });
});

describe("texts", () => {
  it("names each solenoid and refers to its ladder line", async () => {
    const { sheets, places } = await layOutText(sample("tray-stamper"));
    const [sheet] = sheets as [CircuitSheet];
    expect(textsOf(sheet, "V1/left")).toEqual(["SOL1", { to: "ladder-line", device: "SOL1", room: expect.any(Number) }]);
    expect(places.get("V1/left")).toMatchObject({ sheet: 1 });
  });

  it("marks a switch at its place along the rod's way, true to scale", async () => {
    const { sheets, places } = await layOutText(sample("tray-stamper"));
    const [sheet] = sheets as [CircuitSheet];
    const way = sheet.strokes.filter(({ role, part }) => role === "stroke-line" && part === "STAMP")[0]?.path.map(({ x }) => x) ?? [];
    const window =
      sheet.strokes
        .filter(({ role, part }) => role === "cam" && part === "STAMP/LS4")
        .find(({ path }) => path[0]?.y === path[1]?.y)
        ?.path.map(({ x }) => x) ?? [];
    const [from, to] = way as [number, number];
    // LS4 is operated from 118 mm to 125 mm of a stroke of 125 mm.
    expect(window[0]).toBeCloseTo(from + ((to - from) * 118) / 125, 3);
    expect(window[1]).toBeCloseTo(to, 3);
    expect(places.get("STAMP/LS4")).toMatchObject({ sheet: 1 });
  });

  it("says once for all valves without a normal position that they are drawn as they stand at the start", async () => {
    const axes = (count: number) => {
      const one = (i: number) => `cylinder C${i} double-acting bore 40 mm rod 22 mm stroke 100 mm
        valve V${i} 4/2 left solenoid SA${i} right solenoid SB${i} detent
        line V${i}.A -- C${i}.cap
        line V${i}.B -- C${i}.rod`;
      return `fluid "Resting" hydraulic {\n${Array.from({ length: count }, (_, i) => one(i + 1)).join("\n")}\n}`;
    };
    const notes = async (count: number) => (await layOutText(axes(count))).sheets[0]?.notes;
    expect(await notes(1)).toEqual(["V1 has no normal position; it is drawn as it stands at the start of the cycle."]);
    expect(await notes(3)).toEqual(["V1, V2 and V3 have no normal position; they are drawn as they stand at the start of the cycle."]);
  });

  it("keeps a row for each ladder line of a switch over its mark, three at the most", async () => {
    const contacts = (count: number) => Array.from({ length: count }, (_, i) => `rung: LS1 -> CR${i}`).join("\n");
    const rows = async (count: number) => {
      const { sheets } = await layOutText(`supply C 24 V DC { rails P M }
        limit-switch LS1 on C1 at extended
        ${Array.from({ length: count }, (_, i) => `relay CR${i}`).join("\n")}
        fluid "One" pneumatic { cylinder C1 double-acting bore 40 mm rod 16 mm stroke 100 mm }
        ladder "Control" supply C {\n${contacts(count)}\n}`);
      const [sheet] = sheets as [CircuitSheet];
      for (const found of [textOverlaps, textsOnWires]) expect(found(sheet, 0.5)).toEqual([]);
      return textsOf(sheet, "C1/LS1").flatMap((text) => (typeof text === "string" ? [] : [text.rows ?? 1]));
    };
    expect([await rows(1), await rows(2), await rows(3), await rows(5)]).toEqual([[1], [2], [3], [3]]);
  });

  it("names each shared line at one of its ends, by its letter where the author gave no name", async () => {
    const axis = (i: number) => `cylinder C${i} double-acting bore 40 mm rod 22 mm stroke 100 mm
      valve V${i} 4/2 left solenoid SA${i} right spring
      line @pressure -- V${i}.P
      line V${i}.A -- C${i}.cap
      line V${i}.B -- C${i}.rod`;
    const { sheets } = await layOutText(`fluid "Two" hydraulic {
      tank T1
      pump P1
      filter F1
      line T1 -- P1 -- @pressure
      ${axis(1)}
      ${axis(2)}
      line V1.T, V2.T -- F1 -- tank
    }`);
    const [sheet] = sheets as [CircuitSheet];
    const names = sheet.texts.filter(({ part, role }) => part === undefined && role === "designation");
    expect(names.map(({ text }) => text)).toEqual(["pressure", "T"]);
    expect(tooClose(sheet, { lines: 0.8, others: 0.5 })).toEqual([]);
    // Beside the end of its own header.
    for (const [index, node] of [...new Set(sheet.wires.filter(({ width }) => width === 0.5).map((wire) => wire.node))].entries()) {
      const ends = sheet.wires.filter((wire) => wire.node === node && wire.width === 0.5).flatMap(({ points }) => points);
      const name = names[index]?.at ?? { x: 0, y: 0 };
      expect(Math.min(...ends.map(({ x, y }) => Math.hypot(x - name.x, y - name.y)))).toBeLessThan(4.5);
    }
  });
});

/** Cylinders with flow controls on both lines, all alike. */
function stations(count: number, paper: string): string {
  const one = (i: number) => `cylinder C${i} "Station ${i}" double-acting bore 32 mm rod 12 mm stroke 50 mm
    valve V${i} 5/2 left solenoid S${i} right spring
    one-way-flow-control FA${i} free-to C${i}
    one-way-flow-control FB${i} free-to C${i}
    line @P -- V${i}.1
    line V${i}.4 -- FA${i} -- C${i}.cap
    line V${i}.2 -- FB${i} -- C${i}.rod
    exhaust V${i}.3, V${i}.5 -- silencer`;
  const all = Array.from({ length: count }, (_, i) => one(i + 1)).join("\n");
  return `drawing "Line" { paper ${paper} }\nfluid "Line" pneumatic {\nair-supply AIR 6 bar\nline AIR -- @P\n${all}\n}`;
}

describe("sharing out groups", () => {
  const counts = async (text: string) =>
    (await layOutText(text)).sheets.map((sheet) => sheet.symbols.filter(({ part }) => /^C\d+$/.test(part)).length);

  it("closes up before it breaks", async () => {
    // Six stations of about 56 mm each, with 2 mm between them, in 376 mm.
    expect(await counts(stations(6, "A3"))).toEqual([6]);
  });

  it("gives each sheet about as many groups as the others", async () => {
    expect(await counts(stations(8, "A3"))).toEqual([4, 4]);
    expect(await counts(stations(7, "A3"))).toEqual([4, 3]);
    expect(await counts(stations(8, "A4"))).toEqual([2, 2, 2, 2]);
  });

  it("keeps texts of neighbouring groups 2 mm apart", async () => {
    const { sheets } = await layOutText(stations(6, "A3"));
    const [sheet] = sheets as [CircuitSheet];
    expect(textOverlaps({ ...sheet, symbols: [] }, 1.99).filter((found) => /F[AB]\d/.test(found))).toEqual([]);
  });
});

describe("paper that is too small", () => {
  const parallel = (count: number) => {
    const one = (i: number) => `cylinder C${i} double-acting bore 50 mm rod 28 mm stroke 200 mm
      line @a -- C${i}.cap
      line @b -- C${i}.rod`;
    return `fluid "Press" hydraulic {
      valve V1 4/3 centre closed left solenoid SA right solenoid SB springs
      line V1.A -- @a
      line V1.B -- @b
      ${Array.from({ length: count }, (_, i) => one(i + 1)).join("\n")}
    }`;
  };

  it("is told, with the place of the circuit and what to do", async () => {
    const { sheets, diagnostics } = await layOutText(`drawing "Press" { paper A4 }\n${parallel(6)}`);
    expect(sheets).toEqual([]);
    expect(diagnostics).toEqual([
      {
        code: "sheet-too-small",
        severity: "error",
        message: expect.stringMatching(
          /^What belongs to C1 does not fit on a sheet: it takes \d+ × \d+ mm, and there is room for 166 × \d+ mm\.$/,
        ),
        at: expect.objectContaining({ line: 2 }),
        hint: "Use a larger paper.",
      },
    ]);
  });

  it("is not told where it is enough", async () => {
    const { sheets, diagnostics, area } = await layOutText(`drawing "Press" { paper A3 }\n${parallel(6)}`);
    expect(diagnostics).toEqual([]);
    expect(sheets.flatMap((sheet) => outside(sheet, area))).toEqual([]);
  });

  it("has the power unit beside the valves where it is not high enough for both", async () => {
    const { circuit, sheets, area } = await layOutText(`drawing "Low" { paper ANSI-A }
      fluid "Low" hydraulic {
        tank T1
        pump P1
        check-valve K1
        relief-valve R1 100 bar
        filter F1
        gauge G1
        shut-off-valve S1
        line T1 -- F1 -- P1 -- K1 -- @P
        line @P -- S1 -- G1
        line P1.P -- R1 -- tank
        cylinder C1 "Lift" double-acting bore 50 mm rod 28 mm stroke 200 mm
        valve V1 4/2 left solenoid SA right spring
        throttle TH1
        line @P -- V1.P
        line V1.A -- TH1 -- C1.cap
        line V1.B -- C1.rod
        line V1.T -- tank
      }`);
    expect(sheets).toHaveLength(1);
    const [sheet] = sheets as [CircuitSheet];
    expect(outside(sheet, area)).toEqual([]);
    expect(symbol(sheet, "R1").at.x).toBeLessThan(symbolBox(symbol(sheet, "V1")).x);
    for (const found of [symbolOverlaps, textOverlaps, textsOnWires, wiresThroughSymbols, looseEnds]) expect(found(sheet)).toEqual([]);
    expect(netsOfSheets(sheets)).toEqual(netsOfMachine(circuit));
  });
});

describe("more than one sheet takes", () => {
  const axes = Array.from(
    { length: 12 },
    (_, i) => `
    cylinder C${i} "Axis ${i}" double-acting bore 40 mm rod 16 mm stroke 100 mm
    valve V${i} "Axis ${i}" 5/2 left solenoid SOL${i} right spring
    line @P -- V${i}.1
    line V${i}.4 -- C${i}.cap
    line V${i}.2 -- C${i}.rod
    exhaust V${i}.3, V${i}.5`,
  );
  const text = `fluid "Many" pneumatic {\n air-supply AIR1 6 bar\n line AIR1 -- @P\n ${axes.join("\n")}\n}`;

  it("goes on to further sheets between actuators, with a named reference at both ends", async () => {
    const { circuit, sheets, area } = await layOutText(text);
    expect(sheets.length).toBeGreaterThan(1);
    expect(netsOfSheets(sheets)).toEqual(netsOfMachine(circuit));
    for (const [index, sheet] of sheets.entries()) {
      expect(sheet.number).toBe(index + 1);
      expect(outside(sheet, area)).toEqual([]);
      const references = sheet.texts.flatMap(({ text: one }) => (typeof one !== "string" && one.to === "point" ? [one.point] : []));
      expect(references).toEqual(index === 0 || index === sheets.length - 1 ? ["P"] : ["P", "P"]);
    }
    const order = sheets.flatMap((sheet) => sheet.symbols.filter(({ part }) => /^C\d+$/.test(part)).map(({ part }) => part));
    expect(order).toEqual(Array.from({ length: 12 }, (_, i) => `C${i}`));
  });
});

describe("unusual circuits", () => {
  const cases: Record<string, string> = {
    "a lone gauge": "gauge PG1",
    "a valve with nothing": "valve V1 4/2 left solenoid SA right spring\nplug V1.A, V1.B",
    "two valves in series": `cylinder C1 double-acting bore 40 mm rod 22 mm stroke 100 mm
      valve V1 4/2 left solenoid SA right spring
      valve V2 4/3 centre closed left solenoid SC right solenoid SD springs
      line V1.A -- V2.P
      line V1.B -- V2.T
      line V2.A -- C1.cap
      line V2.B -- C1.rod`,
    "a cylinder fed by two valves": `cylinder C1 double-acting bore 40 mm rod 22 mm stroke 100 mm
      valve V1 4/2 left solenoid SA right spring
      valve V2 4/2 left solenoid SC right spring
      line V1.A -- C1.cap
      line V2.A -- C1.cap
      line V1.B -- C1.rod
      line V2.B -- C1.rod`,
    "crossed working lines": `cylinder C1 double-acting bore 40 mm rod 22 mm stroke 100 mm
      valve V1 4/2 left solenoid SA right spring
      line V1.A -- C1.rod
      line V1.B -- C1.cap`,
    "lock valves piloted from each other's line": `cylinder C1 double-acting bore 40 mm rod 22 mm stroke 100 mm
      valve V1 4/3 centre float left solenoid SA right solenoid SB springs
      pilot-operated-check-valve PC1
      pilot-operated-check-valve PC2
      line V1.A -- @a -- PC1 -- C1.cap
      line V1.B -- @b -- PC2 -- C1.rod
      pilot @a -- PC2.X
      pilot @b -- PC1.X`,
    "two pumps on one line": `tank TK1
      pump P1
      pump P2
      check-valve CV1
      check-valve CV2
      gauge PG1
      line TK1 -- P1 -- CV1 -- @P
      line TK1 -- P2 -- CV2 -- @P
      line @P -- PG1`,
    "a filter with a check valve across it": `tank TK1
      pump P1
      filter F1
      check-valve CV1
      cylinder C1 double-acting bore 40 mm rod 22 mm stroke 100 mm
      valve V1 4/2 left solenoid SA right spring
      line TK1 -- P1 -- @Q -- F1 -- @P -- V1.P
      line @Q -- CV1 -- @P
      line V1.A -- C1.cap
      line V1.B -- C1.rod
      line V1.T -- tank`,
  };
  for (const [name, body] of Object.entries(cases)) {
    it(`draws ${name}`, async () => {
      const { circuit, sheets } = await layOutText(`fluid "Unusual" hydraulic {\n${body}\n}`);
      expect(sheets).toHaveLength(1);
      const [sheet] = sheets as [CircuitSheet];
      for (const found of [symbolOverlaps, textOverlaps, textsOnWires, wiresThroughSymbols, looseEnds]) expect(found(sheet)).toEqual([]);
      expect(netsOfSheets(sheets)).toEqual(netsOfMachine(circuit));
    });
  }
});

it("hangs open exhausts and silencers at the ports of pilot valves too", async () => {
  const { circuit, sheets } = await layOutText(`fluid "Air" pneumatic {
    air-supply S1 6 bar
    cylinder C1 double-acting bore 40 mm rod 16 mm stroke 100 mm
    valve V1 5/2 left pilot right pilot start right
    valve V2 3/2 normally closed left pedal right spring
    valve V3 3/2 normally closed left roller right spring
    line S1 -- @P
    line @P -- V1.1, V2.1, V3.1
    pilot V2.2 -- V1.14
    pilot V3.2 -- V1.12
    line V1.4 -- C1.cap
    line V1.2 -- C1.rod
    exhaust V1.5, V1.3 -- silencer
    exhaust V2.3, V3.3
  }`);
  const [sheet] = sheets as [CircuitSheet];
  const sinks = circuit.components.filter(({ kind }) => kind === "silencer" || kind === "exhaust");
  expect(sinks).toHaveLength(4);
  for (const { id, ports } of sinks) {
    const [joint] = circuit.nodes.find(({ id: node }) => node === ports[0]?.node)?.ports.filter(({ component }) => component !== id) ?? [];
    const top = port(sheet, id, "in");
    const lead = port(sheet, joint?.component ?? "", joint?.port ?? "");
    expect(top.x).toBeCloseTo(lead.x);
    expect(top.y - lead.y).toBeGreaterThanOrEqual(0);
    expect(top.y - lead.y).toBeLessThanOrEqual(4);
  }
});
