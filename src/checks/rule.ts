import type { StartState } from "../behaviour/start-state.js";
import type { Diagnostic, Severity, SourceRange } from "../language/diagnostic.js";
import type { Machine } from "../machine/model.js";
import type { Networks } from "./networks.js";

/** What every rule looks at. */
export interface Subject {
  machine: Machine;
  start: StartState;
  /** Which electrical potentials contacts can join. */
  networks: Networks;
}

/** Where a rule found something, with what its sentence speaks of. */
export type Finding<Facts> = Facts & { at: SourceRange; seeAlso?: Diagnostic["seeAlso"] };

/** A design rule: what it is called, how bad it is, what it says, and how it is found. */
export interface Rule<Facts = unknown> {
  code: string;
  severity: Severity;
  says: (facts: Facts) => string;
  hint?: (facts: Facts) => string | undefined;
  find: (subject: Subject) => Finding<Facts>[];
}

/** A rule ready to be run among others, whatever facts it speaks of. */
export interface RunnableRule {
  code: string;
  severity: Severity;
  run: (subject: Subject) => Diagnostic[];
}

/** Closes a rule over its facts. */
export function rule<Facts>({ code, severity, says, hint, find }: Rule<Facts>): RunnableRule {
  return {
    code,
    severity,
    run: (subject) =>
      find(subject).map((finding) => {
        const { at, seeAlso, ...facts } = finding;
        const advice = hint?.(finding);
        return {
          code,
          severity,
          message: says(finding),
          at,
          ...(advice !== undefined && { hint: advice }),
          ...(seeAlso && { seeAlso }),
          ...(Object.keys(facts).length > 0 && { data: facts }),
        };
      }),
  };
}
