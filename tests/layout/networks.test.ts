import fc from "fast-check";
import { expect, test } from "vitest";
import { faults, ladderOf } from "../support/ladder.js";

/*
 * Random networks of everything a rung can hold: contacts of all kinds, what current passes through, loads side by side,
 * nested and in series, contacts behind loads, bridges over points in either direction. Whatever the network, the drawing is
 * held to the same facts: its wires read back join what the text joins, nothing overlaps or lies outside, every part is
 * drawn once.
 */

const declared = `
relay CR1 "Cycle running"
timer TR1 "Dwell" on-delay 2 s
counter CN1 preset 4
push-button PB1 "Start"
emergency-stop ES1 "Emergency stop"
selector-switch SS1 "Mode" { positions hand off auto }
key-switch KS1 { positions locked free }
limit-switch LS1 "Clamp open"
proximity-switch PRS1 "Part here"
pressure-switch PS1 "Air on" rising 5 bar
door-switch DS1 "Gate"
overload OL1
output-card Q0 8 points
terminal-strip X1
terminal-strip X22
plug XP1
`;

// In what follows `#` stands for a number of its own.
const contact = fc.constantFrom(
  ...[
    "CR1",
    "/CR1",
    "TR1",
    "/TR1.inst",
    "/CN1",
    "PB1",
    "/PB1",
    "/ES1",
    "SS1.auto",
    "/KS1.free",
    "LS1",
    "/LS1",
    "PRS1",
    "PS1",
    "/DS1",
    "/OL1",
  ],
);
const through = fc.oneof(fc.constantFrom("X1:#", "X22:#", "XP1:#"), fc.constantFrom("FU#", "CB#", "D#", "D#:K-A", "R#", "Q0.3"));
const point = fc.integer({ min: 0, max: 5 }).map((index) => `@p${index}`);

interface Shapes {
  series: string;
  item: string;
}

/** A path of contacts and what current passes through, with points or without. */
const pathOf = (points: boolean, longest: number) =>
  fc.letrec<Shapes>((tie) => ({
    series: fc.array(tie("item"), { minLength: 1, maxLength: longest }).map((items) => items.join(" ")),
    item: fc.oneof(
      { depthSize: "small", withCrossShrink: true },
      { arbitrary: contact, weight: 5 },
      { arbitrary: through, weight: 2 },
      ...(points ? [{ arbitrary: fc.tuple(point, contact).map(([name, device]) => `${name} ${device}`), weight: 1 }] : []),
      { arbitrary: fc.array(tie("series"), { minLength: 2, maxLength: 3 }).map((branches) => `(${branches.join(" | ")})`), weight: 3 },
    ),
  })).series;

/** What is driven. */
const driven = fc.letrec<{ load: string }>((tie) => ({
  load: fc.oneof(
    { depthSize: "small", withCrossShrink: true },
    fc.constant("LT#"),
    fc.constantFrom("LT# /OL1", "X1:# LT# X1:#", "LT# /OL1 /CR1 LS1 X1:# PB1", "LT# LT#"),
    fc.constantFrom("(LT# | D#:K-A)", "(LT# | R# D#)", "(LT# | X1:# D#:K-A)"),
    fc
      .array(
        fc.oneof(
          tie("load"),
          fc.tuple(pathOf(false, 2), tie("load")).map(([path, load]) => `${path} -> ${load}`),
        ),
        {
          minLength: 2,
          maxLength: 3,
        },
      )
      .map((branches) => `(${branches.join(" | ")})`),
    fc.tuple(fc.array(tie("load"), { minLength: 2, maxLength: 2 }), contact).map(([loads, after]) => `(${loads.join(" | ")}) ${after}`),
  ),
})).load;

const rung = fc.oneof(
  { arbitrary: fc.tuple(pathOf(false, 3), driven).map(([path, load]) => `${path} -> ${load}`), weight: 2 },
  { arbitrary: fc.tuple(pathOf(true, 4), driven).map(([path, load]) => `${path} -> ${load}`), weight: 3 },
  { arbitrary: fc.tuple(point, pathOf(true, 2), driven).map(([from, path, load]) => `${from} ${path} -> ${load}`), weight: 2 },
  { arbitrary: fc.tuple(point, pathOf(false, 2), point).map((parts) => parts.join(" ")), weight: 3 },
);

const drawing = fc.record({
  rungs: fc.array(rung, { minLength: 1, maxLength: 7 }),
  paper: fc.constantFrom("A4", "A3", "A3", "A2", "ANSI-A"),
});

function textOf({ rungs, paper }: { rungs: readonly string[]; paper: string }): string {
  let uses = 0;
  const written = rungs.map((path, index) => `rung "Rung ${index}": ${path.replace(/#/g, () => String(++uses))}`);
  const own = [...new Set(written.join(" ").match(/\b(LT|FU|CB|D|R)\d+/g))].filter((name) => !declared.includes(` ${name} `));
  const kinds = { LT: "pilot-light", FU: "fuse", CB: "circuit-breaker", D: "diode", R: "resistor" } as Record<string, string>;
  const devices = own.map((name) => `${kinds[name.replace(/\d+/, "")]} ${name}${name.startsWith("LT") ? ` "Lamp ${name}" red` : ""}`);
  return `drawing "Network" { paper ${paper} }
supply CTRL 24 V DC { rails L+ M }
${declared}${devices.join("\n")}
ladder "Control" supply CTRL {
${written.join("\n")}
}
`;
}

/** What is wrong with the drawing of a network; nothing where its points happen to join the rails. */
function faultsOf(given: { rungs: readonly string[]; paper: string }, convention: Convention): string[] {
  const bridges = given.rungs.filter((path) => !path.includes("->")).length;
  let laid: ReturnType<typeof ladderOf>;
  try {
    laid = ladderOf(textOf(given), convention);
  } catch (fault) {
    if (/rails/.test(String(fault))) return [];
    throw fault;
  }
  expect(laid.again().sheets).toEqual(laid.sheets);
  return faults(laid, bridges);
}

type Convention = "north-american" | "international";
const conventions: Convention[] = ["north-american", "international"];

test.each(conventions)(
  "any network is drawn whole and reads back as it was written, %s",
  (convention) => {
    fc.assert(
      fc.property(drawing, (given) => {
        expect(faultsOf(given, convention)).toEqual([]);
      }),
      { numRuns: 60 },
    );
  },
  60_000,
);
