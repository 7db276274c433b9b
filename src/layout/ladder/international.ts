import { textBox } from "../../drawing/extent.js";
import type { Box, Mm } from "../../drawing/geometry.js";
import { measureText } from "../../drawing/text.js";
import { wrapNameAt, wrappedPitch } from "../../drawing/wrap-name.js";
import type { Device, DeviceUse, Machine } from "../../machine/model.js";
import { extentOf } from "../../symbols/extent.js";
import type { Shape, Symbol } from "../../symbols/symbol.js";
import type { PlacedText } from "../placement.js";
import type { Arrangement, Dressed } from "./arrangement.js";
import { chartPositions } from "./chart-positions.js";
import { footBlock } from "./foot-block.js";
import { endingSize } from "./measure-rungs.js";
import { heightBeyond, reachInBand } from "./reach-in-band.js";
import { scaleSymbol } from "./scale-symbol.js";
import { around, hang, roomOf } from "./text-box.js";
import { designationWords, mostLines, type SymbolWords, textHeight, underWords } from "./under-words.js";
import { wrapOwnTexts } from "./wrap-own-texts.js";

export interface InternationalGiven {
  machine: Machine;
  symbolOf(use: DeviceUse): Symbol;
  /** 1 for the 2.5 mm module, less for a smaller one. */
  scale: number;
  /** The most that what stands below the lower rail may take, mm. */
  deepestFoot: Mm;
}

/** Rails level, paths upright: along is y, across is x. Every text stands upright beside its symbol or wire. */
export function international({ machine, symbolOf, scale, deepestFoot }: InternationalGiven): Arrangement {
  const potentials = new Map(machine.potentials.map((potential) => [potential.id, potential]));
  const endingHeight = textHeight.usual;
  const roomOfPoint = (point: string) => Math.min(measureText(`${point} /88.88`, endingHeight), widestEnding);
  return {
    orient: (along, across) => ({ x: across, y: along }),
    columns: { usual: 15 * scale, widest: 24 * scale, gap: 4 * scale },
    lines: { least: 17.5 * scale, step: 1.25 },
    bareLine: { above: 2, below: 2 },
    dress: (use, tight) => {
      const width = tight ? lowLabel : widestLabel;
      return dress(use, machine.devices.get(use.device), clearOfPath(wrapOwnTexts(scaleSymbol(symbolOf(use), scale), width)), width);
    },
    margin: (entry) => footBlock(entry, machine, deepestFoot),
    wireNumber: (node) => {
      const words = potentials.get(node)?.number.value ?? "";
      // Numbers by line are given once the paths are known.
      const longest = machine.drawing.wireNumbers === "by-line" ? "88.88.88" : words;
      const room = measureText(longest, textHeight.usual);
      if (room === 0) return undefined;
      // Left of the wire, at its upper end: clear of wire that comes across to where it begins.
      const end = numberGap.along + textHeight.usual;
      return {
        words,
        height: textHeight.usual,
        at: { x: -numberGap.across, y: end },
        anchor: "end",
        before: 0,
        behind: end + 0.8,
        end,
        above: numberGap.across + room + 0.8,
      };
    },
    ending: (kind, point) => {
      const room = roomOfPoint(point);
      const { gap } = endingSize;
      const common = { height: endingHeight, room } as const;
      const hangs = endingHeight * 0.3;
      if (kind === "start")
        return { ...common, at: { x: 0, y: -gap - hangs }, anchor: "middle", along: endingHeight + hangs, across: room / 2 + 0.6 };
      if (kind === "end")
        return { ...common, at: { x: 0, y: gap + endingHeight }, anchor: "middle", along: endingHeight + hangs, across: room / 2 + 0.6 };
      return { ...common, at: { x: gap, y: endingHeight / 2 }, anchor: "start", along: endingHeight / 2 + hangs, across: room + 0.6 };
    },
    broken: (end, point) => ({
      height: endingHeight,
      room: Math.min(roomOfPoint(point), brokenRoom - endingSize.gap),
      // Outside the rails, where these are named too.
      at: { x: end === "foot" ? endingSize.gap : -endingSize.head - endingSize.gap, y: endingHeight / 2 },
      anchor: end === "foot" ? "start" : "end",
      // Clear of the lower rail's own name.
      along: endingHeight / 2 + railNameRise,
      across: 0,
      fromRailEnd: 0,
    }),
    lineNumber: { at: { x: 0, y: -pathNumberRise }, anchor: "middle", height: textHeight.usual },
  };
}

/** From the upper rail to the numbers of the paths, mm: the names of the rail stand between. */
export const pathNumberRise: Mm = 6.4;
/** How far the name of the lower rail stands over it, with what keeps a text clear of it, mm. */
const railNameRise: Mm = 2.3;
/** Beside the ends of the rails, for what goes on elsewhere, mm. */
export const brokenRoom: Mm = 15;

/** Distances of a wire number from the beginning of its wire and from the wire, mm. */
const numberGap = { along: 1.1, across: 1 } as const;

/** Texts beside a symbol are wrapped at this, and at the second where their height must not lengthen a path, mm. */
const widestLabel: Mm = 21;
const lowLabel: Mm = 34;
/** Room at an arrow: a longer name is shortened there, so that the place after it is kept. */
const widestEnding: Mm = 24;

/** A symbol with its designation and all that belongs to it on its left, its terminals at its pins on its right. */
function dress(use: DeviceUse, device: Device | undefined, symbol: Symbol, width: Mm): Dressed {
  const { ports } = symbol;
  const up = ports.find((port) => port.direction === "up") ?? ports[0] ?? { x: 0, y: -5 };
  const down = ports.find((port) => port.direction === "down") ?? { x: up.x, y: -up.y };
  const shift = { x: -up.x, y: -(up.y + down.y) / 2 };
  const reach = (down.y - up.y) / 2;
  const box: Box = { ...symbol.box, x: symbol.box.x + shift.x, y: symbol.box.y + shift.y };
  const texts: PlacedText[] = [];
  const left = (top: Mm, bottom: Mm) => reachInBand(symbol, shift, top - clearance, bottom + clearance, "left");
  const set = (words: SymbolWords, right: Mm, baseline: Mm) =>
    texts.push({
      part: use.id,
      role: words.role,
      at: { x: right, y: baseline },
      anchor: "end",
      height: words.height,
      text: words.words,
    });

  const name = wrapNameAt([textHeight.usual, textHeight.small], designationWords(use, "international"), width, mostLines);
  // A controller's box, half as high as its pins lie apart, has room for it inside.
  const address = symbol.spots.address ? designationWords(use, "international") : "";
  const inside = [textHeight.usual, textHeight.small].find(
    (height) => address !== "" && height / 2 + hang(address, height) + 0.4 <= reach / 2 && measureText(address, height) <= box.width - 1.5,
  );
  if (inside !== undefined) {
    texts.push({ part: use.id, role: "designation", at: { x: 0, y: inside / 2 }, anchor: "middle", height: inside, text: address });
  }
  const names = inside ? [] : name.lines.map((words): SymbolWords => ({ role: "designation", words, height: name.height }));
  const labels = positionLabels(use, device, symbol, width);
  const under = [...labels.legend, ...underWords(use, device, { words: width, references: width }, "international")];
  texts.push(...labels.texts.map((text) => ({ ...text, at: { x: text.at.x + shift.x, y: text.at.y + shift.y } })));

  const nameRise = inside ? 0 : name.height + (names.length - 1) * wrappedPitch(name.height);
  const chart = chartPositions(use, device, lowLabel);
  const chartRise = chart ? chart.height + lineGap : 0;
  const underRise = chartRise + under.reduce((sum, { height }) => sum + lineGap + height, 0);
  const beyond = left(-name.height / 2, name.height / 2) > bareReach;
  // Beyond an actuator the name stands level with it and the rest below, as long as that does not lengthen the path; at a bare
  // symbol all of it stands about its middle.
  const level = name.height / 2 - nameRise;
  const overhang = Math.max(0, level + nameRise + underRise - reach - 1);
  const middled = -(nameRise + underRise) / 2;
  const top = beyond ? Math.max(level - overhang, Math.min(level, middled)) : middled;
  const nameEdge = -left(top, top + nameRise) - (beyond ? 1.6 : 1) * clearance;
  const underTop = top + nameRise + lineGap;
  const underEdge = -left(underTop, underTop + underRise) - clearance;
  const edges = beyond && overhang === 0 ? [nameEdge, underEdge] : [Math.min(nameEdge, underEdge), Math.min(nameEdge, underEdge)];
  let baseline = top;
  for (const [index, words] of names.entries()) {
    baseline += index === 0 ? words.height : wrappedPitch(words.height);
    set(words, edges[0] as Mm, baseline);
  }
  if (chart) {
    const corner = { x: (edges[1] as Mm) - chart.width, y: baseline + lineGap };
    texts.push(...chart.texts.map((text) => ({ ...text, at: { x: text.at.x + corner.x, y: text.at.y + corner.y } })));
    baseline += chartRise;
  }
  for (const words of under) {
    baseline += lineGap + words.height;
    set(words, edges[1] as Mm, baseline);
  }

  const right = heightBeyond(symbol, shift, terminalGap - 0.4);
  use.terminals.value.forEach((terminal, pin) => {
    if (terminal === "") return;
    const height = textHeight.small;
    const y = pin === 0 ? Math.min(height - reach + 0.1, right.top - 0.4) : Math.max(reach - 0.1, right.bottom + 0.4 + height);
    texts.push({ part: use.id, role: "terminal", at: { x: terminalGap, y }, anchor: "start", height, text: terminal });
  });

  const all = around([box, ...texts.map(roomOf)]);
  const along = Math.max(reach, -all.y, all.y + all.height);
  return {
    symbol,
    turn: { quarter: 0 },
    shift,
    texts,
    reach,
    body: along,
    label: 0,
    above: -all.x + besideGap,
    below: all.x + all.width + besideGap,
    box,
  };
}

/** The symbol with those of its own texts that stand left of the path, and are so wide that they reach over it, moved off it. */
function clearOfPath(symbol: Symbol): Symbol {
  const over = (shape: Shape): shape is Shape & { kind: "text" } => {
    if (shape.kind !== "text" || shape.at.x > -ownTextGap) return false;
    const { x, width } = textBox(shape);
    return x + width > -ownTextGap;
  };
  if (!symbol.shapes.some(over)) return symbol;
  const shapes = symbol.shapes.map((shape) =>
    over(shape) ? { ...shape, anchor: "end" as const, at: { ...shape.at, x: -ownTextGap } } : shape,
  );
  return { ...symbol, shapes, box: extentOf(shapes, symbol.ports) };
}

const ownTextGap: Mm = 1.5;

/** Between a symbol and a text beside it, and between lines of text about one symbol, mm. */
const clearance: Mm = 0.9;
const lineGap: Mm = 1;
/** From a lead to the number of its terminal, mm. */
const terminalGap: Mm = 0.9;
/** Between the texts of one path and those of the next, to either side, mm. */
const besideGap: Mm = 0.6;
/** A symbol that reaches farther to the left at its middle has an actuator there. */
const bareReach: Mm = 5.5;

/** The positions of a selector over its ticks: by their names where these are short, else by numbers with a legend. */
function positionLabels(
  use: DeviceUse,
  device: Device | undefined,
  symbol: Symbol,
  width: Mm,
): { texts: PlacedText[]; legend: SymbolWords[] } {
  const positions = use.kind === "contact" ? device?.selector?.positions : undefined;
  const height = textHeight.small;
  const spots = (positions ?? []).flatMap((position, index) => {
    const spot = symbol.spots[`position-${index + 1}`];
    return spot ? [{ position, spot, index }] : [];
  });
  const [first, second] = spots;
  if (!first || !second) return { texts: [], legend: [] };
  const pitch = Math.abs(second.spot.x - first.spot.x);
  const short = spots.every(({ position }) => measureText(position, height) <= pitch - 0.4);
  const texts = spots.map(
    ({ position, spot, index }): PlacedText => ({
      part: use.id,
      role: "value",
      at: { x: spot.x, y: spot.y },
      anchor: spot.anchor,
      height,
      text: short ? position : `${index + 1}`,
    }),
  );
  if (short) return { texts, legend: [] };
  const lines: string[] = [];
  for (const { position, index } of spots) {
    const entry = `${index + 1} ${position}`;
    const longer = lines.length > 0 ? `${lines.at(-1)}  ${entry}` : entry;
    if (lines.length > 0 && measureText(longer, height) <= width) lines[lines.length - 1] = longer;
    else lines.push(...wrapNameAt([height], entry, width, 2).lines);
  }
  return { texts, legend: lines.map((words) => ({ role: "value", words, height })) };
}
