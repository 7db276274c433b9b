import type { ContactUse, Device } from "./model.js";

/** One contact a device is declared to have. */
export interface Pole {
  form: ContactUse["form"];
  /** The digits before the last one of its terminals: 2 of 21-22. */
  place: number;
  /** Where the drawing uses it. */
  use?: ContactUse;
}

/**
 * The contacts of a device with declared poles and the places they have.
 *
 * Contactor relays after EN 50011, recalled and not looked up again: four contacts stand side by side, one make contact first, then
 * the break contacts, then the other make contacts: 40E is 13-14 23-24 33-34 43-44, 31E is 13-14 21-22 33-34 43-44, 22E is 13-14
 * 21-22 31-32 43-44. The next four stand in a second row by the same rule, after as many make contacts as the first row takes:
 * 62E is 13-14 23-24 33-34 43-44 53-54 61-62 71-72 83-84. Auxiliary contacts of contactors (EN 50012) and pairs of control switches
 * (EN 50013: 13-14 and 21-22) come out the same; other numbers of contacts follow the rule where no standard gives them.
 *
 * Overload relays after EN 50005: a break and a make contact share place 9, a second pair place 0.
 */
function arrangementOf(kind: Device["kind"], { no, nc }: NonNullable<Device["poles"]>): Pole[] {
  if (kind === "overload") {
    const places = (count: number) => Array.from({ length: count }, (_, index) => overloadPlaces[index] ?? index + 8);
    return [...places(nc).map((place) => ({ form: "NC" as const, place })), ...places(no).map((place) => ({ form: "NO" as const, place }))];
  }
  const arrangement: Pole[] = [];
  let [makes, breaks] = [no, nc];
  while (makes + breaks > 0) {
    const first = Math.min(rowLength, makes);
    const second = Math.min(rowLength - first, breaks);
    const row: ContactUse["form"][] = [
      ...(first > 0 ? (["NO"] as const) : []),
      ...Array<"NC">(second).fill("NC"),
      ...Array<"NO">(Math.max(0, first - 1)).fill("NO"),
    ];
    for (const form of row) arrangement.push({ form, place: arrangement.length + 1 });
    makes -= first;
    breaks -= second;
  }
  return arrangement;
}

/** How many contacts stand side by side in a contactor relay. */
const rowLength = 4;

/** Places of an overload's pairs of contacts, in the order they are given out. */
export const overloadPlaces: readonly number[] = [9, 0, 10];

/**
 * The declared contacts of a device with the use each has: first what the author pinned, then the others in drawing order.
 * Terminals pinned against the standard's arrangement change it: the contact whose place they take gets theirs.
 */
export function polesOf({ kind, poles, contacts }: Device): Pole[] {
  if (!poles) return [];
  const arrangement = arrangementOf(kind, poles);
  const pinned = contacts.filter(({ terminals }) => terminals.by === "author");
  const unlike = pinned.filter((use) => {
    const place = placeOf(use.terminals.value)?.place;
    const pole = arrangement.find((other) => other.form === use.form && other.place === place && !other.use);
    if (pole) pole.use = use;
    return !pole;
  });
  for (const use of unlike) {
    const pole = arrangement.findLast((other) => other.form === use.form && !other.use);
    if (!pole) continue;
    const place = placeOf(use.terminals.value)?.place;
    const displaced = arrangement.find((other) => other.place === place && !other.use && other !== pole);
    if (displaced && kind !== "overload") displaced.place = pole.place;
    if (place !== undefined) pole.place = place;
    pole.use = use;
  }
  for (const use of contacts) {
    if (use.terminals.by === "author") continue;
    const pole = arrangement.find((other) => other.form === use.form && !other.use);
    if (pole) pole.use = use;
  }
  return arrangement;
}

/** Place and function digits of terminals written by the rule of EN 50005: `23-24` is place 2, digits 3 and 4. */
export function placeOf([a, b]: readonly [string, string]): { place: number; digits: [string, string] } | undefined {
  if (!/^\d{2,}$/.test(a) || !/^\d{2,}$/.test(b) || a.slice(0, -1) !== b.slice(0, -1)) return undefined;
  return { place: Number(a.slice(0, -1)), digits: [a.slice(-1), b.slice(-1)] };
}
