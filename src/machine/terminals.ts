import type { ContactUse, Device, DeviceKind, DeviceUse, LoadUse } from "./model.js";
import { overloadPlaces, placeOf, polesOf } from "./poles.js";
import { capital, type Report, withArticle } from "./report.js";
import { coilOf, designationOf } from "./walk.js";

/*
 * Terminal numbers after EN 50005 (EN 50013 for control switches): the last digit is the function, the digits before it the
 * place of the contact in the device. A device with declared poles has its contacts at the places of EN 50011; those of any other
 * take places 1, 2, 3 … in the order in which the drawing uses them; a tenth contact is 103-104. What the author pins keeps its
 * place and the others go round it.
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
  counter: ["A1", "A2"],
  "latching-relay": ["A1", "A2"],
  solenoid: ["A1", "A2"],
  "pilot-light": ["X1", "X2"],
};

/** The second coil of a device that has two (EN 50005). */
const secondCoil = ["B1", "B2"] as const;

/** What has one pair of ends and stands at one place. */
const endTerminals: Partial<Record<DeviceKind, [string, string]>> = { diode: ["A", "K"], resistor: ["1", "2"] };

/** Places in the order they are given out to contacts that are not declared. */
function* places(kind: DeviceKind): Generator<number> {
  const first = kind === "overload" ? overloadPlaces : [];
  yield* first;
  for (let place = Math.max(0, ...first) + 1; ; place++) yield place;
}

function digitsOf({ form, timed }: Pick<ContactUse, "form" | "timed">, kind: DeviceKind): readonly [string, string] {
  return (timed || kind === "overload" ? specialDigits : plainDigits)[form];
}

function terminalsAt(place: number, contact: Pick<ContactUse, "form" | "timed">, kind: DeviceKind): [string, string] {
  const [a, b] = digitsOf(contact, kind);
  return [`${place}${a}`, `${place}${b}`];
}

/** A contact a device is declared to have and the drawing does not use. */
export interface SparePole {
  form: ContactUse["form"];
  /** A timer's is taken to be delayed, as nothing says otherwise. */
  timed: boolean;
  terminals: [string, string];
}

/** The declared contacts that no rung uses, in the order of their places. A device without declared poles has none. */
export function sparePoles(device: Device): SparePole[] {
  const { kind } = device;
  const timed = kind === "timer";
  return polesOf(device)
    .filter(({ use }) => !use)
    .sort((a, b) => (kind === "overload" ? 0 : a.place - b.place))
    .map(({ form, place }) => ({
      form,
      timed,
      terminals: kind === "proximity-switch" ? [...sensorTerminals[form]] : terminalsAt(place, { form, timed }, kind),
    }));
}

/** Gives every contact, load and pole of a device its terminals and its id. */
export function allotTerminals(device: Device, report: Report): void {
  allotContacts(device, checkPins(device, report));
  for (const load of device.loads) {
    if (load.terminals.by !== "author") load.terminals = { value: loadPair(load, device.kind), by: "load terminals" };
  }
  allotThroughs(device, report);
  giveIds(device);
}

/** `taken`: the places of what the author pinned. */
function allotContacts(device: Device, taken: Set<number>): void {
  const { kind } = device;
  const poles = polesOf(device);
  const declared = new Map(poles.flatMap(({ use, place }) => (use ? [[use, place] as const] : [])));
  // An overload's break and make contact share a place; anything else has one place a contact.
  const sharing = new Map<number, Set<ContactUse["form"]>>();
  for (const { form, place } of poles) {
    // What is used beyond the declared contacts stands behind them.
    if (kind === "overload") sharing.set(place, (sharing.get(place) ?? new Set()).add(form));
    else taken.add(place);
  }
  const free = places(kind);
  for (const contact of device.contacts) {
    // The outputs of a controller's card are marked by their points.
    if (contact.terminals.by === "author" || kind === "output-card") continue;
    // A sensor has each output once: used again, it is the same two terminals, which only a wire there can join.
    if (kind === "proximity-switch") {
      contact.terminals = { value: [...sensorTerminals[contact.form]], by: "sensor outputs" };
      continue;
    }
    const pole = declared.get(contact);
    const place = pole ?? (kind === "overload" ? sharedPlace(contact, sharing, taken) : nextPlace(free, taken));
    contact.terminals = {
      value: terminalsAt(place, contact, kind),
      by: pole === undefined ? "places in reading order" : "declared poles in reading order",
    };
  }
}

function loadPair({ coil }: LoadUse, kind: DeviceKind): [string, string] {
  return [...(coil === "reset" ? secondCoil : (loadTerminals[kind] ?? (["", ""] as const)))];
}

/** Poles of fuses, breakers and disconnects are 1-2, 3-4, 5-6 … (EN 50005). */
function allotThroughs({ name, kind, throughs }: Device, report: Report): void {
  const pairOf = ({ value }: DeviceUse["terminals"]) => [...value].sort().join("-");
  const ends = endTerminals[kind];
  const taken = new Set(throughs.flatMap(({ terminals }) => (terminals.by === "author" ? [pairOf(terminals)] : [])));
  const met = new Set<string>();
  let pole = 1;
  for (const through of throughs) {
    if (through.pin !== undefined) continue;
    // A diode that is turned has its ends already.
    if (through.terminals.by === "unallotted" && ends) through.terminals = { value: [...ends], by: "its ends" };
    else if (through.terminals.by === "unallotted") {
      while (taken.has(pairOf(poleTerminals(pole)))) pole++;
      through.terminals = poleTerminals(pole++);
    }
    const pair = pairOf(through.terminals);
    if (met.has(pair)) {
      const place = "at" in through.terminals ? through.terminals.at : through.at;
      report.error("terminals-twice", place, `${name}:${through.terminals.value.join("-")} is already used.`, {
        hint: ends ? `${capital(withArticle(kind))} stands at one place.` : "Each pole has terminals of its own.",
      });
    }
    met.add(pair);
  }
}

function poleTerminals(pole: number): DeviceUse["terminals"] {
  return { value: [`${2 * pole - 1}`, `${2 * pole}`], by: "poles in reading order" };
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
    const own = use.kind === "load" ? coilOf(use) : designationOf(use);
    const id = pin !== undefined ? own : `${own}:${terminals === "-" ? use.kind : terminals}`;
    const times = (seen.get(id) ?? 0) + 1;
    seen.set(id, times);
    use.id = times === 1 ? id : `${id}/${times}`;
  }
}
