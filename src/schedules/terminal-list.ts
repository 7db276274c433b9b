import type { Layout } from "../layout/placement.js";
import type { Device, Machine, NodeId, PartId } from "../machine/model.js";
import { naturalOrder } from "../machine/natural-order.js";
import { joinPins, type Pin } from "./join-pins.js";
import { type DrawnAt, drawnAt } from "./rows.js";

/** One terminal of a strip or pin of a plug. */
export interface TerminalRow {
  strip: string;
  kind: "terminal-strip" | "plug";
  terminal: string;
  wire: string;
  /** What is joined on the side the current comes from, and on the side it goes on; a rail by its name. */
  before: (Pin | string)[];
  after: (Pin | string)[];
  drawn: DrawnAt[];
}

/** Every terminal and pin the drawing uses, strip by strip as declared, in the order of their numbers. */
export function terminalList(machine: Machine, layout: Layout): TerminalRow[] {
  const joined = joinPins(machine);
  const rows: TerminalRow[] = [];
  for (const device of machine.devices.values()) {
    const { name, kind } = device;
    if (kind !== "terminal-strip" && kind !== "plug") continue;
    const all = usesOfStrip(device);
    for (const terminal of [...new Set(all.map(({ pin }) => pin))].sort(naturalOrder)) {
      const uses = all.filter(({ pin }) => pin === terminal);
      const own = `${name}:${terminal}`;
      const [before, after]: [Set<string>, Set<string>] = [new Set(), new Set()];
      for (const node of new Set(uses.map((use) => use.node))) {
        for (const { from, to, way } of joined.get(node)?.connections ?? []) {
          if (to === own) (way === "tail" ? after : before).add(from);
          else if (from === own) (way === "head" ? before : after).add(to);
        }
      }
      const [use] = uses;
      const potential = use && machine.potentials[use.node];
      if (potential?.rail !== undefined) for (const side of [before, after]) if (side.size === 0) side.add(potential.rail);
      rows.push({
        strip: name,
        kind,
        terminal,
        wire: potential?.number.value ?? "",
        before: [...before],
        after: [...after],
        drawn: uses.flatMap(({ id }) => drawnAt(id, layout)),
      });
    }
  }
  return rows;
}

/** Its terminals in rungs and in power circuits, in drawing order. */
function usesOfStrip({ throughs, mains }: Device): { pin: string; node: NodeId; id: PartId }[] {
  return [
    ...mains.flatMap(({ id, ins }) => ins.map(({ terminal, node }) => ({ pin: terminal, node, id }))),
    ...throughs.flatMap(({ id, pin, from }) => (pin === undefined ? [] : [{ pin, node: from, id }])),
  ];
}
