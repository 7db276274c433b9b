import type { PartId } from "../../drawing/marks.js";
import { isMeasuring } from "../../machine/kinds.js";
import type { FluidCircuit, FluidComponent, FluidLine, FluidNode, FluidNodeId } from "../../machine/model.js";

/** A circuit as it is drawn, with what its repeated tanks and their nodes stand for. */
export interface DrawnCircuit {
  circuit: FluidCircuit;
  /** The component of the machine that a repeated symbol stands for. */
  standsFor: ReadonlyMap<PartId, PartId>;
  /** The node of the machine that a node of its own belongs to. */
  nodeOf: ReadonlyMap<FluidNodeId, FluidNodeId>;
}

type End = FluidNode["ports"][number];

/**
 * Draws a tank anew wherever a line ends in it, as ISO 1219-1 allows: each pump has its own straight below it, and each line
 * that leads back. Only the returns of several directional valves come together. The first symbol carries the tank's data,
 * the others its designation.
 */
export function repeatTanks(circuit: FluidCircuit): DrawnCircuit {
  const standsFor = new Map<PartId, PartId>();
  const nodeOf = new Map<FluidNodeId, FluidNodeId>();
  const byId = new Map(circuit.components.map((component) => [component.id, component]));
  const moved = new Map<string, { node: FluidNodeId; tank: PartId }>();
  const replaced = new Map<FluidComponent, FluidComponent[]>();
  const nodes: FluidNode[] = [];
  let next = Math.max(-1, ...circuit.nodes.map(({ id }) => id)) + 1;
  for (const node of circuit.nodes) {
    const tanks = node.ports.filter(({ component }) => byId.get(component)?.kind === "tank");
    const tank = tanks.length === 1 ? byId.get(tanks[0]?.component as PartId) : undefined;
    const groups = tank ? endsApart(node, tank, byId) : [];
    if (!tank || groups.length < 2) {
      nodes.push(node);
      continue;
    }
    const drawn: FluidComponent[] = [];
    for (const [index, ends] of groups.entries()) {
      const id = index === 0 ? node.id : next++;
      const own = index === 0 ? tank : repeated(tank, index + 1, id);
      drawn.push(own);
      nodes.push({ id, points: index === 0 ? node.points : [], ports: [...ends, { component: own.id, port: "T" }] });
      if (index === 0) continue;
      nodeOf.set(id, node.id);
      standsFor.set(own.id, tank.id);
      for (const { component, port } of ends) moved.set(`${component} ${port}`, { node: id, tank: own.id });
    }
    replaced.set(tank, drawn);
  }
  if (replaced.size === 0) return { circuit, standsFor, nodeOf };
  const onNode = (component: FluidComponent): FluidComponent => {
    const ports = component.ports.map((port) => {
      const there = moved.get(`${component.id} ${port.name}`);
      return there ? { ...port, node: there.node } : port;
    });
    return ports.some((port, index) => port !== component.ports[index]) ? { ...component, ports } : component;
  };
  const components = circuit.components.flatMap((component) => replaced.get(component) ?? [onNode(component)]);
  return { circuit: { ...circuit, components, nodes, lines: circuit.lines.map((line) => led(line, moved, byId)) }, standsFor, nodeOf };
}

function repeated(tank: FluidComponent, count: number, node: FluidNodeId): FluidComponent {
  const { text: _, note: __, ...rest } = tank;
  return { ...rest, id: `${tank.id} (${count})`, values: [], ports: tank.ports.map((port) => ({ ...port, node })) };
}

/** The ports on a tank's node by the symbol they end in, what pumps draw from first. */
function endsApart(node: FluidNode, tank: FluidComponent, byId: ReadonlyMap<PartId, FluidComponent>): End[][] {
  const ends = node.ports.filter(({ component }) => component !== tank.id);
  const kindOf = ({ component }: End) => byId.get(component)?.kind;
  const isSuction = (end: End) => kindOf(end) === "pump" || leadsToPump(end, byId);
  const together = ends.filter((end) => kindOf(end) === "valve");
  const measuring = ends.filter((end) => isMeasuring(kindOf(end)));
  const rest = ends.filter((end) => !together.includes(end) && !measuring.includes(end));
  const groups = [
    ...rest.filter(isSuction).map((end) => [end]),
    ...(together.length > 0 ? [together] : []),
    ...rest.filter((end) => !isSuction(end)).map((end) => [end]),
  ];
  groups[0]?.push(...measuring);
  return groups;
}

/** A strainer whose other end is a pump's inlet. */
function leadsToPump({ component, port }: End, byId: ReadonlyMap<PartId, FluidComponent>): boolean {
  const strainer = byId.get(component);
  const other = strainer?.ports.length === 2 ? strainer.ports.find(({ name }) => name !== port)?.node : undefined;
  return (
    other !== undefined &&
    [...byId.values()].some((one) => one.kind === "pump" && one.ports.some(({ name, node }) => name === "S" && node === other))
  );
}

/** A stretch of line with its end at the tank of its other end. */
function led(
  line: FluidLine,
  moved: ReadonlyMap<string, { node: FluidNodeId; tank: PartId }>,
  byId: ReadonlyMap<PartId, FluidComponent>,
): FluidLine {
  const there = line.ends.flatMap((end) => (end.kind === "port" ? (moved.get(`${end.component} ${end.port}`) ?? []) : []))[0];
  if (!there) return line;
  const ends = line.ends.map((end) =>
    end.kind === "port" && byId.get(end.component)?.kind === "tank" ? { ...end, component: there.tank } : end,
  ) as FluidLine["ends"];
  return { ...line, node: there.node, ends };
}
