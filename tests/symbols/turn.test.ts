import fc from "fast-check";
import { expect, test } from "vitest";
import { composeCylinder } from "../../src/symbols/cylinder.js";
import { openSymbols } from "../../src/symbols/library.js";
import type { Symbol, Turn } from "../../src/symbols/symbol.js";
import { turnSymbol } from "../../src/symbols/turn.js";
import { assets } from "../support/assets.js";
import { drawnBox } from "./geometry.js";

const library = openSymbols(assets);
const contact = library.get("north-american/limit-no");
const anySymbol = fc.constantFrom(...library.names()).map((name) => library.get(name));
const anyTurn: fc.Arbitrary<Turn> = fc.record({ quarter: fc.constantFrom(0, 1, 2, 3), mirrored: fc.boolean() });

/** Coordinates cut to what a sheet prints, so that turning there and back compares equal. */
const rounded = (symbol: Symbol) =>
  JSON.parse(JSON.stringify(symbol, (_, v) => (typeof v === "number" ? Math.round(v * 1000) / 1000 + 0 : v)));

test("a quarter turn is counter-clockwise as seen: what led right leads up", () => {
  const turned = turnSymbol(contact, { quarter: 1 });
  expect(turned.ports.find(({ name }) => name === "out")).toMatchObject({ x: 0, y: -10, direction: "up" });
});

test("mirroring comes before turning", () => {
  const turned = turnSymbol(contact, { quarter: 1, mirrored: true });
  expect(turned.ports.find(({ name }) => name === "out")).toMatchObject({ x: 0, y: 10, direction: "down" });
});

test("four quarter turns, and two mirrorings, change nothing", () => {
  fc.assert(
    fc.property(anySymbol, (symbol) => {
      let turned = symbol;
      for (let i = 0; i < 4; i++) turned = turnSymbol(turned, { quarter: 1 });
      expect(rounded({ ...turned, spots: {} })).toEqual(rounded({ ...symbol, spots: {} }));
      const twice = turnSymbol(turnSymbol(symbol, { quarter: 0, mirrored: true }), { quarter: 0, mirrored: true });
      expect(rounded(twice)).toEqual(rounded(symbol));
    }),
  );
});

test("however turned, the box is what is drawn and each port leads out of it", () => {
  fc.assert(
    fc.property(anySymbol, anyTurn, (symbol, turn) => {
      if (symbol.shapes.some(({ kind }) => kind === "text")) return;
      const turned = turnSymbol(symbol, turn);
      const drawn = drawnBox(turned);
      for (const key of ["x", "y", "width", "height"] as const) expect(turned.box[key]).toBeCloseTo(drawn[key], 1);
    }),
  );
});

test("text stays upright, and a designation beside the symbol stays beside it", () => {
  const motor = turnSymbol(library.get("fluid/electric-motor"), { quarter: 1, mirrored: true });
  expect(motor.shapes.find(({ kind }) => kind === "text")).toMatchObject({ text: "M", at: { x: 0, y: 0 } });
  // Over the contact; turned, it stands left of the upright contact, ending there.
  const spot = turnSymbol(contact, { quarter: 1 }).spots.designation;
  expect(spot).toEqual({ x: contact.spots.designation?.y, y: 1.25, anchor: "end" });
  const below = turnSymbol(contact, { quarter: 2 }).spots.designation;
  expect(below).toMatchObject({ anchor: "middle" });
  expect((below?.y as number) - 2.5).toBeCloseTo(-(contact.spots.designation?.y as number));
});

test("where a valve's controls are turns with it", () => {
  const cylinder = turnSymbol(composeCylinder({ action: "double-acting", cushion: "none" }, 0, "hydraulic"), { quarter: 1 });
  expect(cylinder.ports.map(({ name, direction }) => [name, direction])).toEqual([
    ["cap", "right"],
    ["rod", "right"],
  ]);
});
