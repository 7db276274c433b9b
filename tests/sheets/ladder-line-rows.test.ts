import { expect, test } from "vitest";
import { compile } from "../../src/compile.js";
import { memoryWorld } from "../support/memory-world.js";

/** A switch at a cylinder's end with so many contacts, each on a rung of its own. */
async function wordedAt(contacts: number): Promise<{ texts: string[]; rows: number[]; links: number }> {
  const relays = Array.from({ length: contacts }, (_, i) => `relay CR${i}`).join("\n");
  const rungs = Array.from({ length: contacts }, (_, i) => `rung: LS1 -> CR${i}`).join("\n");
  const text = `supply C 24 V DC { rails P M }
    limit-switch LS1 on C1 at extended
    ${relays}
    fluid "One" pneumatic { cylinder C1 double-acting bore 40 mm rod 16 mm stroke 100 mm }
    ladder "Control" supply C {\n${rungs}\n}`;
  const { set } = await compile("one.sprung", memoryWorld({ "one.sprung": text }));
  const marks = (set?.sheets[0]?.marks ?? []).filter(({ part }) => part === "C1/LS1");
  const said = marks.flatMap((mark) => (mark.kind === "text" && mark.role === "reference" ? [mark] : []));
  const links = (set?.sheets[0]?.marks ?? []).filter((mark) => mark.kind === "link" && mark.to.startsWith("LS1:")).length;
  return { texts: said.map((mark) => mark.text), rows: said.map(({ at }) => at.y), links };
}

test("a switch's ladder lines stand above each other, each leading to its contact", async () => {
  const { texts, rows, links } = await wordedAt(3);
  expect(texts).toEqual(["(201)", "(202)", "(203)"]);
  expect(links).toBe(3);
  // 1.8 mm letters, 2.4 mm from row to row.
  expect((rows[1] as number) - (rows[0] as number)).toBeCloseTo(2.4, 3);
  expect((rows[2] as number) - (rows[1] as number)).toBeCloseTo(2.4, 3);
});

test("more than three rows end with an ellipsis", async () => {
  expect((await wordedAt(5)).texts).toEqual(["(201)", "(202)", "(203…)"]);
});

test("a single ladder line stands alone", async () => {
  expect((await wordedAt(1)).texts).toEqual(["(201)"]);
});
