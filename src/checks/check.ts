import type { StartState } from "../behaviour/start-state.js";
import type { Diagnostic } from "../language/diagnostic.js";
import type { Machine } from "../machine/model.js";
import { Networks } from "./networks.js";
import { rules } from "./rules.js";

/**
 * Holds a machine against every design rule. A drawing with no finding is not thereby safe: the rules find slips of the pen,
 * they do not certify a machine.
 */
export function check(machine: Machine, start: StartState): Diagnostic[] {
  const subject = { machine, start, networks: new Networks(machine) };
  return rules.flatMap((rule) => rule.run(subject));
}
