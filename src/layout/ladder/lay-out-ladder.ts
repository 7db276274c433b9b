import type { PartId } from "../../drawing/marks.js";
import type { DeviceUse, LadderCircuit, Machine, NodeId } from "../../machine/model.js";
import { laddersOf } from "../../machine/walk.js";
import type { SymbolLibrary } from "../../symbols/library.js";
import type { Symbol } from "../../symbols/symbol.js";
import { type CircuitSheet, emptySheet, type PageArea, type Place } from "../placement.js";
import { breakSheets, type RungSheet } from "./break-sheets.js";
import { drawLadder } from "./draw-ladder.js";
import { fitRungs, pointsOf } from "./fit-rungs.js";
import type { Link } from "./grid.js";
import { nameThirdLead } from "./name-third-lead.js";
import type { RailEnd } from "./plan.js";
import { planInternational } from "./plan-international.js";
import { planNorthAmerican } from "./plan-north-american.js";
import { prepareSymbol } from "./prepare-symbol.js";
import { leastSpan, setColumns } from "./set-columns.js";

/** The numbers a ladder's first sheet and first line get. */
export interface Numbering {
  sheet: number;
  /** With line numbers running on, the first one. */
  line: number;
}

export interface LadderLayout {
  sheets: CircuitSheet[];
  places: [PartId, Place][];
  /** The line number after the last. */
  nextLine: number;
}

/**
 * Lays a ladder out on as many sheets as it needs.
 * @param symbolOf the symbol of a contact or load in the state drawn
 * @param symbols for what stands in no rung: the supply's fuse
 * @param page the room on each sheet
 */
export function layOutLadder(
  circuit: LadderCircuit,
  machine: Machine,
  symbolOf: (use: DeviceUse) => Symbol,
  symbols: SymbolLibrary,
  page: PageArea,
  numbering: Numbering,
): LadderLayout {
  const rails = railNodes(circuit, machine);
  const { rungs } = circuit;
  if (rungs.length === 0) return { sheets: [], places: [], nextLine: numbering.line };
  const prepared = (use: DeviceUse) =>
    nameThirdLead(prepareSymbol(symbolOf(use), use), machine.devices.get(use.device), circuit.supply.rails);
  const plan = (machine.drawing.convention === "international" ? planInternational : planNorthAmerican)({
    circuit,
    machine,
    symbolOf: prepared,
    symbols,
    room: page.area,
  });

  // 1. Every part has a column and a line on the grid, shared points are joined or end in a reference, every text is
  //    measured, and no rung needs more than a sheet offers.
  const offer = { span: plan.span, depth: Math.min(plan.first, plan.next) };
  const { joined, measured, arrangement, breaks } = fitRungs(circuit, rungs, rails, offer, plan.arrange, pointsElsewhere(circuit, machine));
  // 2. Every rung is whole on one sheet; line numbers are known.
  const broken = breakSheets(
    measured,
    breaks,
    { depth: plan.next, first: plan.first, span: plan.span },
    arrangement,
    linkedRungs(joined.links),
  );
  const firstLines = numberLines(broken, machine, numbering);
  // 3. Every sheet is set down in millimetres.
  const places: [PartId, Place][] = [];
  const linksOf = shareLinks(joined.links, broken);
  const sheets = broken.map((sheet, index) => {
    const out = emptySheet("ladder", circuit.id, numbering.sheet + index, sheet.title ?? circuit.title);
    const first = index === 0;
    const span = Math.max(plan.span, ...sheet.groups.map(({ needs }) => leastSpan(needs, arrangement.columns)));
    const corner = plan.origin(first);
    const origin = { x: page.area.x + corner.x, y: page.area.y + corner.y };
    const ends = plan.rails(first, sheet.depth);
    places.push(
      ...drawLadder(
        {
          circuit,
          sheet,
          span,
          groups: sheet.groups.map(({ from, needs }) => ({ from, columns: setColumns(needs, span, arrangement.columns) })),
          arrangement,
          rails,
          origin,
          railFrom: ends.from,
          railTo: ends.to,
          firstLine: firstLines[index] as number,
          links: linksOf[index] ?? [],
          zoneOf: (point) => page.zoneOf(point),
        },
        out,
      ),
    );
    plan.finish(out, {
      first,
      origin,
      span,
      rails: ends,
      ...(first ? {} : { comesFrom: endOf(broken, firstLines, index - 1, numbering) }),
      ...(index < broken.length - 1 ? { goesTo: startOf(firstLines, index + 1, numbering) } : {}),
    });
    return out;
  });
  const lines = broken.at(-1)?.rungs.reduce((sum, { lines }) => sum + lines.length, 0) ?? 0;
  return { sheets, places, nextLine: (firstLines.at(-1) ?? numbering.line) + lines };
}

function railNodes(circuit: LadderCircuit, machine: Machine): [NodeId, NodeId] {
  return circuit.supply.rails.map((rail) => machine.potentials.find((potential) => potential.rail === rail)?.id ?? -1) as [NodeId, NodeId];
}

/** The points that other ladders use. */
function pointsElsewhere(circuit: LadderCircuit, machine: Machine): Set<string> {
  return new Set(
    laddersOf(machine)
      .filter((other) => other !== circuit)
      .flatMap(({ rungs }) => rungs.flatMap(pointsOf)),
  );
}

/** The links that begin, end or both on each sheet. */
function shareLinks(links: readonly Link[], sheets: readonly RungSheet[]): Link[][] {
  const sheetOf = sheets.flatMap(({ rungs }, index) => rungs.map(() => index));
  const shared: Link[][] = sheets.map(() => []);
  for (const link of links) {
    const [from, to] = [sheetOf[link.from.rung] as number, sheetOf[link.to.rung] as number];
    shared[from]?.push(link);
    if (to !== from) shared[to]?.push(link);
  }
  return shared;
}

/** Whether wire joins a rung to one before it. */
function linkedRungs(links: readonly Link[]): (rung: number) => boolean {
  const joined = new Set<number>();
  for (const { from, to } of links) for (let rung = from.rung + 1; rung <= to.rung; rung++) joined.add(rung);
  return (rung) => joined.has(rung);
}

/** The number of the first line of each sheet. */
function numberLines(sheets: readonly RungSheet[], machine: Machine, numbering: Numbering): number[] {
  let running = numbering.line;
  // A rung's number says its sheet too, a path's is written behind that of its sheet.
  const bySheet = (sheet: number) => (machine.drawing.convention === "international" ? 1 : sheet * 100 + 1);
  return sheets.map((sheet, index) => {
    const first = machine.drawing.lineNumbers === "running" ? running : bySheet(numbering.sheet + index);
    running += sheet.rungs.reduce((sum, { lines }) => sum + lines.length, 0);
    return first;
  });
}

const startOf = (firstLines: readonly number[], index: number, numbering: Numbering): RailEnd => ({
  sheet: numbering.sheet + index,
  line: firstLines[index] as number,
});
const endOf = (sheets: readonly RungSheet[], firstLines: readonly number[], index: number, numbering: Numbering): RailEnd => ({
  sheet: numbering.sheet + index,
  line: (firstLines[index] as number) + (sheets[index] as RungSheet).rungs.reduce((sum, { lines }) => sum + lines.length, 0) - 1,
});
