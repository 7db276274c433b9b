import { rule } from "./rule.js";
import { hintOnly } from "./safety.js";

/** An overload relay only bends a contact: what it guards goes on running unless that contact opens its contactor. */
export const overloadOpensNothing = rule<{ device: string; motor?: string }>({
  code: "overload-opens-nothing",
  severity: "warning",
  says: ({ device, motor }) =>
    `When ${device} trips, nothing is opened${motor === undefined ? "" : ` and ${motor} runs on`}: no rung has its normally closed contact.`,
  hint: ({ device }) => `Put /${device} in the path of the contactor. ${hintOnly}`,
  find: ({ machine, networks }) =>
    networks.gaps || networks.rungs.length === 0
      ? []
      : [...machine.devices.values()].flatMap(({ name, kind, contacts, guards, at }) =>
          kind === "overload" && contacts.every(({ form }) => form === "NO") ? [{ device: name, motor: guards, at }] : [],
        ),
});
