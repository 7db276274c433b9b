import { describe, expect, test } from "vitest";
import type { StartState } from "../../src/behaviour/start-state.js";
import { strokeOf } from "../../src/machine/cylinder.js";
import { deviceRoles, fluidMedia } from "../../src/machine/kinds.js";
import type { ContactUse, Device, DeviceKind, FluidComponent, FluidKind, LoadUse } from "../../src/machine/model.js";
import { portsOf } from "../../src/machine/ports.js";
import { symbolForComponent, symbolForDevice } from "../../src/symbols/choose.js";
import { openSymbols } from "../../src/symbols/library.js";
import type { Symbol } from "../../src/symbols/symbol.js";
import { assets } from "../support/assets.js";
import { distanceToSegment, flatten, pieces } from "./geometry.js";

const library = openSymbols(assets);
const at = { file: "test", line: 1, column: 1, endLine: 1, endColumn: 1, from: 0, to: 0 } as Device["at"];
const start = (held: string[] = []): StartState => ({
  cylinders: new Map(),
  held: new Set(held),
  valveBoxes: new Map(),
  restingByStart: new Set(),
});
const device = (kind: DeviceKind, more: Partial<Device> = {}): Device => ({
  name: "X1",
  kind,
  at,
  values: [],
  contacts: [],
  loads: [],
  throughs: [],
  ...more,
});
const contact = (form: "NO" | "NC", more: Partial<ContactUse> = {}): ContactUse => ({
  kind: "contact",
  id: "X1:1",
  device: "X1",
  form,
  timed: false,
  terminals: { value: ["", ""], by: "none" },
  from: 0,
  to: 1,
  rung: "r",
  at,
  ...more,
});
const load: LoadUse = {
  kind: "load",
  id: "X1:A1",
  device: "X1",
  terminals: { value: ["", ""], by: "none" },
  from: 0,
  to: 1,
  rung: "r",
  at,
};
const conventions = ["north-american", "international"] as const;

describe.each(conventions)("%s", (convention) => {
  test.each(Object.keys(deviceRoles) as DeviceKind[])("%s has a symbol for all it can be in a rung", (kind) => {
    const uses = [
      ...(deviceRoles[kind].contacts ? [contact("NO"), contact("NC"), contact("NO", { timed: true })] : []),
      ...(deviceRoles[kind].load ? [load] : []),
    ];
    for (const held of [[], ["X1"]]) {
      for (const use of uses) {
        const symbol = symbolForDevice(use, device(kind), start(held), convention, library);
        expect(symbol.ports.map(({ name }) => name)).toEqual(["in", "out"]);
      }
    }
    if (uses.length === 0) expect(symbolForDevice(load, device(kind), start(), convention, library).ports.length).toBeGreaterThan(0);
  });
});

/** Whether current passes: the blade or bar reaches from one terminal of the symbol to the other. */
function bridges(symbol: Symbol): boolean {
  const lines = pieces(symbol.shapes);
  const reaches = (x: number) => (line: { x: number; y: number }[]) =>
    // The terminals are rings of 1 mm at 5 mm from the middle; a wire on the line itself does not count.
    line.some((p, i) => i > 0 && line.length < 20 && Math.abs(distanceToSegment({ x, y: 0 }, line[i - 1] as typeof p, p) - 1) < 0.1);
  return lines.some((line) => {
    const xs = line.map((p) => p.x);
    return (
      Math.min(...xs) < -3 && Math.max(...xs) > 3 && Math.max(...xs) < 9 && Math.min(...xs) > -9 && reaches(5)(line) && line.length < 4
    );
  });
}

describe("north-american switches show whether they pass at the start", () => {
  const drawn = (kind: DeviceKind, form: "NO" | "NC", held: boolean, more: Partial<Device> = {}, use: Partial<ContactUse> = {}) =>
    symbolForDevice(contact(form, use), device(kind, more), start(held ? ["X1"] : []), "north-american", library);

  test.each(["limit-switch", "proximity-switch"] as const)("%s in its four states", (kind) => {
    const states = [drawn(kind, "NO", false), drawn(kind, "NC", false), drawn(kind, "NO", true), drawn(kind, "NC", true)];
    expect(states.map(bridges)).toEqual([false, true, true, false]);
    expect(states.map(({ title }) => title.replace(/^[^,]+, /, ""))).toEqual([
      "normally open",
      "normally closed",
      "normally open, held closed",
      "normally closed, held open",
    ]);
  });

  test("the arm of a limit switch stands as the trade has it", () => {
    // NFPA 79 practice from memory: all push up; below and apart is open, resting on top is closed, held closed touches from
    // below, held open stands clear above.
    const armEnd = (symbol: Symbol) => {
      const arm = pieces(symbol.shapes).find(([first, last]) => first?.x === -4 && (last?.x ?? 0) > 4);
      return Math.sign(-(arm?.[1]?.y as number));
    };
    const states = [
      drawn("limit-switch", "NO", false),
      drawn("limit-switch", "NC", false),
      drawn("limit-switch", "NO", true),
      drawn("limit-switch", "NC", true),
    ];
    expect(states.map(armEnd)).toEqual([-1, 1, -1, 1]);
  });

  test("buttons, pressure switches and timed contacts by their form", () => {
    for (const kind of ["push-button", "emergency-stop", "pressure-switch"] as const)
      expect([drawn(kind, "NO", false), drawn(kind, "NC", false)].map(bridges), kind).toEqual([false, true]);
    for (const mode of ["on-delay", "off-delay"] as const) {
      const timer: Partial<Device> = { delay: { mode, time: { value: 1, unit: "s", text: "1 s" } as never } };
      expect(
        [drawn("timer", "NO", false, timer, { timed: true }), drawn("timer", "NC", false, timer, { timed: true })].map(bridges),
      ).toEqual([false, true]);
    }
  });

  test("a timed contact's arrow points up for an on delay and down for an off delay", () => {
    // IEEE 315 practice from memory: the arrow points the way the delayed arm moves.
    const tipY = (form: "NO" | "NC", mode: "on-delay" | "off-delay") => {
      const symbol = drawn("timer", form, false, { delay: { mode, time: {} as never } }, { timed: true });
      const arrow = pieces(symbol.shapes).find((line) => line.length === 3 && line[0]?.x === 0 && line[2]?.x === 2.5) as { y: number }[];
      return Math.sign((arrow[1] as { y: number }).y - (arrow[0] as { y: number }).y);
    };
    expect([tipY("NO", "on-delay"), tipY("NC", "on-delay")]).toEqual([-1, -1]);
    expect([tipY("NO", "off-delay"), tipY("NC", "off-delay")]).toEqual([1, 1]);
  });

  test("a selector's contact by the position drawn, with its target letters", () => {
    const positions = ["hand", "off", "auto"];
    const selector = (form: "NO" | "NC", at: string, position: string, of = positions) =>
      drawn("selector-switch", form, false, { selector: { positions: of, start: at } }, { position });
    const letters = (symbol: Symbol) => symbol.shapes.flatMap((shape) => (shape.kind === "text" ? [shape.text] : []));
    for (const at of positions) {
      for (const position of positions) {
        const [no, nc] = [selector("NO", at, position), selector("NC", at, position)];
        expect([bridges(no), bridges(nc)]).toEqual([at === position, at !== position]);
        expect(letters(no)).toEqual(positions.map((p) => (p === position ? "X" : "O")));
        expect(letters(nc)).toEqual(positions.map((p) => (p === position ? "O" : "X")));
      }
    }
    const many = selector("NO", "1", "3", ["0", "1", "2", "3"]);
    expect([many.name, letters(many)]).toEqual(["north-american/selector-many-open", ["3"]]);
    expect(selector("NO", "auto", "auto", ["hand", "auto"]).name).toBe("north-american/selector-2-at-2-closed");
  });

  test("a pilot light carries its colour's letter", () => {
    const letter = (colour: string) =>
      symbolForDevice(load, device("pilot-light", { colour }), start(), "north-american", library).shapes.flatMap((shape) =>
        shape.kind === "text" ? [shape.text] : [],
      );
    expect([letter("green"), letter("clear")]).toEqual([["G"], ["C"]]);
  });
});

describe("fluid components", () => {
  const component = (kind: FluidKind, medium: FluidComponent["medium"], more: Partial<FluidComponent> = {}): FluidComponent => ({
    id: "C1",
    name: "C1",
    kind,
    medium,
    values: [],
    ports: [],
    at,
    ...more,
  });

  test.each((Object.keys(fluidMedia) as FluidKind[]).filter((kind) => kind !== "valve" && kind !== "cylinder"))(
    "%s has the machine's ports in each medium",
    (kind) => {
      for (const medium of fluidMedia[kind]) {
        const names = symbolForComponent(component(kind, medium), start(), library).ports.map(({ name }) => name);
        expect([...names].sort()).toEqual([...portsOf(kind as "tank")].sort());
      }
    },
  );

  test("the triangle of a pressure switch and a source is filled for a liquid, open for a gas", () => {
    for (const name of ["pressure-switch", "pressure-source", "motor-fixed", "rotary-actuator"]) {
      const fills = (medium: string) => library.get(`fluid/${name}-${medium}`).shapes.filter(({ kind }) => kind === "fill").length;
      expect(fills("hydraulic"), name).toBeGreaterThan(fills("pneumatic"));
    }
  });

  test("a cylinder is drawn where it starts", () => {
    const spec = { action: "double-acting", cushion: "none", stroke: { value: 200 } as never, start: 0, switches: [] } as const;
    const cylinder = (mm: number) =>
      symbolForComponent(
        component("cylinder", "hydraulic", { cylinder: { ...spec, switches: [] } }),
        { ...start(), cylinders: new Map([["C1", mm]]) },
        library,
      );
    expect(cylinder(100).spots["rod-end"]?.x).toBeCloseTo(31);
    expect(cylinder(200).box.width).toBe(36);
    const unstated = { ...spec, stroke: undefined, switches: [] };
    const half = { ...start(), cylinders: new Map([["C1", strokeOf(unstated) / 2]]) };
    expect(symbolForComponent(component("cylinder", "hydraulic", { cylinder: unstated }), half, library).spots["rod-end"]?.x).toBeCloseTo(
      31,
    );
  });

  test("a valve's lines stand on the box of the start", () => {
    const valve = {
      ports: 4,
      positions: 2,
      boxes: ["P>A·B>T", "P>B·A>T"],
      left: [{ kind: "solenoid", override: false }],
      right: [{ kind: "solenoid", override: false }],
    } as const;
    const shown = (box?: number) =>
      symbolForComponent(
        component("valve", "hydraulic", { valve: structuredClone(valve) as never }),
        { ...start(), valveBoxes: new Map(box === undefined ? [] : [["C1", box]]) },
        library,
      );
    // The box left of the lines is the left one when the right is shown.
    expect(shown(1).box.x).toBe(-(4 + 2 + 3) * 2);
    expect(shown(0).box.x).toBe(-(2 + 3) * 2);
    expect(shown().box.x).toBe(shown(1).box.x);
  });
});

test("a drawn line is straight where it is given so", () => {
  expect(
    flatten([
      { op: "M", x: 0, y: 0 },
      { op: "L", x: 1, y: 0 },
    ]),
  ).toEqual([
    [
      { x: 0, y: 0 },
      { x: 1, y: 0 },
    ],
  ]);
});
