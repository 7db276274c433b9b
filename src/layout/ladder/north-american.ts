import type { Mm } from "../../drawing/geometry.js";
import { measureText, wrapText } from "../../drawing/text.js";
import type { ContactUse, Device, LoadUse, Machine } from "../../machine/model.js";
import type { Symbol } from "../../symbols/symbol.js";
import type { PlacedText, Reference, ReferenceTo } from "../placement.js";
import type { Arrangement, Block, Dressed, MarginEntry } from "./arrangement.js";
import { numberRise } from "./measure-rungs.js";
import { reachInBand } from "./reach-in-band.js";
import { scaleSymbol } from "./scale-symbol.js";
import { around, roomOf } from "./text-box.js";

/** Heights of text on a ladder sheet, mm (ISO 3098 series). */
export const textHeight = { usual: 2.5, small: 1.8 } as const;

/** Widths beside the return rail, mm. */
export interface MarginWidths {
  references: Mm;
  words: Mm;
}

export interface NorthAmericanGiven {
  machine: Machine;
  symbolOf(use: ContactUse | LoadUse): Symbol;
  margin: MarginWidths;
  /** 1 for the 2.5 mm module, less for a smaller one. */
  scale: number;
}

/** Rails upright, rungs level: along is x, across is y. */
export function northAmerican({ machine, symbolOf, margin, scale }: NorthAmericanGiven): Arrangement {
  const endingHeight = scale < 1 ? textHeight.small : textHeight.usual;
  const potentials = new Map(machine.potentials.map((potential) => [potential.id, potential]));
  return {
    orient: (along, across) => ({ x: along, y: across }),
    dress: (use) => dress(use, machine, scaleSymbol(symbolOf(use), scale), scale),
    margin: (entry) => marginBlock(entry, machine, margin),
    wireNumber: (node) => {
      const words = potentials.get(node)?.number.value ?? "";
      // Numbers by line are given once the lines are known.
      const longest = machine.drawing.wireNumbers === "by-line" ? "8888A" : words;
      return { words, room: measureText(longest, textHeight.usual) };
    },
    endingHeight,
    endingRoom: (point) => measureText(`${point} 8/8888`, endingHeight),
  };
}

function dress(use: ContactUse | LoadUse, machine: Machine, symbol: Symbol, scale: number): Dressed {
  const device = machine.devices.get(use.device);
  const ports = symbol.ports;
  const left = ports.find((port) => port.direction === "left") ?? ports[0] ?? { x: -10, y: 0 };
  const right = ports.find((port) => port.direction === "right") ?? ports.at(-1) ?? { x: 10, y: 0 };
  const shift = { x: -(left.x + right.x) / 2, y: -left.y };
  const reach = (right.x - left.x) / 2;
  const box = { ...symbol.box, x: symbol.box.x + shift.x, y: symbol.box.y + shift.y };
  // A bare coil or contact has its designation as high as most others on the line.
  const top = Math.min(box.y, -3.75 * scale, -numberRise.gap - numberRise.height) - clearance;
  const bottom = Math.max(box.y + box.height, 2.5 * scale) + clearance;
  const texts: PlacedText[] = [];

  const inside = insideWords(use, device, scale);
  if (inside)
    texts.push({
      part: use.id,
      role: "designation",
      at: { x: 0, y: inside.height / 2 },
      anchor: "middle",
      height: inside.height,
      text: inside.words,
    });
  const labels = selectorLabels(use, device, symbol);
  texts.push(...labels.map((text) => ({ ...text, at: { x: text.at.x + shift.x, y: text.at.y + shift.y } })));
  const highest = Math.min(top, ...labels.map((text) => roomOf(text).y + shift.y - clearance));
  if (!inside) {
    texts.push({
      part: use.id,
      role: "designation",
      at: { x: 0, y: highest - hang(use.device) },
      anchor: "middle",
      height: textHeight.usual,
      text: use.device,
    });
  }

  // Over the middle of the lead, clear of the symbol; a long number reaches out over the wire.
  const leads = reachInBand(symbol, shift, -0.4 - textHeight.small - 0.7, -0.4);
  let body = reach;
  use.terminals.value.forEach((terminal, pin) => {
    if (terminal === "") return;
    const half = measureText(terminal, textHeight.small) / 2;
    const middle = Math.max(reach - 1.8 * scale, leads + 0.6 + half);
    body = Math.max(body, middle + half + 0.4);
    texts.push({
      part: use.id,
      role: "terminal",
      at: { x: pin === 0 ? -middle : middle, y: -0.7 },
      anchor: "middle",
      height: textHeight.small,
      text: terminal,
    });
  });

  let baseline = bottom;
  for (const { role, words, height } of underWords(use, device, 2 * reach)) {
    baseline += height;
    texts.push({ part: use.id, role, at: { x: 0, y: baseline }, anchor: "middle", height, text: words });
    baseline += height * 0.45 + 0.3;
  }
  const all = around([box, ...texts.map(roomOf)]);
  return {
    symbol,
    turn: { quarter: 0 },
    shift,
    texts,
    reach,
    body,
    label: Math.max(-all.x, all.x + all.width),
    above: -all.y,
    below: all.y + all.height,
    box,
  };
}

/** Between a symbol and a text over or under it. */
const clearance: Mm = 0.8;

/** Room for letters that hang below the line. */
const hang = (words: string): Mm => (/[gjpqyQ_,;()]/.test(words) ? textHeight.usual * 0.3 : 0);

/** A coil's designation stands in its circle if it has room there. */
function insideWords(use: ContactUse | LoadUse, device: Device | undefined, scale: number): { words: string; height: Mm } | undefined {
  if (use.kind !== "load" || !device) return undefined;
  if (device.kind !== "relay" && device.kind !== "contactor" && device.kind !== "timer") return undefined;
  const { usual, small } = textHeight;
  const height = [usual, small].find((height) => measureText(use.device, height) <= 7.4 * scale - (height - small) / 2);
  return height === undefined ? undefined : { words: use.device, height };
}

function selectorLabels(use: ContactUse | LoadUse, device: Device | undefined, symbol: Symbol): PlacedText[] {
  const positions = use.kind === "contact" ? device?.selector?.positions : undefined;
  if (!positions) return [];
  return positions.flatMap((position, index) => {
    const spot = symbol.spots[`position-${index + 1}`];
    if (!spot) return [];
    return [
      {
        part: use.id,
        role: "value",
        at: { x: spot.x, y: spot.y },
        anchor: spot.anchor,
        height: textHeight.small,
        text: position,
      } satisfies PlacedText,
    ];
  });
}

interface UnderWords {
  role: PlacedText["role"];
  words: string | Reference;
  height: Mm;
}

/** What stands under a symbol, from its line outward. */
function underWords(use: ContactUse | LoadUse, device: Device | undefined, width: Mm): UnderWords[] {
  if (!device) return [];
  const { usual, small } = textHeight;
  const reference = (to: ReferenceTo, longest: string, height: Mm): UnderWords => ({
    role: "reference",
    words: { ...to, room: measureText(longest, height) },
    height,
  });
  const words = (text: string | undefined, role: "function" | "value" = "function"): UnderWords[] =>
    wrapText(text ?? "", small, width + 4, 2).map((line) => ({ role, words: line, height: small }));
  if (use.kind === "load") {
    if (device.kind !== "timer" || !device.delay) return [];
    return words(`${device.delay.mode === "on-delay" ? "ON DELAY" : "OFF DELAY"} ${device.delay.time.text}`, "value");
  }
  const operator = device.place?.cylinder ?? device.senses?.component ?? device.senses?.point;
  switch (device.kind) {
    case "relay":
    case "contactor":
    case "timer":
      return [reference({ to: "coil", device: device.name }, "(88888)", usual)];
    case "limit-switch":
    case "proximity-switch":
      return [
        ...words(device.text),
        ...(operator ? [reference({ to: "switch-place", device: device.name }, `${operator} 88/H8`, small)] : []),
      ];
    case "pressure-switch": {
      const settings = [device.senses?.rising?.text, device.senses?.falling?.text].filter((text) => text !== undefined).join(" / ");
      return [
        ...words(device.text),
        ...words(settings, "value"),
        ...(operator ? [reference({ to: "switch-place", device: device.name }, `${operator} 88/H8`, small)] : []),
      ];
    }
    default:
      return words(device.text);
  }
}

/** Function texts and references right of the return rail, centred on the line; the origin is on the rail. */
function marginBlock({ title, load }: MarginEntry, machine: Machine, margin: MarginWidths): Block {
  const device = load ? machine.devices.get(load.device) : undefined;
  const texts: PlacedText[] = [];
  const { usual } = textHeight;
  if (load && device) {
    const to: ReferenceTo | undefined =
      device.kind === "solenoid"
        ? { to: "valve", device: device.name }
        : device.contacts.length > 0
          ? { to: "contacts", device: device.name }
          : undefined;
    if (to) {
      texts.push({
        part: load.id,
        role: "margin",
        at: { x: marginGap, y: usual / 2 },
        anchor: "start",
        height: usual,
        text: { ...to, room: margin.references },
      });
    }
  }
  const words = [title, device?.text].filter(
    (text, index, all) => text !== undefined && text !== "" && all.indexOf(text) === index,
  ) as string[];
  const lines = words.flatMap((text) => wrapText(text, usual, margin.words, 3));
  const pitch = usual * 1.6;
  lines.forEach((line, index) => {
    const y = usual / 2 + (index - (lines.length - 1) / 2) * pitch;
    texts.push({
      ...(load ? { part: load.id } : {}),
      role: "function",
      at: { x: 2 * marginGap + margin.references, y },
      anchor: "start",
      height: usual,
      text: line,
    });
  });
  // A long contact list is set in up to three rows.
  const listed = device && device.contacts.length > 2 ? 4.8 : usual;
  const boxes = around(texts.map(roomOf));
  return {
    texts,
    above: Math.max(-boxes.y, texts.length > 0 ? listed : 0),
    below: Math.max(boxes.y + boxes.height, texts.length > 0 ? listed : 0),
  };
}

export const marginGap: Mm = 3;
