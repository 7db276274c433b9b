import { deviceRoles } from "../machine/kinds.js";
import { rule } from "./rule.js";

/** A relay that is never driven but has contacts has a rule of its own, and so has a valve's coil. */
export const coilNeverDriven = rule<{ device: string }>({
  code: "coil-never-driven",
  severity: "warning",
  says: ({ device }) => `Nothing drives ${device}.`,
  hint: ({ device }) => `Write a rung that ends in -> ${device}, or take it out.`,
  find: ({ machine, networks }) =>
    networks.gaps
      ? []
      : [...machine.devices.values()]
          .filter(({ kind, loads, contacts }) => deviceRoles[kind].load && kind !== "solenoid" && loads.length + contacts.length === 0)
          // A lamp or a heater may stand in a power circuit alone; a contactor there still needs its coil driven.
          .filter(({ kind, mains }) => kind === "contactor" || mains.length === 0)
          .map(({ name, at }) => ({ device: name, at })),
});
