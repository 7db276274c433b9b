import { describe, expect, test } from "vitest";
import type { Layout, Place } from "../../src/layout/placement.js";
import type { Machine } from "../../src/machine/model.js";
import { elementsOf, fluidsOf, laddersOf } from "../../src/machine/walk.js";
import { crossReference, switchReference } from "../../src/schedules/cross-reference.js";
import { numberWires } from "../../src/schedules/wire-numbers.js";
import { ladder, soundMachine } from "../machine/machine-of.js";
import { readText } from "../support/sources.js";

/** One rung a line, from the given line on; fluid components on the sheet before. */
function placed(machine: Machine, first = 201): Layout {
  const places = new Map<string, Place>();
  const box = { x: 0, y: 0, width: 1, height: 1 };
  let line = first;
  for (const { rungs } of laddersOf(machine)) {
    for (const { path } of rungs) {
      for (const { id } of elementsOf(path)) places.set(id, { sheet: 2, line, zone: "A1", box });
      line++;
    }
  }
  for (const { components } of fluidsOf(machine)) for (const { id } of components) places.set(id, { sheet: 1, zone: "C3", box });
  return { sheets: [], places };
}

describe("the cross-reference", () => {
  // RSES, Electricity for HVACR Technicians, "Ladder Diagram Locators": a coil on line 52 with one normally open contact on line
  // 33 shows 33; a coil on line 57 with contacts on 7 and 11 (open) and 39 (closed) shows 7, 11 and 39, the last one underlined.
  test("lists a coil's contacts by line, open and closed", () => {
    const lamps = (from: number, to: number) => Array.from({ length: to - from + 1 }, (_, index) => from + index);
    const use = new Map([
      [33, "CR1"],
      [7, "CR2"],
      [11, "CR2"],
      [39, "/CR2"],
    ]);
    const drives = new Map([
      [52, "CR1"],
      [57, "CR2"],
    ]);
    const rungs = lamps(1, 57).map((line) => `rung: ${use.get(line) ?? "PB1"} -> ${drives.get(line) ?? `LT${line}`}`);
    const declarations = ["push-button PB1", "relay CR1", "relay CR2", ...lamps(1, 57).map((line) => `pilot-light LT${line}`)].join("\n");
    const machine = soundMachine(ladder(rungs.join("\n"), declarations));
    const rows = new Map(crossReference(machine, placed(machine, 1)).map((row) => [row.coil, row]));
    expect(rows.get("CR1")).toMatchObject({ line: 52, contacts: [{ type: "NO", line: 33 }] });
    expect(rows.get("CR2")).toMatchObject({
      line: 57,
      contacts: [
        { type: "NO", line: 7, terminals: "13-14" },
        { type: "NO", line: 11, terminals: "23-24" },
        { type: "NC", line: 39, terminals: "31-32" },
      ],
    });
  });

  test("has every load of the tray stamper in drawing order, solenoids with their valve", () => {
    const machine = soundMachine(readText("samples/tray-stamper.sprung"));
    const rows = crossReference(machine, placed(machine));
    expect(rows.map(({ coil }) => coil)).toEqual(["CR1", "LT1", "CR2", "SOL1", "SOL2", "TR1"]);
    expect(rows[0]).toEqual({
      coil: "CR1",
      kind: "relay",
      text: "Cycle running",
      sheet: 2,
      line: 201,
      contacts: [{ type: "NO", terminals: "13-14", sheet: 2, line: 201 }],
    });
    expect(rows[3]).toEqual({
      coil: "SOL1",
      kind: "solenoid",
      text: "Clamp",
      sheet: 2,
      line: 203,
      contacts: [],
      valve: { name: "V1", sheet: 1, zone: "C3" },
    });
    expect(rows[5]?.contacts).toEqual([{ type: "NO", timed: true, terminals: "17-18", sheet: 2, line: 202 }]);
  });

  test("has what has contacts and no coil apart", () => {
    const machine = soundMachine(readText("samples/tray-stamper.sprung"));
    const rows = switchReference(machine, placed(machine));
    expect(rows.map(({ coil }) => coil)).toEqual(["PB2", "PB1", "LS1", "LS3", "LS2", "LS4"]);
    expect(rows[0]).toMatchObject({ kind: "push-button", text: "Stop", contacts: [{ type: "NC", terminals: "11-12", line: 201 }] });
  });

  test("names each coil of a device that has several, each with all contacts, and each point of a controller's card", () => {
    const machine = soundMachine(
      ladder(
        "rung: PB1 -> KL1.set\nrung: PB1 -> KL1.reset\nrung: KL1 -> I0.5\nrung: Q0.1 -> I0.6\nrung: Q0.2 -> LT1",
        "push-button PB1\nlatching-relay KL1 poles 1 no 1 nc\ninput-card I0 8 points\noutput-card Q0 8 points\npilot-light LT1",
      ),
    );
    const contacts = [{ type: "NO", terminals: "13-14", sheet: 2, line: 203 }];
    const spare = [{ type: "NC", terminals: "21-22" }];
    expect(crossReference(machine, placed(machine))).toMatchObject([
      { coil: "KL1.set", device: "KL1", line: 201, contacts, spare },
      { coil: "KL1.reset", device: "KL1", line: 202, contacts, spare },
      { coil: "I0.5", line: 203 },
      { coil: "I0.6", line: 204 },
      { coil: "LT1", line: 205 },
    ]);
    const switches = switchReference(machine, placed(machine));
    expect(switches.map(({ coil, contacts: those }) => [coil, those.map(({ line }) => line)])).toEqual([
      ["PB1", [201, 202]],
      ["Q0.1", [204]],
      ["Q0.2", [205]],
    ]);
  });
});

describe("wire numbers by line", () => {
  const drawing = 'drawing "X" { wire-numbers by-line }\n';
  const text =
    drawing +
    ladder(
      "rung: PB1 (PB2 | CR1) -> CR1\nrung: CR1 LS1 PB2 -> LT1",
      "push-button PB1\npush-button PB2\nrelay CR1\nlimit-switch LS1\npilot-light LT1",
    );

  test("are the line where the wire begins and a letter", () => {
    const machine = soundMachine(text);
    const numbers = numberWires(machine, placed(machine));
    expect([...numbers.values()]).toEqual(["L+", "M", "201A", "201B", "202A", "202B", "202C"]);
    expect(machine.potentials[2]?.number).toEqual({ value: "201A", by: "line" });
  });

  test("name sheet and path where these are numbered from 1 on every sheet, and never give a number twice", () => {
    const machine = soundMachine(text);
    machine.drawing.convention = "international";
    const numbers = [...numberWires(machine, placed(machine)).values()];
    expect(numbers).toEqual(["L+", "M", "2.201.1", "2.201.2", "2.202.1", "2.202.2", "2.202.3"]);
    expect(new Set(numbers).size).toBe(numbers.length);
  });

  test("fill the room held for them", () => {
    const machine = soundMachine(text);
    const layout = placed(machine);
    const words = { part: "ladder1/wire3", role: "wire-number", at: { x: 0, y: 0 }, anchor: "middle", height: 2.5, text: "0000W" } as const;
    layout.sheets.push({
      kind: "ladder",
      circuit: "ladder1",
      number: 2,
      title: "",
      symbols: [],
      wires: [],
      dots: [],
      texts: [{ ...words }],
      strokes: [],
    });
    numberWires(machine, layout);
    expect(layout.sheets[0]?.texts[0]?.text).toBe("201B");
  });

  test("leave running numbers alone", () => {
    const machine = soundMachine(text.replace(drawing, ""));
    expect([...numberWires(machine, placed(machine)).values()]).toEqual(["L+", "M", "1", "2", "3", "4", "5"]);
  });
});
