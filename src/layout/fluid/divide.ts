import type { FluidComponent, FluidNodeId } from "../../machine/model.js";
import { beyond, type FluidGraph, inletPorts, isSink, returnPorts, sourcePort, throughPorts } from "./graph.js";

export type HeaderKind = "supply" | "return" | "other";

/** A fluid circuit in the parts it is drawn by. */
export interface Division {
  /** Pumps, supplies and what conditions and guards their fluid; tanks that all share, with the filters before them. */
  unit: FluidComponent[];
  /** What belongs together by lines that are nobody else's: usually an actuator with the valves that serve it. */
  groups: FluidComponent[][];
  /** Nodes the groups share with the unit or with each other, in the order they are to stand below the valves. */
  headers: { node: FluidNodeId; kind: HeaderKind }[];
}

/** Splits a circuit at its shared pressure, return and pilot nodes. */
export function divide(graph: FluidGraph): Division {
  const supply = supplySide(graph);
  const unit = supply.unit;
  addUnloading(graph, supply, unit);
  addReturns(graph, unit);
  for (const component of graph.components) if (component.kind === "electric-motor") unit.add(component);

  const shared = sharedNodes(graph, unit);
  addSinksOfUnit(graph, unit, shared);
  const groups = connected(graph, unit, shared);
  const headers = [...shared]
    .map((node) => ({ node, kind: kindOf(graph, node, supply.nodes) }))
    .sort((a, b) => order.indexOf(a.kind) - order.indexOf(b.kind) || a.node - b.node);
  return { unit: graph.components.filter((component) => unit.has(component)), groups, headers };
}

const order: readonly HeaderKind[] = ["supply", "other", "return"];

interface SupplySide {
  unit: Set<FluidComponent>;
  /** Nodes under supply pressure before any directional valve. */
  nodes: Set<FluidNodeId>;
}

/** Follows the fluid from its sources up to the valves and cylinders that use it. What serves more than one user belongs to the unit. */
function supplySide(graph: FluidGraph): SupplySide {
  const unit = new Set<FluidComponent>();
  const nodes = new Set<FluidNodeId>();
  const branches = new Map<FluidNodeId, { component: FluidComponent; users: Set<FluidComponent>; to?: FluidNodeId }[]>();
  const seen = new Set<FluidComponent>();
  const idle = idleValves(graph);

  const follow = (node: FluidNodeId): Set<FluidComponent> => {
    const users = new Set<FluidComponent>();
    if (nodes.has(node)) return users;
    nodes.add(node);
    const here: { component: FluidComponent; users: Set<FluidComponent>; to?: FluidNodeId }[] = [];
    branches.set(node, here);
    for (const { component, port } of graph.at(node)) {
      if (sourcePort(component) !== undefined || component.kind === "tank") continue;
      if ((component.kind === "valve" && !feedsSeveral(graph, component, port)) || component.kind === "cylinder") {
        if (!idle.has(component)) users.add(component);
        continue;
      }
      if (seen.has(component)) continue;
      seen.add(component);
      const out = beyond(component, port);
      const to = out === undefined ? undefined : graph.nodeOf(component, out);
      const theirs = to === undefined ? new Set<FluidComponent>() : follow(to);
      here.push({ component, users: theirs, ...(to === undefined ? {} : { to }) });
      for (const user of theirs) users.add(user);
    }
    return users;
  };
  const assigned = new Set<FluidNodeId>();
  const assign = (node: FluidNodeId, total: number): void => {
    if (assigned.has(node)) return;
    assigned.add(node);
    for (const { component, users, to } of branches.get(node) ?? []) {
      if (users.size === 1 && total > 1) continue;
      unit.add(component);
      if (to !== undefined) assign(to, total);
    }
  };
  for (const component of graph.components) {
    const port = sourcePort(component);
    if (port === undefined) continue;
    unit.add(component);
    const node = graph.nodeOf(component, port);
    if (node !== undefined && !nodes.has(node)) assign(node, follow(node).size);
    addSuction(graph, component, unit);
  }
  return { unit, nodes };
}

/** Strainer and whatever else stands between a pump and its tank. */
function addSuction(graph: FluidGraph, pump: FluidComponent, unit: Set<FluidComponent>): void {
  let at = pump;
  for (let node = graph.nodeOf(pump, "S"); node !== undefined; ) {
    const others = graph.others(node, at);
    for (const { component } of others) if (isSink(component)) unit.add(component);
    const next = others.find(({ component }) => throughPorts(component) && component.kind !== "valve" && !unit.has(component));
    if (!next) return;
    unit.add(next.component);
    at = next.component;
    node = graph.nodeOf(next.component, beyond(next.component, next.port) as string);
  }
}

/** A two- or three-port valve in the main line, such as the one that shuts off a whole machine's air. */
function feedsSeveral(graph: FluidGraph, valve: FluidComponent, port: string): boolean {
  if (!inletPorts.has(port) || !valve.valve || valve.valve.ports > 3) return false;
  const outlet = valve.ports.find(({ name }) => name === "A" || name === "2")?.node;
  return (
    outlet !== undefined &&
    graph.others(outlet, valve).filter(({ component, port: fed }) => component.kind === "valve" && inletPorts.has(fed)).length > 1
  );
}

/** Valves that only let a supply back to the tank, as a pump is unloaded. */
function idleValves(graph: FluidGraph): Set<FluidComponent> {
  const found = new Set<FluidComponent>();
  for (const valve of graph.components) {
    if (valve.kind !== "valve") continue;
    const rest = valve.ports.filter(({ name, node }) => !inletPorts.has(name) && node !== undefined);
    const working = rest.filter(({ name }) => !returnPorts.has(name));
    if (working.length > 0 && working.every(({ node }) => graph.others(node, valve).some(({ component }) => component.kind === "tank")))
      found.add(valve);
  }
  return found;
}

function addUnloading(graph: FluidGraph, supply: SupplySide, unit: Set<FluidComponent>): void {
  for (const valve of idleValves(graph)) {
    if (valve.ports.some(({ name, node }) => inletPorts.has(name) && node !== undefined && supply.nodes.has(node))) unit.add(valve);
  }
}

/** Follows the returns back from the tanks and silencers. What takes the return of more than one valve belongs to the unit. */
function addReturns(graph: FluidGraph, unit: Set<FluidComponent>): void {
  const valves = graph.components.filter(({ kind }) => kind === "valve").length;
  for (const sink of graph.components) {
    if (!isSink(sink) || unit.has(sink)) continue;
    const node = sink.ports[0]?.node;
    if (node === undefined) continue;
    const found = { users: new Set<FluidComponent>(), through: [] as FluidComponent[] };
    followBack(graph, node, sink, found, new Set([node]), unit);
    const filtered = found.through.some(({ kind }) => kind === "filter");
    if (found.users.size > 1 || (found.users.size === 1 && valves === 1 && filtered)) {
      unit.add(sink);
      for (const component of found.through) unit.add(component);
    }
  }
  // The return into a tank that a pump draws from.
  for (const sink of graph.components) {
    if (!isSink(sink) || !unit.has(sink)) continue;
    const node = sink.ports[0]?.node;
    if (node === undefined) continue;
    const found = { users: new Set<FluidComponent>(), through: [] as FluidComponent[] };
    followBack(graph, node, sink, found, new Set([node]), unit);
    for (const component of found.through) if (component.kind === "filter" || found.users.size > 1) unit.add(component);
  }
}

function followBack(
  graph: FluidGraph,
  node: FluidNodeId,
  from: FluidComponent,
  found: { users: Set<FluidComponent>; through: FluidComponent[] },
  seen: Set<FluidNodeId>,
  unit: ReadonlySet<FluidComponent>,
): void {
  for (const { component, port } of graph.others(node, from)) {
    if (unit.has(component)) continue;
    const out = component.kind === "valve" ? undefined : beyond(component, port);
    if (out === undefined) {
      if (component.kind === "valve" || component.kind === "cylinder") found.users.add(component);
      continue;
    }
    found.through.push(component);
    const to = graph.nodeOf(component, out);
    if (to === undefined || seen.has(to)) continue;
    seen.add(to);
    followBack(graph, to, component, found, seen, unit);
  }
}

/** Nodes between the unit and the rest, and those that feed or drain several valves. */
function sharedNodes(graph: FluidGraph, unit: ReadonlySet<FluidComponent>): Set<FluidNodeId> {
  const shared = new Set<FluidNodeId>();
  for (const node of graph.nodeIds()) {
    const joints = graph.at(node);
    const inUnit = joints.some(({ component }) => unit.has(component));
    const outside = joints.filter(({ component }) => !unit.has(component));
    const valves = (ports: ReadonlySet<string>) =>
      new Set(outside.filter(({ component, port }) => component.kind === "valve" && ports.has(port)).map(({ component }) => component))
        .size;
    if ((inUnit && outside.some(({ component }) => !isSink(component))) || valves(inletPorts) > 1 || valves(returnPorts) > 1)
      shared.add(node);
  }
  return shared;
}

/** A tank at a relief valve belongs where the valve does, and a sink on a shared node to the unit. */
function addSinksOfUnit(graph: FluidGraph, unit: Set<FluidComponent>, shared: ReadonlySet<FluidNodeId>): void {
  for (const sink of graph.components) {
    if (!isSink(sink)) continue;
    const node = sink.ports[0]?.node;
    if (node === undefined) continue;
    if (shared.has(node) || graph.others(node, sink).some(({ component }) => unit.has(component))) unit.add(sink);
  }
}

function connected(graph: FluidGraph, unit: ReadonlySet<FluidComponent>, shared: ReadonlySet<FluidNodeId>): FluidComponent[][] {
  const groups: FluidComponent[][] = [];
  const taken = new Set<FluidComponent>();
  const collect = (start: FluidComponent) => {
    const members = new Set<FluidComponent>([start]);
    for (const member of members) {
      taken.add(member);
      for (const { node } of member.ports) {
        if (node === undefined || shared.has(node)) continue;
        for (const { component } of graph.at(node)) if (!unit.has(component)) members.add(component);
      }
    }
    groups.push(graph.components.filter((component) => members.has(component)));
  };
  // Working order is the order in which the actuators are declared; what moves nothing comes after.
  for (const kind of ["cylinder", "valve", undefined]) {
    for (const component of graph.components) {
      if (!taken.has(component) && !unit.has(component) && (kind === undefined || component.kind === kind)) collect(component);
    }
  }
  return groups;
}

function kindOf(graph: FluidGraph, node: FluidNodeId, supplied: ReadonlySet<FluidNodeId>): HeaderKind {
  if (supplied.has(node)) return "supply";
  const joints = graph.at(node);
  if (joints.some(({ component, port }) => component.kind === "valve" && inletPorts.has(port))) return "supply";
  if (joints.some(({ component, port }) => isSink(component) || (component.kind === "valve" && returnPorts.has(port)))) return "return";
  return "other";
}
