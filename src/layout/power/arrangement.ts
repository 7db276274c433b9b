import type { Box, Mm, Point } from "../../drawing/geometry.js";
import { fitText, measureText } from "../../drawing/text.js";
import { wrapName, wrappedPitch } from "../../drawing/wrap-name.js";
import type { Device, Machine, MainUse } from "../../machine/model.js";
import { printedName } from "../../machine/walk.js";
import type { Port, Symbol } from "../../symbols/symbol.js";
import { around, hang, roomOf } from "../ladder/text-box.js";
import type { PlacedText, Reference } from "../placement.js";

/**
 * How a power circuit lies on the sheet. International: busbars level at the top, branches hang side by side. North-american:
 * busbars upright at the left, branches run to the right, one under the other. Lanes, slots and wires are worked out along the current
 * and across it; what that means on paper, and where texts go, is the arrangement's affair.
 */
export interface PowerArrangement {
  flow: "down" | "right";
  orient(along: Mm, across: Mm): Point;
  alongOf(point: Point): Mm;
  acrossOf(point: Point): Mm;
  /** Across, before everything: for what kind of current comes in, where it does not stand beside the names. */
  headingRow: Mm;
  /** Along: for the numbers of the lines; for the names of what comes in; for wire numbers in a gap. */
  lineRow: Mm;
  nameRow: Mm;
  numberRow: Mm;
  /** Along, behind everything: for the function texts. */
  functionRow(lines: number): Mm;
  /** Across, at the start of busbars that come from another sheet and at the end of those that go on. */
  busEnds: Mm;
  /** Behind the arrow where a conductor leaves: along, for its reference. */
  endRoom: Mm;
  /** Designation, values, references and terminals about the first pole's track, where the slot's middle is. */
  dress(use: MainUse, symbol: Symbol, scale: number): DressedCell;
  /** A wire number from the end of its row on its track. */
  wireNumber(words: string, track: number): Omit<PlacedText, "role">;
  /** The number of a line from the middle of the lane's tracks, at the very start of the sheet. */
  lineNumber: Omit<PlacedText, "role" | "text">;
  /** The function text of a branch from the middle of its lanes behind everything; `width` is across. */
  functionText(words: readonly string[], width: Mm): { texts: PlacedText[]; across: Mm };
  /** A text that runs on along the current behind an arrow, or before one. */
  alongArrow(side: "before" | "behind"): Pick<PlacedText, "at" | "anchor" | "rotated">;
  /** A text that runs across beside an arrow of the busbars. */
  acrossArrow(side: "before" | "behind"): Pick<PlacedText, "at" | "anchor" | "rotated">;
}

/** A cell ready to be set down; distances are from its first track and from the middle between its pins (of a load: from its pins). */
export interface DressedCell {
  symbol: Symbol;
  /** From there to the symbol's origin. */
  shift: Point;
  /** Pins along, from the same place. */
  ins: Mm;
  outs: Mm;
  texts: PlacedText[];
  box: Box;
  /** Across, from the first track. */
  before: Mm;
  behind: Mm;
  /** Along, to either side. */
  ahead: Mm;
  after: Mm;
}

const small: Mm = 1.8;
const usual: Mm = 2.5;

export function powerArrangement(machine: Machine): PowerArrangement {
  return machine.drawing.convention === "international" ? international(machine) : northAmerican(machine);
}

/** A symbol set so that its first pole is on the track and its slot's middle between its pins. */
function settle(
  symbol: Symbol,
  role: MainUse["role"],
  { alongOf, acrossOf, orient }: Pick<PowerArrangement, "alongOf" | "acrossOf" | "orient">,
) {
  const ins = symbol.ports.filter(({ name }) => name.startsWith("in-"));
  const outs = symbol.ports.filter(({ name }) => name.startsWith("out-"));
  const first = ins.find(({ name }) => name === "in-1") as Port;
  const end = outs.length > 0 ? alongOf(outs[0] as Port) : undefined;
  const middle = end === undefined || role === "load" ? alongOf(first) : (alongOf(first) + end) / 2;
  const shift = orient(-middle, -acrossOf(first));
  return { shift, ins: alongOf(first) - middle, outs: (end ?? alongOf(first)) - middle };
}

function terminalTexts(use: MainUse, symbol: Symbol, shift: Point): PlacedText[] {
  const pins = [
    ...use.ins.map(({ terminal }, index) => [`in-${index + 1}`, terminal] as const),
    ...[...use.outs, ...(use.second ?? [])].map(({ terminal }, index) => [`out-${index + 1}`, terminal] as const),
  ];
  // What hangs between two conductors has its other end at the far side.
  if (use.role === "load" && use.ins.length === 2 && !symbol.ports.some(({ name }) => name === "in-2")) {
    pins.splice(1, 1, ["out-1", use.ins[1]?.terminal ?? ""]);
  }
  return pins.flatMap(([port, terminal]): PlacedText[] => {
    const spot = symbol.spots[`terminal-${port}`];
    if (!spot || terminal === "") return [];
    const at = { x: shift.x + spot.x, y: shift.y + spot.y };
    const pin = symbol.ports.find(({ name }) => name === port);
    if (!pin) return [];
    // Clear of the symbol's body: right of the end of an upright lead; where leads are short, before the end of a level one.
    if (pin.direction === "up") at.y = shift.y + pin.y + 0.3;
    else if (pin.direction === "down") at.y = shift.y + pin.y + 1.5;
    else if (use.role !== "through") {
      const before = pin.direction === "left";
      at.x = shift.x + pin.x + (before ? -0.3 : 0.3);
      return [{ part: use.id, role: "terminal", at, anchor: before ? "end" : "start", height: small, text: terminal }];
    }
    return [{ part: use.id, role: "terminal", at, anchor: spot.anchor, height: small, text: terminal }];
  });
}

interface Words {
  role: PlacedText["role"];
  text: string | Reference;
  height: Mm;
}

/** What stands at an element: its designation, its ratings, and where its coil, its contacts or what it drives are drawn. */
function wordsOf(use: MainUse, device: Device | undefined, machine: Machine, width: Mm): { name: Words[]; data: Words[] } {
  const { convention } = machine.drawing;
  const printed = printedName(use.device, convention);
  const name = wrapName(printed, usual, width, 3).map((text): Words => ({ role: "designation", text, height: usual }));
  const data = (device ? ratingsOf(device, width) : []).map((text): Words => ({ role: "value", text, height: small }));
  const reference = referenceOf(use, device, machine);
  if (reference) data.push({ role: "reference", text: { ...reference, room: Math.min(reference.room, width) }, height: small });
  return { name, data };
}

/** Ratings side by side as long as a line takes them. The coil's data belong to the coil. */
function ratingsOf({ kind, values }: Device, width: Mm): string[] {
  const lines: string[] = [];
  for (const value of kind === "contactor" ? [] : values) {
    const longer = `${lines.at(-1)} ${value}`;
    if (lines.length > 0 && measureText(longer, small) <= width) lines[lines.length - 1] = longer;
    else lines.push(...wrapName(value, small, width, 2));
  }
  return lines.slice(0, 4);
}

function referenceOf({ device: name }: MainUse, device: Device | undefined, machine: Machine): Reference | undefined {
  if (!device) return undefined;
  if (device.loads.length > 0) return { to: "coil", device: name, room: measureText("(88888)", small) };
  if (device.contacts.length > 0) return { to: "ladder-line", device: name, room: measureText("(8888, 8888, …)", small) };
  const driven = [...machine.components.values()].find(({ drivenBy }) => drivenBy === name);
  return driven ? { to: "driven", device: name, room: measureText(`${driven.name} 88/H8`, small) } : undefined;
}

/** Texts one under the other, the first baseline at `y`; gives the last baseline too. */
function stack(part: string, words: readonly Words[], x: Mm, y: Mm, anchor: PlacedText["anchor"]): PlacedText[] {
  let at = y;
  return words.map(({ role, text, height }, index) => {
    if (index > 0) at += Math.max(height, words[index - 1]?.height ?? 0) * 1.5;
    return { part, role, at: { x, y: at }, anchor, height, text };
  });
}

function depthOf(words: readonly Words[]): Mm {
  return words.reduce((sum, { height }, index) => sum + (index === 0 ? height : Math.max(height, words[index - 1]?.height ?? 0) * 1.5), 0);
}

function finish(symbol: Symbol, settled: ReturnType<typeof settle>, texts: PlacedText[], flow: "down" | "right"): DressedCell {
  const box = { ...symbol.box, x: symbol.box.x + settled.shift.x, y: symbol.box.y + settled.shift.y };
  const all = around([box, ...texts.map(roomOf)]);
  const across: [Mm, Mm] = flow === "down" ? [all.x, all.x + all.width] : [all.y, all.y + all.height];
  const along: [Mm, Mm] = flow === "down" ? [all.y, all.y + all.height] : [all.x, all.x + all.width];
  return { symbol, ...settled, texts, box, before: -across[0], behind: across[1], ahead: -along[0], after: along[1] };
}

function international(machine: Machine): PowerArrangement {
  const orient = (along: Mm, across: Mm) => ({ x: across, y: along });
  const alongOf = ({ y }: Point) => y;
  const acrossOf = ({ x }: Point) => x;
  const textWidth: Mm = 24;
  return {
    flow: "down",
    orient,
    alongOf,
    acrossOf,
    headingRow: 0,
    lineRow: 6,
    nameRow: 4,
    numberRow: 4.2,
    functionRow: (lines) => (lines === 0 ? 1 : 4.2 + (lines - 1) * wrappedPitch(usual)),
    busEnds: 22,
    endRoom: 18,
    dress: (use, symbol) => {
      const settled = settle(symbol, use.role, { alongOf, acrossOf, orient });
      const left = symbol.box.x + settled.shift.x - 1.4;
      const { name, data } = wordsOf(use, machine.devices.get(use.device), machine, textWidth);
      const words = [...name, ...data];
      const middle = settled.shift.y + symbol.box.y + symbol.box.height / 2;
      const texts = stack(use.id, words, left, middle - depthOf(words) / 2 + (words[0]?.height ?? 0), "end");
      return finish(symbol, settled, [...texts, ...terminalTexts(use, symbol, settled.shift)], "down");
    },
    wireNumber: (words, track) => ({
      at: { x: -0.7, y: -1 },
      anchor: "end",
      height: small,
      text: fitText(words, small, track === 0 ? 12 : 6.2),
    }),
    lineNumber: { at: { x: 0, y: usual }, anchor: "middle", height: usual },
    functionText: (words, width) => {
      const lines = words.flatMap((text) => wrapName(text, usual, width, 3)).slice(0, 3);
      const pitch = wrappedPitch(usual);
      return {
        texts: lines.map((text, index) => ({
          role: "function",
          at: { x: 0, y: 3.5 + index * pitch },
          anchor: "middle",
          height: usual,
          text,
        })),
        across: Math.max(0, ...lines.map((line) => measureText(line, usual))),
      };
    },
    alongArrow: (side) => ({
      at: { x: small / 2, y: side === "behind" ? 0.8 : -0.8 },
      anchor: side === "behind" ? "end" : "start",
      rotated: true,
    }),
    acrossArrow: (side) => ({ at: { x: side === "behind" ? 0.8 : -0.8, y: small / 2 }, anchor: side === "behind" ? "start" : "end" }),
  };
}

function northAmerican(machine: Machine): PowerArrangement {
  const orient = (along: Mm, across: Mm) => ({ x: along, y: across });
  const alongOf = ({ x }: Point) => x;
  const acrossOf = ({ y }: Point) => y;
  const names = machine.potentials.map(({ number }) => number.value);
  const widest = Math.min(14, Math.max(6, ...names.filter((name) => name.length < 9).map((name) => measureText(name, small))));
  return {
    flow: "right",
    orient,
    alongOf,
    acrossOf,
    headingRow: 5,
    lineRow: 12,
    nameRow: 16,
    numberRow: widest + 1.6,
    functionRow: () => 50,
    busEnds: 18,
    endRoom: 20,
    dress: (use, symbol, scale) => {
      const settled = settle(symbol, use.role, { alongOf, acrossOf, orient });
      const width = 24 * Math.max(scale, 0.7);
      const { name, data } = wordsOf(use, machine.devices.get(use.device), machine, width);
      // Clear of the terminals over the first track, however small the symbol.
      const top = Math.min(symbol.box.y + settled.shift.y, -0.7 - small - 0.3);
      const bottom = symbol.box.y + settled.shift.y + symbol.box.height;
      const x = settled.shift.x + symbol.box.x + symbol.box.width / 2;
      const texts: PlacedText[] = [];
      // A frame has its earth under it.
      const earthed = use.role === "load" || symbol.ports.some(({ name }) => name === "pe");
      const over = earthed ? [...name, ...data] : name;
      const under = earthed ? [] : data;
      const last = over.at(-1);
      const drop = typeof last?.text === "string" ? hang(last.text, last.height) : 0.4;
      texts.push(...stack(use.id, over, x, top - 1.1 - drop - depthOf(over) + (over[0]?.height ?? 0), "middle"));
      texts.push(...stack(use.id, under, x, bottom + 1 + (under[0]?.height ?? 0), "middle"));
      return finish(symbol, settled, [...texts, ...terminalTexts(use, symbol, settled.shift)], "right");
    },
    wireNumber: (words) => ({
      at: { x: -widest / 2 - 0.8, y: -0.7 },
      anchor: "middle",
      height: small,
      text: fitText(words, small, widest),
    }),
    lineNumber: { at: { x: 8, y: usual / 2 }, anchor: "end", height: usual },
    functionText: (words, width) => {
      const lines = words.flatMap((text) => wrapName(text, usual, 46, 3)).slice(0, Math.max(1, Math.floor(width / 4)));
      const pitch = wrappedPitch(usual);
      return {
        texts: lines.map((text, index) => ({
          role: "function",
          at: { x: 3, y: usual / 2 + (index - (lines.length - 1) / 2) * pitch },
          anchor: "start",
          height: usual,
          text,
        })),
        across: lines.length * pitch,
      };
    },
    alongArrow: (side) => ({ at: { x: side === "behind" ? 0.8 : -0.8, y: small / 2 }, anchor: side === "behind" ? "start" : "end" }),
    acrossArrow: (side) => ({
      at: { x: small / 2, y: side === "behind" ? 0.8 : -0.8 },
      anchor: side === "behind" ? "end" : "start",
      rotated: true,
    }),
  };
}
