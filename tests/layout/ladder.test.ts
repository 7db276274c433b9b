import fc from "fast-check";
import { describe, expect, test } from "vitest";
import type { CircuitSheet } from "../../src/layout/placement.js";
import { bends } from "../support/facts.js";
import { faults, ladderOf } from "../support/ladder.js";

const devices = `
push-button PB1 "Start"
push-button PB2 "Stop"
relay CR1 "Cycle running"
relay CR2 "Stamp done"
timer TR1 "Stamp dwell" on-delay 1.5 s
pilot-light LT1 "Running" green
limit-switch LS1 "Clamp open"   on CLAMP at retracted
limit-switch LS2 "Clamp closed" on CLAMP at extended
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

const drawn = (rungs: string, drawing = "paper A3") =>
  ladderOf(`drawing "Test" { ${drawing} }\nsupply CTRL 24 V DC { rails L+ M }\n${devices}\nladder "Control" supply CTRL {\n${rungs}\n}\n`);

const at = (sheet: CircuitSheet, part: string) => {
  const found = sheet.symbols.find((symbol) => symbol.part.startsWith(part));
  if (!found) throw new Error(`${part} is not on sheet ${sheet.number}`);
  return found.at;
};
const lineNumbers = (sheet: CircuitSheet) => sheet.texts.filter(({ role }) => role === "line-number").map(({ text }) => text);
const loadsOf = (sheet: CircuitSheet) =>
  sheet.symbols.filter(({ part }) => /^(CR|TR|LT|SOL|MS)\d+:(A1|X1)/.test(part) || /^(SOL|LT)/.test(part));

describe("a ladder sheet", () => {
  test("holds a stop, start and holding contact as the trade draws them", () => {
    const laid = drawn(`rung "Cycle running": /PB2 (PB1 | CR1) -> CR1`);
    const [sheet] = laid.sheets as [CircuitSheet];
    expect(faults(laid)).toEqual([]);
    expect(lineNumbers(sheet)).toEqual(["101", "102"]);
    // Stop, start and coil on one straight line; the holding contact below the start button.
    expect(at(sheet, "PB2").y).toBe(at(sheet, "PB1").y);
    expect(at(sheet, "CR1:13").x).toBe(at(sheet, "PB1").x);
    expect(at(sheet, "CR1:13").y).toBeGreaterThan(at(sheet, "PB1").y);
    // One branch, whose wire turns down and up again.
    expect(bends(sheet)).toBe(2);
  });

  test("names every wire once in its rung and the rails at their heads", () => {
    // BCcampus, Basic Motor Control, "Numbering System": the number rises across each device; here the rails keep their names.
    const [sheet] = drawn("rung: /PB2 (PB1 | CR1) -> CR1").sheets as [CircuitSheet];
    const numbers = sheet.texts.filter(({ role }) => role === "wire-number").map(({ text }) => text);
    expect(new Set(numbers).size).toBe(2);
    expect(numbers).toHaveLength(2);
    expect(sheet.texts.filter(({ role }) => role === "rail").map(({ text }) => text)).toEqual(["L+", "M"]);
  });

  test("joins a point of neighbouring rungs with one upright", () => {
    const laid = drawn(`
      rung: /PB2 (PB1 | CR1 (/CR2 | /LS1)) @run -> (CR1 | LT1)
      rung: @run (TR1 | CR2) -> CR2
      rung: @run LS2 /CR2 -> SOL1
      rung: @run LS2 -> TR1`);
    expect(faults(laid)).toEqual([]);
    const [sheet] = laid.sheets as [CircuitSheet];
    const left = Math.min(...sheet.wires.filter(({ role }) => role === "rail").map(({ points }) => points[0]?.x as number));
    // Only the first rung begins on the live rail.
    const fromRail = sheet.wires.filter(({ role, points }) => role === "wire" && points.some(({ x }) => Math.abs(x - left) < 0.01));
    expect(fromRail).toHaveLength(1);
    expect(sheet.strokes.filter(({ role }) => role === "continuation")).toEqual([]);
  });

  test("refers where a rung in between keeps two rungs with one point apart", () => {
    const laid = drawn(`
      rung: /PB2 PB1 @run -> CR1
      rung: LS1 /LS2 CR1 -> CR2
      rung: @run LS2 -> SOL1`);
    expect(faults(laid)).toEqual([]);
    const [sheet] = laid.sheets as [CircuitSheet];
    const references = sheet.texts.flatMap(({ text }) => (typeof text !== "string" && text.to === "point" ? [text] : []));
    expect(references.map(({ point }) => point)).toEqual(["run", "run"]);
    for (const { from } of references) expect(laid.places.get(from)?.line).toBeDefined();
  });

  test("refers at both ends where a point goes on on another sheet", () => {
    const laid = drawn(`
      rung: /PB2 PB1 @run -> CR1
      sheet "Outputs"
      rung: @run LS2 -> SOL1`);
    expect(faults(laid)).toEqual([]);
    expect(laid.sheets.map(({ title }) => title)).toEqual(["Control", "Outputs"]);
    for (const sheet of laid.sheets) expect(sheet.strokes.filter(({ role }) => role === "continuation")).toHaveLength(1);
    expect(laid.sheets.map(lineNumbers)).toEqual([["101"], ["201"]]);
  });

  test("draws a bridge between two uprights as a line of its own", () => {
    const laid = drawn(`
      rung: PB1 @a /PB2 @b -> CR1
      rung: @a LS1 @b
      rung: @b LS2 -> CR2`);
    expect(faults(laid)).toEqual([]);
    const [sheet] = laid.sheets as [CircuitSheet];
    expect(sheet.strokes.filter(({ role }) => role === "continuation")).toEqual([]);
    expect(at(sheet, "LS1").x).toBe(at(sheet, "PB2").x);
  });

  test("keeps a bridge in a network of two branches right", () => {
    expect(
      faults(
        drawn(`
      rung: (PB1 @a LS1 | PB2 @b LS2) -> CR1
      rung: @a CR2 @b
      rung: CR1 -> CR2`),
        1,
      ),
    ).toEqual([]);
  });

  test("stacks loads in one column and lets a branch carry its own arrow", () => {
    const laid = drawn("rung: /PB2 PB1 -> (CR1 | LT1 | LS2 -> SOL1)\nrung: CR1 -> CR2");
    expect(faults(laid)).toEqual([]);
    const [sheet] = laid.sheets as [CircuitSheet];
    const xs = loadsOf(sheet).map(({ at }) => at.x);
    expect(xs).toHaveLength(4);
    expect(new Set(xs).size).toBe(1);
  });

  test("puts contacts of the return side between load and rail", () => {
    const laid = drawn("rung: CR1 LS1 -> MS1 /OL1\nrung: PB1 -> CR1");
    expect(faults(laid)).toEqual([]);
    const [sheet] = laid.sheets as [CircuitSheet];
    expect(at(sheet, "OL1").x).toBeGreaterThan(at(sheet, "MS1").x);
    expect(at(sheet, "CR1:A1").x).toBe(at(sheet, "MS1").x);
  });

  test("draws the four states of limit switches", () => {
    // The clamp starts retracted, so LS1 is held and LS2 is free. NEMA practice, from memory: a held switch keeps its form in name and terminals.
    const laid = drawn("rung: LS1 /LS1 LS2 /LS2 -> CR1");
    expect(faults(laid)).toEqual([]);
    const states = (laid.sheets[0] as CircuitSheet).symbols
      .filter(({ device }) => device?.startsWith("LS"))
      .map(({ symbol, part }) => [symbol.name, part]);
    expect(states).toEqual([
      ["north-american/limit-no-held-closed", "LS1:13-14"],
      ["north-american/limit-nc-held-open", "LS1:21-22"],
      ["north-american/limit-no", "LS2:13-14"],
      ["north-american/limit-nc", "LS2:21-22"],
    ]);
  });

  test("breaks between rungs and says where the rails go on", () => {
    const laid = drawn(Array.from({ length: 30 }, (_, i) => `rung: /PB2 (PB1 | LS1) -> ${i === 0 ? "CR1" : "LT1"}`).join("\n"));
    expect(laid.sheets.length).toBeGreaterThan(2);
    expect(faults(laid)).toEqual([]);
    for (const [index, sheet] of laid.sheets.entries()) {
      const numbers = lineNumbers(sheet);
      expect(numbers[0]).toBe(String((index + 1) * 100 + 1));
      expect(numbers.length % 2).toBe(0);
    }
    const notes = laid.sheets.map((sheet) => sheet.texts.filter(({ role }) => role === "note").map(({ text }) => text));
    expect(notes[0]).toContain("to sheet 2, line 201");
    expect(notes[1]?.some((note) => String(note).startsWith("from sheet 1, line 1"))).toBe(true);
  });

  test("numbers lines on through the sheets if asked", () => {
    const laid = drawn(`rung: PB1 -> CR1\nsheet "Two"\nrung: PB2 -> CR2`, "line-numbers running");
    expect(laid.sheets.map(lineNumbers)).toEqual([["1"], ["2"]]);
  });

  test("stands in two columns on a wide sheet, filled from the left, and says between them where the rails go on", () => {
    const laid = drawn(Array.from({ length: 30 }, (_, i) => `rung: /PB2 (PB1 | LS1) -> ${i === 0 ? "CR1" : "LT1"}`).join("\n"), "paper A1");
    expect(faults(laid)).toEqual([]);
    const [sheet] = laid.sheets as [CircuitSheet];
    const numbers = sheet.texts.filter(({ role }) => role === "line-number");
    expect(numbers.map(({ text }) => Number(text))).toEqual(numbers.map((_, index) => 101 + index));
    expect(new Set(numbers.map(({ at }) => at.x)).size).toBe(2);
    const right = numbers.find(({ at }) => at.x > (numbers[0]?.at.x as number)) as (typeof numbers)[number];
    const notes = sheet.texts.filter(({ role }) => role === "note").map(({ text }) => text);
    expect(notes.filter((note) => note === `to line ${right.text}`)).toHaveLength(2);
    expect(notes.filter((note) => note === `from line ${Number(right.text) - 1}`)).toHaveLength(2);
  });

  test.each(["A4", "A3", "A2", "A1", "A0", "ANSI-A", "ANSI-B", "ANSI-C", "ANSI-D", "ANSI-E"])("keeps within %s", (paper) => {
    expect(
      faults(
        drawn(
          `
      rung "Cycle running": /PB2 (PB1 | CR1 (/CR2 | /LS1)) @run -> (CR1 | LT1)
      rung "Stamp done": @run (TR1 | CR2) -> CR2
      rung "Stamp": @run LS2 /CR2 -> SOL1
      rung "Dwell": @run LS2 -> TR1`,
          `paper ${paper}`,
        ),
      ),
    ).toEqual([]);
  });
});

// ---------------------------------------------------------------- random rungs

const names = ["CR1", "PRS1", "SS1.auto", "PS1", "LS-CLAMP-OPEN-12", "PB1", "1CR", "LS2A", "TR1", "EMERGENCY_STOP_PANEL"];
const declared = `relay CR1 "Running"\nlimit-switch LS-CLAMP-OPEN-12 "Clamp open over the whole of its way"\npush-button PB1 "Start"\nrelay 1CR\nlimit-switch LS2A\ntimer TR1 off-delay 2 s\nemergency-stop EMERGENCY_STOP_PANEL "Stop everything"
proximity-switch PRS1 "Part here"
selector-switch SS1 "Mode" { positions hand off auto }
pressure-switch PS1 "Air on" rising 5 bar`;

const contact = fc
  .tuple(fc.boolean(), fc.constantFrom(...names))
  .map(([closed, name]) => `${closed && name !== "EMERGENCY_STOP_PANEL" ? "/" : ""}${name}`);
const path = fc.letrec<{ series: string; item: string }>((tie) => ({
  series: fc.array(tie("item"), { minLength: 1, maxLength: 3 }).map((items) => items.join(" ")),
  item: fc.oneof(
    { depthSize: "small", withCrossShrink: true },
    contact,
    fc.array(tie("series"), { minLength: 2, maxLength: 3 }).map((branches) => `(${branches.join(" | ")})`),
  ),
})).series;

const columnsOf = (text: string): number => {
  // How many contacts stand one behind the other in the longest way through.
  const read = (from: number): { width: number; next: number } => {
    let width = 0;
    let widest = 0;
    let i = from;
    while (i < text.length && text[i] !== ")") {
      if (text[i] === "(") {
        const inner = read(i + 1);
        width += inner.width;
        i = inner.next + 1;
      } else if (text[i] === "|") {
        widest = Math.max(widest, width);
        width = 0;
        i++;
      } else if (/\s/.test(text[i] as string)) i++;
      else {
        width++;
        while (i < text.length && !/[\s()|]/.test(text[i] as string)) i++;
      }
    }
    return { width: Math.max(widest, width), next: i };
  };
  return read(0).width;
};

const conventions = ["north-american", "international"] as const;

describe.each(conventions)("random rungs, %s", (convention) => {
  const rungs = fc.array(
    path.filter((text) => columnsOf(text) <= 5),
    { minLength: 1, maxLength: 12 },
  );

  test("overlap nothing, cross nothing, leave no end open and join what the machine joins", () => {
    fc.assert(
      fc.property(rungs, (paths) => {
        const lamps = paths.map((_, i) => `pilot-light LT${i} "Lamp number ${i}" green`).join("\n");
        const text = paths.map((p, i) => `rung "Rung ${i}": ${p} -> LT${i}`).join("\n");
        const laid = ladderOf(
          `supply CTRL 24 V DC { rails L+ M }\n${declared}\n${lamps}\nladder "Control" supply CTRL {\n${text}\n}\n`,
          convention,
        );
        expect(faults(laid)).toEqual([]);
      }),
      { numRuns: 40, seed: 1 },
    );
  });

  test("keep their points joined whatever stands between them", () => {
    const pointed = fc.record({
      start: fc.constantFrom("", "@p0 ", "@p1 ", "@p2 "),
      head: path.filter((text) => columnsOf(text) <= 2),
      point: fc.constantFrom("", "@p0", "@p1", "@p2"),
      tail: path.filter((text) => columnsOf(text) <= 2),
      end: fc.constantFrom("load", "load", "load", "@p0", "@p1"),
    });
    fc.assert(
      fc.property(fc.array(pointed, { minLength: 2, maxLength: 10 }), (list) => {
        const lamps = list.map((_, i) => `pilot-light LT${i} red`).join("\n");
        const text = list
          .map(({ start, head, point, tail, end }, i) => `rung: ${start}${head} ${point} ${tail} ${end === "load" ? `-> LT${i}` : end}`)
          .join("\n");
        const laid = ladderOf(
          `supply CTRL 24 V DC { rails L+ M }\n${declared}\n${lamps}\nladder "Control" supply CTRL {\n${text}\n}\n`,
          convention,
        );
        const bridges = list.filter(({ start, end }) => start !== "" && end !== "load").length;
        expect(faults(laid, bridges)).toEqual([]);
      }),
      { numRuns: 60, seed: 2 },
    );
  });
});

describe.each(conventions)("rungs larger than a sheet, %s", (convention) => {
  const contacts = (count: number) => Array.from({ length: count }, (_, i) => `LS${i + 1}`);
  const large = (rung: string, paper: string) =>
    ladderOf(
      `drawing "Large" { paper ${paper} }
      supply CTRL 24 V DC { rails L+ M  fuse FU1 4 A }
      relay CR1 "Everything in place"
      pilot-light LT1 green
      pilot-light LT2 red
      ${contacts(40)
        .map((name) => `limit-switch ${name} "Gate closed"`)
        .join("\n")}
      ladder "Control" supply CTRL {
        ${rung}
        rung: LS1 -> LT1
      }`,
      convention,
    );

  test.each(["A4", "A3", "ANSI-A"])("go on with letters when they are too long for %s", (paper) => {
    const laid = large(`rung "Chain": ${contacts(23).join(" ")} -> CR1`, paper);
    expect(faults(laid)).toEqual([]);
    const names = laid.sheets
      .flatMap((sheet) => sheet.texts)
      .flatMap(({ text }) => (typeof text !== "string" && text.to === "point" ? [text.point] : []));
    // Every letter stands at two ends.
    expect(names.length).toBeGreaterThan(0);
    for (const name of names) expect(names.filter((other) => other === name)).toHaveLength(2);
  });

  test.each(["A4", "A3"])("put long branches on lines of their own on %s", (paper) => {
    expect(
      faults(
        large(
          `rung "Bracket": LS30 (${contacts(15).join(" ")} | LS31 (LS32 | ${contacts(12).join(" ")})) LS33 -> (CR1 | LS34 ${contacts(14).join(" ")} -> LT2)`,
          paper,
        ),
      ),
    ).toEqual([]);
  });

  test.each(["A4", "A3", "ANSI-A"])(
    "are drawn whole or cut without a fault on %s: many in series, beside each other, and as loads",
    (paper) => {
      const lamps = Array.from({ length: 12 }, (_, i) => `LP${i}`);
      const laid = ladderOf(
        `drawing "Large" { paper ${paper} }
      ${contacts(20)
        .map((name) => `limit-switch ${name} "Gate closed"`)
        .join("\n")}
      ${lamps.map((lamp) => `pilot-light ${lamp} "Gate" red`).join("\n")}
      relay CR1
      relay CR2
      ladder {
        rung "Series": ${contacts(16).join(" ")} -> CR1
        rung "Beside": LS20 (${contacts(20).join(" | ")}) -> CR2
        rung "Loads": LS20 -> (${lamps.join(" | ")})
      }`,
        convention,
      );
      expect(faults(laid)).toEqual([]);
    },
  );

  test("put branches that have no room below the others on the next sheet", () => {
    const laid = large(`rung "Any of many": LS40 (${contacts(38).join(" | ")}) -> CR1`, "A3");
    expect(faults(laid)).toEqual([]);
    expect(laid.sheets.length).toBeGreaterThan(2);
  });
});

test("time grows no faster than the ladder", () => {
  const time = (count: number) => {
    const lamps = Array.from({ length: count }, (_, i) => `pilot-light LT${i} red`).join("\n");
    const rungs = Array.from({ length: count }, (_, i) =>
      i % 4 === 0 ? `rung: PB1 (CR1 | LS2A) @p${i} -> LT${i}` : `rung: @p${i - (i % 4)} CR1 -> LT${i}`,
    ).join("\n");
    const text = `supply CTRL 24 V DC { rails L+ M }\n${declared}\n${lamps}\nladder "Control" supply CTRL {\n${rungs}\n}\n`;
    const laid = ladderOf(text);
    const again = () => {
      const begun = performance.now();
      laid.again();
      return performance.now() - begun;
    };
    return Math.min(again(), again());
  };
  time(50);
  const [few, many] = [time(150), time(1200)];
  // Eight times the rungs; twice that in time leaves room for noise, not for squares.
  expect(many / few).toBeLessThan(20);
}, 60_000);
