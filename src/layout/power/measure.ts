import type { Mm } from "../../drawing/geometry.js";
import type { Device, Machine, MainUse, PowerBranch, PowerCircuit } from "../../machine/model.js";
import { symbolForPower } from "../../symbols/choose-power.js";
import { polePitch } from "../../symbols/gang-poles.js";
import type { SymbolLibrary } from "../../symbols/library.js";
import { scaleSymbol } from "../ladder/scale-symbol.js";
import type { DressedCell, PowerArrangement } from "./arrangement.js";
import { type Cell, type Lane, type Plan, planSheet, type Run, type Spot, type Stop } from "./plan.js";

/** What a circuit is laid out with. */
export interface PowerGiven {
  circuit: PowerCircuit;
  machine: Machine;
  symbols: SymbolLibrary;
  arrangement: PowerArrangement;
  /** 1 for the 2.5 mm module, less for a smaller one. */
  scale: number;
  /** The gaps along the current are kept as small as they can be read. */
  tight: boolean;
}

/** A sheet with its plan in millimetres along and across from the sheet's corner. */
export interface MeasuredPower {
  plan: Plan;
  feed?: { use: MainUse; dressed: DressedCell; middle: Mm }[];
  dressed: ReadonlyMap<Cell, DressedCell>;
  trackAt(lane: Lane, track: number): Mm;
  spotAt(spot: Spot): Mm;
  /** Of a slot, the middle between the pins of what passes through; the pins of a load. */
  slotAt(slot: number): Mm;
  stopAt(stop: Stop): Mm;
  levelAt(run: Run, level: number): Mm;
  numberRowEnd(boundary: number): Mm;
  endAt(boundary: number): Mm;
  busAt(index: number): Mm;
  feedTrack(index: number): Mm;
  feedStart: Mm;
  /** Across: where the busbars begin and end. */
  busFrom(index: number): Mm;
  busTo: Mm;
  functionAt: Mm;
  along: Mm;
  across: Mm;
}

/** Free lengths, mm: before the first lane and behind the last, between lanes. */
const margin: Mm = 3;
const laneGap: Mm = 3;
/** Along: between busbars, between the levels of a run, before and behind them. */
const usualGaps = { busPitch: 5, levelPitch: 3, lead: 2 };
const tightGaps = { busPitch: 4, levelPitch: 2.2, lead: 1.5 };
export const arrowLength: Mm = 2;

/** Works out where everything of a sheet stands. */
export function measurePower(given: PowerGiven, branches: readonly PowerBranch[], first: boolean, last: boolean): MeasuredPower {
  const { circuit, machine, arrangement, scale } = given;
  const { busPitch, levelPitch, lead } = given.tight ? tightGaps : usualGaps;
  const plan = planSheet(circuit, branches, (device) => machine.devices.get(device)?.kind);
  const pitch = polePitch * scale;
  const dress = (use: MainUse) => dressed(use, given);
  const cells = new Map(plan.cells.map((cell) => [cell, dress(cell.use)]));
  const feedCells = first ? circuit.feed.path.map((use) => ({ use, dressed: dress(use) })) : [];

  // Across: every lane as wide as its widest element and its texts.
  const lanes = new Map<Lane, Mm>();
  const under = laneUnderFeed(circuit, plan);
  let firstTrack: Mm = 0;
  const feedTrack = (index: number) => firstTrack + index * pitch;
  let cursor: Mm = margin + (first ? arrangement.headingRow : arrangement.busEnds);
  for (const [index, lane] of plan.lanes.entries()) {
    const own = plan.cells.filter((cell) => cell.lane === lane).map((cell) => cells.get(cell) as DressedCell);
    const heads = index === 0 ? feedCells.map((one) => one.dressed) : [];
    const before = Math.max(leastBefore(arrangement.flow), ...own.map((one) => one.before), ...heads.map((one) => one.before));
    const behind = Math.max(
      (lane.tracks - 1) * pitch + leastBehind(arrangement.flow, plan, lane),
      ...own.map((one) => one.behind + earthRoom(one, arrangement)),
    );
    if (index === 0) firstTrack = cursor + before;
    // What comes in stands over the first lane, unless its conductors there would meet others of the lane.
    if (first && index === (under ? 1 : 0)) cursor = Math.max(cursor, feedTrack(circuit.feed.conductors.length - 1) + laneGap);
    const track = cursor + before;
    lanes.set(lane, track);
    cursor = track + behind + laneGap;
  }
  if (first) cursor = Math.max(cursor, feedTrack(circuit.feed.conductors.length - 1) + laneGap + 4);
  const goesOut = plan.ends.some(({ kind }) => kind === "point-out");
  const busTo = cursor + (goesOut ? arrangement.busEnds : 0);
  const across = busTo + (last ? earthBar : arrangement.busEnds) + margin;

  // Along: the feed, the busbars, then gap by gap and slot by slot.
  let along: Mm = arrangement.lineRow;
  const feedStart = along + (first ? arrangement.nameRow : 0);
  if (first) along = feedStart + arrowLength + lead;
  const feed = feedCells.map(({ use, dressed }) => {
    const middle = along + lead + dressed.ahead;
    along = middle + Math.max(dressed.outs, dressed.after) + arrangement.numberRow;
    return { use, dressed, middle };
  });
  const busStart = along + lead;
  const busAt = (index: number) => busStart + index * busPitch;
  along = busAt(circuit.feed.bus.length - 1) + lead;
  // What comes from a point on another sheet begins with its reference and an arrow, clear of the busbars.
  if (plan.ends.some(({ kind }) => kind === "point-in")) along += arrangement.endRoom + arrowLength;
  const comesIn = along;

  const spotAt = ({ lane, track, beside }: Spot): Mm =>
    (lanes.get(lane) ?? 0) + track * pitch + (beside === "half" ? pitch / 2 : beside === "out" ? outReach : 0);
  const bases = allotLevels(plan, spotAt);
  const bandStart = new Map<string, Mm>();
  const rowEnd: Mm[] = [];
  const gapEnd: Mm[] = [];
  const slots: Mm[] = [];
  const lastGap = plan.loadSlot + 1;
  const endsAt = (boundary: number) => plan.ends.some((end) => end.boundary === boundary && end.kind !== "point-out");
  for (let boundary = 0; boundary <= lastGap; boundary++) {
    const band = (name: Run["band"]) => {
      const levels = Math.max(
        0,
        ...plan.runs.filter((run) => run.boundary === boundary && run.band === name).map((run) => (bases.get(run) ?? 0) + run.levels),
      );
      bandStart.set(`${boundary} ${name}`, along + lead);
      if (levels > 0) along += lead + (levels - 1) * levelPitch + 1;
    };
    band("join");
    const numbered = plan.numbers.some((number) => number.boundary === boundary) || endsAt(boundary);
    along += numbered ? arrangement.numberRow : 0;
    rowEnd[boundary] = along;
    band("point");
    band("split");
    along += boundary === 0 || boundary > plan.loadSlot ? lead : lead + 1;
    gapEnd[boundary] = along;
    if (boundary > plan.loadSlot) break;
    const here = plan.cells.filter(({ slot }) => slot === boundary).map((cell) => cells.get(cell) as DressedCell);
    const ahead = Math.max(0, ...here.map((one) => Math.max(-one.ins, one.ahead)));
    const after = Math.max(0, ...here.map((one) => Math.max(one.outs, one.after)));
    slots[boundary] = along + ahead;
    along += ahead + after;
  }
  const ends = plan.ends
    .filter(({ kind }) => kind === "rails")
    .map(({ boundary }) => (rowEnd[boundary] ?? along) + lead + arrowLength + arrangement.endRoom);
  const functionAt = Math.max(along, ...ends);

  const levelAt = (run: Run, level: number) =>
    (bandStart.get(`${run.boundary} ${run.band}`) ?? 0) + ((bases.get(run) ?? 0) + level) * levelPitch;
  const endAt = (boundary: number) => (rowEnd[boundary] ?? functionAt) + lead;
  const busIndex = (phase: string) => circuit.feed.bus.findIndex((one) => one.phase === phase);
  return {
    plan,
    ...(first ? { feed } : {}),
    dressed: cells,
    trackAt: (lane, track) => (lanes.get(lane) ?? 0) + track * pitch,
    spotAt,
    slotAt: (slot) => slots[slot] ?? 0,
    stopAt: (stop) => {
      switch (stop.kind) {
        case "bus":
          return busAt(Math.max(0, busIndex(stop.phase)));
        case "level":
          return levelAt(stop.run, stop.level);
        case "end":
          return stop.end.kind === "point-in" ? comesIn : endAt(stop.end.boundary);
        default: {
          const one = cells.get(stop.cell) as DressedCell;
          return (slots[stop.cell.slot] ?? 0) + (stop.kind === "in" ? one.ins : one.outs);
        }
      }
    },
    levelAt,
    numberRowEnd: (boundary) => rowEnd[boundary] ?? 0,
    endAt,
    busAt,
    feedTrack,
    feedStart,
    busFrom: (index) => {
      if (!first) return margin + arrangement.busEnds;
      const taps = plan.strands.filter(({ from }) => from.kind === "bus" && busIndex(from.phase) === index);
      return Math.min(feedTrack(index), ...taps.map(({ lane, track }) => (lanes.get(lane) ?? 0) + track * pitch));
    },
    busTo,
    functionAt,
    along: functionAt + arrangement.functionRow(Math.max(0, ...branches.map((branch) => functionLines(branch, machine, arrangement)))),
    across,
  };
}

/** What a branch is for, as it stands at its end: its title, and its load's text where that says more. */
export function functionOf({ title = "", path }: PowerBranch, machine: Machine): string[] {
  const load = path.at(-1);
  const device = load?.kind === "main" && load.role !== "through" ? machine.devices.get(load.device) : undefined;
  const text = device?.text ?? "";
  return [title, title.includes(text) ? "" : text].filter((word) => word !== "");
}

/** Across, the least that a function text is wrapped to. */
export const functionWidth: Mm = 26;

const functionLines = (branch: PowerBranch, machine: Machine, { functionText }: PowerArrangement) =>
  functionText(functionOf(branch, machine), functionWidth).texts.length;

/** Whether the first lane may go on straight under what comes in: each conductor there lies on a busbar no nearer than that of the one over it. */
function laneUnderFeed({ feed }: PowerCircuit, { lanes, strands }: Plan): boolean {
  return strands.every(({ lane, from, track }) => {
    if (lane !== lanes[0] || from.kind !== "bus") return true;
    return feed.bus.findIndex(({ phase }) => phase === from.phase) >= track;
  });
}

/** How far the wires of a point that goes on elsewhere lead out of the last lane. */
const outReach: Mm = 6;
/** Room for the earth at the end of the protective bar. */
export const earthBar: Mm = 12;

const leastBefore = (flow: "down" | "right"): Mm => (flow === "down" ? 9 : 5);

/** Room behind the last track: terminal numbers stand there, and at the end of a lane its wires may lead out. */
function leastBehind(flow: "down" | "right", plan: Plan, lane: Lane): Mm {
  const out = plan.ends.some((end) => end.kind === "point-out" && end.lane === lane);
  return (flow === "down" ? 6 : 3) + (out ? outReach : 0);
}

/** Room behind a symbol for the earth at its frame. */
function earthRoom({ symbol }: DressedCell, { flow }: PowerArrangement): Mm {
  return symbol.ports.some(({ name }) => name === "pe") ? (flow === "down" ? 11 : 8) : 0;
}

function dressed(use: MainUse, { machine, symbols, arrangement, scale }: PowerGiven): DressedCell {
  const device = machine.devices.get(use.device) as Device;
  const symbol = symbolForPower(
    device,
    {
      conductors: hangsBetween(use, device) ? 1 : use.ins.length,
      flow: arrangement.flow,
      current: use.current,
      sixLead: use.second !== undefined,
    },
    machine.drawing.convention,
    symbols,
  );
  if (!symbol) throw new Error(`There is no symbol for ${device.kind} in a power circuit.`);
  return arrangement.dress(use, scaleSymbol(symbol, scale), scale);
}

/** Loads of two leads other than motors hang between two conductors, as a single pole on the first of them. */
const hangsBetween = ({ role, ins }: MainUse, { kind }: Device): boolean => role === "load" && ins.length === 2 && kind !== "motor";

/** Runs in one band of a gap that overlap across lie on levels one behind the other, in the order planned. */
function allotLevels(plan: Plan, spotAt: (spot: Spot) => Mm): Map<Run, number> {
  const bases = new Map<Run, number>();
  const spans = new Map<Run, [Mm, Mm]>();
  for (const run of plan.runs) {
    const spots = run.wires.flatMap(({ from, to }) => [spotAt(from), spotAt(to)]);
    if (spots.length === 0) continue;
    const span: [Mm, Mm] = [Math.min(...spots), Math.max(...spots)];
    let base = 0;
    for (const [other, [from, to]] of spans) {
      if (other.boundary !== run.boundary || other.band !== run.band) continue;
      if (from < span[1] + 2 && to > span[0] - 2) base = Math.max(base, (bases.get(other) ?? 0) + other.levels);
    }
    bases.set(run, base);
    spans.set(run, span);
  }
  return bases;
}
