import type { Box } from "../../drawing/geometry.js";
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
import { linkContacts } from "./link-contacts.js";
import { nameThirdLead } from "./name-third-lead.js";
import type { RailEnd } from "./plan.js";
import { planInternational } from "./plan-international.js";
import { planNorthAmerican } from "./plan-north-american.js";
import { prepareSymbol } from "./prepare-symbol.js";
import { leastSpan, setColumns } from "./set-columns.js";
import { mostLadders, roomsFor, type Slot, shareSlots } from "./share-sheet.js";

/** The numbers a ladder's first sheet and first line get. */
export interface Numbering {
  sheet: number;
  /** With line numbers running on, the first one. */
  line: number;
  /** Where the ladder before it on the same supply ends: its rails go on here. */
  follows?: RailEnd;
}

export interface LadderLayout {
  sheets: CircuitSheet[];
  places: [PartId, Place][];
  /** The line number after the last. */
  nextLine: number;
  /** Where its rails begin and end. */
  begins?: RailEnd;
  ends?: RailEnd;
  /** To be called once it is known where the rails go on behind the last sheet: names them there. */
  finish(goesTo?: RailEnd): void;
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
  if (rungs.length === 0) return { sheets: [], places: [], nextLine: numbering.line, finish: () => {} };
  const prepared = (use: DeviceUse) =>
    nameThirdLead(prepareSymbol(symbolOf(use), use), machine.devices.get(use.device), circuit.supply.rails);
  const { convention } = machine.drawing;
  const planFor = convention === "international" ? planInternational : planNorthAmerican;
  const elsewhere = pointsElsewhere(circuit, machine);

  // 1. Every part has a column and a line on the grid, shared points are joined or end in a reference, every text is
  //    measured, and no rung needs more than its ladder has. A large sheet holds several ladders if no rung suffers.
  const fitOn = (perSheet: number) => {
    const rooms = roomsFor(page.area, perSheet, convention);
    const plan = planFor({ circuit, machine, symbolOf: prepared, symbols, room: rooms[0] as Box });
    const offer = { span: plan.span, depth: Math.min(plan.first, plan.next) };
    return { rooms, plan, ...fitRungs(circuit, rungs, rails, offer, plan.arrange, elsewhere) };
  };
  let perSheet = mostLadders(page.area, convention);
  let fitted = fitOn(perSheet);
  while (perSheet > 1 && !fitted.whole) fitted = fitOn(--perSheet);
  const { rooms, plan, joined, measured, arrangement, breaks } = fitted;
  // 2. Every rung is whole in one ladder; the ladders have their places, line numbers are known.
  const ladders = breakSheets(
    measured,
    breaks,
    { depth: plan.next, first: numbering.follows ? plan.next : plan.first, span: plan.span },
    arrangement,
    linkedRungs(joined.links),
  );
  const slots = shareSlots(ladders, perSheet);
  const ends = numberLines(ladders, slots, machine, numbering);
  // 3. Every ladder is set down in millimetres.
  const places: [PartId, Place][] = [];
  const linksOf = shareLinks(joined.links, ladders);
  let finish: LadderLayout["finish"] = () => {};
  const sheets: CircuitSheet[] = [];
  ladders.forEach((ladder, index) => {
    const slot = slots[index] as Slot;
    if (slot.place === 0) sheets.push(emptySheet("ladder", circuit.id, numbering.sheet + slot.sheet, ladder.title ?? circuit.title));
    const out = sheets.at(-1) as CircuitSheet;
    const first = index === 0 && !numbering.follows;
    const span = Math.max(plan.span, ...ladder.groups.map(({ needs }) => leastSpan(needs, arrangement.columns)));
    const corner = plan.origin(first);
    const room = rooms[slot.place] as Box;
    const origin = { x: room.x + corner.x, y: room.y + corner.y };
    const reach = plan.rails(first, ladder.depth);
    places.push(
      ...drawLadder(
        {
          circuit,
          sheet: ladder,
          span,
          groups: ladder.groups.map(({ from, needs }) => ({ from, columns: setColumns(needs, span, arrangement.columns) })),
          arrangement,
          rails,
          origin,
          railFrom: reach.from,
          railTo: reach.to,
          firstLine: (ends[index] as LineEnds).first,
          links: linksOf[index] ?? [],
          zoneOf: (point) => page.zoneOf(point),
        },
        out,
      ),
    );
    const railEnd = (other: number, line: "first" | "last"): RailEnd => {
      const there = slots[other] as Slot;
      return { line: (ends[other] as LineEnds)[line], ...(there.sheet === slot.sheet ? {} : { sheet: numbering.sheet + there.sheet }) };
    };
    const comesFrom = index === 0 ? numbering.follows : railEnd(index - 1, "last");
    const railed = { first, origin, span, rails: reach, ...(comesFrom ? { comesFrom } : {}) };
    if (index < ladders.length - 1) plan.finish(out, { ...railed, goesTo: railEnd(index + 1, "first") });
    else finish = (goesTo) => plan.finish(out, { ...railed, ...(goesTo ? { goesTo } : {}) });
  });
  // 4. What one hand works is joined.
  for (const sheet of sheets) linkContacts(sheet, machine.devices, convention === "international" ? "right" : "down");
  const lines = ladders.reduce((sum, { rungs }) => sum + rungs.reduce((own, { lines }) => own + lines.length, 0), 0);
  return {
    sheets,
    places,
    nextLine: machine.drawing.lineNumbers === "running" ? numbering.line + lines : numbering.line,
    begins: { sheet: numbering.sheet, line: (ends[0] as LineEnds).first },
    ends: { sheet: numbering.sheet + sheets.length - 1, line: (ends.at(-1) as LineEnds).last },
    finish,
  };
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

/** The numbers of the first and the last line of a ladder. */
interface LineEnds {
  first: number;
  last: number;
}

/** Numbers the lines of every ladder, from the beginning of each sheet or on through all. */
function numberLines(ladders: readonly RungSheet[], slots: readonly Slot[], { drawing }: Machine, numbering: Numbering): LineEnds[] {
  // A rung's number says its sheet too, a path's is written behind that of its sheet.
  const bySheet = (sheet: number) => (drawing.convention === "international" ? 1 : sheet * 100 + 1);
  let next = numbering.line;
  return ladders.map(({ rungs }, index) => {
    const { sheet, place } = slots[index] as Slot;
    if (drawing.lineNumbers === "by-sheet" && place === 0) next = bySheet(numbering.sheet + sheet);
    const first = next;
    next += rungs.reduce((sum, { lines }) => sum + lines.length, 0);
    return { first, last: next - 1 };
  });
}
