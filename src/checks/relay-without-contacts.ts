import type { DeviceKind } from "../machine/model.js";
import { rule } from "./rule.js";

/** What does nothing but by its contacts. A contactor may do its work with its main contacts alone. */
const contactsAlone: ReadonlySet<DeviceKind> = new Set<DeviceKind>(["relay", "timer", "latching-relay", "counter"]);

export const relayWithoutContacts = rule<{ device: string }>({
  code: "relay-without-contacts",
  severity: "note",
  says: ({ device }) => `${device} is driven, but none of its contacts is used.`,
  find: ({ machine, networks }) =>
    networks.gaps
      ? []
      : [...machine.devices.values()]
          .filter(({ kind, loads, contacts }) => contactsAlone.has(kind) && loads.length > 0 && contacts.length === 0)
          .map(({ name, loads: [load], at }) => ({ device: name, at: load?.at ?? at })),
});
