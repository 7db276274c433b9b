import { deviceRoles } from "../machine/kinds.js";
import { rule } from "./rule.js";

export const contactWithoutCoil = rule<{ device: string }>({
  code: "contact-without-coil",
  severity: "error",
  says: ({ device }) => `This contact never changes: nothing drives ${device}.`,
  hint: ({ device }) => `Write a rung that ends in -> ${device}.`,
  // In a rung that could not be read whole, what looks like a contact may be the coil.
  find: ({ machine, networks }) =>
    [...machine.devices.values()].flatMap(({ name, kind, loads, contacts: [first, ...others], at }) =>
      first &&
      deviceRoles[kind].load &&
      loads.length === 0 &&
      ![first, ...others].some(({ rung }) => networks.rungById.get(rung)?.incomplete)
        ? [{ device: name, at: first.at, seeAlso: [{ message: `${name} is declared here.`, at }] }]
        : [],
    ),
});
