import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  crossings,
  looseEnds,
  outside,
  slantedWires,
  symbolOverlaps,
  textOverlaps,
  textsOnWires,
  tooClose,
  wiresThroughSymbols,
} from "../../support/facts.js";
import { anyCircuit, layOutText, netsOfMachine, netsOfSheets, stubs, usualCircuit, usualCircuitOn } from "../../support/fluid-circuits.js";

const runs = Number(process.env.FLUID_RUNS ?? 25);

describe("circuits as machines have them", () => {
  it("draw with every line where it belongs and nothing in the way of anything", async () => {
    await fc.assert(
      fc.asyncProperty(usualCircuit, async (text) => {
        const { circuit, sheets, area } = await layOutText(text);
        for (const sheet of sheets) {
          expect(symbolOverlaps(sheet)).toEqual([]);
          expect(textOverlaps(sheet)).toEqual([]);
          expect(textsOnWires(sheet)).toEqual([]);
          expect(tooClose(sheet, { lines: 0.8, others: 0.5 })).toEqual([]);
          expect(stubs(sheet)).toEqual([]);
          expect(wiresThroughSymbols(sheet)).toEqual([]);
          expect(looseEnds(sheet)).toEqual([]);
          expect(slantedWires(sheet)).toEqual([]);
          expect(outside(sheet, area)).toEqual([]);
          expect(crossings(sheet).filter((one) => !one.includes(" cross at "))).toEqual([]);
        }
        expect(netsOfSheets(sheets)).toEqual(netsOfMachine(circuit));
      }),
      { numRuns: runs, seed: 7, endOnFailure: true },
    );
  }, 120_000);
});

describe("circuits on small and large paper", () => {
  it("stay within the sheet, or are told to be too large for it", async () => {
    await fc.assert(
      fc.asyncProperty(usualCircuitOn("A4", "A3", "ANSI-A"), async (text) => {
        const { circuit, sheets, area, diagnostics } = await layOutText(text);
        for (const sheet of sheets) {
          expect(outside(sheet, area)).toEqual([]);
          expect(stubs(sheet)).toEqual([]);
          expect(tooClose(sheet, { lines: 0.8, others: 0.5 })).toEqual([]);
          expect(symbolOverlaps(sheet)).toEqual([]);
          expect(wiresThroughSymbols(sheet)).toEqual([]);
          expect(looseEnds(sheet)).toEqual([]);
        }
        if (diagnostics.length === 0) expect(netsOfSheets(sheets)).toEqual(netsOfMachine(circuit));
        for (const found of diagnostics) expect(found).toMatchObject({ code: "sheet-too-small", severity: "error", at: circuit.at });
      }),
      { numRuns: runs, seed: 13, endOnFailure: true },
    );
  }, 120_000);
});

describe("any netlist", () => {
  it("is drawn as it is, however unusual", async () => {
    await fc.assert(
      fc.asyncProperty(anyCircuit, async (text) => {
        const { circuit, sheets, diagnostics, area } = await layOutText(text);
        expect(diagnostics).toEqual([]);
        for (const sheet of sheets) {
          expect(outside(sheet, area)).toEqual([]);
          expect(symbolOverlaps(sheet)).toEqual([]);
          expect(textOverlaps(sheet)).toEqual([]);
          expect(wiresThroughSymbols(sheet)).toEqual([]);
          expect(looseEnds(sheet)).toEqual([]);
          expect(slantedWires(sheet)).toEqual([]);
          expect(crossings(sheet).filter((one) => !one.includes(" cross at "))).toEqual([]);
        }
        expect(netsOfSheets(sheets)).toEqual(netsOfMachine(circuit));
      }),
      { numRuns: runs, seed: 11, endOnFailure: true },
    );
  }, 120_000);
});
