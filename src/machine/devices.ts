import type { SourceRange } from "../language/diagnostic.js";
import { printQuantity } from "../language/print-quantity.js";
import type { Dimension, Quantity } from "../language/quantity.js";
import type { Declaration, Item, Word } from "../language/tree.js";
import type { Device, DeviceKind } from "./model.js";
import { type ItemReader, type PropertyTable, readerOf, readProperties } from "./reader.js";
import { didYouMean, listed, type Report } from "./report.js";

/** A device with the names it mentions, which are looked up when everything is declared. */
export interface DeviceDraft {
  device: Device;
  declaration: Declaration;
  /** What stands behind `on`: a cylinder, a port, a point or a motor. */
  on?: Item;
  /** Limit and proximity switches: where along the stroke. */
  where?: { at: SourceRange; place: "retracted" | "extended" | { at: number } | { from: number; to: number } };
  rising?: Quantity;
  falling?: Quantity;
  lamp?: Word;
  noPoles?: number;
  ncPoles?: number;
}

type DeviceTable = PropertyTable<DeviceDraft>;
type DeviceWords = DeviceTable["words"];

const colours = ["red", "green", "yellow", "blue", "white", "amber", "orange", "clear", "black", "grey"] as const;

const common: DeviceWords = {
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

const poles: DeviceWords = {
  // `poles 3 no 1 nc`, `poles 2 nc`
  poles: (draft, read, word) => {
    do {
      const number = read.count(word);
      if (number === undefined) return;
      const form = read.choice({ text: "poles", at: word.at }, ["no", "nc"]);
      if (form === undefined) continue;
      if (form === "no") draft.noPoles = number;
      else draft.ncPoles = number;
    } while (read.peek()?.kind === "number");
  },
};

const coil: DeviceWords = {
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

const stroke: DeviceWords = {
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

const colour: DeviceWords = {
  color: ({ device }, read, word) => {
    device.colour = read.choice(word, colours);
  },
};

/** A value printed as written. */
const printed = ({ device }: DeviceDraft, quantity: Quantity) => {
  device.values.push(printQuantity(quantity));
};

const selectorWords: DeviceWords = {
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

/** Switches that a fluid value works: what they sense, and the values they switch at. */
const sensing = (...dimensions: [Dimension, ...Dimension[]]): DeviceTable => ({
  words: {
    ...common,
    ...poles,
    on: (draft, read) => {
      draft.on = read.reference();
    },
    rising: (draft, read, word) => {
      draft.rising = read.positive(word, ...dimensions);
    },
    falling: (draft, read, word) => {
      draft.falling = read.positive(word, ...dimensions);
    },
  },
});

const ratings: DeviceTable["bare"] = { power: printed, voltage: printed, current: printed, "apparent-power": printed };

/** How many conductors pass through: `poles 3`, or main poles with auxiliary contacts `poles 3 1 no`. */
const ways: DeviceWords = {
  poles: (draft, read, word) => {
    const number = read.count(word);
    if (number !== undefined) draft.device.ways = number;
  },
};

/** `primary 400 V`, `secondary 24 V DC`. */
const conversion: DeviceWords = Object.fromEntries(
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
const card: DeviceTable = {
  words: common,
  bare: { voltage: printed, current: printed },
  values: ["points", "AC", "DC"],
  other: ({ device }, item, read) => {
    if (item.kind === "word" && (item.text === "AC" || item.text === "DC")) return true;
    if (item.kind !== "number" || !read.take("points")) return false;
    device.points = item.value;
    return true;
  },
};

/** How each kind's properties are read. */
const tables: Record<DeviceKind, DeviceTable> = {
  relay: { words: { ...common, ...poles, ...coil } },
  contactor: { words: { ...common, ...poles, ...coil } },
  timer: {
    words: { ...common, ...poles, ...coil, "on-delay": delay, "off-delay": delay },
  },
  "push-button": {
    words: {
      ...common,
      ...poles,
      ...colour,
      momentary: ({ device }) => setButton(device, { action: "momentary" }),
      maintained: ({ device }) => setButton(device, { action: "maintained" }),
      mushroom: ({ device }) => setButton(device, { mushroom: true }),
      illuminated: (draft, read, word) => {
        draft.lamp = read.name(word, "the pilot light in the button");
      },
    },
  },
  "emergency-stop": { words: { ...common, ...poles, ...colour } },
  "selector-switch": { words: selectorWords },
  "key-switch": { words: selectorWords },
  "foot-switch": { words: { ...common, ...poles } },
  "cable-pull": { words: { ...common, ...poles } },
  "door-switch": { words: { ...common, ...poles } },
  "latching-relay": { words: { ...common, ...poles, ...coil } },
  counter: {
    words: {
      ...common,
      ...poles,
      ...coil,
      preset: ({ device }, read, word) => {
        device.preset = read.count(word);
        if (device.preset !== undefined) device.values.push(String(device.preset));
      },
    },
  },
  "limit-switch": { words: { ...common, ...poles, ...stroke } },
  "proximity-switch": {
    words: {
      ...common,
      ...poles,
      ...stroke,
      wires: ({ device }, read, word) => {
        const item = read.peek();
        const wires = read.count(word);
        if (wires === 2 || wires === 3) device.wires = wires;
        else if (wires !== undefined && item) read.report.error("value-unknown", item.at, `"wires" takes 2 or 3, not ${wires}.`);
      },
    },
  },
  "pressure-switch": sensing("pressure"),
  "vacuum-switch": sensing("pressure"),
  "flow-switch": sensing("flow"),
  "level-switch": sensing("length"),
  "temperature-switch": sensing("temperature"),
  overload: {
    words: {
      ...common,
      ...poles,
      on: (draft, read) => {
        draft.on = read.reference();
      },
      setting: (draft, read, word) => {
        const setting = read.positive(word, "current");
        if (setting) printed(draft, setting);
      },
    },
    bare: { current: printed },
  },
  solenoid: { words: { ...common, ...coil } },
  "pilot-light": {
    words: { ...common, ...colour },
    bare: { power: printed, voltage: printed, current: printed },
    other: ({ device }, item) => {
      if (item.kind !== "word") return false;
      if (item.text === "push-to-test") device.lamp = { pushToTest: true };
      if (item.text === "push-to-test") return true;
      if (!(colours as readonly string[]).includes(item.text)) return false;
      device.colour = item.text;
      return true;
    },
    values: [...colours, "push-to-test"],
  },
  horn: { words: common, bare: ratings },
  bell: { words: common, bare: ratings },
  heater: { words: common, bare: ratings },
  fuse: { words: { ...common, ...ways }, bare: ratings },
  "circuit-breaker": { words: { ...common, ...ways }, bare: ratings },
  disconnect: { words: { ...common, ...ways }, bare: ratings },
  transformer: { words: { ...common, ...conversion }, bare: ratings },
  "power-supply": { words: { ...common, ...conversion }, bare: ratings },
  rectifier: { words: { ...common, ...conversion }, bare: ratings },
  "terminal-strip": { words: common },
  plug: { words: common },
  diode: { words: common, bare: ratings },
  resistor: { words: common, bare: ratings },
  "input-card": card,
  "output-card": card,
  motor: {
    words: {
      ...common,
      current: (draft, read, word) => {
        const current = read.positive(word, "current");
        if (current) printed(draft, current);
      },
    },
    bare: { power: printed, voltage: printed, current: printed, speed: printed, frequency: printed },
    // `3 phase`
    other: ({ device }, item, read) => {
      if (item.kind !== "number" || !(item.value === 1 || item.value === 3) || !read.take("phase")) return false;
      device.values.push(`${item.text}~`);
      return true;
    },
  },
};

function setButton(device: Device, button: Partial<NonNullable<Device["button"]>>): void {
  device.button = { action: "momentary", mushroom: false, ...device.button, ...button };
}

function delay({ device }: DeviceDraft, read: Parameters<DeviceWords[string]>[1], word: Word): void {
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

/** A device that has its name and kind and nothing else. */
export function bareDevice(name: Word, kind: DeviceKind, text?: string): Device {
  return { name: name.text, kind, text, at: name.at, values: [], contacts: [], loads: [], throughs: [] };
}

/** Reads one device declaration. */
export function readDevice(declaration: Declaration & { name: Word }, kind: DeviceKind, report: Report): DeviceDraft {
  const device = bareDevice(declaration.name, kind, declaration.text?.text);
  const draft: DeviceDraft = { device, declaration };
  if (kind === "push-button") setButton(device, {});
  readProperties(draft, readerOf(declaration, report), withKind(kind), tables[kind]);
  if (draft.noPoles !== undefined || draft.ncPoles !== undefined) {
    device.poles = { no: draft.noPoles ?? 0, nc: draft.ncPoles ?? 0 };
  }
  const delayWritten = declaration.items.some((item) => item.kind === "word" && (item.text === "on-delay" || item.text === "off-delay"));
  if (kind === "timer" && !delayWritten) {
    report.missing(declaration.at, declaration.name.at, `${device.name} needs its delay: "on-delay 2 s" or "off-delay 2 s".`);
  }
  if (kind === "selector-switch" || kind === "key-switch") settleSelector(draft, declaration, report);
  const settings = [draft.rising, draft.falling].filter((setting) => setting !== undefined);
  if (settings.length > 0) device.values.unshift(settings.map(printQuantity).join(" / "));
  if (draft.rising && draft.falling && draft.falling.value >= draft.rising.value) {
    const written = declaration.items.find((item) => item.kind === "quantity" && item.quantity === draft.falling);
    report.error(
      "value-out-of-order",
      written?.at ?? declaration.name.at,
      `${device.name} must switch back below the pressure it switches at: ${draft.falling.text} is not below ${draft.rising.text}.`,
    );
  }
  return draft;
}

function withKind(kind: DeviceKind): string {
  return /^[aeiou]/.test(kind) ? `an ${kind}` : `a ${kind}`;
}

/** A selector is drawn at `start`, or at `off` or `0` if it has one, or at its first position. */
function settleSelector({ device }: DeviceDraft, declaration: Declaration & { name: Word }, report: Report): void {
  const { positions, start } = device.selector ?? { positions: [], start: "" };
  if (positions.length === 0) {
    if (!device.selector) {
      report.missing(declaration.at, declaration.name.at, `${device.name} needs its positions, as in "positions hand off auto".`);
    }
    device.selector = { positions: ["off", "on"], start: "off" };
    return;
  }
  const resting = positions.includes("off") ? "off" : positions.includes("0") ? "0" : (positions[0] as string);
  if (start !== "" && !positions.includes(start)) {
    const item = declaration.items.findLast((item) => "text" in item && item.text === start);
    report.error(
      "value-unknown",
      item?.at ?? declaration.name.at,
      `${device.name} has the positions ${listed(positions, "and")}, not "${start}".`,
      didYouMean(start, positions),
    );
  }
  device.selector = { positions, start: positions.includes(start) ? start : resting };
}
