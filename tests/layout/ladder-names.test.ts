import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { measureText } from "../../src/drawing/text.js";
import { wrapName } from "../../src/drawing/wrap-name.js";
import { faults, ladderOf } from "../support/ladder.js";

const letters = "ABCDEFGHIJKLMNOPQRSTUVWXYZ";
/** A designation of 1 to 40 characters, with or without hyphens. */
const name = fc
  .tuple(fc.integer({ min: 0, max: 38 }), fc.integer({ min: 0, max: 9 }), fc.constantFrom(0, 0, 4, 7, 12))
  .map(([length, seed, hyphenAt]) => {
    let text = "";
    for (let i = 0; i < length; i++) text += hyphenAt > 0 && i % hyphenAt === hyphenAt - 1 ? "-" : letters[(i * 7 + seed * 5) % 26];
    return text.replace(/-$/, "");
  });
/** Words of 1 to 40 characters. */
const words = fc
  .array(fc.constantFrom("Part", "in place", "Ejector", "x", "the-whole-of-its-way", "Überhitzungsschutz"), { maxLength: 5 })
  .map((list) => list.join(" ").slice(0, 40).trim());

const kinds = ["push-button", "relay", "limit-switch", "selector-switch", "pressure-switch", "timer", "proximity-switch"] as const;

const machine = fc.record({
  paper: fc.constantFrom("A4", "A3", "ANSI-A"),
  numbers: fc.constantFrom("running", "by-line"),
  fuse: fc.boolean(),
  names: fc.array(name, { minLength: 10, maxLength: 10 }),
  texts: fc.array(words, { minLength: 10, maxLength: 10 }),
  points: fc.array(name, { minLength: 2, maxLength: 2 }),
  rails: fc.array(name, { minLength: 2, maxLength: 2 }),
  positions: fc.array(name, { minLength: 2, maxLength: 4 }),
  rungs: fc.array(
    fc.record({
      start: fc.constantFrom("", "", "", "@0 ", "@1 "),
      shape: fc.constantFrom(
        "a",
        "a b",
        "(a | b)",
        "a (b | c d)",
        "a b c d",
        "(a | b (c | d e)) f",
        "a (b c d e f | g) h",
        "a b c d e f g h a b",
      ),
      point: fc.constantFrom("", "", " @0", " @1"),
      picks: fc.array(fc.integer({ min: 0, max: 6 }), { minLength: 8, maxLength: 8 }),
      load: fc.constantFrom("relay", "solenoid", "lamp", "timer"),
    }),
    { minLength: 1, maxLength: 8 },
  ),
});

function textOf({
  paper,
  numbers,
  fuse,
  names,
  texts,
  points,
  rails,
  positions,
  rungs,
}: typeof machine extends fc.Arbitrary<infer T> ? T : never): string {
  const own = (prefix: string, index: number) => `${prefix}${names[index % 10]}`;
  const places = positions.map((text, index) => `p${index}${text}`);
  const devices = kinds.map((kind, index) => {
    const tail =
      kind === "selector-switch"
        ? ` { positions ${places.join(" ")} }`
        : kind === "timer"
          ? " on-delay 1.5 s"
          : kind === "limit-switch"
            ? ` on C0${names[8]} at retracted`
            : kind === "pressure-switch"
              ? " rising 5 bar"
              : "";
    return `${kind} ${own(`D${index}`, index)} ${texts[index] ? `"${texts[index]}"` : ""}${tail}`;
  });
  const contact = (pick: number) => `${own(`D${pick}`, pick)}${kinds[pick] === "selector-switch" ? `.${places[0]}` : ""}`;
  const point = (text: string) => text.replace(/@(\d)/, (_, index) => `@n${index}${points[Number(index)]}`);
  const loads = rungs.map(({ load }, index) => {
    const called = own(`L${index}`, index + 3);
    if (load === "solenoid") return { called: `S${index}${names[9]}`, declared: "" };
    const kind = load === "lamp" ? "pilot-light" : load;
    return {
      called,
      declared: `${kind} ${called} "${texts[index % 10]} load"${load === "lamp" ? " green" : load === "timer" ? " off-delay 2 s" : ""}`,
    };
  });
  const valves = rungs.flatMap(({ load }, index) =>
    load === "solenoid" ? [`valve V${index}${names[9]} 3/2 normally closed left solenoid S${index}${names[9]} right spring`] : [],
  );
  const lines = rungs.map(({ start, shape, point: middle, picks }, index) => {
    const path = shape.replace(/[a-h]/g, (letter) => contact(picks["abcdefgh".indexOf(letter)] as number));
    return `rung "${texts[(index + 2) % 10]}": ${point(start)}${path}${point(middle)} -> ${loads[index]?.called}`;
  });
  return `drawing "Names" { paper ${paper}\n wire-numbers ${numbers} }
supply C${names[7]} 24 V DC { rails L${rails[0]} M${rails[1]} ${fuse ? `fuse F${names[6]} 6 A` : ""} }
${devices.join("\n")}
${loads.map(({ declared }) => declared).join("\n")}
fluid "Air" pneumatic {
 cylinder C0${names[8]} double-acting bore 40 mm rod 16 mm stroke 60 mm
 ${valves.join("\n")}
}
ladder "Control" { ${lines.join("\n")} }`;
}

describe("a wrapped name", () => {
  test("breaks behind hyphens and at spaces", () => {
    expect(wrapName("START-BUTTON-LEFT", 2.5, 20, 3)).toEqual(["START-", "BUTTON-", "LEFT"]);
    expect(wrapName("Clamp closed and locked", 2.5, 20, 3)).toEqual(["Clamp", "closed and", "locked"]);
    expect(wrapName("CR1", 2.5, 20, 3)).toEqual(["CR1"]);
  });

  test("breaks within a word only where the word alone is too wide", () => {
    const lines = wrapName("LS-ABCDEFGHIJKLMNOPQR", 2.5, 26, 3);
    expect(lines.length).toBe(3);
    expect(lines.join("")).toBe("LS-ABCDEFGHIJKLMNOPQR");
  });

  test("loses nothing unless the last of its lines says so, and is never too wide", () => {
    fc.assert(
      fc.property(name, fc.integer({ min: 8, max: 60 }), (text, width) => {
        const lines = wrapName(text, 2.5, width, 3);
        expect(lines.length).toBeLessThanOrEqual(3);
        for (const line of lines) expect(measureText(line, 2.5)).toBeLessThanOrEqual(width + 0.01);
        if (!lines.at(-1)?.endsWith("…")) expect(lines.join("")).toBe(text);
        else expect(measureText(text, 2.5)).toBeGreaterThan(2 * width - 20);
      }),
    );
  });
});

describe("the head of the rails", () => {
  const headOf = (rails: string, fuse: string, paper = "A3") =>
    ladderOf(
      `drawing "Heads" { paper ${paper} }\nsupply CTRL 24 V DC { rails ${rails} ${fuse} }\npush-button PB1\nrelay CR1\nladder { rung: PB1 -> CR1 }`,
    );

  test("has the name of a fused rail behind the fuse, for the fuse feeds it", () => {
    const laid = headOf("L+ M", "fuse FU1 4 A");
    expect(faults(laid)).toEqual([]);
    const sheet = laid.sheets[0] as (typeof laid.sheets)[number];
    const fuse = sheet.symbols.find(({ part }) => part === "FU1");
    const [live, back] = sheet.texts.filter(({ role }) => role === "rail");
    expect([live?.text, back?.text]).toEqual(["L+", "M"]);
    expect((live?.at.y as number) - (live?.height as number)).toBeGreaterThan(fuse?.at.y as number);
    expect(back?.at.y).toBeLessThan(fuse?.at.y as number);
  });

  test("keeps long names of rails on the sheet", () => {
    for (const paper of ["A4", "A3"]) {
      for (const fuse of ["", "fuse FU1 4 A"]) {
        const laid = headOf("POTENTIAL-PLUS-24-VOLTS-OF-THE-WHOLE-LINE RETURN-OF-THE-WHOLE-LINE-AND-ITS-BRANCHES", fuse, paper);
        expect(faults(laid)).toEqual([]);
        const said = laid.sheets[0]?.texts
          .filter(({ role }) => role === "rail")
          .map(({ text }) => text)
          .join("");
        expect(said).toBe("POTENTIAL-PLUS-24-VOLTS-OF-THE-WHOLE-LINERETURN-OF-THE-WHOLE-LINE-AND-ITS-BRANCHES");
      }
    }
  });
});

describe.each(["north-american", "international"] as const)("long names, %s", (convention) => {
  test("stay on the sheet and clear of everything, whatever they are", () => {
    fc.assert(
      fc.property(machine, (given) => {
        // A bridge may cross a wire; where nothing may cross is held by the networks without bridges.
        expect(faults(ladderOf(textOf(given), convention)).filter((fault) => !/ cross at /.test(fault))).toEqual([]);
      }),
      { numRuns: 60, seed: 1 },
    );
  }, 60_000);
});
