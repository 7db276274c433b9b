import type { Layout } from "../layout/placement.js";
import type { ContactUse, Device } from "../machine/model.js";
import { sparePoles } from "../machine/terminals.js";
import { polesOf } from "../machine/walk.js";
import type { ContactReference, SpareContact } from "./rows.js";

/** Contacts by their terminals and where they stand; one that stands on no sheet is left out. */
export function contactReferences(contacts: readonly ContactUse[], layout: Layout): ContactReference[] {
  return contacts.flatMap(({ id, form, timed, terminals }) => {
    const place = layout.places.get(id);
    if (!place) return [];
    const printed = terminals.value.join("-");
    return [{ type: form, ...(timed && { timed }), terminals: printed === "-" ? "" : printed, sheet: place.sheet, line: place.line ?? 0 }];
  });
}

/** Main contacts, and what else of a device stands in power circuits: all poles of one use together. */
export function mainReferences({ mains }: Device, layout: Layout): ContactReference[] {
  return mains.flatMap((main) => {
    const place = layout.places.get(main.id);
    return place ? [{ type: "main", terminals: polesOf(main), sheet: place.sheet, line: place.line ?? 0 }] : [];
  });
}

/** A device's declared contacts that no rung uses. */
export function spareContacts(device: Device): SpareContact[] {
  return sparePoles(device).map(({ form, timed, terminals }) => ({ type: form, ...(timed && { timed }), terminals: terminals.join("-") }));
}
