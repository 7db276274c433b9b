import { deviceRoles } from "../machine/kinds.js";
import { rule } from "./rule.js";

export const contactWithoutCoil = rule<{ device: string }>({
  code: "contact-without-coil",
  severity: "error",
  says: ({ device }) => `This contact never changes: nothing drives ${device}.`,
  hint: ({ device }) => `Write a rung that ends in -> ${device}.`,
  find: ({ machine }) =>
    [...machine.devices.values()].flatMap(({ name, kind, loads, contacts: [first], at }) =>
      first && deviceRoles[kind].load && loads.length === 0
        ? [{ device: name, at: first.at, seeAlso: [{ message: `${name} is declared here.`, at }] }]
        : [],
    ),
});
