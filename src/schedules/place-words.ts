import type { Place } from "../layout/placement.js";
import type { DrawingInfo, Machine } from "../machine/model.js";
import { printedName } from "../machine/walk.js";

/*
 * How places are spoken of. North-american: a ladder line by its number, a zone as `1/B4`. International: the sheet behind a
 * slash, then a dot and the path or the zone, `/2.4` and `/1.B4` (IEC 61082-1 writes the sheet behind a slash; the dot is this
 * project's).
 */

type Convention = DrawingInfo["convention"];

/** Sheet and zone; only the sheet where the zone is not known. */
export function zonePlace({ sheet, zone }: Pick<Place, "sheet" | "zone">, convention: Convention): string {
  if (convention === "international") return zone === "" ? `/${sheet}` : `/${sheet}.${zone}`;
  return zone === "" ? String(sheet) : `${sheet}/${zone}`;
}

/** Sheet and ladder line, where both are said. */
export function linePlace(sheet: number, line: number, convention: Convention): string {
  return convention === "international" ? `/${sheet}.${line}` : `${sheet}/${line}`;
}

/** What a ladder line is called. */
export const lineWord = (convention: Convention): "line" | "path" => (convention === "international" ? "path" : "line");

/** The name of a device or fluid component as it is printed: electrical designations have a dash in the international convention. */
export function nameOf(name: string, { devices, drawing }: Machine): string {
  return devices.has(name) ? printedName(name, drawing.convention) : name;
}
