import { startOfCycle } from "../../src/behaviour/start-of-cycle.js";
import { check } from "../../src/checks/check.js";
import type { Diagnostic } from "../../src/language/diagnostic.js";
import { parse } from "../../src/language/parse.js";
import { buildMachine } from "../../src/machine/build.js";

/**
 * A fixture announces what is found in it above the line it is found on: `# expect error coil-driven-twice 27-29`, with the first
 * and last column underlined. Several announcements may stand above one line.
 */
export function announcedIn(text: string): string[] {
  const announced: string[] = [];
  let waiting: string[] = [];
  text.split("\n").forEach((line, index) => {
    const match = /^\s*# expect (error|warning|note) ([a-z-]+) (\d+-\d+)$/.exec(line);
    if (match) waiting.push(`${match[1]} ${match[2]} ${match[3]}`);
    else {
      announced.push(...waiting.map((words) => `${index + 1}: ${words}`));
      waiting = [];
    }
  });
  return [...announced, ...waiting.map((words) => `end: ${words}`)].sort();
}

/** What reading, building and checking a text find, in the words of an announcement. */
export function foundIn(text: string): string[] {
  return diagnosticsOf(text)
    .map(({ at, severity, code }) => `${at.line}: ${severity} ${code} ${at.column}-${at.endLine === at.line ? at.endColumn - 1 : "…"}`)
    .sort();
}

export function diagnosticsOf(text: string): Diagnostic[] {
  const { tree, diagnostics } = parse(text, "fixture.sprung");
  const built = buildMachine(tree);
  return [...diagnostics, ...built.diagnostics, ...check(built.machine, startOfCycle(built.machine))];
}
