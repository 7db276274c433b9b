import type { Conductor, Machine, MainUse, NodeId, PowerBranch, Supply } from "../machine/model.js";
import { laddersOf, usesOf } from "../machine/walk.js";
import { type ConductorColour, conductorColour } from "./conductor-colours.js";
import { type Connection, joinPins, type Pin } from "./join-pins.js";

/** One potential with all that is joined at it. */
export interface WireRow {
  number: string;
  colour: ConductorColour;
  /** The rail's name or the points', `@run`; empty for a wire without a name. */
  name: string;
  /** In drawing order. */
  pins: Pin[];
  /** From pin to pin; none where a single pin has nothing joined to it. */
  connections: Pick<Connection, "from" | "to">[];
}

/** Every wire number with the pins it joins, in the order of the potentials. What no device touches has no row. */
export function wireList(machine: Machine): WireRow[] {
  const joined = joinPins(machine);
  const supplies = suppliesByNode(machine);
  const phases = phasesByNode(machine);
  return machine.potentials.flatMap(({ id, rail, points, number }) => {
    const there = joined.get(id);
    if (!there) return [];
    const phase = supplies.has(id) ? rail : (phases.get(id) ?? rail);
    return [
      {
        number: number.value,
        colour: conductorColour(phase, supplies.get(id), machine.drawing.convention),
        name: rail ?? points.map((point) => `@${point}`).join(" "),
        pins: there.pins,
        connections: there.connections.map(({ from, to }) => ({ from, to })),
      },
    ];
  });
}

/** The supply of the ladder in which each potential first stands, or to which a branch of a power circuit leads it. */
function suppliesByNode({ circuits, supplies }: Machine): Map<NodeId, Supply> {
  const found = new Map<NodeId, Supply>();
  const note = (node: NodeId, supply: Supply | undefined) => {
    if (supply && !found.has(node)) found.set(node, supply);
  };
  for (const { rungs, supply } of laddersOf({ circuits })) {
    for (const { path } of rungs) for (const { from, to } of usesOf(path)) for (const node of [from, to]) note(node, supply);
  }
  for (const circuit of circuits) {
    if (circuit.kind !== "power") continue;
    const before = new Set(circuit.feed.bus.map(({ node }) => node));
    for (const { end } of circuit.branches) {
      if (end.kind !== "supply") continue;
      const supply = supplies.find(({ name }) => name === end.supply);
      // Rails that are the busbars themselves are power still.
      for (const { node } of end.conductors) if (!before.has(node)) note(node, supply);
    }
  }
  return found;
}

/** Which conductor of a power circuit each potential is. */
function phasesByNode({ circuits }: Machine): Map<NodeId, string> {
  const phases = new Map<NodeId, string>();
  const note = ({ node, phase }: Pick<Conductor, "node" | "phase">) => {
    if (!phases.has(node)) phases.set(node, phase);
  };
  const visit = (item: PowerBranch["path"][number]): void => {
    if (item.kind === "power-parallel") for (const way of item.ways) way.forEach(visit);
    else if (item.kind === "main") for (const pin of pinsOfMain(item)) note(pin);
  };
  for (const circuit of circuits) {
    if (circuit.kind !== "power") continue;
    for (const conductor of [...circuit.feed.conductors, ...circuit.feed.bus]) note(conductor);
    for (const { path } of [circuit.feed, ...circuit.branches]) path.forEach(visit);
  }
  return phases;
}

function pinsOfMain({ ins, outs, second = [] }: MainUse): Pick<Conductor, "node" | "phase">[] {
  return [...ins, ...outs, ...second];
}
