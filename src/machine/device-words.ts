import { printQuantity } from "../language/print-quantity.js";
import type { Dimension, Quantity } from "../language/quantity.js";
import type { Declaration, Item, Word } from "../language/tree.js";
import type { Device, Rating } from "./model.js";
import type { ItemReader, PropertyTable } from "./reader.js";
import { capital, didYouMean, withArticle } from "./report.js";

/** A device with the names it mentions, which are looked up when everything is declared. */
export interface DeviceDraft {
  device: Device;
  declaration: Declaration;
  /** What stands behind `on`: a cylinder, a port, a point or a motor. */
  on?: Item;
  /** Limit and proximity switches: where along the stroke. */
  where?: { at: Word["at"]; place: "retracted" | "extended" | { at: number } | { from: number; to: number } };
  rising?: Quantity;
  falling?: Quantity;
  lamp?: Word;
  noPoles?: number;
  ncPoles?: number;
}

export type DeviceTable = PropertyTable<DeviceDraft>;
export type DeviceWords = DeviceTable["words"];

export const colours = ["red", "green", "yellow", "blue", "white", "amber", "orange", "clear", "black", "grey"] as const;

export const common: DeviceWords = {
  part: ({ device }, read, word) => {
    device.orderCode = read.text(word)?.text;
  },
  note: ({ device }, read, word) => {
    device.note = read.text(word)?.text;
  },
  location: ({ device }, read, word) => {
    device.location = (read.peek()?.kind === "text" ? read.text(word) : read.name(word, "a place"))?.text;
  },
};

/** `poles 3 no 1 nc`, `poles 2 nc` */
export const poles: DeviceWords = {
  poles: (draft, read, word) => {
    do {
      const number = read.count(word);
      if (number === undefined) return;
      takeForm(draft, number, read, word);
    } while (read.peek()?.kind === "number");
  },
};

/** `poles 3`: how many conductors pass through. */
export const ways: DeviceWords = {
  poles: (draft, read, word) => {
    takeWays(draft, read, word);
    for (let told = false; read.peek()?.kind === "number" && formFollows(read.peek(1)); told = true) {
      const at = read.next()?.at ?? word.at;
      read.next();
      if (!told)
        read.report.error("value-unknown", at, `${capital(withArticle(draft.declaration.keyword.text))} has no auxiliary contacts.`);
    }
  },
};

/** `poles 3 1 no 1 nc`: main poles, and auxiliary contacts besides. Only auxiliary contacts: `poles 1 no`. */
export const waysAndPoles: DeviceWords = {
  poles: (draft, read, word) => {
    if (formFollows(read.peek(1))) return poles.poles?.(draft, read, word);
    if (takeWays(draft, read, word) && read.peek()?.kind === "number") poles.poles?.(draft, read, word);
  },
};

function formFollows(item: Item | undefined): boolean {
  return item?.kind === "word" && (item.text === "no" || item.text === "nc");
}

function takeForm(draft: DeviceDraft, number: number, read: ItemReader, { at }: Word): void {
  const form = read.choice({ text: "poles", at }, ["no", "nc"]);
  if (form === "no") draft.noPoles = number;
  else if (form === "nc") draft.ncPoles = number;
}

function takeWays({ device }: DeviceDraft, read: ItemReader, word: Word): boolean {
  const item = read.peek();
  const number = read.count(word);
  if (number === undefined) return false;
  if (number > 0) device.ways = number;
  else read.report.error("value-out-of-range", item?.at ?? word.at, `"poles" must be more than zero.`);
  return true;
}

export const coil: DeviceWords = {
  coil: ({ device }, read, word) => {
    const power = read.positive(word, "power", "apparent-power", "current");
    if (power) {
      device.coil = { ...device.coil, power };
      device.values.push(printQuantity(power));
    }
  },
  inrush: ({ device }, read, word) => {
    device.coil = { ...device.coil, inrush: read.positive(word, "apparent-power", "power", "current") };
  },
  pickup: ({ device }, read, word) => {
    device.coil = { ...device.coil, pickup: read.positive(word, "time") };
  },
  dropout: ({ device }, read, word) => {
    device.coil = { ...device.coil, dropout: read.positive(word, "time") };
  },
};

/** Where along the stroke of a cylinder a switch is operated. */
export const stroke: DeviceWords = {
  on: (draft, read) => {
    draft.on = read.reference();
  },
  at: (draft, read, word) => {
    const end = read.take("retracted", "extended") as "retracted" | "extended" | undefined;
    if (end) {
      draft.where = { at: word.at, place: end };
      return;
    }
    const item = read.peek();
    if (item?.kind === "word") {
      read.next();
      read.report.error(
        "value-unknown",
        item.at,
        `"at" takes retracted, extended or a length, not "${item.text}".`,
        didYouMean(item.text, ["retracted", "extended"]),
      );
      return;
    }
    const length = read.quantity(word, "length");
    if (length) draft.where = { at: item?.at ?? word.at, place: { at: length.value } };
  },
  from: (draft, read, word) => {
    const start = read.peek()?.at ?? word.at;
    const from = read.quantity(word, "length");
    if (!read.take("to")) return read.missing(word, 'two lengths, as in "from 40 mm to 55 mm"');
    const end = read.peek()?.at ?? start;
    const to = read.quantity({ text: "to", at: word.at }, "length");
    if (!from || !to) return;
    if (from.value > to.value) {
      read.report.error(
        "value-out-of-order",
        end,
        `A switch is operated from the smaller length to the greater: ${to.text} comes before ${from.text}.`,
      );
    }
    const [low, high] = [Math.min(from.value, to.value), Math.max(from.value, to.value)];
    draft.where = { at: { ...start, endLine: end.endLine, endColumn: end.endColumn }, place: { from: low, to: high } };
  },
};

export const colour: DeviceWords = {
  color: ({ device }, read, word) => {
    device.colour = read.choice(word, colours);
  },
};

/** A value printed as written. */
export const printed = ({ device }: DeviceDraft, quantity: Quantity) => {
  device.values.push(printQuantity(quantity));
};

/** `24 V DC`: what a device is made for. The kind of current follows as a word of its own, which `currentKind` takes. */
const voltage = (draft: DeviceDraft, quantity: Quantity) => {
  draft.device.voltage = { voltage: quantity };
  printed(draft, quantity);
};

/** `AC` or `DC` behind a voltage. */
export const currentKind: NonNullable<DeviceTable["other"]> = ({ device }, item) => {
  if (item.kind !== "word" || !isCurrentKind(item.text) || !device.voltage || device.voltage.current) return false;
  device.voltage.current = item.text;
  const place = device.values.lastIndexOf(printQuantity(device.voltage.voltage));
  device.values[place] = printRating(device.voltage);
  return true;
};

function isCurrentKind(word: string): word is "AC" | "DC" {
  return word === "AC" || word === "DC";
}

/** `24 V DC` */
export function printRating({ voltage, current }: Rating): string {
  return current ? `${printQuantity(voltage)} ${current}` : printQuantity(voltage);
}

/** Electrical ratings that stand without a word of their own, and what else a kind takes so. */
export const rated = (words: DeviceWords, more: Dimension[] = []): DeviceTable => ({
  words,
  bare: { ...Object.fromEntries([...more, "power", "apparent-power", "current"].map((dimension) => [dimension, printed])), voltage },
  other: currentKind,
  values: ["AC", "DC"],
});

export const selectorWords: DeviceWords = {
  ...common,
  ...poles,
  positions: ({ device }, read, word) => {
    const positions: string[] = [];
    for (let item = read.peek(); item?.kind === "word" || item?.kind === "number"; item = read.peek()) {
      if (Object.hasOwn(selectorWords, item.text) && positions.length > 0) break;
      read.next();
      if (positions.includes(item.text)) {
        read.report.error("position-twice", item.at, `${read.owner} already has a position "${item.text}".`);
      } else positions.push(item.text);
    }
    if (positions.length < 2) read.missing(word, 'two or more positions, as in "positions hand off auto"');
    device.selector = { positions, start: device.selector?.start ?? "" };
  },
  start: ({ device }, read, word) => {
    const start = read.name(word, "the position drawn");
    device.selector = { positions: device.selector?.positions ?? [], start: start?.text ?? "" };
  },
};

/** Switches that a fluid value works: what they sense, and the values they switch at. `signed` where a value may be nought or less. */
export const sensing = (signed: boolean, ...dimensions: [Dimension, ...Dimension[]]): DeviceTable => {
  const setting = (read: ItemReader, word: Word) => (signed ? read.quantity(word, ...dimensions) : read.positive(word, ...dimensions));
  return {
    words: {
      ...common,
      ...poles,
      on: (draft, read) => {
        draft.on = read.reference();
      },
      rising: (draft, read, word) => {
        draft.rising = setting(read, word);
      },
      falling: (draft, read, word) => {
        draft.falling = setting(read, word);
      },
    },
  };
};

/** `primary 400 V`, `secondary 24 V DC` */
export const conversion: DeviceWords = Object.fromEntries(
  (["primary", "secondary"] as const).map((side) => [
    side,
    ({ device }: DeviceDraft, read: ItemReader, word: Word) => {
      const voltage = read.positive(word, "voltage");
      const current = read.take("AC", "DC") as "AC" | "DC" | undefined;
      if (voltage) device.conversion = { ...device.conversion, [side]: { voltage, ...(current ? { current } : {}) } };
    },
  ]),
);

/** A controller's card: `8 points 24 V DC`. */
export const card: DeviceTable = {
  words: common,
  bare: { voltage, current: printed },
  values: ["points", "AC", "DC"],
  other: (draft, item, read) => {
    if (currentKind(draft, item, read)) return true;
    if (item.kind !== "number") return false;
    if (!read.take("points")) {
      read.report.error("value-missing", item.at, `What of ${read.owner} is ${item.text}?`, { hint: `Write ${item.text} points.` });
    } else if (Number.isInteger(item.value) && item.value > 0 && item.value <= 999) draft.device.points = item.value;
    else read.report.error("value-wrong", item.at, `${read.owner} has a whole number of points, from 1 to 999.`);
    return true;
  },
};

export function setButton(device: Device, button: Partial<NonNullable<Device["button"]>>): void {
  device.button = { action: "momentary", mushroom: false, ...device.button, ...button };
}

export function delay({ device }: DeviceDraft, read: ItemReader, word: Word): void {
  const time = read.positive(word, "time");
  if (!time) return;
  if (device.delay) {
    read.report.error(
      "property-twice",
      word.at,
      `${device.name} already has ${device.delay.mode === "on-delay" ? "an on-delay" : "an off-delay"}.`,
    );
    return;
  }
  device.delay = { mode: word.text as "on-delay" | "off-delay", time };
  device.values.push(printQuantity(time));
}
