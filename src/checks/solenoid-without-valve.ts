import { rule } from "./rule.js";

export const solenoidWithoutValve = rule<{ solenoid: string }>({
  code: "solenoid-without-valve",
  severity: "error",
  says: ({ solenoid }) => `No valve carries ${solenoid}.`,
  hint: ({ solenoid }) => `Name it at its valve, as in "valve V1 5/2 left solenoid ${solenoid} right spring".`,
  find: ({ machine }) =>
    [...machine.devices.values()]
      .filter(({ kind, valve }) => kind === "solenoid" && !valve)
      .map(({ name, at }) => ({ solenoid: name, at })),
});
