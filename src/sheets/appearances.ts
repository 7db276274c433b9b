import type { Box, Point } from "../drawing/geometry.js";
import type { PartId } from "../drawing/marks.js";
import type { CircuitSheet, Layout, Place } from "../layout/placement.js";
import type { ContactUse, Device, Machine } from "../machine/model.js";
import { coilOf, laddersOf, polesOf } from "../machine/walk.js";
import type { ContactReference, CrossReferenceRow } from "../schedules/rows.js";

/** Something drawn, and where. */
export interface Appearance {
  part: PartId;
  place: Place;
}

/** Where a point that goes on elsewhere ends on a sheet. */
export interface PointEnd {
  from: PartId;
  place: Place;
}

/** Where the devices of a machine are drawn: the lookups behind references, links and outline. */
export interface Appearances {
  machine: Machine;
  layout: Layout;
  rows: ReadonlyMap<string, CrossReferenceRow>;
  /** A device's coil, lamp or other load; of several the first, or the one named: `KL1.reset`, `I0.5`. */
  loadOf(name: string): Appearance | undefined;
  /** All of its loads, in drawing order. */
  loadsOf(device: string): Appearance[];
  /** A device in a power circuit: main contacts, poles, a motor. */
  mainsOf(device: string): Appearance[];
  /** What a supply's rails come from, at the end of its branch. */
  sourceOf(supply: string): Appearance | undefined;
  /** The first rungs of the ladders that a supply feeds. */
  headsOf(supply: string): Appearance[];
  /** A device's contacts in drawing order. */
  contactsOf(device: string): (Appearance & { contact: ContactUse })[];
  /** On a fluid sheet: a solenoid at its valve, a switch at the cam that works it or the line that it senses. */
  fluidSideOf(device: string): Appearance | undefined;
  /** A fluid component. */
  component(name: string): Appearance | undefined;
  /** The contact a row of the cross-reference speaks of. */
  contactOf(device: string, reference: ContactReference): PartId | undefined;
  /** The device of which a part is a contact or a load in a rung. */
  deviceOf(part: PartId): { device: string; use: "contact" | "load" | "main" } | undefined;
  /** The ends of a point on all sheets of a kind. */
  pointEnds(kind: CircuitSheet["kind"], point: string): readonly PointEnd[];
}

/** Looks up every appearance once. */
export function findAppearances(
  machine: Machine,
  layout: Layout,
  rows: readonly CrossReferenceRow[],
  zoneOf: (point: Point) => string,
): Appearances {
  const at = (part: PartId | undefined): Appearance | undefined => {
    const place = part === undefined ? undefined : layout.places.get(part);
    return part !== undefined && place ? { part, place } : undefined;
  };
  const marked = cams(layout, zoneOf);
  const ends = endsOfPoints(layout, zoneOf);
  const placed = new Map<string, (Appearance & { contact: ContactUse })[]>();
  const byReference = new Map<string, PartId>();
  for (const { name, contacts } of machine.devices.values()) {
    const those = contacts.flatMap((contact) => {
      const found = at(contact.id);
      return found ? [{ ...found, contact }] : [];
    });
    placed.set(name, those);
    for (const { part, place, contact } of those) {
      const key = referenceKey(name, { type: contact.form, terminals: terminalsOf(contact), sheet: place.sheet, line: place.line ?? 0 });
      if (!byReference.has(key)) byReference.set(key, part);
    }
  }
  for (const { name, mains } of machine.devices.values()) {
    for (const main of mains) {
      const place = layout.places.get(main.id);
      if (!place) continue;
      const key = referenceKey(name, { type: "main", terminals: polesOf(main), sheet: place.sheet, line: place.line ?? 0 });
      if (!byReference.has(key)) byReference.set(key, main.id);
    }
  }
  const contactsOf = (device: string) => placed.get(device) ?? [];
  const component = (name: string) => at(machine.components.get(name)?.id);
  const fluidSideOf = (name: string) => {
    const device = machine.devices.get(name);
    return marked.get(name) ?? onValve(device, at) ?? component(name) ?? component(device ? (operatorOf(device) ?? "") : "");
  };
  const coils = new Map<string, PartId>();
  for (const { name, loads } of machine.devices.values()) {
    for (const load of [...loads].reverse()) coils.set(coilOf(load), load.id);
    const [first] = loads;
    if (first) coils.set(name, first.id);
  }
  const uses = new Map<PartId, { device: string; use: "contact" | "load" | "main" }>();
  for (const device of machine.devices.values()) {
    for (const { id } of device.contacts) uses.set(id, { device: device.name, use: "contact" });
    for (const { id } of device.loads) uses.set(id, { device: device.name, use: "load" });
    for (const { id } of device.mains) uses.set(id, { device: device.name, use: "main" });
  }
  return {
    machine,
    layout,
    rows: new Map(rows.map((row) => [row.device ?? row.coil, row])),
    loadOf: (name) => at(coils.get(name)),
    loadsOf: (device) => (machine.devices.get(device)?.loads ?? []).flatMap(({ id }) => at(id) ?? []),
    mainsOf: (device) => (machine.devices.get(device)?.mains ?? []).flatMap(({ id }) => at(id) ?? []),
    sourceOf: (supply) => {
      const fed = machine.supplies.find(({ name }) => name === supply);
      return at(machine.devices.get(fed?.from ?? "")?.mains[0]?.id) ?? at(fed?.branch);
    },
    headsOf: (supply) =>
      laddersOf(machine).flatMap((ladder) => {
        const head = ladder.supply.name === supply ? at(ladder.rungs[0]?.id) : undefined;
        return head ? [head] : [];
      }),
    contactsOf,
    fluidSideOf,
    component,
    contactOf: (device, reference) => byReference.get(referenceKey(device, reference)),
    deviceOf: (part) => uses.get(part),
    pointEnds: (kind, point) => ends.get(`${kind} ${point}`) ?? [],
  };
}

/** What tells a contact from the others of its device. */
function referenceKey(device: string, { type, terminals, sheet, line }: ContactReference): string {
  return [device, type, terminals, sheet, line].join(" ");
}

/** A contact's terminals as they are written, `13-14`; empty when it has none. */
export function terminalsOf(contact: ContactUse): string {
  const printed = contact.terminals.value.join("-");
  return printed === "-" ? "" : printed;
}

/** What works a switch: a cylinder, a fluid point, or the motor that an overload guards. */
export function operatorOf(device: Device): string | undefined {
  return device.place?.cylinder ?? device.senses?.component ?? device.senses?.point ?? device.guards;
}

function onValve(device: Device | undefined, at: (part: PartId) => Appearance | undefined): Appearance | undefined {
  if (!device?.valve) return undefined;
  return at(`${device.valve.name}/${device.valve.side}`) ?? at(device.valve.name);
}

/** Parts on fluid sheets that carry a reference to a device's ladder line: its cam mark or its end of a valve. */
function cams(layout: Layout, zoneOf: (point: Point) => string): Map<string, Appearance> {
  const found = new Map<string, Appearance>();
  for (const sheet of layout.sheets) {
    if (sheet.kind !== "fluid") continue;
    for (const { text, part, at, height } of sheet.texts) {
      if (typeof text === "string" || text.to !== "ladder-line" || part === undefined || found.has(text.device)) continue;
      const place = layout.places.get(part) ?? placeless(sheet.number, at, height, zoneOf);
      found.set(text.device, { part, place });
    }
  }
  return found;
}

function endsOfPoints(layout: Layout, zoneOf: (point: Point) => string): Map<string, PointEnd[]> {
  const ends = new Map<string, PointEnd[]>();
  for (const sheet of layout.sheets) {
    for (const { text, at, height } of sheet.texts) {
      if (typeof text === "string" || text.to !== "point") continue;
      const key = `${sheet.kind} ${text.point}`;
      const home = layout.places.get(text.from);
      // A part that runs over several sheets has its place on one of them only.
      const place = home?.sheet === sheet.number ? home : placeless(sheet.number, at, height, zoneOf);
      const known = ends.get(key);
      if (known) known.push({ from: text.from, place });
      else ends.set(key, [{ from: text.from, place }]);
    }
  }
  return ends;
}

/** The place of something to which the layout gave none: where its reference stands. */
function placeless(sheet: number, at: Point, height: number, zoneOf: (point: Point) => string): Place {
  const box: Box = { x: at.x, y: at.y - height, width: height, height };
  return { sheet, zone: zoneOf(at), box };
}
