import { rule } from "./rule.js";

export const deviceBridged = rule<{ device: string }>({
  code: "device-bridged",
  severity: "error",
  says: ({ device }) => `A plain wire runs past ${device}: both its ends are on the same potential.`,
  find: ({ networks }) =>
    [...networks.contacts, ...networks.loads]
      .filter(({ from, to, rung }) => from === to && !networks.rungById.get(rung)?.incomplete)
      .map(({ device, at }) => ({ device, at })),
});
