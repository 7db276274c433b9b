import { describe, expect, test } from "vitest";
import type { Dimension } from "../../src/language/quantity.js";
import { parseNumber, parseQuantity, unitsOf } from "../../src/language/units.js";

// Conversion factors of NIST Special Publication 811, appendix B (from memory), to the figures given there.
const handbook: [written: string, dimension: Dimension, value: number][] = [
  ["1 in", "length", 25.4],
  ["1 ft", "length", 304.8],
  ["2.5 in", "length", 63.5],
  ["1 psi", "pressure", 0.06894757],
  ["2300 psi", "pressure", 158.5794],
  ["1 MPa", "pressure", 10],
  ["1 kPa", "pressure", 0.01],
  ["1 inHg", "pressure", 0.03386389],
  ["1 hp", "power", 745.6999],
  ["1 lb", "mass", 0.45359237],
  ["1 lbf", "force", 4.448222],
  ["1 gal", "volume", 3.785412],
  ["1 in3", "volume", 0.01638706],
  ["1 ft3", "volume", 28.31685],
  ["1 gpm", "flow", 3.785412],
  ["1 cfm", "flow", 28.31685],
  ["1 m3/h", "flow", 16.66667],
  ["1 in3/rev", "displacement", 16.38706],
  ["32 °F", "temperature", 0],
  ["212 °F", "temperature", 100],
  ["273.15 K", "temperature", 0],
];

describe("quantities", () => {
  test.each(handbook)("%s is %s %d", (written, dimension, value) => {
    const quantity = parseQuantity(written);
    expect(quantity?.dimension).toBe(dimension);
    expect(quantity?.value).toBeCloseTo(value, value < 1 ? 7 : value < 100 ? 5 : 3);
  });

  test.each([
    ["15 ms", 0.015],
    ["1.5 s", 1.5],
    ["2 min", 120],
    ["5.5 kW", 5500],
    ["400 V", 400],
    ["11.2 A", 11.2],
    ["140 VA", 140],
    ["1455 rpm", 1455],
    ["1455 1/min", 1455],
    ["1455 r/min", 1455],
    ["16 cm3/rev", 16],
    ["10 um", 10],
    ["10 µm", 10],
    ["3/8 in", 9.525],
    ["1-1/2 in", 38.1],
    ["-0.6 bar", -0.6],
    ["4.7 kohm", 4700],
    ["0.1 mm", 0.1],
  ])("%s", (written, value) => {
    expect(parseQuantity(written)?.value).toBe(value);
  });

  test("keep what was written, single-spaced, and the unit's usual spelling", () => {
    expect(parseQuantity("63   mm")).toEqual({ dimension: "length", value: 63, unit: "mm", text: "63 mm" });
    expect(parseQuantity("63mm")?.text).toBe("63mm");
    expect(parseQuantity("5 L/min")).toMatchObject({ unit: "l/min", text: "5 L/min" });
  });

  test.each(["", "mm", "5", "5 furlongs", "five mm", "1/0 in", "5 mm mm", "--5 mm"])("%j is none", (written) => {
    expect(parseQuantity(written)).toBeUndefined();
  });

  test("every unit that is offered is understood, as that dimension", () => {
    const dimensions: Dimension[] = ["length", "pressure", "time", "voltage", "current", "power", "apparent-power", "frequency", "speed"];
    dimensions.push("displacement", "flow", "volume", "temperature", "mass", "force", "angle", "resistance", "filtration");
    for (const dimension of dimensions) {
      expect(unitsOf(dimension).length).toBeGreaterThan(0);
      for (const unit of unitsOf(dimension)) expect(parseQuantity(`7 ${unit}`)).toMatchObject({ dimension, unit });
    }
    expect(unitsOf("length").slice(0, 1)).toEqual(["mm"]);
  });

  test("numbers", () => {
    expect(["12", "1.5", "-3", "3/8", "1 1/2", "1/0", "x"].map(parseNumber)).toEqual([12, 1.5, -3, 0.375, 1.5, undefined, undefined]);
  });
});
