import fc from "fast-check";
import { expect, test } from "vitest";
import type { ParallelPath, SeriesPath } from "../../src/machine/model.js";
import { usesOf } from "../../src/machine/walk.js";
import { firstLadder, ladder, soundMachine } from "./machine-of.js";

/** A series-parallel network of contacts: a name, or parts in series, or branches side by side. */
type Net = { one: string } | { series: Net[] } | { parallel: Net[] };

const names = ["PB1", "PB2", "PB3", "PB4", "LS1", "LS2", "LS3"];
const nets = fc.letrec<{ net: Net }>((tie) => ({
  net: fc.oneof(
    { maxDepth: 4, withCrossShrink: true },
    fc.record({ one: fc.constantFrom(...names, ...names.map((name) => `/${name}`)) }),
    fc.record({ series: fc.array(tie("net"), { minLength: 2, maxLength: 4 }) }),
    fc.record({ parallel: fc.array(tie("net"), { minLength: 2, maxLength: 4 }) }),
  ),
})).net;

function text(net: Net): string {
  if ("one" in net) return net.one;
  return "series" in net ? net.series.map(text).join(" ") : `(${net.parallel.map(text).join(" | ")})`;
}

const contactsIn = (net: Net): number =>
  "one" in net ? 1 : ("series" in net ? net.series : net.parallel).reduce((sum, part) => sum + contactsIn(part), 0);

/** Nodes strictly inside a network: one between each two neighbours in series, and those inside the parts. */
function innerNodes(net: Net): number {
  if ("one" in net) return 0;
  if ("series" in net) return net.series.length - 1 + net.series.reduce((sum, part) => sum + innerNodes(part), 0);
  return net.parallel.reduce((sum, part) => sum + innerNodes(part), 0);
}

const declarations = `${names.map((name) => (name.startsWith("PB") ? `push-button ${name}` : `limit-switch ${name}`)).join("\n")}\nrelay CR1`;

test("any series-parallel rung has the nodes its shape says, and its wires join up", () => {
  fc.assert(
    fc.property(nets, (net) => {
      const machine = soundMachine(ladder(`rung: ${text(net)} -> CR1`, declarations));
      const path = firstLadder(machine).rungs[0]?.path as SeriesPath;
      const uses = [...usesOf(path)];
      expect(uses).toHaveLength(contactsIn(net) + 1);
      // Two rails, what is inside, and the node before the coil.
      expect(machine.potentials).toHaveLength(2 + innerNodes(net) + 1);
      expect(uses.filter(({ from, to }) => from === to)).toEqual([]);
      expect(new Set(uses.map(({ id }) => id)).size).toBe(uses.length);
      joinsUp(path);
      expect([path.from, path.to]).toEqual([0, 1]);
      // Numbers rise as the drawing is read.
      const seen = new Set<number>([0, 1]);
      for (const { from, to } of uses) for (const node of [from, to]) if (!seen.has(node)) expect(node).toBe(seen.add(node).size - 1);
    }),
    { numRuns: 300, seed: 1 },
  );
});

function joinsUp(path: SeriesPath | ParallelPath): void {
  if (path.kind === "parallel") {
    for (const branch of path.branches) {
      expect([branch.from, branch.to]).toEqual([path.from, path.to]);
      joinsUp(branch);
    }
    return;
  }
  let here = path.from;
  for (const item of path.items) {
    expect(item.from).toBe(here);
    here = item.to;
    if (item.kind === "parallel") joinsUp(item);
  }
  expect(here).toBe(path.to);
}
