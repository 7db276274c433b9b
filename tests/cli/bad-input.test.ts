import { describe, expect, test } from "vitest";
import { run } from "../../src/cli/run.js";
import { memoryWorld } from "../support/memory-world.js";

const head = `supply CTRL 24 V DC { rails L+ M }
push-button PB1 "On"
relay CR1 "Ready"
`;
const ladder = (...rungs: string[]) => `${head}ladder "Control" supply CTRL {\n${rungs.map((rung) => `  rung: ${rung}\n`).join("")}}\n`;

const air = (...lines: string[]) => `${head}ladder "Control" supply CTRL {
  rung: PB1 -> CR1
  rung: CR1 -> SOL1
}
fluid "Air" pneumatic {
  air-supply AIR1 6 bar
  cylinder RAM "Ram" double-acting bore 40 mm rod 16 mm stroke 60 mm
  valve V1 "Ram" 5/2 left solenoid SOL1 right spring
${lines.map((line) => `  ${line}\n`).join("")}}
`;

interface Case {
  what: string;
  text?: string | Uint8Array;
  exit: 0 | 1 | 2;
  code: string;
  says: RegExp;
  /** The place of the finding, line and column. */
  at: [number, number];
}

const cases: Case[] = [
  { what: "a missing file", exit: 2, code: "file-missing", says: /no file .bad\.sprung/, at: [1, 1] },
  { what: "an empty file", text: "", exit: 1, code: "empty-file", says: /describes nothing/, at: [1, 1] },
  { what: "a file of comments only", text: "# nothing yet\n\n", exit: 1, code: "empty-file", says: /describes nothing/, at: [1, 1] },
  {
    what: "a binary file",
    text: new Uint8Array([0x7f, 0x45, 0x4c, 0x46, 0, 1, 255, 254]),
    exit: 1,
    code: "not-text",
    says: /not text/,
    at: [1, 1],
  },
  {
    what: "a 10 000-deep bracket",
    text: ladder(`PB1 ${"(".repeat(10_000)}PB1${")".repeat(10_000)} -> CR1`),
    exit: 1,
    code: "nesting-too-deep",
    says: /more than 64 deep/,
    at: [5, 76],
  },
  {
    what: "an unknown device",
    text: ladder("PB1 CR11 -> CR1"),
    exit: 1,
    code: "unknown-name",
    says: /CR11[\s\S]*Did you mean "CR1"/,
    at: [5, 13],
  },
  { what: "a coil driven twice", text: ladder("PB1 -> CR1", "CR1 -> CR1"), exit: 1, code: "coil-driven-twice", says: /CR1/, at: [6, 16] },
  {
    what: "a short across the rails",
    text: ladder("PB1 -> CR1", "CR1 PB1"),
    exit: 1,
    code: "short-across-rails",
    says: /L\+ and M are joined with no load/,
    at: [6, 13],
  },
  {
    what: "a valve port joined to nothing",
    text: air("line AIR1 -- V1.1", "line V1.4 -- RAM.cap", "line V1.2 -- RAM.rod", "exhaust V1.3 -- silencer"),
    exit: 0,
    code: "port-open",
    says: /V1\.5|V1.*port.*5|port 5/,
    at: [11, 9],
  },
  { what: "a folder", exit: 2, code: "file-folder", says: /is a folder/, at: [1, 1] },
];

describe.each(cases)("$what", ({ what, text, exit, code, says, at }) => {
  const files: Record<string, string | Uint8Array> =
    what === "a folder" ? { "bad.sprung/x": "" } : text === undefined ? {} : { "bad.sprung": text };

  test("check says so, with its place and exit code", async () => {
    const desk = memoryWorld(files);
    expect(await run(["check", "--json", "bad.sprung"], desk)).toBe(exit);
    const found = JSON.parse(desk.stdout) as { code: string; severity: string; line: number; column: number }[];
    expect(found.map((finding) => finding.code)).toContain(code);
    expect(found.find((finding) => finding.code === code)).toMatchObject({
      severity: exit === 0 ? "warning" : "error",
      line: at[0],
      column: at[1],
    });
    // One fault, told once: nothing trails behind it but what is a fault of its own.
    expect(found.filter(({ severity }) => severity === "error").length).toBeLessThanOrEqual(1);
    const words = memoryWorld(files);
    await run(["check", "bad.sprung"], words);
    expect(words.stdout).toMatch(says);
    expect(words.stdout).toMatch(/\n1 (error|warning)/);
  });

  test("draw writes nothing if it is an error", async () => {
    const desk = memoryWorld(files);
    expect(await run(["draw", "bad.sprung"], desk)).toBe(exit);
    expect(desk.stderr).toMatch(says);
    expect(desk.written.size > 0).toBe(exit === 0);
  });
});
