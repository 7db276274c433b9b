import type { Layout } from "../layout/placement.js";
import type { Machine } from "../machine/model.js";
import { contactReferences, mainReferences, spareContacts } from "./contact-references.js";
import type { ContactReference, SpareContact } from "./rows.js";

/** A device with all its contacts. */
export interface ContactRow {
  device: string;
  kind: string;
  text: string;
  /** As the text declares them; absent where it says nothing. */
  declared?: { no: number; nc: number };
  used: ContactReference[];
  /** Declared and not used. */
  spare: SpareContact[];
}

/** Every device that has contacts in the drawing or is declared to have any, as declared, main contacts first. Outputs of a controller are none. */
export function contactList(machine: Machine, layout: Layout): ContactRow[] {
  return [...machine.devices.values()]
    .filter(({ kind }) => kind !== "output-card")
    .filter(
      ({ kind, contacts, mains, poles }) =>
        contacts.length > 0 || (kind === "contactor" && mains.length > 0) || (poles && poles.no + poles.nc > 0),
    )
    .map((device) => ({
      device: device.name,
      kind: device.kind,
      text: device.text ?? "",
      ...(device.poles && { declared: { ...device.poles } }),
      used: [...(device.kind === "contactor" ? mainReferences(device, layout) : []), ...contactReferences(device.contacts, layout)],
      spare: spareContacts(device),
    }));
}
