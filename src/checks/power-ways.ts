import type { Machine, MainUse, NodeId, PowerBranch, PowerCircuit, PowerParallel, PowerPoint } from "../machine/model.js";
import { gather } from "./gather.js";

/** Ways to one motor that are told apart. */
const mostWays = 32;

/** The power circuits of which every branch could be read. */
export function wholePowersOf({ circuits }: Machine): PowerCircuit[] {
  return circuits.filter((circuit) => circuit.kind === "power").filter(({ branches }) => !branches.some(({ incomplete }) => incomplete));
}

type Element = MainUse | PowerParallel | PowerPoint;

/** What stands in a path, over both sides of what is parallel. */
export function* mainsIn(path: readonly Element[]): Generator<MainUse> {
  for (const element of path) {
    if (element.kind === "main") yield element;
    else if (element.kind === "power-parallel") for (const way of element.ways) yield* mainsIn(way);
  }
}

/** The motors of a power circuit, each with the branch it ends. */
export function motorsOf(machine: Machine, { branches }: PowerCircuit): { motor: MainUse; branch: PowerBranch }[] {
  return branches.flatMap((branch) =>
    [...mainsIn(branch.path)].flatMap((use) => (machine.devices.get(use.device)?.kind === "motor" ? [{ motor: use, branch }] : [])),
  );
}

/**
 * The ways from the busbars to a motor, each with what it leads through, nearest to the motor first; undefined where they are too
 * many to tell. What stands in the feed itself is not among it.
 */
export function waysToMotor({ branches }: PowerCircuit, motor: MainUse): MainUse[][] | undefined {
  const behind = new Map<NodeId, MainUse[]>();
  for (const { path } of branches) for (const use of mainsIn(path)) for (const { node } of use.outs) gather(behind, node, use);
  const ways: MainUse[][] = [];
  const visit = (use: MainUse, way: readonly MainUse[]): void => {
    if (ways.length > mostWays) return;
    const before = new Set(use.ins.flatMap(({ node }) => behind.get(node) ?? []).filter((other) => !way.includes(other)));
    if (before.size === 0) ways.push([...way]);
    for (const other of before) visit(other, [...way, other]);
  };
  visit(motor, []);
  return ways.length > mostWays ? undefined : ways;
}
