import type { Layout } from "../layout/placement.js";
import type { Device, Machine } from "../machine/model.js";
import { type DrawnAt, drawnAt, printedPoles } from "./rows.js";

/** One device or fluid component. */
export interface DeviceRow {
  designation: string;
  kind: string;
  text: string;
  orderCode: string;
  location: string;
  ratings: string[];
  drawn: DrawnAt[];
}

/** Every electrical device as declared, the fuses of the supplies, then every fluid component that is no electrical device too. */
export function deviceList(machine: Machine, layout: Layout): DeviceRow[] {
  const rows = [...machine.devices.values()].map((device) => deviceRow(device, machine, layout));
  for (const { name, fuse } of machine.supplies) {
    if (!fuse) continue;
    const sheets = layout.sheets.filter(({ symbols }) => symbols.some(({ device }) => device === fuse.name));
    rows.push({
      designation: fuse.name,
      kind: "fuse",
      text: `Supply ${name}`,
      orderCode: "",
      location: "",
      ratings: fuse.rating === "" ? [] : [fuse.rating],
      drawn: sheets.map(({ number }) => ({ sheet: number })),
    });
  }
  for (const [name, { id, kind, text, orderCode, location, values }] of machine.components) {
    if (machine.devices.has(name)) continue;
    const drawn = drawnAt(id, layout);
    rows.push({
      designation: name,
      kind,
      text: text ?? "",
      orderCode: orderCode ?? "",
      location: location ?? "",
      // A tank bears the names of the switches that stand in it.
      ratings: values.filter((value) => !machine.devices.has(value)),
      drawn,
    });
  }
  return rows;
}

function deviceRow(device: Device, machine: Machine, layout: Layout): DeviceRow {
  const { name, kind, text, orderCode, location, valve, place, senses } = device;
  const component = machine.components.get(name);
  const elsewhere = component?.id ?? (valve ? valve.name : (place?.cylinder ?? (component ? undefined : senses?.component)));
  const uses = [...device.mains, ...device.loads, ...device.contacts, ...device.throughs].map(({ id }) => id);
  const found = [...uses, ...(elsewhere === undefined ? [] : [elsewhere])].flatMap((part) => drawnAt(part, layout));
  const seen = new Set<string>();
  return {
    designation: name,
    kind,
    text: text ?? "",
    orderCode: orderCode ?? "",
    location: location ?? "",
    ratings: ratingsOf(device),
    drawn: found
      .filter((at) => !seen.has(JSON.stringify(at)) && seen.add(JSON.stringify(at)))
      .sort((a, b) => a.sheet - b.sheet || (a.line ?? 0) - (b.line ?? 0)),
  };
}

/** What is printed beside it, and what its declaration says in numbers besides. */
function ratingsOf({ values, points, ways, wires, poles }: Device): string[] {
  const contacts = poles ? printedPoles(poles) : "";
  return [
    ...values,
    ...(points === undefined ? [] : [`${points} points`]),
    ...(ways === undefined ? [] : [ways === 1 ? "1 pole" : `${ways} poles`]),
    ...(wires === undefined ? [] : [`${wires}-wire`]),
    ...(contacts === "" ? [] : [contacts]),
  ];
}
