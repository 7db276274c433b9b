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
  ["counter C1", 'C1 needs the number it counts to, as in "preset 12".'],
  ["counter C1 preset 0", '"preset" must be more than zero.'],
  ["counter C1 preset", '"preset" is followed by a whole number.'],
  ["key-switch S1", 'S1 needs its positions, as in "positions hand off auto".'],
  ["proximity-switch PX1 wires 4", '"wires" takes 2 or 3, not 4.'],
  ["relay CR1 poles 3", '"poles" is followed by no or nc.'],
  ["circuit-breaker Q1 poles 0", '"poles" must be more than zero.'],
  ["fuse FU1 poles 3 1 no", "A fuse has no auxiliary contacts."],
  [
    "vacuum-switch VS1 rising -2 bar",
    "No vacuum is as deep as -2 bar: the air presses with 1.013 bar. Write how far the pressure is below that of the air, as in -0.6 bar or 0.6 bar.",
  ],
  [
    "vacuum-switch VS1 rising -0.4 bar falling -0.6 bar",
    "VS1 must switch back at a lesser vacuum than it switches at: -0.6 bar is not less than -0.4 bar.",
  ],
  ["vacuum-switch VS1 rising 0 bar", "0 bar is no vacuum."],
  ["temperature-switch TS1 rising -5 °C falling 2 °C", "TS1 must switch back below the value it switches at: 2 °C is not below -5 °C."],
  ["level-switch FS1 rising 80 % falling 200 mm", "FS1 cannot go over at 80 % and back at 200 mm."],
  ["level-switch FS1 rising 3 bar", '"rising" takes mm, cm, m, in, ft or %, not bar.'],
  [
    "flow-switch FLS1 rising 3",
    '"rising" needs a unit: l/min, gpm, m3/min, m3/h, l/s, cm3/min, cfm or in3/min. Write for example 3 l/min.',
  ],
  ["resistor R1 470 V 3 bar", "R1 takes ohm, kohm, Mohm, W, kW, mW, MW, hp, VA, kVA, A, mA, kA, V, mV or kV, not bar."],
  ["input-card I0 8", "What of I0 is 8? Write 8 points."],
  ["output-card Q0 0 points", "Q0 has a whole number of points, from 1 to 999."],
  [
    "transformer T1 primary 400 V secondary 24 V DC",
    'A transformer gives AC. Direct current comes from a "power-supply" or a "rectifier".',
  ],
  ["rectifier REC1 primary 24 V DC", "A rectifier takes AC."],
  ["power-supply G1 primary", '"primary" is followed by a value in V, mV or kV.'],
  ["horn HN1 DC", '"DC" is not a property of a horn. It may have AC, DC, location, note and part.'],
  ["supply CTRL 24 V DC { rails L+ M from }", '"from" is followed by the transformer or power supply the rails come from, as in: from G1.'],
  [
    "supply CTRL 24 V DC { rails L+ M from G1 }",
    'There is no G1 in this drawing. Declare it, as in "power-supply G1 primary 400 V secondary 24 V DC".',
  ],
  ["relay G1\nsupply CTRL 24 V DC { rails L+ M from G1 }", "G1 is a relay; rails come from a transformer, power-supply or rectifier."],
  ["plug", 'A plug needs a designation, as in "plug XP1".'],
  ["plug V1.B", 'A plug needs a designation, as in "plug XP1".'],
  [
    "fluid pneumatic {\nvalve V1 5/2 left lever right spring\nline V1.A -- @a\n}",
    "V1 has no port A: it has 1, 2, 3, 4 and 5. In pneumatics it is V1.4.",
  ],
  ["fluid hydraulic {\nsilencer SL1\n}", "A silencer does not belong in a hydraulic circuit."],
])("%s is told in one plain sentence", (line, sentence) => {
  expect(told(line)).toEqual([sentence]);
});

const devices = `push-button PB1
relay CR1
latching-relay KL1
counter C1 preset 12
timer TR1 on-delay 1 s
terminal-strip X1
plug XP1
circuit-breaker Q1 2 A
fuse FU1 2 A
diode D1
resistor R1 470 ohm
key-switch S1 positions off on
input-card I0 8 points
input-card I1
output-card Q0 1 points
transformer T1 primary 400 V
`;

/** The errors of one rung among devices of every kind. */
function toldOf(rung: string): string[] {
  const wrong = told(`${devices}ladder "C" {\nrung: ${rung}\n}`);
  // A coil whose rung went wrong is not driven: that is told elsewhere.
  return wrong.filter((sentence) => !sentence.startsWith("This contact never changes"));
}

test.each([
  ["PB1 -> KL1", "Which coil of KL1? It has set and reset. Write KL1.set."],
  ["PB1 -> (CR1 | KL1)", "Which coil of KL1? It has set and reset. Write KL1.set."],
  ["PB1 -> KL1.rest", 'KL1 is a latching-relay and has no part rest. Did you mean "reset"?'],
  ["PB1 -> C1.foo", "C1 is a counter and has no part foo. Its coils are C1.count and C1.reset."],
  ["PB1 KL1.set", 'KL1.set is a coil: "->" stands before what is driven. Write -> KL1.set.'],
  ["PB1 /KL1.set -> CR1", "KL1.set is a coil, not a contact. Its contacts are KL1 and /KL1."],
  ["PB1 X9:4 -> CR1", 'There is no X9 in this drawing. Declare it, as in "terminal-strip X9".'],
  ["PB1 TS7:4 -> CR1", 'There is no TS7 in this drawing. Declare it, as in "terminal-strip TS7".'],
  ["PB1 X1 -> CR1", "Which terminal of X1? Write X1:1."],
  ["PB1 XP1 -> CR1", "Which pin of XP1? Write XP1:1."],
  ["PB1 /X1:4 -> CR1", "X1 is a terminal-strip and has no contacts."],
  ["PB1 X1:4-5 -> CR1", "X1:4-5 is no single terminal. Write X1:4 X1:5, one behind the other."],
  ["PB1 X1.4 -> CR1", "X1 is a terminal-strip and has no part 4. A terminal stands behind a colon: X1:4."],
  ["/Q1 -> CR1", "Q1 is a circuit-breaker: its poles are drawn as they carry current. Its auxiliary contacts are Q1.aux and /Q1.aux."],
  ["Q1.ax -> CR1", "Q1 is a circuit-breaker and has no part ax. Its auxiliary contacts are Q1.aux and /Q1.aux."],
  ["FU1.aux -> CR1", "FU1 is a fuse and has no part aux."],
  ["FU1:1 -> CR1", "A pole has two terminals, as in FU1:1-2."],
  [
    "PB1 -> FU1",
    'FU1 is a fuse, which cannot be driven: nothing behind "->" is a load. A relay, contactor, timer, solenoid, pilot-light, horn or heater is driven.',
  ],
  ["S1 -> CR1", "In which position of S1? It has off and on. Write S1.off."],
  ["S1.onn -> CR1", 'S1 has no position onn: it has off and on. Did you mean "on"?'],
  ["PB1 -> I0", "Which point of I0? Write I0.0."],
  ["PB1 -> I0.8", "I0 has no point 8. It has 0 to 7."],
  ["PB1 -> I1.x", "I1 has no point x. Points are numbers."],
  ["Q0.1 -> CR1", "Q0 has no point 1. It has point 0 alone."],
  ["Q0 -> CR1", "Which point of Q0? Write Q0.0."],
  [
    "/Q0.0 -> CR1",
    "Q0 has no normally closed contacts: an output closes when its program says so. Drive a relay and use its normally closed contact.",
  ],
  [
    "PB1 -> Q0.0",
    'Q0 is an output-card, which cannot be driven: nothing behind "->" is a load. A point of an output-card drives a rung; one of an input-card is driven.',
  ],
  ["I0.1 PB1 -> CR1", 'I0.1 is an input: "->" stands before what is driven. Write -> I0.1.'],
  ["PB1 -> (CR1 | D1) D1", "D1:A-K is already used. A diode stands at one place."],
  ["FU1:1-2 FU1:2-1 -> CR1", "FU1:2-1 is already used. Each pole has terminals of its own."],
  ["T1 -> CR1", "T1 is a transformer and has no contacts."],
])("in a rung %s is told in one plain sentence", (rung, sentence) => {
  expect(toldOf(rung)).toEqual([sentence]);
});
