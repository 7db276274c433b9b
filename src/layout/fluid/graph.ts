import type { PartId } from "../../drawing/marks.js";
import type { FluidCircuit, FluidComponent, FluidKind, FluidNode, FluidNodeId } from "../../machine/model.js";

/** One port on a node. */
export interface Joint {
  component: FluidComponent;
  port: string;
}

/** A component's two main ports, where a line leads in at one and out at the other. */
const throughKinds: ReadonlySet<FluidKind> = new Set<FluidKind>([
  "service-unit",
  "filter",
  "check-valve",
  "pilot-operated-check-valve",
  "throttle",
  "one-way-flow-control",
  "shut-off-valve",
]);

const sinkKinds: ReadonlySet<FluidKind> = new Set<FluidKind>(["tank", "silencer", "exhaust"]);

const sourcePorts: Partial<Record<FluidKind, string>> = { pump: "P", compressor: "P", "air-supply": "1" };

/** Where a line ends: a tank, a silencer, the open air. */
export function isSink({ kind }: FluidComponent): boolean {
  return sinkKinds.has(kind);
}

/** The port at which a pump, compressor or supply gives its fluid. */
export function sourcePort({ kind }: FluidComponent): string | undefined {
  return sourcePorts[kind];
}

/** The ports a line runs through a component by, inlet first; undefined for what has one port or more than a way through. */
export function throughPorts(component: FluidComponent): [string, string] | undefined {
  if (throughKinds.has(component.kind)) return ["in", "out"];
  if (component.valve?.ports === 2) {
    const main = component.ports.map(({ name }) => name).filter((name) => name === "P" || name === "A" || name === "1" || name === "2");
    if (main.length === 2) return main[0] === "A" || main[0] === "2" ? [main[1] as string, main[0]] : (main as [string, string]);
  }
  return undefined;
}

/** The other end of a way through. */
export function beyond(component: FluidComponent, port: string): string | undefined {
  const through = throughPorts(component);
  if (!through) return undefined;
  return port === through[0] ? through[1] : port === through[1] ? through[0] : undefined;
}

/** Ports of a directional valve that are fed, and those that let out. */
export const inletPorts: ReadonlySet<string> = new Set(["P", "1"]);
export const returnPorts: ReadonlySet<string> = new Set(["T", "3", "5"]);

/** A fluid circuit by its ports and nodes. */
export class FluidGraph {
  readonly components: readonly FluidComponent[];
  private readonly byId: ReadonlyMap<PartId, FluidComponent>;
  private readonly nodes: ReadonlyMap<FluidNodeId, FluidNode>;
  private readonly joints: ReadonlyMap<FluidNodeId, Joint[]>;

  constructor(readonly circuit: FluidCircuit) {
    this.components = circuit.components;
    this.byId = new Map(circuit.components.map((component) => [component.id, component]));
    this.nodes = new Map(circuit.nodes.map((node) => [node.id, node]));
    const joints = new Map<FluidNodeId, Joint[]>();
    for (const component of circuit.components) {
      for (const { name, node } of component.ports) {
        if (node === undefined) continue;
        const there = joints.get(node);
        if (there) there.push({ component, port: name });
        else joints.set(node, [{ component, port: name }]);
      }
    }
    this.joints = joints;
  }

  component(id: PartId): FluidComponent | undefined {
    return this.byId.get(id);
  }

  node(id: FluidNodeId): FluidNode | undefined {
    return this.nodes.get(id);
  }

  nodeOf(component: FluidComponent, port: string): FluidNodeId | undefined {
    return component.ports.find(({ name }) => name === port)?.node;
  }

  /** Every port on a node, in the order of the components. */
  at(node: FluidNodeId | undefined): readonly Joint[] {
    return node === undefined ? [] : (this.joints.get(node) ?? []);
  }

  /** Ports on a node other than those of one component. */
  others(node: FluidNodeId | undefined, than: FluidComponent): Joint[] {
    return this.at(node).filter(({ component }) => component !== than);
  }

  nodeIds(): Iterable<FluidNodeId> {
    return this.joints.keys();
  }
}
