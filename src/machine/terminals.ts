import type { ContactUse, Device, DeviceKind, DeviceUse } from "./model.js";
import type { Report } from "./report.js";
import { designationOf } from "./walk.js";

/*
 * Terminal numbers after EN 50005 (EN 50013 for control switches): the last digit is the function, the digits before it the
 * place of the contact in the device. Contacts take places 1, 2, 3 … in the order in which the drawing uses them; a tenth
 * contact is 103-104. What the author pins keeps its place and the others go round it.
 */

/** Last digits by function: 1-2 opens, 3-4 closes; 5-6 and 7-8 are the same for contacts with a special function. */
const plainDigits = { NC: ["1", "2"], NO: ["3", "4"] } as const;
const specialDigits = { NC: ["5", "6"], NO: ["7", "8"] } as const;

/** Three-wire and two-wire sensors by IEC 60947-5-2: supply on 1, output 4 makes and output 2 breaks. */
const sensorTerminals = { NO: ["1", "4"], NC: ["1", "2"] } as const;

const loadTerminals: Partial<Record<DeviceKind, [string, string]>> = {
  relay: ["A1", "A2"],
  contactor: ["A1", "A2"],
  timer: ["A1", "A2"],
  solenoid: ["A1", "A2"],
  "pilot-light": ["X1", "X2"],
};

const throughTerminals: Partial<Record<DeviceKind, [string, string]>> = { diode: ["A", "K"] };

/** Places in the order they are given out. Overloads have place 9, and 0 for a second set. */
function* places(kind: DeviceKind): Generator<number> {
  if (kind === "overload") yield* [9, 0, 10];
  for (let place = kind === "overload" ? 11 : 1; ; place++) yield place;
}

function digitsOf(contact: ContactUse, kind: DeviceKind): readonly [string, string] {
  return (contact.timed || kind === "overload" ? specialDigits : plainDigits)[contact.form];
}

interface Pinned {
  place: number;
  digits: [string, string];
}

/** Place and function digits of terminals written by the rule: `23-24` is place 2, digits 3 and 4. */
function placeOf([a, b]: readonly [string, string]): Pinned | undefined {
  if (!/^\d{2,}$/.test(a) || !/^\d{2,}$/.test(b) || a.slice(0, -1) !== b.slice(0, -1)) return undefined;
  return { place: Number(a.slice(0, -1)), digits: [a.slice(-1), b.slice(-1)] };
}

/** Gives every contact and load of a device its terminals and its id. */
export function allotTerminals(device: Device, report: Report): void {
  const taken = checkPins(device, report);
  const free = places(device.kind);
  // An overload's break and make contact share a place; anything else has one place a contact.
  const sharing = new Map<number, Set<ContactUse["form"]>>();
  for (const contact of device.contacts) {
    if (contact.terminals.by === "author") continue;
    // A sensor has each output once: used again, it is the same two terminals, which only a wire there can join.
    if (device.kind === "proximity-switch") {
      contact.terminals = { value: [...sensorTerminals[contact.form]], by: "sensor outputs" };
      continue;
    }
    const place = device.kind === "overload" ? sharedPlace(contact, sharing, taken) : nextPlace(free, taken);
    const [a, b] = digitsOf(contact, device.kind);
    contact.terminals = { value: [`${place}${a}`, `${place}${b}`], by: "places in reading order" };
  }
  for (const load of device.loads) {
    if (load.terminals.by !== "author") load.terminals = { value: [...(loadTerminals[device.kind] ?? ["", ""])], by: "load terminals" };
  }
  for (const through of device.throughs) {
    if (through.terminals.by === "author" || through.pin !== undefined) continue;
    through.terminals = { value: [...(throughTerminals[device.kind] ?? ["1", "2"])], by: "poles in reading order" };
  }
  giveIds(device);
}

function nextPlace(free: Generator<number>, taken: ReadonlySet<number>): number {
  for (;;) {
    const place = free.next().value as number;
    if (!taken.has(place)) return place;
  }
}

function sharedPlace({ form }: ContactUse, sharing: Map<number, Set<ContactUse["form"]>>, taken: ReadonlySet<number>): number {
  for (const place of places("overload")) {
    const forms = sharing.get(place) ?? new Set();
    if (forms.has(form) || taken.has(place)) continue;
    sharing.set(place, forms.add(form));
    return place;
  }
  return 9;
}

/** Holds the author's terminals against each other and against the rule; gives the places they take. */
function checkPins({ name, contacts, kind }: Device, report: Report): Set<number> {
  const taken = new Set<number>();
  const byTerminal = new Map<string, ContactUse>();
  for (const contact of contacts) {
    const { terminals } = contact;
    if (terminals.by !== "author" || !("at" in terminals)) continue;
    const first = terminals.value.map((terminal) => byTerminal.get(terminal)).find((other) => other !== undefined);
    if (first && !isChangeover(first, contact)) {
      report.error(
        "terminals-twice",
        terminals.at,
        `${name}:${first.terminals.value.join("-")} is already used${sameTerminals(first, contact) ? "" : ", and shares a terminal with this contact"}.`,
        {
          hint: "Each contact has terminals of its own.",
          seeAlso: "at" in first.terminals ? [{ message: "First used here.", at: first.terminals.at }] : [],
        },
      );
    }
    for (const terminal of terminals.value) byTerminal.set(terminal, contact);
    const pinned = placeOf(terminals.value);
    if (!pinned) continue;
    taken.add(pinned.place);
    if (!suits(contact, pinned.digits)) {
      const [a, b] = digitsOf(contact, kind);
      report.warning(
        "terminals-unlike-contact",
        terminals.at,
        `${terminals.value.join("-")} are not the numbers of a normally ${contact.form === "NO" ? "open" : "closed"} contact: by EN 50005 they end in ${a} and ${b}.`,
      );
    }
  }
  return taken;
}

function sameTerminals(a: ContactUse, b: ContactUse): boolean {
  return a.terminals.value.every((terminal) => b.terminals.value.includes(terminal));
}

/** 11-12 and 11-14: a break and a make contact with a common terminal. */
function isChangeover(a: ContactUse, b: ContactUse): boolean {
  return a.form !== b.form && !sameTerminals(a, b);
}

function suits({ form }: ContactUse, digits: readonly string[]): boolean {
  const pair = [...digits].sort().join("");
  return (form === "NO" ? ["34", "78", "14", "58"] : ["12", "56"]).includes(pair);
}

/** `CR1:13-14`; a second use of the same terminals, which has its own message, is told apart. */
function giveIds({ contacts, loads, throughs }: Device): void {
  const seen = new Map<string, number>();
  for (const use of [...contacts, ...loads, ...throughs] as DeviceUse[]) {
    const terminals = use.terminals.value.join("-");
    const pin = use.kind === "through" ? use.pin : undefined;
    const own = use.kind === "load" && use.coil !== undefined ? `${designationOf(use)}.${use.coil}` : designationOf(use);
    const id = pin !== undefined ? own : `${own}:${terminals === "-" ? use.kind : terminals}`;
    const times = (seen.get(id) ?? 0) + 1;
    seen.set(id, times);
    use.id = times === 1 ? id : `${id}/${times}`;
  }
}
