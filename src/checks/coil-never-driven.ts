import { deviceRoles } from "../machine/kinds.js";
import { rule } from "./rule.js";

/**
 * A relay that is never driven but has contacts has a rule of its own, and so has a valve's coil. Of a latching relay and a counter
 * each coil is looked at.
 */
export const coilNeverDriven = rule<{ coil: string; meaning?: string }>({
  code: "coil-never-driven",
  severity: "warning",
  says: ({ coil, meaning }) => `Nothing drives ${coil}${meaning === undefined ? "" : `: ${meaning}`}.`,
  hint: ({ coil }) => `Write a rung that ends in -> ${coil}, or take it out.`,
  find: ({ machine, networks }) =>
    networks.gaps
      ? []
      : [...machine.devices.values()].flatMap(({ name, kind, loads, contacts, mains, at }) => {
          const { load, coils } = deviceRoles[kind];
          if (!load || kind === "solenoid" || kind === "input-card") return [];
          // A lamp or a heater may stand in a power circuit alone; a contactor there still needs its coil driven.
          if (mains.length > 0 && kind !== "contactor") return [];
          if (loads.length === 0) return contacts.length === 0 ? [{ coil: name, at }] : [];
          const idle = coils?.filter((coil) => !loads.some((driven) => driven.coil === coil)) ?? [];
          return idle.map((coil) => ({ coil: `${name}.${coil}`, meaning: consequence(name, kind === "counter", coil === "reset"), at }));
        }),
});

function consequence(name: string, counts: boolean, isReset: boolean): string {
  if (isReset) return counts ? `once ${name} has counted, it never starts again` : `once ${name} is set, it stays set`;
  return counts ? `${name} never counts` : `${name} is never set`;
}
