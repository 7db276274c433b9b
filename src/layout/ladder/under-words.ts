import type { Mm } from "../../drawing/geometry.js";
import { measureText } from "../../drawing/text.js";
import { wrapName } from "../../drawing/wrap-name.js";
import { deviceRoles, isSwitchKind } from "../../machine/kinds.js";
import type { Device, DeviceUse, DrawingInfo, LoadUse } from "../../machine/model.js";
import { designationOf, printedName } from "../../machine/walk.js";
import type { PlacedText, Reference, ReferenceTo } from "../placement.js";

/** Heights of text on a ladder sheet, mm (ISO 3098 series). */
export const textHeight = { usual: 2.5, small: 1.8 } as const;

/** A name takes no more lines than this. */
export const mostLines = 3;

/** A line of text about a symbol, not yet placed. */
export interface SymbolWords {
  role: PlacedText["role"];
  words: string | Reference;
  height: Mm;
  /** It may stand behind the line before it where there is room. */
  follows?: boolean;
}

/** The width of words, or of the room kept for a reference. */
export const widthOf = ({ words, height }: SymbolWords): Mm => (typeof words === "string" ? measureText(words, height) : words.room);

type Convention = DrawingInfo["convention"];

/** What a contact or load is called on a ladder sheet. */
export function designationWords(use: DeviceUse, convention: Convention): string {
  return printedName(designationOf(use), convention);
}

/** The longest that references get, for the room that is kept before they are worded. */
const longest = {
  "north-american": { coil: "(88888)", zone: "88/H8" },
  international: { coil: "/88.88", zone: "/88.H8" },
} as const;

/**
 * What stands under a symbol, or under its designation, from the top down: its function, its settings, where its coil or
 * what works it is drawn.
 * @param room words are no wider than `words`, references no wider than `references`, mm
 */
export function underWords(
  use: DeviceUse,
  device: Device | undefined,
  room: { words: Mm; references: Mm },
  convention: Convention,
): SymbolWords[] {
  if (!device) return [];
  const { usual, small } = textHeight;
  const reference = (to: ReferenceTo, widest: string, height: Mm): SymbolWords => ({
    role: "reference",
    words: { ...to, room: Math.min(measureText(widest, height), room.references) },
    height,
  });
  const words = (text: string | undefined, role: "function" | "value" = "function"): SymbolWords[] =>
    wrapName(text ?? "", small, room.words, mostLines).map((line) => ({ role, words: line, height: small }));
  if (use.kind === "load") return words(loadWords(use, device, convention), "value");
  // What a strip or a plug is for stands in the lists, not at each of its terminals.
  if (use.kind === "through") return [...(use.pin === undefined ? words(device.text) : []), ...words(device.values.join(" "), "value")];
  const operator = device.place?.cylinder ?? device.senses?.component ?? device.senses?.point;
  const place = operator ? [reference({ to: "switch-place", device: device.name }, `${operator} ${longest[convention].zone}`, small)] : [];
  const { load, coils } = deviceRoles[device.kind];
  const { coil } = longest[convention];
  if (load) return [reference({ to: "coil", device: device.name }, coils ? `${coil}, ${coil}` : coil, coils ? small : usual)];
  // What a cylinder or a fluid works is looked up there: its mark names all of its contacts.
  const sisters = isSwitchKind(device.kind) && !operator ? Math.min(device.contacts.length - 1, mostSisters) : 0;
  const others =
    sisters > 0
      ? [{ ...reference({ to: "sisters", device: device.name, from: use.id }, sisterRoom(sisters, convention), small), follows: true }]
      : [];
  switch (device.kind) {
    case "limit-switch":
    case "proximity-switch":
      return [...words(device.text), ...place, ...others];
    case "pressure-switch":
    case "vacuum-switch":
    case "flow-switch":
    case "level-switch":
    case "temperature-switch": {
      const settings = [device.senses?.rising?.text, device.senses?.falling?.text].filter((text) => text !== undefined).join(" / ");
      return [...words(device.text), ...words(settings, "value"), ...place, ...others];
    }
    default:
      // An overload, or a breaker with contacts of its own, is worked by what flows in the power circuit.
      return [
        ...words(device.text),
        ...others,
        ...(device.mains.length > 0 ? [reference({ to: "coil", device: device.name }, longest[convention].coil, usual)] : []),
      ];
  }
}

/** So many other contacts of a switch are told of under each; the cross-reference has them all. */
const mostSisters = 3;

/** The longest that the lines of so many contacts get. */
function sisterRoom(count: number, convention: Convention): string {
  const one = convention === "international" ? "/88.88" : "8888";
  const all = Array.from({ length: count }, () => one).join(", ");
  return convention === "international" ? all : `(${all})`;
}

/** What a load says of itself beside its name: its delay, its count, which of its coils it is, its rating. */
function loadWords(use: LoadUse, device: Device, convention: Convention): string {
  // The international coils show by their cells what they are.
  const named = convention === "north-american";
  switch (device.kind) {
    case "timer":
      if (!device.delay) return "";
      return `${named ? (device.delay.mode === "on-delay" ? "ON DELAY " : "OFF DELAY ") : ""}${device.delay.time.text}`;
    case "counter":
      if (use.coil === "reset") return named ? "RESET" : "";
      return `${named ? "COUNT " : ""}${device.preset ?? ""}`.trim();
    case "latching-relay":
      return named ? (use.coil === "reset" ? "UNLATCH" : "LATCH") : "";
    case "pilot-light":
      return [device.lamp?.pushToTest && named ? "PUSH TO TEST" : "", ...device.values].filter((word) => word !== "").join(" ");
    case "horn":
    case "bell":
    case "heater":
      return device.values.join(" ");
    default:
      return "";
  }
}
