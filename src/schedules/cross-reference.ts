import type { Layout, Place } from "../layout/placement.js";
import type { ContactUse, Device, DeviceUse, Machine } from "../machine/model.js";
import { coilOf, designationOf, laddersOf, usesOf } from "../machine/walk.js";
import { contactReferences, mainReferences, spareContacts } from "./contact-references.js";
import type { CrossReferenceRow } from "./rows.js";

/**
 * Every coil and other load with all its contacts, in drawing order; each coil of a device that has several, and each input of a
 * controller's card. Takes the machine and where its parts stand; a load that stands on no sheet has no row, a contact that stands
 * on none is left out of its row.
 */
export function crossReference(machine: Machine, layout: Layout): CrossReferenceRow[] {
  return rowsOf(
    machine,
    layout,
    (use) => (use.kind === "load" ? coilOf(use) : undefined),
    ({ contacts }) => contacts,
  );
}

/**
 * Devices that have contacts and no coil, in the order in which the drawing first shows them: push-buttons, switches,
 * overloads, outputs of a controller's card. `coil` is their designation; sheet and line are those of the first contact.
 */
export function switchReference(machine: Machine, layout: Layout): CrossReferenceRow[] {
  return rowsOf(
    machine,
    layout,
    (use, { loads }) => (use.kind === "contact" && loads.length === 0 ? designationOf(use) : undefined),
    ({ contacts }, name) => contacts.filter((contact) => designationOf(contact) === name),
  );
}

/** One row for each name, from the first use that has it. */
function rowsOf(
  machine: Machine,
  layout: Layout,
  nameOf: (use: DeviceUse, device: Device) => string | undefined,
  contactsOf: (device: Device, name: string) => readonly ContactUse[],
): CrossReferenceRow[] {
  const rows = new Map<string, CrossReferenceRow>();
  for (const { path } of laddersOf(machine).flatMap(({ rungs }) => rungs)) {
    for (const use of usesOf(path)) {
      const device = machine.devices.get(use.device);
      const name = device && nameOf(use, device);
      const place = layout.places.get(use.id);
      if (device && name !== undefined && place && !rows.has(name)) {
        rows.set(name, rowOf(name, device, contactsOf(device, name), place, layout));
      }
    }
  }
  return [...rows.values()];
}

function rowOf(name: string, device: Device, contacts: readonly ContactUse[], place: Place, layout: Layout): CrossReferenceRow {
  const valve = device.valve && layout.places.get(device.valve.name);
  const spare = spareContacts(device);
  return {
    coil: name,
    ...(name !== device.name && { device: device.name }),
    kind: device.kind,
    text: device.text ?? "",
    sheet: place.sheet,
    line: place.line ?? 0,
    contacts: [...mainReferences(device, layout), ...contactReferences(contacts, layout)],
    ...(spare.length > 0 && { spare }),
    ...(device.valve && valve && { valve: { name: device.valve.name, sheet: valve.sheet, zone: valve.zone } }),
  };
}
