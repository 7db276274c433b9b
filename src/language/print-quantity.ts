import type { Quantity } from "./quantity.js";

/** Spellings that keyboards force on an author, and what a sheet shows for them. */
const signs: [RegExp, string][] = [
  [/\b(cm|dm|m|in|ft)3(?=\/|$)/, "$1³"],
  [/\b(um|micron)$/, "µm"],
  [/\b(k|M|)ohm$/, "$1Ω"],
  [/\bdeg([CF])$/, "°$1"],
  [/ ?\bdeg$/, "°"],
];

/** A value as printed on a sheet: as written, with the unit's proper signs: `16 cm³/rev` for `16 cm3/rev`, `10 µm` for `10 um`. */
export function printQuantity({ text }: Quantity): string {
  return signs.reduce((printed, [spelling, sign]) => printed.replace(spelling, sign), text);
}
