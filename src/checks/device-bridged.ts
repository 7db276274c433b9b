import { nameOf } from "./names-of.js";
import { rule } from "./rule.js";

/** A terminal or a plug pin is a place on a wire: both its sides are one potential. */
export const deviceBridged = rule<{ device: string }>({
  code: "device-bridged",
  severity: "error",
  says: ({ device }) => `A plain wire runs past ${device}: both its ends are on the same potential.`,
  find: ({ networks }) =>
    [...networks.contacts, ...networks.loads, ...networks.throughs.filter(({ pin }) => pin === undefined)]
      .filter(({ from, to, rung }) => from === to && !networks.rungById.get(rung)?.incomplete)
      .map((use) => ({ device: use.kind === "contact" ? use.device : nameOf(use), at: use.at })),
});
