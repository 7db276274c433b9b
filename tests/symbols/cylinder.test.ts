import fc from "fast-check";
import { expect, test } from "vitest";
import type { CylinderSpec, Medium } from "../../src/machine/model.js";
import { composeCylinder } from "../../src/symbols/cylinder.js";
import { drawnBox } from "./geometry.js";

const M = 2;
const double = { action: "double-acting", cushion: "none" } as const;

test("the rod comes out by the stroke's part", () => {
  const rodEnds = [0, 0.5, 1].map((fraction) => composeCylinder(double, fraction, "hydraulic").box.width / M);
  expect(rodEnds).toEqual([13, 15.5, 18]);
  const half = composeCylinder(double, 0.5, "hydraulic").spots;
  expect(half["rod-end"]?.x).toBeCloseTo(((half["rod-retracted"]?.x as number) + (half["rod-extended"]?.x as number)) / 2);
});

test("a single-acting cylinder has the port that drives it", () => {
  const ports = (spec: Partial<CylinderSpec>) => composeCylinder({ ...double, ...spec }, 0, "pneumatic").ports.map(({ name }) => name);
  expect(ports({})).toEqual(["cap", "rod"]);
  expect(ports({ action: "single-acting", returnedBy: "spring" })).toEqual(["cap"]);
  expect(ports({ action: "single-acting", returnedBy: "load" })).toEqual(["cap"]);
  expect(ports({ action: "single-acting", returnedBy: "spring-extend" })).toEqual(["rod"]);
});

test("whatever is asked for, the ports stay where they are and the box is what is drawn", () => {
  const forms = fc.record({
    action: fc.constantFrom("double-acting" as const, "single-acting" as const),
    cushion: fc.constantFrom("none" as const, "fixed" as const, "adjustable" as const),
    returnedBy: fc.constantFrom("spring" as const, "spring-extend" as const, "load" as const, undefined),
  });
  const fractions = fc.oneof(fc.double({ min: 0, max: 1, noNaN: true }), fc.constantFrom(-1, 2, Number.NaN));
  fc.assert(
    fc.property(forms, fractions, fc.constantFrom<Medium>("hydraulic", "pneumatic"), (form, fraction, medium) => {
      const cylinder = composeCylinder(form, fraction, medium);
      for (const { name, x, y } of cylinder.ports) expect([x, y]).toEqual([name === "cap" ? M : 9 * M, 3 * M]);
      const drawn = drawnBox(cylinder);
      for (const key of ["x", "y", "width", "height"] as const) expect(cylinder.box[key]).toBeCloseTo(drawn[key], 1);
      // Wherever the piston stands, it is within the barrel and the rod's end beyond it.
      expect(cylinder.box.x).toBe(0);
      expect(cylinder.box.width).toBeGreaterThanOrEqual(13 * M);
    }),
  );
});
