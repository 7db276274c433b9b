import { rule } from "./rule.js";

export const coilDrivenTwice = rule<{ coil: string; first: string }>({
  code: "coil-driven-twice",
  severity: "error",
  says: ({ coil, first }) => `${coil} is already driven${first === "" ? "" : ` in rung "${first}"`}.`,
  hint: () => "Bring both paths to one place as parallel branches.",
  find: ({ machine, networks }) =>
    [...machine.devices.values()].flatMap(({ name, loads: [one, ...again] }) =>
      again.map((load) => ({
        coil: name,
        first: networks.rungById.get(one?.rung ?? "")?.title ?? "",
        at: load.at,
        seeAlso: one ? [{ message: `${name} is first driven here.`, at: one.at }] : [],
      })),
    ),
});
