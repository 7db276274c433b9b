import fc from "fast-check";
import { expect, test } from "vitest";
import { startOfCycle } from "../../src/behaviour/start-of-cycle.js";
import { check } from "../../src/checks/check.js";
import { parse } from "../../src/language/parse.js";
import { buildMachine } from "../../src/machine/build.js";
import { listNames } from "../../src/schedules/list-names.js";
import { listMakers } from "../../src/schedules/lists.js";
import { readText } from "../support/sources.js";

/** Lines of sound drawings, cut up, joined again in any order, with words changed for others. */
const lines = [
  "samples/tray-stamper.sprung",
  "samples/billet-shear.sprung",
  "tests/machine/fixtures/slips.sprung",
  "tests/machine/every-kind.sprung",
]
  .flatMap((path) => readText(path).split("\n"))
  .filter((line) => line.trim() !== "" && !line.trim().startsWith("#"));
const words = [...new Set(lines.flatMap((line) => line.split(/\s+/)))].filter((word) => word !== "");

const broken = fc
  .array(fc.tuple(fc.constantFrom(...lines), fc.nat(), fc.constantFrom("", ...words), fc.boolean()), { minLength: 1, maxLength: 60 })
  .map((picked) =>
    picked
      .map(([line, where, word, change]) => {
        const parts = line.split(" ");
        if (change) parts[where % parts.length] = word;
        return parts.join(" ");
      })
      .join("\n"),
  );

test("whatever the text, there is a machine, and every finding has its place", () => {
  fc.assert(
    fc.property(broken, (text) => {
      const { tree } = parse(text, "broken.sprung");
      const { machine, diagnostics } = buildMachine(tree);
      const rows = text.split("\n");
      for (const { at, code, message } of [...diagnostics, ...check(machine, startOfCycle(machine))]) {
        expect(code).toMatch(/^[a-z]+(-[a-z]+)*$/);
        expect(message).not.toMatch(/undefined|NaN|\[object/);
        expect(at.line).toBeGreaterThan(0);
        expect(at.line).toBeLessThanOrEqual(rows.length);
        expect(at.column).toBeGreaterThan(0);
        expect(at.endLine > at.line || at.endColumn >= at.column).toBe(true);
      }
      // What is in the machine is whole: every use has its device, every port its node.
      for (const device of machine.devices.values())
        for (const { device: name } of [...device.contacts, ...device.loads, ...device.throughs, ...device.mains])
          expect(name).toBe(device.name);
      for (const name of listNames) expect(() => listMakers[name](machine, { sheets: [], places: new Map() })).not.toThrow();
      for (const circuit of machine.circuits) {
        if (circuit.kind !== "fluid") continue;
        const known = new Set(circuit.nodes.map(({ id }) => id));
        for (const { node } of circuit.lines) expect(known.has(node)).toBe(true);
        for (const { ports } of circuit.components)
          for (const { node } of ports) if (node !== undefined) expect(known.has(node)).toBe(true);
      }
    }),
    { numRuns: 200, seed: 1 },
  );
});

test("what is built is built the same again", () => {
  const text = readText("samples/billet-shear.sprung");
  expect(buildMachine(parse(text, "a.sprung").tree)).toEqual(buildMachine(parse(text, "a.sprung").tree));
});
