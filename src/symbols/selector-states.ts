import type { Device, DeviceUse } from "../machine/model.js";

/** The positions of a selector or key switch and the index of the one drawn. */
export function selectorOf({ selector }: Device): { positions: readonly string[]; at: number } {
  const { positions, start } = selector ?? { positions: ["0", "1"], start: "0" };
  return { positions, at: Math.max(0, positions.indexOf(start)) };
}

/** Whether a contact of a selector or key switch is closed, for each of its positions in order. */
export function closedIn(use: DeviceUse, device: Device): boolean[] {
  const normallyOpen = !(use.kind === "contact" && use.form === "NC");
  return selectorOf(device).positions.map((position) => (use.kind === "contact" && position === use.position) === normallyOpen);
}
