import { describe, expect, test } from "vitest";
import type { CircuitSheet, PlacedText } from "../../src/layout/placement.js";
import { symbolBox } from "../support/facts.js";
import { faults, ladderOf } from "../support/ladder.js";

const devices = `
push-button PB1 "Start"
push-button PB2 "Stop"
relay CR1 "Cycle running"
relay CR2 "Stamp done" poles 4 no 4 nc
timer TR1 "Stamp dwell" on-delay 1.5 s
pilot-light LT1 "Running" green
limit-switch LS1 "Clamp open"   on CLAMP at retracted
limit-switch LS2 "Clamp closed" on CLAMP at extended
selector-switch S1 "Mode" positions hand off auto start off
contactor MS1 "Pump motor"
overload OL1 "Pump motor"
fluid "Air" pneumatic {
  air-supply AIR1 6 bar
  cylinder CLAMP "Clamp" double-acting bore 40 mm rod 16 mm stroke 60 mm
  valve V1 "Clamp" 5/2 left solenoid SOL1 right spring
  line AIR1 -- V1.1
  line V1.4 -- CLAMP.cap
  line V1.2 -- CLAMP.rod
  exhaust V1.3, V1.5 -- silencer
}
`;

const drawn = (rungs: string, drawing = "paper A3", fuse = "") =>
  ladderOf(
    `drawing "Test" { ${drawing} }\nsupply CTRL 24 V DC { rails L+ M ${fuse} }\n${devices}\nladder "Control" supply CTRL {\n${rungs}\n}\n`,
    "international",
  );

const at = (sheet: CircuitSheet, part: string) => {
  const found = sheet.symbols.find((symbol) => symbol.part.startsWith(part));
  if (!found) throw new Error(`${part} is not on sheet ${sheet.number}`);
  return found.at;
};
const said = (sheet: CircuitSheet, role: PlacedText["role"]) => sheet.texts.filter((text) => text.role === role).map(({ text }) => text);
const railsOf = (sheet: CircuitSheet) => sheet.wires.filter(({ role, part }) => role === "rail" && /rail\d$/.test(part));

describe("a sheet of current paths", () => {
  test("runs from the live rail on top to the return rail, its branches on the right", () => {
    // IEC 61082-1, from memory: current paths upright, supply on top; the holding contact stands beside the start button.
    const laid = drawn(`rung "Cycle running": /PB2 (PB1 | CR1) -> CR1`);
    const [sheet] = laid.sheets as [CircuitSheet];
    expect(faults(laid)).toEqual([]);
    const [live, back] = railsOf(sheet).map(({ points }) => points);
    expect(live?.[0]?.y).toBe(live?.[1]?.y);
    expect(live?.[0]?.y).toBeLessThan(back?.[0]?.y as number);
    expect(at(sheet, "PB2").x).toBe(at(sheet, "PB1").x);
    expect(at(sheet, "PB2").x).toBe(at(sheet, "CR1:A1").x);
    expect(at(sheet, "PB2").y).toBeLessThan(at(sheet, "PB1").y);
    expect(at(sheet, "CR1:13").y).toBe(at(sheet, "PB1").y);
    expect(at(sheet, "CR1:13").x).toBeGreaterThan(at(sheet, "PB1").x);
    expect(said(sheet, "line-number")).toEqual(["1", "2"]);
  });

  test("names its devices with a dash, left of the symbol, and its terminals right of the pins", () => {
    // IEC 81346-1, from memory: the product aspect is written with a dash.
    const [sheet] = drawn("rung: /PB2 PB1 -> CR1").sheets as [CircuitSheet];
    expect(said(sheet, "designation")).toEqual(["-PB2", "-PB1", "-CR1"]);
    for (const { part, at, role } of sheet.texts) {
      const symbol = sheet.symbols.find((placed) => placed.part === part);
      if (!symbol) continue;
      if (role === "designation") expect(at.x).toBeLessThan(symbolBox(symbol).x);
      if (role === "terminal") expect(at.x).toBeGreaterThan(symbol.at.x);
    }
  });

  test("has its loads in one row, whatever stands behind them", () => {
    const laid = drawn("rung: CR1 LS1 -> MS1 /OL1\nrung: PB1 -> (CR1 | LT1)\nrung: LS2 -> SOL1");
    expect(faults(laid)).toEqual([]);
    const [sheet] = laid.sheets as [CircuitSheet];
    expect(new Set(["MS1:A1", "CR1:A1", "LT1", "SOL1"].map((part) => at(sheet, part).y)).size).toBe(1);
    expect(at(sheet, "OL1").y).toBeGreaterThan(at(sheet, "MS1").y);
  });

  test("has the contacts of a coil in a table below it, spare ones too, each with its place", () => {
    // EN 50011, from memory: a contactor relay 44E has its make contacts at 13 to 44 and its break contacts at 51 to 82.
    const laid = drawn("rung: (CR2 | /CR2) /CR2 -> CR2");
    expect(faults(laid)).toEqual([]);
    const [sheet] = laid.sheets as [CircuitSheet];
    const low = railsOf(sheet)[1]?.points[0]?.y as number;
    const table = sheet.texts.filter(({ role, at }) => role === "margin" && at.y > low);
    const words = table.map(({ text }) => (typeof text === "string" ? text : text.to === "contact-place" ? text.contact : ""));
    expect(words.filter((word) => /^\d+-\d+$/.test(word))).toEqual([
      ...["13-14", "23-24", "33-34", "43-44"],
      ...["51-52", "61-62", "71-72", "81-82"],
    ]);
    expect(words.filter((word) => word.startsWith("CR2:"))).toEqual(["CR2:13-14", "CR2:51-52", "CR2:61-62"]);
    expect(words.filter((word) => word === "–")).toHaveLength(3 + 2);
    const coil = at(sheet, "CR2:A1");
    for (const { at } of table) expect(Math.abs(at.x - coil.x)).toBeLessThan(30);
  });

  test("numbers the positions of a switch at its ticks and says below what they are", () => {
    const laid = drawn("rung: S1.auto -> CR1");
    expect(faults(laid)).toEqual([]);
    const values = said(laid.sheets[0] as CircuitSheet, "value");
    expect(values.slice(0, 3)).toEqual(["1", "2", "3"]);
    expect(values.slice(3).join(" ")).toContain("1 hand");
  });

  test("draws held switches operated, with the arrow", () => {
    // IEC 61082-1, from memory: a device that stands operated is drawn so, and an arrow says it.
    const [sheet] = drawn("rung: LS1 /LS1 LS2 /LS2 -> CR1").sheets as [CircuitSheet];
    expect(sheet.symbols.filter(({ device }) => device?.startsWith("LS")).map(({ symbol }) => symbol.name)).toEqual([
      "international/limit-no-held-closed",
      "international/limit-nc-held-open",
      "international/limit-no",
      "international/limit-nc",
    ]);
  });

  test("has the supply's fuse in the upper rail at its left, and the rail's name behind it", () => {
    const laid = drawn("rung: PB1 -> CR1", "paper A3", "fuse FU1 4 A");
    expect(faults(laid)).toEqual([]);
    const [sheet] = laid.sheets as [CircuitSheet];
    const fuse = at(sheet, "FU1");
    const live = sheet.texts.find(({ role, text }) => role === "rail" && text === "L+");
    expect(fuse.y).toBe(railsOf(sheet)[0]?.points[0]?.y);
    expect(fuse.x).toBeLessThan(at(sheet, "PB1").x);
    expect(live?.at.x).toBeGreaterThan(fuse.x);
    expect(said(sheet, "designation")).toContain("-FU1");
  });

  test("says at both ends of the rails where they come from and go on", () => {
    const laid = drawn(Array.from({ length: 30 }, (_, i) => `rung: /PB2 (PB1 | LS1) -> ${i === 0 ? "CR1" : "LT1"}`).join("\n"));
    expect(laid.sheets.length).toBeGreaterThan(2);
    expect(faults(laid)).toEqual([]);
    const paths = laid.sheets.map((sheet) => said(sheet, "line-number").length);
    expect(laid.sheets.map((sheet) => said(sheet, "line-number")[0])).toEqual(laid.sheets.map(() => "1"));
    expect(said(laid.sheets[0] as CircuitSheet, "note")).toEqual(["/2.1", "/2.1", "CTRL  24 V DC"]);
    expect(said(laid.sheets[1] as CircuitSheet, "note").filter((note) => note === `/1.${paths[0]}`)).toHaveLength(2);
  });

  test("refers at both ends where a point goes on on another sheet", () => {
    const laid = drawn(`
      rung: /PB2 PB1 @run -> CR1
      sheet "Outputs"
      rung: @run LS2 -> SOL1`);
    expect(faults(laid)).toEqual([]);
    for (const sheet of laid.sheets) {
      expect(sheet.strokes.filter(({ role }) => role === "continuation")).toHaveLength(1);
      expect(sheet.texts.filter(({ text }) => typeof text !== "string" && text.to === "point")).toHaveLength(1);
    }
  });

  test("numbers paths on through the sheets if asked, and wires by sheet and path", () => {
    const laid = drawn(`rung: PB1 -> CR1\nsheet "Two"\nrung: PB2 -> CR2`, "line-numbers running");
    expect(laid.sheets.map((sheet) => said(sheet, "line-number"))).toEqual([["1"], ["2"]]);
  });

  test("stands in rows on a tall sheet, filled from above, and says between them where the rails go on", () => {
    const laid = drawn(Array.from({ length: 30 }, (_, i) => `rung: /PB2 (PB1 | LS1) -> ${i === 0 ? "CR1" : "LT1"}`).join("\n"), "paper A2");
    expect(faults(laid)).toEqual([]);
    const [sheet] = laid.sheets as [CircuitSheet];
    const heights = [...new Set(railsOf(sheet).map(({ points }) => points[0]?.y as number))];
    expect(heights).toHaveLength(4);
    const numbers = sheet.texts.filter(({ role }) => role === "line-number");
    expect(numbers.map(({ text }) => Number(text))).toEqual(numbers.map((_, index) => index + 1));
    const rows = [...new Set(numbers.map(({ at }) => at.y))];
    expect(rows).toHaveLength(2);
    const below = numbers.findIndex(({ at }) => at.y === rows[1]);
    expect(said(sheet, "note").filter((note) => note === `/1.${below + 1}`)).toHaveLength(2);
    expect(said(sheet, "note").filter((note) => note === `/1.${below}`)).toHaveLength(2);
  });

  test.each(["A4", "A3", "A2", "A1", "A0", "ANSI-A", "ANSI-B", "ANSI-C", "ANSI-D", "ANSI-E"])("keeps within %s", (paper) => {
    const laid = drawn(
      `
      rung "Cycle running": /PB2 (PB1 | CR1 (/CR2 | /LS1)) @run -> (CR1 | LT1)
      rung "Stamp done": @run (TR1 | CR2) -> CR2
      rung "Stamp": @run LS2 /CR2 -> SOL1
      rung "Dwell": @run LS2 S1.auto -> TR1`,
      `paper ${paper}`,
      "fuse FU1 4 A",
    );
    expect(faults(laid)).toEqual([]);
  });
});
