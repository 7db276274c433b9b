import type { NodeId, Rung, SeriesPath } from "../../machine/model.js";
import { NodeJoiner } from "../../machine/nodes.js";
import type { Cell, Stop } from "./grid.js";
import type { Joined } from "./join-points.js";

/** Rungs whose nodes are single wires, and the electrical node of each wire. */
export interface SplitWires {
  rungs: Rung[];
  nodeOf(wire: NodeId): NodeId;
  /** The wires that are the rails themselves. */
  rails: readonly NodeId[];
}

/**
 * Takes the two sides of every terminal and plug pin for different wires. They are one node, but what is joined behind a
 * terminal is not to be drawn before it.
 */
export function splitWires(rungs: readonly Rung[], rails: readonly NodeId[]): SplitWires {
  const wires = new NodeJoiner();
  const nodes: NodeId[] = [];
  const add = (node: NodeId) => {
    nodes.push(node);
    return wires.add();
  };
  const railWires = rails.map(add);
  const points = new Map<string, NodeId>();
  const pointWire = (point: string, node: NodeId) => {
    const wire = points.get(point) ?? add(node);
    points.set(point, wire);
    return wire;
  };
  const endWire = (end: Rung["start"]) => {
    const rail = rails.indexOf(end.node);
    return end.kind === "point" ? pointWire(end.point, end.node) : rail < 0 ? add(end.node) : (railWires[rail] as NodeId);
  };
  const splitSeries = (path: SeriesPath, from: NodeId, to: NodeId): SeriesPath => {
    const last = path.items.findLastIndex((item) => item.kind !== "point");
    if (last < 0) wires.join(from, to);
    let here = from;
    const items = path.items.map((item, index): SeriesPath["items"][number] => {
      if (item.kind === "point") {
        wires.join(here, pointWire(item.point, item.from));
        return { ...item, from: here, to: here };
      }
      const next = index === last ? to : add(item.to);
      const ends = { from: here, to: next };
      here = next;
      if (item.kind !== "parallel") return { ...item, ...ends };
      return { ...item, ...ends, branches: item.branches.map((branch) => splitSeries(branch, ends.from, ends.to)) };
    });
    return { ...path, items, from, to };
  };
  const split = rungs.map((rung): Rung => {
    const start = { ...rung.start, node: endWire(rung.start) };
    const end = { ...rung.end, node: endWire(rung.end) };
    return { ...rung, start, end, path: splitSeries(rung.path, start.node, end.node) };
  });
  const found = (path: SeriesPath): SeriesPath => ({
    ...path,
    items: path.items.map((item) => {
      const ends = { from: wires.find(item.from), to: wires.find(item.to) };
      return item.kind === "parallel" ? { ...item, ...ends, branches: item.branches.map(found) } : { ...item, ...ends };
    }),
    from: wires.find(path.from),
    to: wires.find(path.to),
  });
  return {
    rungs: split.map((rung) => ({
      ...rung,
      start: { ...rung.start, node: wires.find(rung.start.node) },
      end: { ...rung.end, node: wires.find(rung.end.node) },
      path: found(rung.path),
    })),
    nodeOf: (wire) => nodes[wire] ?? wire,
    rails: railWires.map((wire) => wires.find(wire)),
  };
}

/** The places with their electrical nodes again instead of single wires. */
export function joinWiresAgain({ grids, links, endings }: Joined, nodeOf: SplitWires["nodeOf"]): Joined {
  const named = <T extends { node: NodeId }>(list: readonly T[]): T[] => list.map((item) => ({ ...item, node: nodeOf(item.node) }));
  return {
    grids: grids.map((grid) => {
      const cells = new Map(
        grid.cells.map((cell) => [cell, { ...cell, use: { ...cell.use, from: nodeOf(cell.use.from), to: nodeOf(cell.use.to) } }]),
      );
      const stop = (end: Stop): Stop => ("cell" in end ? { cell: cells.get(end.cell) as Cell, pin: end.pin } : end);
      return {
        ...grid,
        cells: [...cells.values()],
        runs: named(grid.runs).map((run) => ({ ...run, from: stop(run.from), to: stop(run.to) })),
        uprights: named(grid.uprights),
        sites: named(grid.sites),
      };
    }),
    links: named(links),
    endings: named(endings),
  };
}
