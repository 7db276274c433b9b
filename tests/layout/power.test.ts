import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { netlistOf, portsOf } from "../support/facts.js";
import { mainsOf } from "../support/power.js";
import { powerFaults, powerOf, usesIn } from "../support/power-layout.js";
import { readText } from "../support/sources.js";

const conventions = ["north-american", "international"] as const;

/** Devices for any number of branches. */
function declared(count: number): string {
  const of = (i: number) =>
    [
      `fuse F${i} 16 A`,
      `circuit-breaker Q${i} 2.5 A`,
      `contactor KA${i}`,
      `contactor KB${i}`,
      `contactor KC${i}`,
      `overload OL${i} 5 A`,
      `motor M${i} "Motor ${i}" 4 kW 400 V 3 phase 1430 rpm`,
      `heater HT${i} 2 kW`,
      `pilot-light LT${i} white`,
      `transformer T${i} primary 400 V secondary 230 V 400 VA`,
      `rectifier V${i} secondary 24 V DC 10 A`,
      `power-supply G${i} primary 230 V secondary 24 V DC 10 A`,
    ].join("\n");
  return [
    "disconnect QS1 63 A",
    "terminal-strip X1",
    "supply CTRL 24 V DC { rails L+ M }",
    ...Array.from({ length: count }, (_, i) => of(i + 1)),
  ].join("\n");
}

const power = (lines: readonly string[], count: number, feed = "L1 L2 L3 N PE: QS1", paper = "A3") =>
  `drawing "D" {\n paper ${paper}\n}\n${declared(count)}\npower "Main" 400 V AC 3 phase 50 Hz {\n feed ${feed}\n${lines.join("\n")}\n}\n`;

/** Branches of every form; the number makes their devices their own. */
const forms: ((i: number) => string[])[] = [
  (i) => [`branch "Pump ${i}": F${i} KA${i} OL${i} -> M${i}`],
  (i) => [`branch "Hoist": Q${i} (KA${i} | KB${i} crossed) OL${i} -> M${i}`],
  (i) => [`branch "Fixed": F${i} KA${i} crossed -> M${i}`],
  (i) => [`branch "Way": F${i} (KA${i} crossed | KB${i} | KC${i}) -> M${i}`],
  (i) => [
    `branch "Mill": F${i} @m${i} KA${i} OL${i} -> M${i}`,
    `branch "Delta": @m${i} KB${i} -> M${i}.2`,
    `branch "Star": star KC${i} -> M${i}.2`,
  ],
  (i) => [`branch "Slow": F${i} KA${i} -> M${i}`, `branch "Fast": Q${i} KB${i} -> M${i}.2`],
  (i) => [`branch "Heating": F${i} KA${i} -> HT${i}`],
  (i) => [`branch "Heating" L1 N: F${i} KA${i} -> HT${i}`],
  (i) => [`branch "Lamp" L2 N: F${i} -> LT${i}`],
  (i) => [`branch "Transformer" L1 L3: F${i} T${i} Q${i} G${i} @d${i}`, `branch "Lamp" : @d${i} KB${i} -> LT${i}`],
  (i) => [`branch "Bypass and reverse": F${i} (KA${i} | KB${i}) OL${i} (KC${i} | Q${i}) -> M${i}`],
  (i) => [`branch "Three phases": F${i} T${i} Q${i} G${i} @t${i}`, `branch "Lamp": @t${i} KB${i} -> LT${i}`],
  (i) => [`branch "Rectifier": F${i} V${i} KA${i} @v${i}`, `branch "Heating": @v${i} -> HT${i}`],
  (i) => [`branch "Terminals": F${i} KA${i} X1:${3 * i}-${3 * i + 2} -> M${i}`],
];

describe.each(conventions)("%s", (convention) => {
  test("the power circuit of the bark mill", () => {
    expect(powerFaults(powerOf(readText("samples/bark-mill.sprung"), { convention }))).toEqual([]);
  });

  test.each(forms.map((form, index) => [form(1)[0] as string, index]))("%s", (_line, index) => {
    const form = forms[index as number] as (typeof forms)[number];
    expect(powerFaults(powerOf(power(form(1), 1), { convention }))).toEqual([]);
  });

  test("any branches, in any order", () => {
    const branches = fc.array(fc.constantFrom(...forms), { minLength: 1, maxLength: 14 });
    const feeds = fc.constantFrom("L1 L2 L3 N PE: QS1", "L1 L2 L3 N PE", "L1 L2 L3 N: QS1");
    fc.assert(
      fc.property(branches, feeds, fc.constantFrom("A3", "A2", "ANSI-B"), (picked, feed, paper) => {
        const lines = picked.flatMap((form, index) => form(index + 1));
        expect(powerFaults(powerOf(power(lines, picked.length, feed, paper), { convention }))).toEqual([]);
      }),
      { numRuns: 40, seed: 7 },
    );
  });

  test("a point with more branches than a sheet takes goes on by references", () => {
    const lines = [
      'branch "Fans": F1 KA1 @fans',
      ...Array.from({ length: 14 }, (_, i) => `branch "Fan ${i + 2}": @fans OL${i + 2} -> M${i + 2}`),
    ];
    const laid = powerOf(power(lines, 15), { convention });
    expect(laid.laid.sheets.length).toBeGreaterThan(1);
    expect(powerFaults(laid)).toEqual([]);
  });

  test("three hundred branches", () => {
    const lines = Array.from({ length: 300 }, (_, i) => (forms[i % 3] as (typeof forms)[number])(i + 1)).flat();
    const laid = powerOf(power(lines, 300), { convention });
    expect(laid.laid.diagnostics).toEqual([]);
    expect(new Set(laid.laid.sheets.flatMap(({ symbols }) => symbols.map(({ part }) => part))).size).toBeGreaterThan(1200);
  });

  test("a long branch is drawn closer, one too long for the paper is told", () => {
    const chain = (count: number) => [`branch "Long": ${Array.from({ length: count }, (_, i) => `F${i + 1}`).join(" ")} -> M1`];
    const long = convention === "international" ? 6 : 11;
    expect(powerFaults(powerOf(power(chain(long), long), { convention }))).toEqual([]);
    const { laid } = powerOf(power(chain(60), 60), { convention });
    expect(laid.diagnostics.map(({ code }) => code)).toEqual(["branch-too-long"]);
  });

  test("long names and texts", () => {
    const text = power(['branch "Feed conveyor of the second debarking line, left side, towards the chipper": F1 KA1 OL1 -> M1'], 1)
      .replaceAll("KA1", "CONTACTOR-OF-THE-FEED-CONVEYOR-2")
      .replaceAll("M1", "MOTOR_OF_THE_CONVEYOR")
      .replaceAll("F1", "MAIN-FUSES-OF-THE-SECOND-LINE");
    expect(powerFaults(powerOf(text, { convention }))).toEqual([]);
  });

  test("branches are numbered lane by lane, and every element stands on the line of its lane", () => {
    const { laid, circuit } = powerOf(power([...(forms[1]?.(1) ?? []), ...(forms[0]?.(2) ?? [])], 2), { convention });
    const places = new Map(laid.places);
    const lines = usesIn(circuit).map(({ device, id }) => `${device} ${places.get(id)?.line}`);
    const [a, b, c] = convention === "international" ? [1, 2, 3] : [101, 102, 103];
    expect(lines).toEqual([
      `QS1 ${a}`,
      `Q1 ${a}`,
      `KA1 ${a}`,
      `KB1 ${b}`,
      `OL1 ${a}`,
      `M1 ${a}`,
      `F2 ${c}`,
      `KA2 ${c}`,
      `OL2 ${c}`,
      `M2 ${c}`,
    ]);
    expect(laid.nextLine).toBe(4);
  });

  test("motors stand in line, contactors stand in line", () => {
    const { laid } = powerOf(power([...(forms[0]?.(1) ?? []), ...(forms[4]?.(2) ?? []), ...(forms[1]?.(3) ?? [])], 3), { convention });
    const along = convention === "international" ? "y" : "x";
    const row = (letter: string) =>
      laid.sheets.map(
        (sheet) =>
          new Set(
            sheet.symbols.flatMap((placed) =>
              placed.device?.startsWith(letter)
                ? [
                    portsOf(placed)
                      .find(({ name }) => name === "in-1")
                      ?.at[along].toFixed(2),
                  ]
                : [],
            ),
          ).size,
      );
    expect(row("M").every((count) => count <= 1)).toBe(true);
    expect(row("K").every((count) => count <= 1)).toBe(true);
  });
});

describe("what the wires say", () => {
  // Read back from the drawn lines alone: the reversing contactor brings L1 to the third lead and L3 to the first.
  test.each(conventions)("the phases of a reversing pair change places, %s", (convention) => {
    const { laid, circuit } = powerOf(power(forms[1]?.(1) ?? [], 1), { convention });
    const [, ahead, back] = mainsOf(circuit.branches[0]?.path ?? []);
    const groups = laid.sheets.flatMap((sheet) => netlistOf(sheet).map(({ ports }) => ports));
    const together = (one: string, other: string) => groups.some((ports) => ports.includes(one) && ports.includes(other));
    for (const [from, to] of [
      ["out-1", "out-3"],
      ["out-2", "out-2"],
      ["out-3", "out-1"],
    ])
      expect(together(`${ahead?.id}.${from}`, `${back?.id}.${to}`), `${from} ${to}`).toBe(true);
    for (const pin of ["in-1", "in-2", "in-3"]) expect(together(`${ahead?.id}.${pin}`, `${back?.id}.${pin}`), pin).toBe(true);
  });

  test.each(conventions)("delta joins each winding's end to the next phase, star joins the ends, %s", (convention) => {
    const { laid } = powerOf(power(forms[4]?.(1) ?? [], 1), { convention });
    const groups = laid.sheets.flatMap((sheet) => netlistOf(sheet).map(({ ports }) => ports.join(" ")));
    // U1 with the first pole of delta before it, W2 behind it.
    for (const pole of [1, 2, 3]) {
      expect(groups.some((ports) => ports.includes(`KA1:main.in-${pole}`) && ports.includes(`KB1:main.in-${pole}`))).toBe(true);
      expect(groups.some((ports) => ["KB1:main", "KC1:main", "M1:main"].every((part) => ports.includes(`${part}.out-${pole}`)))).toBe(true);
    }
    expect(groups.some((ports) => [1, 2, 3].every((pole) => ports.includes(`KC1:main.in-${pole}`)))).toBe(true);
  });
});
