import { describe, expect, test } from "vitest";
import { startOfCycle } from "../../src/behaviour/start-of-cycle.js";
import { check } from "../../src/checks/check.js";
import { parse } from "../../src/language/parse.js";
import { buildMachine } from "../../src/machine/build.js";

/** Rungs numbered from 1 that hang together in one way or another. */
const shapes: Record<string, (i: number) => string> = {
  "all behind one holding relay": (i) => `rung: @run (LS${i} | CR${i} /CR${Math.max(1, i - 1)}) -> CR${i}`,
  "each relay pulled in by the one before": (i) => `rung: CR${i - 1} (PB${i} | CR${i}) LS${i} -> CR${i}`,
  "each fed over a point of the one before": (i) => `rung: ${i === 1 ? "@run" : `@p${i - 1}`} (PB${i} | CR${i}) @p${i} -> CR${i}`,
  "all bridged with each other": (i) => `rung: @run LS${i} @b${i} -> CR${i}\nrung: ${i === 1 ? "@run" : `@b${i - 1}`} PB${i} @b${i}`,
};

const drawingOf = (count: number, rung: (i: number) => string) => {
  const numbers = Array.from({ length: count }, (_, i) => i + 1);
  return `supply CTRL 24 V DC { rails L+ M }
emergency-stop ES1
push-button PBA
push-button PBB
relay CR0
${numbers.map((i) => `push-button PB${i}\nlimit-switch LS${i}\nrelay CR${i}`).join("\n")}
ladder "Control" supply CTRL {
rung: /ES1 /PBA (PBB | CR0) @run -> CR0
${numbers.map(rung).join("\n")}
}
`;
};

/** Processor time of one check in ms; waiting for other programs does not count. */
function timeOf(count: number, rung: (i: number) => string): number {
  const { machine, diagnostics } = buildMachine(parse(drawingOf(count, rung), "large.sprung").tree);
  expect(diagnostics).toEqual([]);
  const start = startOfCycle(machine);
  const times = [1, 2, 3].map(() => {
    const begun = process.cpuUsage();
    check(machine, start);
    const { user } = process.cpuUsage(begun);
    return user / 1000;
  });
  return Math.min(...times);
}

describe.each(Object.entries(shapes))("a thousand rungs, %s", (_, rung) => {
  test("are checked in a time that grows no faster than the drawing", () => {
    timeOf(50, rung);
    const [few, many] = [timeOf(150, rung), timeOf(1200, rung)];
    // Eight times the rungs; three times that leaves room for noise, not for squares of the whole.
    expect(many / Math.max(few, 5)).toBeLessThan(24);
  });
});
