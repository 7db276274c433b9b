import type { NodeId } from "./model.js";

/** What names conductors behind devices: the stages in reading order, and the leads of the motors. */
export interface ConductorStages {
  /** Conductors behind one device, with which of the conductors each is. */
  stages: { phase: string; node: NodeId }[][];
  /** Leads of each motor, in reading order, and of its star point. */
  motors: { leads: { terminal: string; node: NodeId }[] }[];
  /** Named as stages even where a motor hangs on them directly. */
  busbars: ReadonlySet<NodeId>;
}

/**
 * Names the conductors of power circuits. Behind each device a new number stands before the conductor: `1L1 1L2 1L3` behind the
 * main switch, `2L1 …` behind the next. The leads of a motor are numbered by the motor and named by its terminals, `1T1` or `1U1`, because a
 * reversing or star-delta contactor changes which phase they carry. The numbers tell the phase and need no sheet, so they are the
 * same with wires numbered running or by line. Names that something has already are passed over.
 */
export function nameConductors(named: { rail?: string; conductor?: string }[], { stages, motors, busbars }: ConductorStages): void {
  const taken = new Set(named.flatMap(({ rail }) => (rail === undefined ? [] : [rail])));
  const free = (node: NodeId) => named[node] && named[node].rail === undefined && named[node].conductor === undefined;
  const give = (node: NodeId, name: string) => {
    if (!free(node) || taken.has(name)) return;
    (named[node] as { conductor?: string }).conductor = name;
    taken.add(name);
  };
  motors.forEach(({ leads }, index) => {
    for (const { terminal, node } of leads) {
      if (!busbars.has(node)) give(node, `${index + 1}${/^\d/.test(terminal) ? "." : ""}${terminal}`);
    }
  });
  let number = 1;
  for (const stage of stages) {
    if (!stage.some(({ node }) => free(node))) continue;
    while (stage.some(({ phase }) => taken.has(`${number}${phase}`))) number++;
    for (const { phase, node } of stage) give(node, `${number}${phase}`);
    number++;
  }
  for (const { node } of [...stages.flat(), ...motors.flatMap(({ leads }) => leads)]) {
    if (!free(node)) continue;
    while (taken.has(`${number}`)) number++;
    give(node, `${number}`);
  }
}
