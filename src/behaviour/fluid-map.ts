import type { FluidCircuit, FluidComponent, FluidKind, FluidNodeId } from "../machine/model.js";

/** What fluid goes through, one way at least, wherever it stands in a line. */
const passing: ReadonlySet<FluidKind> = new Set<FluidKind>([
  "filter",
  "service-unit",
  "check-valve",
  "pilot-operated-check-valve",
  "throttle",
  "one-way-flow-control",
  "shut-off-valve",
]);

interface PortPlace {
  component: FluidComponent;
  port: string;
}

/** Finds what lines lead to in one circuit. */
export class FluidMap {
  private readonly byNode = new Map<FluidNodeId, PortPlace[]>();

  constructor(readonly circuit: FluidCircuit) {
    for (const component of circuit.components) {
      for (const { name, node } of component.ports) {
        if (node === undefined) continue;
        const there = this.byNode.get(node);
        if (there) there.push({ component, port: name });
        else this.byNode.set(node, [{ component, port: name }]);
      }
    }
  }

  /** The ports a line from this node leads to, straight and through what fluid only passes, nearest first. */
  reachedFrom(node: FluidNodeId): PortPlace[] {
    const reached: PortPlace[] = [];
    const seen = new Set([node]);
    const queue = [node];
    for (let here = queue.shift(); here !== undefined; here = queue.shift()) {
      for (const place of this.byNode.get(here) ?? []) {
        reached.push(place);
        if (!passing.has(place.component.kind)) continue;
        for (const { name, node: beyond } of place.component.ports) {
          // A pilot is not a way through.
          if (beyond === undefined || name === "X" || place.port === "X" || seen.has(beyond)) continue;
          seen.add(beyond);
          queue.push(beyond);
        }
      }
    }
    return reached;
  }
}
