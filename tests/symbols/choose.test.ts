import { describe, expect, test } from "vitest";
import type { StartState } from "../../src/behaviour/start-state.js";
import { strokeOf } from "../../src/machine/cylinder.js";
import { deviceRoles, fluidMedia } from "../../src/machine/kinds.js";
import type { ContactUse, Device, DeviceKind, FluidComponent, FluidKind, LoadUse, ThroughUse } from "../../src/machine/model.js";
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
  mains: [],
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
const through: ThroughUse = {
  kind: "through",
  id: "X1:1",
  device: "X1",
  terminals: { value: ["", ""], by: "none" },
  from: 0,
  to: 1,
  rung: "r",
  at,
};
const conventions = ["north-american", "international"] as const;
const nameOf = ({ name }: Symbol) => name.replace(/^.*\//, "");

describe.each(conventions)("%s", (convention) => {
  test.each(Object.keys(deviceRoles) as DeviceKind[])("%s has a symbol for all it can be in a rung", (kind) => {
    const uses = [
      ...(deviceRoles[kind].contacts || deviceRoles[kind].auxiliary ? [contact("NO"), contact("NC"), contact("NO", { timed: true })] : []),
      ...(deviceRoles[kind].load ? [load] : []),
      ...(deviceRoles[kind].through ? [through] : []),
      ...(deviceRoles[kind].coils ?? []).map((coil): LoadUse => ({ ...load, coil })),
    ];
    for (const held of [[], ["X1"]]) {
      for (const use of uses) {
        const symbol = symbolForDevice(use, device(kind), start(held), convention, library);
        expect(symbol.ports.map(({ name }) => name)).toEqual(["in", "out"]);
        const [first, last] = symbol.ports as [Symbol["ports"][number], Symbol["ports"][number]];
        // The current runs straight through: to the right, or down.
        if (convention === "north-american") expect([first.direction, last.direction, first.y - last.y]).toEqual(["left", "right", 0]);
        else expect([first.direction, last.direction, first.x - last.x, first.x]).toEqual(["up", "down", 0, 0]);
        // Half the way to each side, so that it stands in the middle of its place.
        expect(first.x + last.x + first.y + last.y).toBe(0);
      }
    }
    if (uses.length === 0) expect(symbolForDevice(load, device(kind), start(), convention, library).ports.length).toBeGreaterThan(0);
  });

  const chosen = (use: Parameters<typeof symbolForDevice>[0], kind: DeviceKind, more: Partial<Device> = {}, held: string[] = []) =>
    symbolForDevice(use, device(kind, more), start(held), convention, library);
  const words = (symbol: Symbol) => symbol.shapes.flatMap((shape) => (shape.kind === "text" ? [shape.text] : []));

  test("two coils of one device are told apart by their letters", () => {
    for (const kind of ["latching-relay", "counter"] as const) {
      const [first, reset] = deviceRoles[kind].coils as ["set" | "count", "reset"];
      const letters = [first, reset].map((coil) => words(chosen({ ...load, coil }, kind)));
      expect(letters[0]).not.toEqual(letters[1]);
      expect(letters.map((letter) => letter.length)).toEqual([1, 1]);
    }
    expect(nameOf(chosen(contact("NC"), "latching-relay"))).toBe("contact-nc");
  });

  test("a contactor's main contacts are not drawn as auxiliary ones", () => {
    // EN 50005, from memory: main contacts have one digit, auxiliary ones two.
    const numbered = (first: string, last: string, form: "NO" | "NC" = "NO") =>
      nameOf(chosen(contact(form, { terminals: { value: [first, last], by: "none" } }), "contactor"));
    expect([numbered("1", "2"), numbered("5/L3", "6/T3"), numbered("L1", "T1")]).toEqual(Array(3).fill("contact-power"));
    expect([numbered("13", "14"), numbered("", ""), numbered("21", "22", "NC")]).toEqual(["contact-no", "contact-no", "contact-nc"]);
  });

  test("an auxiliary contact of a breaker is a contact, the breaker itself is not", () => {
    for (const kind of ["circuit-breaker", "disconnect"] as const)
      expect([nameOf(chosen(contact("NC"), kind)), nameOf(chosen(through, kind))]).toEqual(["contact-nc", `${kind}-1p`]);
  });

  test("a diode points the way its terminals say", () => {
    const diode = (...value: [string, string]) => chosen({ ...through, terminals: { value, by: "none" } }, "diode");
    expect([nameOf(diode("A", "K")), nameOf(diode("K", "A")), nameOf(diode("", ""))]).toEqual(["diode", "diode-turned", "diode"]);
    // The bar is at the cathode: at the far end of the symbol, or at the near one.
    const along = convention === "north-american" ? "x" : "y";
    const bar = (symbol: Symbol) =>
      pieces(symbol.shapes).find((line) => line.length === 2 && line[0]?.[along] === line[1]?.[along])?.[0]?.[along] as number;
    expect([Math.sign(bar(diode("A", "K"))), Math.sign(bar(diode("K", "A")))]).toEqual([1, -1]);
  });

  test("what is more than a plain button, lamp or sensor shows it", () => {
    const button = (lamp?: string) =>
      chosen(contact("NO"), "push-button", { button: { action: "momentary", mushroom: false, ...(lamp ? { lamp } : {}) } });
    expect(button("LT1").shapes.length).toBeGreaterThan(button().shapes.length);
    expect(nameOf(chosen(load, "pilot-light", { lamp: { pushToTest: true } }))).toBe("pilot-light-push-to-test");
    expect(chosen(contact("NO"), "proximity-switch", { wires: 3 }).spots["third-rail"]).toBeDefined();
    expect(chosen(contact("NO"), "proximity-switch", { wires: 2 }).spots["third-rail"]).toBeUndefined();
    const guard = chosen(contact("NC"), "door-switch");
    expect([nameOf(guard), nameOf(chosen(contact("NC"), "limit-switch"))]).toEqual(["door-switch-nc", "limit-nc"]);
  });

  test.each(["selector-switch", "key-switch"] as const)("a %s shows its position and where this contact is closed", (kind) => {
    const turned = (form: "NO" | "NC", position: string, positions: string[], at: string) =>
      chosen(contact(form, { position }), kind, { selector: { positions, start: at } });
    for (const positions of [
      ["0", "1"],
      ["hand", "off", "auto"],
    ]) {
      positions.forEach((at, index) => {
        for (const position of positions) {
          const closed = position === at;
          const name = `${kind === "key-switch" ? "key-switch" : "selector"}-${positions.length}-at-${index + 1}`;
          expect(nameOf(turned("NO", position, positions, at))).toBe(`${name}-${closed ? "closed" : "open"}`);
          expect(nameOf(turned("NC", position, positions, at))).toBe(`${name}-${closed ? "open" : "closed"}`);
          expect(words(turned("NO", position, positions, at))).toEqual(positions.map((p) => (p === position ? "X" : "O")));
        }
      });
    }
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
    expect([many.name, letters(many)]).toEqual(["north-american/selector-many-open", []]);
    expect(selector("NO", "auto", "auto", ["hand", "auto"]).name).toBe("north-american/selector-2-at-2-closed");
  });

  test("a pilot light carries its colour's letter", () => {
    const letter = (colour: string) =>
      symbolForDevice(load, device("pilot-light", { colour }), start(), "north-american", library).shapes.flatMap((shape) =>
        shape.kind === "text" ? [shape.text] : [],
      );
    expect([letter("green"), letter("clear"), letter("amber"), letter("grey")]).toEqual([["G"], ["C"], ["A"], ["GY"]]);
    // IEC 60757, from memory; it has no code for clear.
    const code = (colour: string) =>
      symbolForDevice(load, device("pilot-light", { colour }), start(), "international", library).shapes.flatMap((shape) =>
        shape.kind === "text" ? [shape.text] : [],
      );
    expect(["red", "green", "yellow", "blue", "white", "orange", "clear"].map(code)).toEqual([
      ["RD"],
      ["GN"],
      ["YE"],
      ["BU"],
      ["WH"],
      ["OG"],
      [],
    ]);
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
