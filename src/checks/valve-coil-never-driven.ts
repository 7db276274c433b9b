import { rule } from "./rule.js";

/** In a drawing without a ladder the control is drawn elsewhere, and nothing is said. */
export const valveCoilNeverDriven = rule<{ solenoid: string; valve: string }>({
  code: "valve-coil-never-driven",
  severity: "warning",
  says: ({ solenoid, valve }) => `No rung drives ${solenoid}, so ${valve} is never shifted by it.`,
  hint: ({ solenoid }) => `Write a rung that ends in -> ${solenoid}.`,
  find: ({ machine, networks }) =>
    networks.gaps || networks.rungs.length === 0
      ? []
      : [...machine.devices.values()].flatMap(({ name, kind, valve, loads, at }) =>
          kind === "solenoid" && valve && loads.length === 0 ? [{ solenoid: name, valve: valve.name, at }] : [],
        ),
});
