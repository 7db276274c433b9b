import type { FluidCircuit } from "../machine/model.js";
import { fluidsOf } from "../machine/walk.js";
import { rule } from "./rule.js";

export const pressureNeverReached = rule<{ device: string; rising: string; most: string; by: string }>({
  code: "pressure-never-reached",
  severity: "warning",
  says: ({ device, rising, most, by }) => `${device} switches at ${rising}, which is never reached: ${by} keeps the pressure to ${most}.`,
  find: ({ machine }) =>
    fluidsOf(machine).flatMap((circuit) => {
      const limit = limitOf(circuit);
      if (!limit) return [];
      return circuit.components.flatMap(({ kind, name = "" }) => {
        const device = kind === "pressure-switch" ? machine.devices.get(name) : undefined;
        const rising = device?.senses?.rising;
        return device && rising && rising.value > limit.pressure.value
          ? [{ device: device.name, rising: rising.text, most: limit.pressure.text, by: limit.name, at: device.at }]
          : [];
      });
    }),
});

/** The highest pressure a circuit's only relief valve or only source lets stand. With several of them nothing is said. */
function limitOf({ components }: FluidCircuit) {
  const limits = components.flatMap(({ name, setting }) => (setting && name !== undefined ? [{ name, pressure: setting }] : []));
  return limits.length === 1 ? limits[0] : undefined;
}
