import { expect, test } from "vitest";
import { announcedIn, diagnosticsOf, foundIn } from "../support/announced.js";
import { filesBelow, readText } from "../support/sources.js";

test.each(filesBelow("tests/machine/fixtures", ".sprung"))("%s is found to have what it announces and nothing else", (path) => {
  const text = readText(path);
  expect(announcedIn(text).length).toBeGreaterThan(0);
  expect(foundIn(text)).toEqual(announcedIn(text));
});

/** What a slip is told, by the line that has it. */
function told(line: string): string[] {
  return diagnosticsOf(line)
    .filter(({ severity }) => severity === "error")
    .map(({ message, hint }) => (hint === undefined ? message : `${message} ${hint}`));
}

test.each([
  ["timer TR1 on-delay 2", '"on-delay" needs a unit: s, ms, min or h. Write for example 2 s.'],
  ["timer TR1 on-delay 2 mm", '"on-delay" takes s, ms, min or h, not mm.'],
  ["timer TR1", 'TR1 needs its delay: "on-delay 2 s" or "off-delay 2 s".'],
  ["timer TR1 2 s", "TR1 takes no value here: say what 2 s is."],
  ["fluid pneumatic {\nvalve V1 5/3 center closed springs\n}", '"center" is not a property of a valve. Did you mean "centre"?'],
  ["relay CR1\nladder {\nrung: CR1 ->\n}", 'Nothing stands behind this "->". Name what is driven, as in -> CR1.'],
  ["rely CR1", '"rely" is not a kind of device or component. Did you mean "relay"?'],
  ["pilot-light LT1 gren", '"gren" is not a property of a pilot-light. Did you mean "green"?'],
  [
    "limit-switch LS1 on CLAMP at 40\nfluid pneumatic {\ncylinder CLAMP\n}",
    '"at" needs a unit: mm, cm, m, in or ft. Write for example 40 mm.',
  ],
  [
    'overload OL1 on M1 "Pump motor"\nmotor M1',
    '"Pump motor" is not a property of an overload. A function text stands once, directly behind the designation; any other text behind the word that says what it is.',
  ],
  ['relay "Pump motor" CR1', 'A relay needs a designation, as in "relay CR1". The designation stands before the text.'],
  ['drawing "X" { number A-1 paper A4 }', '"number" takes one value. Put "paper" on a line of its own.'],
  ['fluid "A" pneumatic {\nvalve V1 5/2 left solenoid right spring\n}', '"solenoid" is followed by the designation of its coil.'],
  ["fluid hydraulic {\ntank TK1\npump P1\nline TK1 -- P1 - tank\n}", '"-" has no place here. The ends of a line are joined with "--".'],
  ["counter C1 preset 12", "A counter is not yet supported."],
  [
    "fluid pneumatic {\nvalve V1 5/2 left lever right spring\nline V1.A -- @a\n}",
    "V1 has no port A: it has 1, 2, 3, 4 and 5. In pneumatics it is V1.4.",
  ],
  ["fluid hydraulic {\nsilencer SL1\n}", "A silencer does not belong in a hydraulic circuit."],
])("%s is told in one plain sentence", (line, sentence) => {
  expect(told(line)).toEqual([sentence]);
});
