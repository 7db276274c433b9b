import fc from "fast-check";
import { describe, expect, test } from "vitest";
import type { CircuitSheet, PlacedSymbol } from "../../src/layout/placement.js";
import { symbolBox, symbolStretches } from "../support/facts.js";
import { faults, type LaidLadder, ladderOf } from "../support/ladder.js";

const devices = `
push-button PB1 "Start both"
push-button PB2 "Jog"
emergency-stop ES1 "Emergency stop"
selector-switch SS1 "Mode" positions off on
selector-switch SS2 "Kind of working" positions hand off auto start off
selector-switch SS3 "Zone" positions 0 1 2 3 4 5 start 2
key-switch KS1 "Service" positions off on
foot-switch FTS1 "Pedal"
pressure-switch PS1 "Air there" rising 5 bar falling 4 bar
relay CR1
relay CR2
relay CR3
relay CR4
`;
type Convention = "north-american" | "international";
const conventions = ["north-american", "international"] as const;
const laid = (rungs: string, convention: Convention) =>
  ladderOf(`supply CTRL 24 V DC { rails L+ M }\n${devices}\nladder "Control" supply CTRL {\n${rungs}\n}\n`, convention);

const links = ({ sheets }: LaidLadder) => sheets.flatMap((sheet) => sheet.strokes.filter(({ role }) => role === "link"));
/** The contacts that still refer to their sisters, and for each those it is linked with. */
const references = ({ sheets }: LaidLadder) =>
  sheets.flatMap(({ texts }) =>
    texts.flatMap(({ text }) =>
      typeof text !== "string" && text.to === "sisters" ? [{ from: text.from, linked: text.linked ?? [] }] : [],
    ),
  );

/** Links that end on nothing, or run through anything but the contacts of one device. */
function badLinks(sheet: CircuitSheet): string[] {
  const found: string[] = [];
  for (const { role, path } of sheet.strokes) {
    if (role !== "link") continue;
    const [a, b] = path as [{ x: number; y: number }, { x: number; y: number }];
    const within = ({ x, y, width, height }: ReturnType<typeof symbolBox>) =>
      x - 0.01 <= Math.max(a.x, b.x) &&
      x + width + 0.01 >= Math.min(a.x, b.x) &&
      y - 0.01 <= Math.max(a.y, b.y) &&
      y + height + 0.01 >= Math.min(a.y, b.y);
    const met = sheet.symbols.filter((symbol) => within(symbolBox(symbol)));
    const name = `link at ${a.x}, ${a.y}`;
    if (met.length !== 2 || met[0]?.device !== met[1]?.device) found.push(`${name} meets ${met.map(({ part }) => part).join(" ")}`);
    for (const end of [a, b]) if (!met.some((symbol) => onInk(end, symbol))) found.push(`${name} ends on nothing`);
    for (const wire of sheet.wires) {
      wire.points.slice(1).forEach((to, index) => {
        const from = wire.points[index] as typeof to;
        const box = {
          x: Math.min(from.x, to.x),
          y: Math.min(from.y, to.y),
          width: Math.abs(from.x - to.x),
          height: Math.abs(from.y - to.y),
        };
        if (within(box)) found.push(`${name} crosses ${wire.part}`);
      });
    }
  }
  return found;
}

function onInk({ x, y }: { x: number; y: number }, symbol: PlacedSymbol): boolean {
  return symbolStretches(symbol).some(({ a, b }) => {
    const length = Math.hypot(b.x - a.x, b.y - a.y);
    const t = length === 0 ? 0 : Math.min(1, Math.max(0, ((x - a.x) * (b.x - a.x) + (y - a.y) * (b.y - a.y)) / length ** 2));
    return Math.hypot(a.x + t * (b.x - a.x) - x, a.y + t * (b.y - a.y) - y) < 0.1;
  });
}

describe.each(conventions)("%s", (convention) => {
  test("contacts of one button that stand together are linked and refer to no other", () => {
    const ladder = laid(`rung "A": PB1 -> CR1\nrung "B": /PB1 -> CR2`, convention);
    expect(links(ladder).length).toBe(1);
    expect(links(ladder)[0]?.dash).toEqual([1.5, 0.75]);
    expect(references(ladder)).toEqual([]);
    expect(faults(ladder)).toEqual([]);
    expect(ladder.sheets.flatMap(badLinks)).toEqual([]);
  });

  test("something between them, or another column, and they refer to each other", () => {
    for (const rungs of [
      `rung "A": PB1 -> CR1\nrung "B": CR1 -> CR2\nrung "C": /PB1 -> CR3`,
      `rung "A": PB1 -> CR1\nrung "B": CR1 /PB1 -> CR2`,
    ]) {
      const ladder = laid(rungs, convention);
      expect(links(ladder)).toEqual([]);
      const contacts = ladder.machine.devices.get("PB1")?.contacts.map(({ id }) => id);
      expect(references(ladder)).toEqual(contacts?.map((from) => ({ from, linked: [] })));
      expect(faults(ladder)).toEqual([]);
    }
  });

  test("of three contacts two together are linked, and both refer to the third alone", () => {
    const ladder = laid(`rung "A": PB1 -> CR1\nrung "B": /PB1 -> CR2\nrung "C": CR1 -> CR3\nrung "D": PB1 -> CR4`, convention);
    const [a, b, c] = (ladder.machine.devices.get("PB1")?.contacts ?? []).map(({ id }) => id);
    expect(links(ladder).length).toBe(1);
    expect(references(ladder)).toEqual([
      { from: a, linked: [b] },
      { from: b, linked: [a] },
      { from: c, linked: [] },
    ]);
    expect(faults(ladder)).toEqual([]);
  });

  test("three in a row have two links", () => {
    const ladder = laid(`rung "A": PB1 -> CR1\nrung "B": /PB1 -> CR2\nrung "C": PB1 -> CR3`, convention);
    expect([links(ladder).length, references(ladder).length]).toEqual([2, 0]);
    expect(faults(ladder)).toEqual([]);
  });

  test("contacts of a relay are not linked: their coil moves them", () => {
    const ladder = laid(`rung "A": PB1 -> CR1\nrung "B": CR1 -> CR2\nrung "C": CR1 -> CR3`, convention);
    expect([links(ladder), references(ladder)]).toEqual([[], []]);
  });

  test("no text of a linked contact is lost or leaves it nameless", () => {
    for (const name of ["PB1", "ES1", "FTS1", "PS1"]) {
      const ladder = laid(`rung "A": ${name} -> CR1\nrung "B": /${name} -> CR2`, convention);
      expect(links(ladder).length, name).toBe(1);
      for (const { id } of ladder.machine.devices.get(name)?.contacts ?? []) {
        const own = ladder.sheets[0]?.texts.filter(({ part }) => part === id) ?? [];
        expect(own.filter(({ role }) => role === "designation").map(({ text }) => text)).toEqual([
          convention === "international" ? `-${name}` : name,
        ]);
        expect(own.some(({ role }) => role === "function")).toBe(true);
      }
    }
  });

  test("whatever stands in whatever columns, links run free and end on their contacts", () => {
    const name = fc.constantFrom(
      "PB1",
      "/PB1",
      "PB2",
      "/PB2",
      "/ES1",
      "SS1.on",
      "SS1.off",
      "SS2.hand",
      "SS2.auto",
      "SS3.1",
      "/SS3.4",
      "KS1.on",
      "FTS1",
      "/FTS1",
      "PS1",
      "/PS1",
      "CR1",
      "/CR2",
    );
    const series = fc.array(name, { minLength: 1, maxLength: 4 }).map((names) => names.join(" "));
    const rung = fc.oneof(
      series,
      fc.tuple(series, series).map(([a, b]) => `(${a} | ${b})`),
    );
    fc.assert(
      fc.property(fc.array(rung, { minLength: 2, maxLength: 4 }), (rungs) => {
        const ladder = laid(rungs.map((path, index) => `rung: ${path} -> CR${index + 1}`).join("\n"), convention);
        expect([...faults(ladder), ...ladder.sheets.flatMap(badLinks)]).toEqual([]);
        // A contact is left without a reference only if it is linked with all of its sisters.
        const referring = new Set(references(ladder).map(({ from }) => from));
        for (const { kind, contacts } of ladder.machine.devices.values()) {
          if (kind === "relay" || contacts.length < 2) continue;
          const bare = contacts.filter(({ id }) => !referring.has(id));
          expect([0, contacts.length]).toContain(bare.length);
        }
      }),
      { numRuns: 60 },
    );
  });
});

test("a selector's positions are not moved for a link: the two contacts refer to each other", () => {
  const ladder = laid(`rung "A": SS2.hand -> CR1\nrung "B": SS2.auto -> CR2`, "north-american");
  expect([links(ladder).length, references(ladder).length]).toEqual([0, 2]);
  const two = laid(`rung "A": SS1.off -> CR1\nrung "B": SS1.on -> CR2`, "north-american");
  expect([links(two).length, references(two).length]).toEqual([1, 0]);
});
