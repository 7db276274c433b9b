import { rule } from "./rule.js";

/** A contactor may do its work with its main contacts alone. */
export const relayWithoutContacts = rule<{ device: string }>({
  code: "relay-without-contacts",
  severity: "note",
  says: ({ device }) => `${device} is driven, but none of its contacts is used.`,
  find: ({ machine, networks }) =>
    networks.gaps
      ? []
      : [...machine.devices.values()]
          .filter(({ kind, loads, contacts }) => (kind === "relay" || kind === "timer") && loads.length > 0 && contacts.length === 0)
          .map(({ name, loads: [load], at }) => ({ device: name, at: load?.at ?? at })),
});
