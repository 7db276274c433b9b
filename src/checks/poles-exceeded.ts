import type { ContactUse, Device } from "../machine/model.js";
import { rule } from "./rule.js";

/** An overload relay has one break and one make contact unless its declaration says otherwise (EN 50005: 95-96 and 97-98). */
const overloadPoles = { no: 1, nc: 1 };

type Form = ContactUse["form"] | "pole";

const names: Record<Form, string> = { NO: "normally open contact", NC: "normally closed contact", pole: "pole" };

export const polesExceeded = rule<{ device: string; has: number; used: number; form: Form }>({
  code: "poles-exceeded",
  severity: "error",
  says: ({ device, has, used, form }) =>
    has === 0
      ? `${device} has no ${names[form]}.`
      : `${device} has no more than ${has} ${names[form]}${has === 1 ? "" : "s"}; ${used} are used.`,
  hint: ({ form }) =>
    form === "pole" ? 'Declare more with "poles".' : 'Declare more with "poles", or use the contacts of a further relay.',
  find: ({ machine }) =>
    [...machine.devices.values()].flatMap((device) => (["NO", "NC", "pole"] as const).flatMap((form) => beyond(device, form))),
});

/** Only the first use beyond what there is: the others follow from it. */
function beyond(device: Device, form: Form) {
  const { name, kind, poles = kind === "overload" ? overloadPoles : undefined, ways, contacts, throughs, at } = device;
  const has = form === "pole" ? ways : form === "NO" ? poles?.no : poles?.nc;
  if (has === undefined) return [];
  const uses = form === "pole" ? throughs : contacts.filter((contact) => contact.form === form);
  return uses
    .slice(has, has + 1)
    .map((use) => ({ device: name, has, used: uses.length, form, at: use.at, seeAlso: [{ message: `${name} is declared here.`, at }] }));
}
