import type { Layout } from "../layout/placement.js";
import type { PartId } from "../machine/model.js";

/** One coil and all its contacts: the row behind the cross-reference sheet, the terminal table, the CSV, the JSON and the coil margin. */
export interface CrossReferenceRow {
  /** The designation; one of several coils or points by its own name, `KL1.set`, `I0.5`. */
  coil: string;
  /** The device, where `coil` is not its designation. */
  device?: string;
  /** relay, contactor, timer, solenoid, pilot-light, horn, and switch kinds for devices with contacts but no coil. */
  kind: string;
  text: string;
  sheet: number;
  line: number;
  contacts: ContactReference[];
  /** Declared contacts that no rung uses. Absent where there are none. */
  spare?: SpareContact[];
  /** Solenoids. */
  valve?: { name: string; sheet: number; zone: string };
}

export interface ContactReference {
  /** `main`: main contacts in a power circuit, all poles of one use together. */
  type: "main" | "NO" | "NC";
  timed?: boolean;
  terminals: string;
  sheet: number;
  line: number;
}

/** A declared contact that no rung uses. */
export type SpareContact = Omit<ContactReference, "sheet" | "line">;

/** Where something is drawn: by its line on a ladder sheet, by its zone on another. */
export interface DrawnAt {
  sheet: number;
  line?: number;
  zone?: string;
}

/** Where a part is drawn; empty for one that stands on no sheet. */
export function drawnAt(part: PartId, { places }: Layout): DrawnAt[] {
  const place = places.get(part);
  if (!place) return [];
  return [{ sheet: place.sheet, ...(place.line === undefined ? { zone: place.zone } : { line: place.line }) }];
}

/** `3 NO 1 NC` */
export function printedPoles({ no, nc }: { no: number; nc: number }): string {
  return [no > 0 ? `${no} NO` : "", nc > 0 ? `${nc} NC` : ""].filter((part) => part !== "").join(" ");
}
