import type { Mm } from "../../drawing/geometry.js";
import { measureText } from "../../drawing/text.js";
import { wrapName, wrapNameAt, wrappedPitch } from "../../drawing/wrap-name.js";
import type { Device, DeviceUse, Machine } from "../../machine/model.js";
import type { Symbol } from "../../symbols/symbol.js";
import type { PlacedText, ReferenceTo } from "../placement.js";
import type { Arrangement, Block, Dressed, MarginEntry } from "./arrangement.js";
import { chartPositions } from "./chart-positions.js";
import { endingSize } from "./measure-rungs.js";
import { reachInBand } from "./reach-in-band.js";
import { scaleSymbol } from "./scale-symbol.js";
import { around, hang, roomOf } from "./text-box.js";
import { designationWords, mostLines, type SymbolWords, textHeight, underWords, widthOf } from "./under-words.js";
import { wrapOwnTexts } from "./wrap-own-texts.js";

/** Widths beside the return rail, mm. */
export interface MarginWidths {
  references: Mm;
  words: Mm;
}

export interface NorthAmericanGiven {
  machine: Machine;
  symbolOf(use: DeviceUse): Symbol;
  margin: MarginWidths;
  /** 1 for the 2.5 mm module, less for a smaller one. */
  scale: number;
}

/** Rails upright, rungs level: along is x, across is y. */
export function northAmerican({ machine, symbolOf, margin, scale }: NorthAmericanGiven): Arrangement {
  const endingHeight = scale < 1 ? textHeight.small : textHeight.usual;
  const potentials = new Map(machine.potentials.map((potential) => [potential.id, potential]));
  const endingRoom = (point: string) => Math.min(measureText(`${point} 8/8888`, endingHeight), widestEnding * scale);
  return {
    orient: (along, across) => ({ x: along, y: across }),
    columns: { usual: 30 * scale, widest: 38 * scale, gap: 8 * scale },
    lines: { least: scale === 1 ? 15 : 12.5, step: 1.25 },
    bareLine: { above: numberRise.gap + numberRise.height + 0.4, below: 1 },
    dress: (use, tight) => {
      const selector = machine.devices.get(use.device)?.selector !== undefined;
      const width = Math.max((tight ? tightLabel : widestLabel) * scale, selector ? narrowestSelector : 0);
      return dress(use, machine, wrapOwnTexts(scaleSymbol(symbolOf(use), scale), width), scale, width);
    },
    margin: (entry) => marginBlock(entry, machine, margin),
    wireNumber: (node, beside) => {
      const words = potentials.get(node)?.number.value ?? "";
      // Numbers by line are given once the lines are known.
      const longest = machine.drawing.wireNumbers === "by-line" ? "8888A" : words;
      const room = measureText(longest, numberRise.height);
      if (room === 0) return undefined;
      const { gap, height, beside: off } = numberRise;
      const common = { words, height, above: gap + height + 0.4 };
      return beside
        ? { ...common, at: { x: off, y: -gap }, anchor: "start", before: 0, behind: room + 2 * off, end: room + off }
        : { ...common, at: { x: 0, y: -gap }, anchor: "middle", before: room / 2 + 1, behind: room / 2 + 1, end: room / 2 };
    },
    ending: (kind, point) => {
      const room = endingRoom(point);
      const { gap } = endingSize;
      const level = endingHeight / 2;
      const common = { height: endingHeight, room } as const;
      if (kind === "start") return { ...common, at: { x: -gap, y: level }, anchor: "end", along: room, across: 0 };
      if (kind === "end") return { ...common, at: { x: gap, y: level }, anchor: "start", along: room, across: 0 };
      return { ...common, at: { x: 0, y: gap + endingHeight }, anchor: "middle", along: room / 2, across: textHeight.usual * 1.3 };
    },
    broken: (end, point) => ({
      height: textHeight.usual,
      room: endingRoom(point),
      at: { x: endingSize.half + 0.8, y: 0 },
      anchor: "start",
      along: endingSize.half + 0.8 + endingRoom(point),
      across: 0,
      // Above the words that say where the rails go on.
      fromRailEnd: end === "foot" ? 4.5 : 0,
    }),
    lineNumber: { at: { x: -4, y: 1.25 }, anchor: "end", height: textHeight.usual },
  };
}

/** Distances of a wire number from the wire and from an upright it stands behind, and its height, mm. */
const numberRise = { gap: 1.1, height: 2.5, beside: 0.9 } as const;

/** No text makes a column wider than this, mm on the usual module. */
const widestLabel: Mm = 43;
/** Texts that leave a column as wide as its symbol needs. */
const tightLabel: Mm = 25;
/** Room that the positions of a selector need about its pointer on any module. */
const narrowestSelector: Mm = 28;
/** Room at an arrow: a longer name is shortened there, so that the place after it is kept. */
const widestEnding: Mm = 24;

function dress(use: DeviceUse, machine: Machine, symbol: Symbol, scale: number, width: Mm): Dressed {
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
  const labels = selectorLabels(use, device, symbol, width);
  texts.push(...labels.map((text) => ({ ...text, at: { x: text.at.x + shift.x, y: text.at.y + shift.y } })));
  const highest = Math.min(top, ...labels.map((text) => roomOf(text).y + shift.y - clearance));
  if (!inside) {
    const { lines, height } = wrapNameAt([textHeight.usual, textHeight.small], designationWords(use, "north-american"), width, mostLines);
    lines.forEach((text, index) => {
      const y = highest - hang(lines.at(-1) as string, height) - (lines.length - 1 - index) * wrappedPitch(height);
      texts.push({ part: use.id, role: "designation", at: { x: 0, y }, anchor: "middle", height, text });
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
  const chart = chartPositions(use, device, width);
  if (chart) {
    texts.push(...chart.texts.map((text) => ({ ...text, at: { x: text.at.x - chart.width / 2, y: text.at.y + baseline } })));
    baseline += chart.height + textHeight.small * 0.45 + 0.3;
  }
  const under = underWords(use, device, { words: Math.min(2 * reach + 4, width), references: width }, "north-american");
  for (let index = 0; index < under.length; index++) {
    const line = under[index] as SymbolWords;
    const next = under[index + 1];
    const total = next?.follows ? widthOf(line) + followGap + widthOf(next) : 0;
    const together = next !== undefined && total > 0 && total <= Math.min(2 * reach + 4, width) && next.height === line.height;
    baseline += line.height;
    const set = ({ role, words, height }: SymbolWords, x: Mm, anchor: PlacedText["anchor"]) =>
      texts.push({ part: use.id, role, at: { x, y: baseline }, anchor, height, text: words });
    if (together) {
      set(line, -total / 2, "start");
      set(next, -total / 2 + widthOf(line) + followGap, "start");
      index++;
    } else set(line, 0, "middle");
    baseline += line.height * 0.45 + 0.3;
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

/** Between a symbol and a text over or under it, and between two texts on one line. */
const clearance: Mm = 0.8;
const followGap: Mm = 1;

/** A designation stands in a coil's circle or a controller's box if it has room there. */
function insideWords(use: DeviceUse, device: Device | undefined, scale: number): { words: string; height: Mm } | undefined {
  const room = device ? roomInside(use, device) : 0;
  const { usual, small } = textHeight;
  const words = designationWords(use, "north-american");
  const height = [usual, small].find((height) => measureText(words, height) <= room * scale - (height - small) / 2);
  return height === undefined ? undefined : { words, height };
}

/** Width for a designation of the least height within the symbol, mm on the usual module; 0 where others letters stand there. */
function roomInside(use: DeviceUse, device: Device): Mm {
  switch (device.kind) {
    case "relay":
    case "contactor":
    case "timer":
      return use.kind === "load" ? 7.4 : 0;
    case "input-card":
    case "output-card":
      return 13.5;
    default:
      return 0;
  }
}

/**
 * The positions of a selector about its pointer: those at the sides wrapped about their height, the one between them over
 * the pointer and, where it is wide, over the others too.
 */
function selectorLabels(use: DeviceUse, device: Device | undefined, symbol: Symbol, width: Mm): PlacedText[] {
  const positions = use.kind === "contact" ? device?.selector?.positions : undefined;
  if (!positions) return [];
  const height = textHeight.small;
  const pitch = wrappedPitch(height);
  const spots = positions.flatMap((position, index) => {
    const spot = symbol.spots[`position-${index + 1}`];
    return spot ? [{ position, spot }] : [];
  });
  const placed: PlacedText[] = [];
  const set = (lines: readonly string[], x: Mm, last: Mm, anchor: PlacedText["anchor"]) =>
    lines.forEach((text, index) => {
      placed.push({ part: use.id, role: "value", at: { x, y: last - (lines.length - 1 - index) * pitch }, anchor, height, text });
    });
  for (const { position, spot } of spots) {
    if (spot.anchor === "middle") continue;
    const lines = wrapName(position, height, width / 2 - Math.abs(spot.x), mostLines);
    // Clear of the numbers over the wire, as far as they have to come down at all.
    const lowest = Math.max(spot.y, -numberRise.gap - numberRise.height - clearance - hang(lines.at(-1) ?? "", height));
    set(lines, spot.x, Math.min(spot.y + ((lines.length - 1) * pitch) / 2, lowest), spot.anchor);
  }
  const sides = placed.map(roomOf);
  for (const { position, spot } of spots) {
    if (spot.anchor !== "middle") continue;
    const lines = wrapName(position, height, width, mostLines);
    const reach = Math.max(0, ...lines.map((line) => measureText(line, height) / 2)) + 0.8;
    const beside = sides.filter(({ x, width }) => x < spot.x + reach && x + width > spot.x - reach);
    const below = Math.min(symbol.box.y - 0.6, ...beside.map(({ y }) => y - 0.6)) - hang(lines.at(-1) ?? "", height);
    set(lines, spot.x, Math.min(spot.y, below), spot.anchor);
  }
  return placed;
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
        : device.contacts.length + device.mains.length > 0
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
  const lines = words.flatMap((text) => wrapName(text, usual, margin.words, mostLines));
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
  const listed = device && device.contacts.length + device.mains.length > 2 ? 4.8 : usual;
  const boxes = around(texts.map(roomOf));
  return {
    texts,
    // Farther from the texts of the next line than their own lines are from each other.
    above: Math.max(-boxes.y + blockGap, texts.length > 0 ? listed : 0),
    below: Math.max(boxes.y + boxes.height + blockGap, texts.length > 0 ? listed : 0),
  };
}

export const marginGap: Mm = 3;
/** Half of what function texts of two lines are kept apart beyond other things, mm. */
const blockGap: Mm = 0.6;
