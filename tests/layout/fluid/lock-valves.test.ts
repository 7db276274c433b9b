import { describe, expect, it } from "vitest";
import type { CircuitSheet } from "../../../src/layout/placement.js";
import {
  crossings,
  looseEnds,
  portsOf,
  symbolOverlaps,
  textOverlaps,
  textsOnWires,
  tooClose,
  wiresThroughSymbols,
} from "../../support/facts.js";
import { layOutText, netsOfMachine, netsOfSheets, stubs } from "../../support/fluid-circuits.js";

const sides = ["A", "B"] as const;
type Where = (typeof sides)[number] | "both" | "none";

/** A cylinder held by check valves on its lines, each opened from the other line, as lifting gear has it. */
function lockCircuit(medium: "hydraulic" | "pneumatic", locks: Where, controls: Where, controlFirst: boolean): string {
  const hydraulic = medium === "hydraulic";
  const [supply, a, b] = hydraulic ? ["P", "A", "B"] : ["1", "4", "2"];
  const on = (where: Where, side: Where) => where === "both" || where === side;
  const parts: string[] = [];
  const lines = sides.map((side) => {
    const inLine = [...(on(locks, side) ? [`L${side}`] : []), ...(on(controls, side) ? [`F${side}`] : [])];
    if (on(locks, side)) parts.push(`pilot-operated-check-valve L${side}`);
    if (on(controls, side)) parts.push(`one-way-flow-control F${side} free-to C1`);
    const way = [`V1.${side === "A" ? a : b}`, ...(controlFirst ? inLine.reverse() : inLine), side === "A" ? "C1.cap" : "C1.rod"];
    return `line ${way.join(" -- ")}`;
  });
  if (on(locks, "A")) lines.push(`pilot V1.${b} -- LA.X`);
  if (on(locks, "B")) lines.push(`pilot V1.${a} -- LB.X`);
  return `fluid "Lock" ${medium} {
    ${hydraulic ? "tank T1\npump P1\nline T1 -- P1 -- @P" : "air-supply AIR 6 bar\nline AIR -- @P"}
    cylinder C1 "Lift" double-acting bore 40 mm rod 22 mm stroke 100 mm
    valve V1 ${hydraulic ? "4/3 centre float" : "5/3 centre exhaust"} left solenoid SA right solenoid SB springs
    ${parts.join("\n")}
    line @P -- V1.${supply}
    ${hydraulic ? "line V1.T -- tank" : "exhaust V1.5, V1.3"}
    ${lines.join("\n")}
  }`;
}

const at = (sheet: CircuitSheet, part: string) => {
  const found = sheet.symbols.find((one) => one.part === part);
  if (!found) throw new Error(`${part} is not drawn.`);
  return found;
};

for (const medium of ["hydraulic", "pneumatic"] as const) {
  describe(`check valves piloted from the other line, ${medium}`, () => {
    for (const locks of ["both", "A", "B"] as const) {
      for (const controls of ["none", "A", "B", "both"] as const) {
        for (const controlFirst of [false, true]) {
          it(`are led whole with locks on ${locks} and flow controls on ${controls}${controlFirst ? ", flow control at the valve" : ""}`, async () => {
            const { circuit, sheets } = await layOutText(lockCircuit(medium, locks, controls, controlFirst));
            expect(sheets).toHaveLength(1);
            const [sheet] = sheets as [CircuitSheet];
            expect(stubs(sheet)).toEqual([]);
            for (const found of [symbolOverlaps, textOverlaps, textsOnWires, wiresThroughSymbols, looseEnds])
              expect(found(sheet)).toEqual([]);
            expect(tooClose(sheet, { lines: 0.8, others: 0.5 })).toEqual([]);
            expect(netsOfSheets(sheets)).toEqual(netsOfMachine(circuit));
            // Two pilots from opposite lines must cross each other once; a single one has no need to cross anything.
            expect(crossings(sheet)).toHaveLength(locks === "both" ? 1 : 0);
          });
        }
      }
    }
  });
}

it("stands the two check valves of a double lock level, each looking to the other line", async () => {
  const { sheets } = await layOutText(lockCircuit("hydraulic", "both", "both", false));
  const [sheet] = sheets as [CircuitSheet];
  const [left, right] = [at(sheet, "LA"), at(sheet, "LB")];
  expect(left.at.y).toBe(right.at.y);
  const pilot = (one: typeof left) => portsOf(one).find(({ name }) => name === "X");
  expect(pilot(left)?.direction).toBe("right");
  expect(pilot(right)?.direction).toBe("left");
});
