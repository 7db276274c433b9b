import type { Layout, Place } from "../layout/placement.js";
import type { ContactUse, Device, Machine } from "../machine/model.js";
import { laddersOf, usesOf } from "../machine/walk.js";
import type { ContactReference, CrossReferenceRow } from "./rows.js";

/**
 * Every coil and other load with all its contacts, in drawing order. Takes the machine and where its parts stand; a load that
 * stands on no sheet has no row, a contact that stands on none is left out of its row.
 */
export function crossReference(machine: Machine, layout: Layout): CrossReferenceRow[] {
  const rows = new Map<string, CrossReferenceRow>();
  for (const { path } of laddersOf(machine).flatMap(({ rungs }) => rungs)) {
    for (const use of usesOf(path)) {
      const device = use.kind === "load" && !rows.has(use.device) ? machine.devices.get(use.device) : undefined;
      const place = layout.places.get(use.id);
      if (device && place) rows.set(device.name, rowOf(device, place, layout));
    }
  }
  return [...rows.values()];
}

/**
 * Devices that have contacts and no coil, in the order in which the drawing first shows them: push-buttons, switches,
 * overloads. `coil` is their designation; sheet and line are those of the first contact.
 */
export function switchReference(machine: Machine, layout: Layout): CrossReferenceRow[] {
  const rows = new Map<string, CrossReferenceRow>();
  for (const { path } of laddersOf(machine).flatMap(({ rungs }) => rungs)) {
    for (const use of usesOf(path)) {
      const device = use.kind === "contact" && !rows.has(use.device) ? machine.devices.get(use.device) : undefined;
      const place = layout.places.get(use.id);
      if (device && place && device.loads.length === 0) rows.set(device.name, rowOf(device, place, layout));
    }
  }
  return [...rows.values()];
}

function rowOf(device: Device, place: Place, layout: Layout): CrossReferenceRow {
  const valve = device.valve && layout.places.get(device.valve.name);
  return {
    coil: device.name,
    kind: device.kind,
    text: device.text ?? "",
    sheet: place.sheet,
    line: place.line ?? 0,
    contacts: device.contacts.flatMap((contact) => contactOf(contact, layout)),
    ...(device.valve && valve && { valve: { name: device.valve.name, sheet: valve.sheet, zone: valve.zone } }),
  };
}

function contactOf({ id, form, timed, terminals }: ContactUse, layout: Layout): ContactReference[] {
  const place = layout.places.get(id);
  if (!place) return [];
  const printed = terminals.value.join("-");
  return [{ type: form, ...(timed && { timed }), terminals: printed === "-" ? "" : printed, sheet: place.sheet, line: place.line ?? 0 }];
}
