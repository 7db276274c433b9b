import { FluidMap } from "../behaviour/fluid-map.js";
import { wholeFluidsOf } from "../machine/walk.js";
import { rule } from "./rule.js";

/** ISO 4413: every part of the system is protected against pressure above its greatest. */
export const pumpWithoutRelief = rule<{ pump: string }>({
  code: "pump-without-relief",
  severity: "warning",
  says: ({ pump }) => `No relief valve guards the pressure side of ${pump}.`,
  hint: ({ pump }) => `Join one there, as in "line ${pump} -- RV1 -- tank".`,
  find: ({ machine }) =>
    wholeFluidsOf(machine).flatMap((circuit) => {
      const map = new FluidMap(circuit);
      return circuit.components.flatMap(({ kind, name, ports, at }) => {
        const outlet = ports.find((port) => port.name === "P")?.node;
        if (kind !== "pump" || name === undefined || outlet === undefined) return [];
        const guarded = map.reachedFrom(outlet).some(({ component, port }) => component.kind === "relief-valve" && port === "P");
        return guarded ? [] : [{ pump: name, at }];
      });
    }),
});
