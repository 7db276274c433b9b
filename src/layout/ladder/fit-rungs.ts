import type { Mm } from "../../drawing/geometry.js";
import type { LadderCircuit, NodeId, Rung } from "../../machine/model.js";
import type { Arrangement } from "./arrangement.js";
import { stack } from "./break-sheets.js";
import { foldRungs, noLimits, type RungLimits } from "./fold-rungs.js";
import { boundaryOf, loadColumn, type RungGrid, stride } from "./grid.js";
import { type Joined, joinPoints } from "./join-points.js";
import { type MeasuredRung, measureRungs } from "./measure-rungs.js";
import { bearsLoad, returnWidth } from "./place-parts.js";
import { alongRails } from "./reverse-rung.js";
import { leastSpan, needsOfLoads, noNeeds, withNeeds } from "./set-columns.js";
import { joinWiresAgain, splitWires } from "./split-wires.js";

/** Rungs of which none is wider or taller than a sheet. */
export interface FittedRungs {
  joined: Joined;
  measured: MeasuredRung[];
  arrangement: Arrangement;
  /** The author's sheet breaks, before the rungs as they are now. */
  breaks: { before: number; title?: string }[];
  /** No rung was cut, and no symbol drawn smaller. */
  whole: boolean;
}

/** The smaller module of the series, 1.8 mm to 2.5 mm (ISO 81714-1, from memory). */
const smallModule = 0.72;

/** More than anybody draws; each round cuts what was still too large. */
const rounds = 40;

/**
 * Places and measures the rungs. Where many are wider than the sheet the symbols take the smaller module; a rung that is
 * still too wide, or taller than a sheet, is cut and goes on with a letter.
 * @param abroad points that are drawn in other circuits too
 */
export function fitRungs(
  circuit: LadderCircuit,
  written: readonly Rung[],
  rails: readonly NodeId[],
  offer: { span: Mm; depth: Mm },
  arrange: (scale: number) => Arrangement,
  abroad: ReadonlySet<string>,
): FittedRungs {
  const split = splitWires(written, rails);
  const rungs = split.rungs.map((rung) => alongRails(rung, split.rails));
  const taken = new Set(rungs.flatMap(pointsOf));
  const limits = new Map<number, RungLimits>();
  /** Rungs that were too wide: their texts are wrapped as narrow as they go before anything is cut. */
  const tight = new Set<number>();
  const limitsOf = (index: number): RungLimits => limits.get(index) ?? noLimits;
  const roomy = roomyColumns * arrange(1).columns.usual;
  let scale = 1;
  let triedSmall = false;
  let wideAtFull = 0;
  for (let round = 1; ; round++) {
    const arrangement = arrange(scale);
    const { rungs: folded, origin, letters } = foldRungs(rungs, limitsOf, taken);
    const breaks = circuit.sheetBreaks.map(({ before, title }) => {
      const at = origin.findIndex((index) => index >= before);
      return { before: at < 0 ? folded.length : at, ...(title === undefined ? {} : { title }) };
    });
    const points = {
      barriers: new Set(breaks.map(({ before }) => before)),
      letters,
      abroad,
      columnsOf: (index: number) => {
        const { columns, plain } = limitsOf(origin[index] as number);
        return bearsLoad((folded[index] as Rung).path) ? columns : plain;
      },
    };
    const joined = joinWiresAgain(joinPoints(folded, points), split.nodeOf);
    const measured = measureRungs(joined, new Set(rails), arrangement, (index) => tight.has(origin[index] as number));
    const fitted = { joined, measured, arrangement, breaks, whole: limits.size === 0 && scale === 1 };
    const next = new Map(limits);
    const wideRungs = new Set<number>();
    let wide = 0;
    let tall = 0;
    measured.forEach((rung, index) => {
      const of = origin[index] as number;
      // What held for this round; several pieces of one rung must not lower its limit several times.
      const known = limitsOf(of);
      const lowered = next.get(of) ?? known;
      const needs = withNeeds(noNeeds(), rung, arrangement);
      const along = leastSpan(needs, arrangement.columns);
      if (along > offer.span) {
        wide++;
        wideRungs.add(of);
        next.set(of, narrower(rung, known, lowered, leastSpan(needsOfLoads(needs), arrangement.columns), along, offer.span));
      }
      const across = stack(rung, 0, 0, arrangement.lines).depth;
      if (across > offer.depth) {
        tall++;
        const { lines } = rung.grid;
        next.set(of, {
          ...lowered,
          ...next.get(of),
          lines: Math.max(1, Math.min(lowered.lines, known.lines - 1, lines - 1, Math.floor((lines * offer.depth) / across))),
        });
      }
    });
    if (wide === 0 && tall === 0) return fitted;
    if (round === rounds) return { ...fitted, whole: false };
    const loose = [...wideRungs].filter((index) => !tight.has(index));
    if (loose.length > 0) {
      for (const index of loose) tight.add(index);
      continue;
    }
    if (!triedSmall && wide > 0 && (wide > measured.length * fewWide || offer.span < roomy)) {
      // Many wide rungs, or a narrow sheet: see what the smaller module does for them.
      triedSmall = true;
      wideAtFull = wide;
      scale = smallModule;
      continue;
    }
    if (scale === smallModule && limits.size === 0 && wide >= wideAtFull && offer.span >= roomy) {
      // It helps nobody: cut on the usual module instead.
      scale = 1;
      continue;
    }
    for (const [index, limit] of next) limits.set(index, limit);
  }
}

/**
 * What a rung that is too wide may take from now on: less behind its loads where these and what lies behind them take most
 * of the sheet, else less before them.
 * @param behind what its loads and all behind them take along
 */
function narrower({ grid }: MeasuredRung, known: RungLimits, lowered: RungLimits, behind: Mm, along: Mm, span: Mm): RungLimits {
  const returns = returnWidth(grid.rung.path);
  const most = span * behindShare;
  if (returns > 0 && known.returns > 0 && (behind > most || known.columns === 1)) {
    const share = Math.floor((returns * most) / behind);
    return { ...lowered, returns: Math.max(0, Math.min(lowered.returns, Math.ceil(known.returns) - 1, Math.ceil(returns) - 1, share)) };
  }
  const columns = columnsOf(grid);
  const share = Math.floor((columns * (span - behind)) / Math.max(along - behind, 1));
  const limit = bearsLoad(grid.rung.path) ? "columns" : "plain";
  return { ...lowered, [limit]: Math.max(1, Math.min(lowered[limit], known[limit] - 1, Math.max(columns - 1, 1), share)) };
}

/** The share of a sheet's width that loads and what lies behind them may take in a rung that is too wide. */
const behindShare = 0.55;

/** The share of wide rungs for whose sake the whole ladder is not drawn smaller. */
const fewWide = 0.1;
/** Fewer columns than this make a narrow sheet. */
const roomyColumns = 6;

/** How many wide columns before its loads a rung takes. */
function columnsOf(grid: RungGrid): number {
  const boundaries = [
    ...grid.cells.map(({ column }) => column + 1),
    ...grid.runs.flatMap(({ from, to }) => [boundaryOf(from), boundaryOf(to)]),
  ];
  return Math.max(0, ...boundaries.filter((boundary) => boundary < loadColumn)) / stride;
}

/** The points that a rung names. */
export function pointsOf(rung: Rung): string[] {
  const inside = (path: Rung["path"]): string[] =>
    path.items.flatMap((item) => (item.kind === "point" ? [item.point] : item.kind === "parallel" ? item.branches.flatMap(inside) : []));
  return [...[rung.start, rung.end].flatMap((end) => (end.kind === "point" ? [end.point] : [])), ...inside(rung.path)];
}
