import type { ContactUse, Device } from "../machine/model.js";
import { rule } from "./rule.js";

/** An overload relay has one break and one make contact unless its declaration says otherwise (EN 50005: 95-96 and 97-98). */
const overloadPoles = { no: 1, nc: 1 };

export const polesExceeded = rule<{ device: string; has: number; form: ContactUse["form"] }>({
  code: "poles-exceeded",
  severity: "error",
  says: ({ device, has, form }) => {
    const kind = form === "NO" ? "normally open" : "normally closed";
    return has === 0 ? `${device} has no ${kind} contact.` : `${device} has no more than ${has} ${kind} contact${has === 1 ? "" : "s"}.`;
  },
  hint: () => 'Declare more with "poles", or use the contacts of a further relay.',
  find: ({ machine }) => [...machine.devices.values()].flatMap((device) => (["NO", "NC"] as const).flatMap((form) => beyond(device, form))),
});

function beyond({ name, kind, poles = kind === "overload" ? overloadPoles : undefined, contacts, at }: Device, form: ContactUse["form"]) {
  if (!poles) return [];
  const has = form === "NO" ? poles.no : poles.nc;
  return contacts
    .filter((contact) => contact.form === form)
    .slice(has)
    .map((contact) => ({ device: name, has, form, at: contact.at, seeAlso: [{ message: `${name} is declared here.`, at }] }));
}
