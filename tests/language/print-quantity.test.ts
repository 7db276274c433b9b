import { expect, test } from "vitest";
import { printQuantity } from "../../src/language/print-quantity.js";
import { parseQuantity } from "../../src/language/units.js";

// Signs of units after ISO 80000-1 (from memory).
test.each([
  ["16 cm3/rev", "16 cm³/rev"],
  ["10 um", "10 µm"],
  ["2 m3/h", "2 m³/h"],
  ["4.7 kohm", "4.7 kΩ"],
  ["40 degC", "40 °C"],
  ["90 deg", "90°"],
  ["100 mm", "100 mm"],
  ["3 min", "3 min"],
])("%s is printed as %s", (written, printed) => {
  const quantity = parseQuantity(written);
  expect(quantity && printQuantity(quantity)).toBe(printed);
});
