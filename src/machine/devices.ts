import { printQuantity } from "../language/print-quantity.js";
import type { Declaration, Word } from "../language/tree.js";
import {
  card,
  coil,
  colour,
  colours,
  common,
  conversion,
  currentKind,
  type DeviceDraft,
  type DeviceTable,
  delay,
  poles,
  printed,
  printRating,
  rated,
  selectorWords,
  sensing,
  setButton,
  stroke,
  ways,
  waysAndPoles,
} from "./device-words.js";
import type { Device, DeviceKind, Rating } from "./model.js";
import { readerOf, readProperties } from "./reader.js";
import { capital, didYouMean, listed, type Report, withArticle } from "./report.js";

/** How each kind's properties are read. */
const tables: Record<DeviceKind, DeviceTable> = {
  relay: { words: { ...common, ...poles, ...coil } },
  contactor: { words: { ...common, ...waysAndPoles, ...coil } },
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
        const at = read.peek()?.at ?? word.at;
        const preset = read.count(word);
        if (preset === 0) read.report.error("value-out-of-range", at, `"preset" must be more than zero.`);
        else if (preset !== undefined) {
          device.preset = preset;
          device.values.push(String(preset));
        }
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
  "pressure-switch": sensing(false, "pressure"),
  // A vacuum may be written below nought: what counts is how far from the pressure of the air.
  "vacuum-switch": sensing(true, "pressure"),
  "flow-switch": sensing(false, "flow"),
  "level-switch": sensing(false, "length", "share"),
  "temperature-switch": sensing(true, "temperature"),
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
    ...rated({ ...common, ...colour }),
    other: (draft, item, read) => {
      if (currentKind(draft, item, read)) return true;
      if (item.kind !== "word") return false;
      const { device } = draft;
      if (item.text === "push-to-test") device.lamp = { pushToTest: true };
      if (item.text === "push-to-test") return true;
      if (!(colours as readonly string[]).includes(item.text)) return false;
      device.colour = item.text;
      return true;
    },
    values: [...colours, "push-to-test", "AC", "DC"],
  },
  horn: rated(common),
  bell: rated(common),
  heater: rated(common),
  fuse: rated({ ...common, ...ways }),
  "circuit-breaker": rated({ ...common, ...waysAndPoles }),
  disconnect: rated({ ...common, ...waysAndPoles }),
  transformer: rated({ ...common, ...conversion }),
  "power-supply": rated({ ...common, ...conversion }),
  rectifier: rated({ ...common, ...conversion }),
  "terminal-strip": { words: common },
  plug: { words: common },
  diode: rated(common),
  resistor: rated(common, ["resistance"]),
  "input-card": card,
  "output-card": card,
  motor: {
    ...rated(
      {
        ...common,
        current: (draft, read, word) => {
          const current = read.positive(word, "current");
          if (current) printed(draft, current);
        },
      },
      ["speed", "frequency"],
    ),
    // `3 phase`
    other: (draft, item, read) => {
      if (currentKind(draft, item, read)) return true;
      if (item.kind !== "number" || !(item.value === 1 || item.value === 3) || !read.take("phase")) return false;
      draft.device.values.push(`${item.text}~`);
      return true;
    },
  },
};

/** A device that has its name and kind and nothing else. */
export function bareDevice(name: Word, kind: DeviceKind, text?: string): Device {
  return { name: name.text, kind, text, at: name.at, values: [], contacts: [], loads: [], throughs: [], mains: [] };
}

/** Reads one device declaration. */
export function readDevice(declaration: Declaration & { name: Word }, kind: DeviceKind, report: Report): DeviceDraft {
  const device = bareDevice(declaration.name, kind, declaration.text?.text);
  const draft: DeviceDraft = { device, declaration };
  if (kind === "push-button") setButton(device, {});
  readProperties(draft, readerOf(declaration, report), withArticle(kind), tables[kind]);
  if (draft.noPoles !== undefined || draft.ncPoles !== undefined) {
    device.poles = { no: draft.noPoles ?? 0, nc: draft.ncPoles ?? 0 };
  }
  if (kind === "timer" && !written(declaration, "on-delay", "off-delay")) {
    report.missing(declaration.at, declaration.name.at, `${device.name} needs its delay: "on-delay 2 s" or "off-delay 2 s".`);
  }
  if (kind === "counter" && !written(declaration, "preset")) {
    report.missing(declaration.at, declaration.name.at, `${device.name} needs the number it counts to, as in "preset 12".`);
  }
  if (kind === "selector-switch" || kind === "key-switch") settleSelector(draft, declaration, report);
  if (kind === "transformer" || kind === "power-supply" || kind === "rectifier") settleConversion(draft, declaration, kind, report);
  settleSettings(draft, declaration, report);
  return draft;
}

/** Whether one of these words stands in the declaration, whatever follows it. */
function written({ items }: Declaration, ...words: string[]): boolean {
  return items.some((item) => item.kind === "word" && words.includes(item.text));
}

/** bar: no vacuum is deeper than the pressure of the air, 101 325 Pa at sea level (ISO 2533). */
const deepestVacuum = 1.01325;

/** Holds the values a switch goes over and back at against each other. */
function settleSettings({ device, rising, falling }: DeviceDraft, declaration: Declaration & { name: Word }, report: Report): void {
  const settings = [rising, falling].filter((setting) => setting !== undefined);
  if (settings.length > 0) device.values.unshift(settings.map(printQuantity).join(" / "));
  const placeOf = (quantity: unknown) =>
    declaration.items.find((item) => item.kind === "quantity" && item.quantity === quantity)?.at ?? declaration.name.at;
  const vacuum = device.kind === "vacuum-switch";
  if (vacuum) {
    for (const setting of settings) {
      if (setting.value === 0) report.error("value-out-of-range", placeOf(setting), `${setting.text} is no vacuum.`);
      else if (Math.abs(setting.value) > deepestVacuum) {
        report.error("value-out-of-range", placeOf(setting), `No vacuum is as deep as ${setting.text}: the air presses with 1.013 bar.`, {
          hint: "Write how far the pressure is below that of the air, as in -0.6 bar or 0.6 bar.",
        });
      }
    }
  }
  if (!rising || !falling) return;
  if (rising.dimension !== falling.dimension) {
    report.error("unit-wrong", placeOf(falling), `${device.name} cannot go over at ${rising.text} and back at ${falling.text}.`);
    return;
  }
  const size = vacuum ? Math.abs : (value: number) => value;
  if (size(falling.value) < size(rising.value)) return;
  report.error(
    "value-out-of-order",
    placeOf(falling),
    vacuum
      ? `${device.name} must switch back at a lesser vacuum than it switches at: ${falling.text} is not less than ${rising.text}.`
      : `${device.name} must switch back below the value it switches at: ${falling.text} is not below ${rising.text}.`,
  );
}

/** What goes in and what comes out: a transformer takes and gives AC, the others give DC. */
function settleConversion(
  { device }: DeviceDraft,
  declaration: Declaration & { name: Word },
  kind: "transformer" | "power-supply" | "rectifier",
  report: Report,
): void {
  const { primary, secondary } = device.conversion ?? {};
  const takes = kind === "power-supply" ? undefined : "AC";
  const gives = kind === "power-supply" ? undefined : kind === "rectifier" ? "DC" : "AC";
  const hold = (side: "primary" | "secondary", current: Rating["current"], due: Rating["current"]) => {
    if (current === undefined || due === undefined || current === due) return;
    const word = declaration.items.findIndex((item) => item.kind === "word" && item.text === side);
    report.error(
      "value-contradicts",
      declaration.items[word + 2]?.at ?? declaration.name.at,
      `${capital(withArticle(kind))} ${side === "primary" ? "takes" : "gives"} ${due}.`,
      kind === "transformer" ? { hint: 'Direct current comes from a "power-supply" or a "rectifier".' } : {},
    );
  };
  hold("primary", primary?.current, takes);
  hold("secondary", secondary?.current, gives);
  if (primary) primary.current = takes ?? primary.current ?? "AC";
  if (secondary) secondary.current = gives ?? secondary.current ?? "DC";
  const both = [primary, secondary].filter((rating) => rating !== undefined);
  if (both.length > 0) device.values.unshift(both.map(printRating).join(" / "));
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
