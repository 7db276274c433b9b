import type { Layout } from "../layout/placement.js";
import type { Machine, NodeId } from "../machine/model.js";
import { laddersOf, usesOf } from "../machine/walk.js";

/** I and O are left out: they read as figures. */
const letters = "ABCDEFGHJKLMNPQRSTUVWXYZ";

/** A, B, … Z, AA, AB, … */
function letterOf(index: number): string {
  const last = letters[index % letters.length] as string;
  return index < letters.length ? last : letterOf(Math.floor(index / letters.length) - 1) + last;
}

/**
 * The number of every wire, by potential. Rails and running numbers are as built. In a drawing numbered by line, each wire gets
 * the number of the line on which it first appears and a letter, `102A`, or of its sheet and path and a count, `3.4.1`; these are written into the machine's potentials and
 * into the texts that were holding the room for them on the sheets.
 */
export function numberWires(machine: Machine, layout: Layout): ReadonlyMap<NodeId, string> {
  if (machine.drawing.wireNumbers === "by-line") {
    numberByLine(machine, layout);
    fillRooms(machine, layout);
  }
  return new Map(machine.potentials.map(({ id, number }) => [id, number.value]));
}

function numberByLine(machine: Machine, layout: Layout): void {
  const given = new Set(machine.potentials.filter(({ rail }) => rail !== undefined).map(({ id }) => id));
  const { convention, lineNumbers } = machine.drawing;
  // Paths that are numbered from 1 on every sheet need it said: 3.4.1 is the first wire that begins in path 4 of sheet 3.
  const bySheet = convention === "international" && lineNumbers === "by-sheet";
  const used = new Map<string, number>();
  for (const { path } of laddersOf(machine).flatMap(({ rungs }) => rungs)) {
    for (const { id, from, to } of usesOf(path)) {
      const place = layout.places.get(id);
      if (place?.line === undefined) continue;
      const line = bySheet ? `${place.sheet}.${place.line}` : String(place.line);
      for (const node of [from, to]) {
        const potential = machine.potentials[node];
        if (!potential || given.has(node)) continue;
        given.add(node);
        const index = used.get(line) ?? 0;
        used.set(line, index + 1);
        potential.number = { value: bySheet ? `${line}.${index + 1}` : line + letterOf(index), by: "line" };
      }
    }
  }
}

/** The wire a number stands over is named by its part: the circuit's, then `wire` and the potential. */
function fillRooms(machine: Machine, layout: Layout): void {
  for (const { texts } of layout.sheets) {
    for (const text of texts) {
      if (text.role !== "wire-number") continue;
      const node = /\/wire(\d+)$/.exec(text.part ?? "")?.[1];
      const number = node === undefined ? undefined : machine.potentials[Number(node)]?.number.value;
      if (number !== undefined) text.text = number;
    }
  }
}
