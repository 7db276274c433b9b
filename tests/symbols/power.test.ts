import { describe, expect, test } from "vitest";
import type { Device, DeviceKind } from "../../src/machine/model.js";
import { type PowerUse, symbolForPower } from "../../src/symbols/choose-power.js";
import { polePitch } from "../../src/symbols/gang-poles.js";
import { openSymbols } from "../../src/symbols/library.js";
import { assets } from "../support/assets.js";
import { pieces, touch } from "./geometry.js";

const library = openSymbols(assets);
const at = { file: "test", line: 1, column: 1, endLine: 1, endColumn: 1, from: 0, to: 0 };
const device = (kind: DeviceKind): Device => ({ name: "Q1", kind, at, values: [], contacts: [], loads: [], throughs: [], mains: [] });
const conventions = ["north-american", "international"] as const;
const flows = ["down", "right"] as const;
const symbol = (kind: DeviceKind, convention: (typeof conventions)[number], use: Partial<PowerUse>) => {
  const drawn = symbolForPower(device(kind), { conductors: 3, flow: "down", ...use }, convention, library);
  if (!drawn) throw new Error(`${kind} has no place in a power circuit`);
  return drawn;
};
const ganged = ["contactor", "circuit-breaker", "disconnect", "fuse", "overload", "terminal-strip", "plug", "heater"] as const;
const fixed = ["motor", "transformer", "power-supply", "rectifier"] as const;

describe.each(conventions)("%s", (convention) => {
  describe.each(flows)("current %s", (flow) => {
    test.each([...ganged, ...fixed])("%s: conductors run straight through it, one pitch apart", (kind) => {
      for (const conductors of kind === "motor"
        ? [2, 3]
        : kind === "transformer" || kind === "power-supply" || kind === "rectifier"
          ? [2]
          : [1, 2, 3, 4]) {
        const { ports, shapes } = symbol(kind, convention, { flow, conductors });
        const across = (port: { x: number; y: number }) => (flow === "down" ? port.x : port.y);
        const along = (port: { x: number; y: number }) => (flow === "down" ? port.y : port.x);
        const named = (side: string) => ports.filter(({ name }) => name.startsWith(`${side}-`));
        expect(named("in").map(({ name }) => name)).toEqual(Array.from({ length: conductors }, (_, k) => `in-${k + 1}`));
        expect(named("in").map(across)).toEqual(Array.from({ length: conductors }, (_, k) => k * polePitch));
        expect(new Set(named("in").map(along)).size).toBe(1);
        expect(named("in").every(({ direction }) => direction === (flow === "down" ? "up" : "left"))).toBe(true);
        if (kind !== "motor") {
          expect(named("out").map(across)).toEqual(named("in").map(across));
          expect(named("out").every(({ direction }) => direction === (flow === "down" ? "down" : "right"))).toBe(true);
          expect(along(named("out")[0] as (typeof ports)[number])).toBeGreaterThan(along(named("in")[0] as (typeof ports)[number]));
        }
        const ink = pieces(shapes);
        for (const port of ports)
          expect(
            ink.some((line) => touch([port], line)),
            port.name,
          ).toBe(true);
      }
    });
  });

  test("poles that work together are linked, fuses and terminals are not", () => {
    const links = (kind: DeviceKind) => {
      const dashed = symbol(kind, convention, { conductors: 3 }).shapes.filter((shape) => shape.kind === "stroke" && shape.dash);
      const single = symbol(kind, convention, { conductors: 1 }).shapes.filter((shape) => shape.kind === "stroke" && shape.dash);
      return dashed.length - single.length;
    };
    expect(["contactor", "circuit-breaker", "disconnect"].map((kind) => links(kind as DeviceKind))).toEqual([2, 2, 2]);
    expect(["fuse", "terminal-strip", "plug"].map((kind) => links(kind as DeviceKind))).toEqual([0, 0, 0]);
  });

  test("only the first pole of a disconnect has the handle", () => {
    const strokes = (conductors: number) => symbol("disconnect", convention, { conductors }).shapes.length;
    const handle = library.get(`${convention}/disconnect-1p`).shapes.length - library.get(`${convention}/disconnect-pole`).shapes.length;
    expect(handle).toBeGreaterThan(0);
    // Each further pole brings its own lines and a link.
    expect(strokes(3) - strokes(2)).toBe(library.get(`${convention}/disconnect-pole`).shapes.length + 1);
  });

  test("motors by their conductors and current", () => {
    const name = (use: Partial<PowerUse>) => symbol("motor", convention, use).name.replace(/^.*\//, "");
    expect(name({ conductors: 3 })).toBe("motor-3ph");
    expect(name({ conductors: 2 })).toBe("motor-1ph");
    expect(name({ conductors: 2, current: "DC" })).toBe("motor-dc");
    const six = symbol("motor", convention, { sixLead: true });
    expect(six.ports.map(({ name }) => name)).toEqual(["in-1", "in-2", "in-3", "out-1", "out-2", "out-3", "pe"]);
  });
});

test("what has no place in a power circuit has no symbol there", () => {
  expect(symbolForPower(device("push-button"), { conductors: 3, flow: "down" }, "international", library)).toBeUndefined();
});
