import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { conduct, wiringOf } from "../../src/behaviour/conduction.js";
import type { ContactUse, LoadUse } from "../../src/machine/model.js";
import { usesOf } from "../../src/machine/walk.js";
import { diagnosticsOf } from "../support/announced.js";
import { drawnNetwork } from "../support/drawn-network.js";
import { type LaidLadder, ladderOf } from "../support/ladder.js";
import { solve } from "../support/spice.js";

const names = ["PB1", "PB2", "LS1", "LS2", "LS3", "FS1"];
const declared = `
push-button PB1
push-button PB2
limit-switch LS1
limit-switch LS2
limit-switch LS3
foot-switch FS1
terminal-strip X1
fuse FU2 2 A
fuse FU3 2 A
${Array.from({ length: 24 }, (_, i) => `diode D${i}`).join("\n")}
${Array.from({ length: 4 }, (_, i) => `pilot-light LT${i} red`).join("\n")}`;

const drawingOf = (rungs: readonly string[]) =>
  `drawing "Network" { paper A2 }\nsupply CTRL 24 V DC { rails L+ M }\n${declared}\nladder "Control" supply CTRL {\n${rungs.map((rung) => `rung: ${rung}`).join("\n")}\n}\n`;

/** Which loads are energized while the named devices are operated, and whether the rails are shorted, by our own conduction. */
function conducted({ machine, circuit }: LaidLadder, operated: readonly string[]) {
  const uses = circuit.rungs.flatMap(({ path }) => [...usesOf(path)]);
  const isClosed = ({ device, form }: ContactUse) => operated.includes(device) === (form === "NO");
  const { energized, shorted } = conduct(wiringOf(machine), isClosed);
  const loads = uses.filter((use): use is LoadUse => use.kind === "load");
  return {
    on: loads
      .filter(({ id }) => energized.has(id))
      .map(({ device }) => device)
      .sort(),
    shorted: shorted.length > 0,
  };
}

/** The same, read from the drawn sheets and solved by ngspice: closed contacts of 1 mΩ, open ones of 1 GΩ, loads of 1 kΩ each. */
async function solved({ sheets, circuit }: LaidLadder, operated: readonly string[]) {
  const uses = new Map(circuit.rungs.flatMap(({ path }) => [...usesOf(path)].map((use) => [use.id, use])));
  const { parts, live, back } = drawnNetwork(sheets, circuit.supply.rails);
  const name = (node: number) => (node === back ? "0" : `n${node}`);
  const elements = [`V1 ${name(live)} 0 dc 24`, ".model ideal d(is=1e-12 n=0.05 rs=0.001)"];
  const nodes = new Set(parts.flatMap(({ ends }) => ends).filter((node) => node !== back));
  for (const node of nodes) elements.push(`Rleak${node} ${name(node)} 0 1e9`);
  const loads: { device: string; ends: [number, number] }[] = [];
  parts.forEach(({ part, symbol, ends: [one, other] }, index) => {
    const use = uses.get(part);
    if (!use) throw new Error(`${part} is drawn but not in the ladder`);
    if (use.kind === "load") loads.push({ device: use.device, ends: [one, other] });
    const [a, b] = [name(one), name(other)];
    if (a === b) return;
    if (use.kind === "through" && use.device.startsWith("D")) {
      // The symbol is drawn with its anode first, or turned.
      elements.push(symbol.endsWith("diode-turned") ? `D${index} ${b} ${a} ideal` : `D${index} ${a} ${b} ideal`);
      return;
    }
    const closed = use.kind === "through" || (use.kind === "contact" && operated.includes(use.device) === (use.form === "NO"));
    elements.push(`R${index} ${a} ${b} ${use.kind === "load" ? 1000 : closed ? 0.001 : 1e9}`);
  });
  const { volts, amperes } = await solve(elements);
  const across = ([one, other]: [number, number]) => Math.abs((volts.get(name(one)) ?? 0) - (volts.get(name(other)) ?? 0));
  // Four loads of one size: in series with others none gets more than three quarters of the voltage.
  return {
    on: loads
      .filter(({ ends }) => across(ends) >= 0.8 * 24)
      .map(({ device }) => device)
      .sort(),
    shorted: amperes > 1,
  };
}

// ---------------------------------------------------------------- random networks

const contact = fc.tuple(fc.boolean(), fc.constantFrom(...names)).map(([closed, name]) => `${closed ? "/" : ""}${name}`);
const element = fc.oneof({ weight: 8, arbitrary: contact }, { weight: 1, arbitrary: fc.constantFrom("X1:?", "D?", "D?:K-A") });
const path = fc.letrec<{ series: string; item: string }>((tie) => ({
  series: fc.array(tie("item"), { minLength: 1, maxLength: 3 }).map((items) => items.join(" ")),
  item: fc.oneof(
    { maxDepth: 2, withCrossShrink: true },
    element,
    fc.array(tie("series"), { minLength: 2, maxLength: 3 }).map((branches) => `(${branches.join(" | ")})`),
  ),
})).series;
const point = fc.constantFrom("", "", "@p0", "@p1", "@p2");
const driven = fc.constantFrom("-> L", "-> L", "-> (L | L)", "-> L L", "-> (L | D?)", "-> (L | PB1 -> L)", "-> L /LS3", "-> L @back", "");
/** Between two points stands at least one element: a wire has one name. */
const rung = fc
  .tuple(point, path, fc.option(fc.tuple(point, path), { freq: 2 }), fc.oneof(driven, driven, fc.constantFrom("@p0", "@p1", "@p2")))
  .map(([start, head, more, end]) => [start, head, ...(more ?? []), end].filter((words) => words !== "").join(" "));

/** Rungs with their own loads, diodes and terminals, four loads at most. */
const network = fc.array(rung, { minLength: 1, maxLength: 6 }).map((rungs) => {
  let [loads, diodes, terminals] = [0, 0, 0];
  const named = rungs.flatMap((words) => {
    if (loads + (words.match(/\bL\b/g)?.length ?? 0) > 4) return [];
    return [
      words
        .replace(/\bL\b/g, () => `LT${loads++}`)
        .replace(/D\?/g, () => `D${diodes++ % 24}`)
        .replace(/X1:\?/g, () => `X1:${++terminals}`),
    ];
  });
  // A load that ends at a point has its way to the return rail from there.
  return named.some((words) => words.includes("@back")) ? [...named, "@back /LS3"] : named;
});

/** Networks that chance may leave out, each with three sets of operated devices. */
const examples: [string[], string[][]][] = [
  // A short circuit, through a diode in its direction; against it there is none.
  [
    ["PB1 LS1 D0", "PB2 -> LT0"],
    [["PB1", "LS1", "PB2"], ["PB2"], ["PB1"]],
  ],
  [
    ["PB1 LS1 D0:K-A", "PB2 -> LT0"],
    [["PB1", "LS1", "PB2"], ["PB2"], ["PB1"]],
  ],
  // Two loads share the voltage.
  [
    ["PB1 -> LT0 LT1", "PB2 -> LT2"],
    [["PB1"], ["PB1", "PB2"], []],
  ],
  // A bridge between two branches, passed both ways.
  [
    ["PB1 @a LS1 -> LT0", "PB2 @b LS2 -> LT1", "@a LS3 @b"],
    [
      ["PB1", "LS3", "LS2"],
      ["PB2", "LS3", "LS1"],
      ["PB1", "LS2"],
    ],
  ],
  // A diode lets one rung feed the other, and not the other way.
  [
    ["PB1 @a -> LT0", "PB2 @b -> LT1", "@a D0 @b"],
    [["PB1"], ["PB2"], []],
  ],
  // Coils quenched as the trade does it.
  [
    ["PB1 -> (LT0 | D0)", "PB2 -> LT1"],
    [["PB1"], ["PB2"], ["PB1", "PB2"]],
  ],
];

/** What has an error is not drawn; a short circuit is let pass here, for ngspice to find it too. */
const isDrawn = (text: string) => diagnosticsOf(text).every(({ severity, code }) => severity !== "error" || code === "short-across-rails");

describe.each(["north-american", "international"] as const)("what a %s sheet shows is what conducts", (convention) => {
  test("random networks light the same lamps as ngspice finds, drawn sheet against machine", async () => {
    let [lit, dark, shorts] = [0, 0, 0];
    await fc.assert(
      fc.asyncProperty(network, fc.array(fc.subarray(names), { minLength: 3, maxLength: 3 }), async (rungs, states) => {
        fc.pre(rungs.length > 0 && isDrawn(drawingOf(rungs)));
        const laid = ladderOf(drawingOf(rungs), convention);
        for (const operated of states) {
          const ours = conducted(laid, operated);
          const theirs = await solved(laid, operated);
          expect(ours.shorted, `${rungs.join("\n")}\noperated: ${operated}`).toBe(theirs.shorted);
          if (ours.shorted) shorts++;
          else {
            expect(ours.on, `${rungs.join("\n")}\noperated: ${operated}`).toEqual(theirs.on);
            lit += ours.on.length;
            dark += theirs.on.length === 0 ? 1 : 0;
          }
        }
      }),
      { numRuns: 25, seed: 1, endOnFailure: true, examples },
    );
    // The networks were worth looking at: some lamps were lit, some states lit none, some shorted the rails.
    expect(lit).toBeGreaterThan(8);
    expect(dark).toBeGreaterThan(2);
    expect(shorts).toBeGreaterThan(0);
  }, 180_000);
});

describe("conduction", () => {
  const devices = `push-button PB1\npush-button PB2\nlimit-switch LS1\nresistor R1\nresistor R2\ndiode D0\npilot-light LT0\npilot-light LT1`;
  const lit = (rungs: string, operated: string[], supply = "24 V DC { rails L+ M }") => {
    const laid = ladderOf(`supply CTRL ${supply}\n${devices}\nladder "Control" supply CTRL {\n${rungs}\n}\n`);
    return conducted(laid, operated);
  };

  test("a resistor lets a lamp work behind it, but feeds none that is wired to the other rail", () => {
    expect(lit("rung: R1 @a -> LT0", []).on).toEqual(["LT0"]);
    expect(lit("rung: R1 @a -> LT0\nrung: @a PB1", []).on).toEqual(["LT0"]);
    // PB1 holds @a to the return rail: nothing is left for the lamp, and the resistor keeps it from being a short circuit.
    expect(lit("rung: R1 @a -> LT0\nrung: @a PB1", ["PB1"])).toEqual({ on: [], shorted: false });
    expect(lit("rung: R1 R2", []).shorted).toBe(false);
  });

  test("on alternating current a diode passes every second half wave, whichever way it stands", () => {
    for (const diode of ["D0", "D0:K-A"]) expect(lit(`rung: ${diode} -> LT0`, [], "24 V AC { rails L1 L2 }").on).toEqual(["LT0"]);
    expect(lit("rung: D0:K-A -> LT0", []).on).toEqual([]);
    expect(lit("rung: PB1 D0:K-A", ["PB1"], "24 V AC { rails L1 L2 }").shorted).toBe(true);
  });

  test("what a shorted supply feeds is not energized, and another supply goes on", () => {
    const laid = ladderOf(
      `supply ONE 24 V DC { rails L+ M }\nsupply TWO 24 V DC { rails 2L+ 2M }\n${devices}\nladder "One" supply ONE {\nrung: PB1 LS1\nrung: PB2 -> LT0\n}\nladder "Two" supply TWO {\nrung: PB2 -> LT1\n}\n`,
    );
    const isClosed = () => true;
    const { energized, shorted } = conduct(wiringOf(laid.machine), isClosed);
    expect([...energized]).toEqual(["LT1:X1-X2"]);
    expect(shorted.map(({ name }) => name)).toEqual(["ONE"]);
  });
});
