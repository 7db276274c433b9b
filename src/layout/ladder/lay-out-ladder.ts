import type { Mm } from "../../drawing/geometry.js";
import type { PartId } from "../../drawing/marks.js";
import type { DeviceUse, LadderCircuit, Machine, NodeId, Rung } from "../../machine/model.js";
import type { SymbolLibrary } from "../../symbols/library.js";
import type { Symbol } from "../../symbols/symbol.js";
import type { CircuitSheet, PageArea, Place } from "../placement.js";
import { breakSheets, type RungSheet } from "./break-sheets.js";
import { drawSheet } from "./draw-sheet.js";
import { columnPitch, fitRungs, linePitch } from "./fit-rungs.js";
import type { Link } from "./grid.js";
import { measureRailHead, nameRails } from "./name-rails.js";
import { northAmerican } from "./north-american.js";
import { scaleSymbol } from "./scale-symbol.js";
import { leastSpan, setColumns } from "./set-columns.js";
import { fuseBlock, fuseScale, fuseSymbol, setFuse } from "./supply-fuse.js";

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
  const rungs = circuit.rungs.map((rung) => onRails(rung, rails));
  if (rungs.length === 0) return { sheets: [], places: [], nextLine: numbering.line };
  const room = shareWidth(page.area.width);
  const fuse =
    circuit.supply.fuse && symbols.names().includes(fuseSymbol)
      ? fuseBlock(circuit.supply.fuse, scaleSymbol(symbols.get(fuseSymbol), fuseScale))
      : undefined;
  const beside = { left: lineNumberRoom, span: room.span, right: page.area.width - lineNumberRoom - room.span };
  const heads = { plain: measureRailHead(circuit, beside, "next"), first: measureRailHead(circuit, beside, fuse ? "fused" : "first") };
  const firstHead = headRoom + heads.first.above + heads.first.below + (fuse?.length ?? 0);
  const nextHead = headRoom + heads.plain.above;
  const depth = page.area.height - nextHead - footRoom;
  const offer = { ...room, depth: page.area.height - Math.max(firstHead, nextHead) - footRoom };

  // 1. Every part has a column and a line on the grid, shared points are joined or end in a reference, every text is
  //    measured, and no rung needs more than a sheet offers.
  const { joined, measured, arrangement, scale, breaks } = fitRungs(circuit, rungs, rails, offer, (scale) =>
    northAmerican({ machine, symbolOf, margin: room.margin, scale }),
  );
  // 2. Every rung is whole on one sheet; line numbers are known.
  const broken = breakSheets(
    measured,
    breaks,
    { depth, first: page.area.height - firstHead - footRoom, span: room.span, columns: columnPitch(scale) },
    linePitch(scale),
    arrangement,
    linkedRungs(joined.links),
  );
  const firstLines = numberLines(broken, machine, numbering);
  // 3. Every sheet is set down in millimetres.
  const places: [PartId, Place][] = [];
  const linksOf = shareLinks(joined.links, broken);
  const sheets = broken.map((sheet, index) => {
    const number = numbering.sheet + index;
    const span = Math.max(room.span, ...sheet.groups.map(({ needs }) => leastSpan(needs, columnPitch(scale))));
    const groups = sheet.groups.map(({ from, needs }) => ({ from, columns: setColumns(needs, span, columnPitch(scale)) }));
    const [head, heading] = index === 0 ? [firstHead, heads.first] : [nextHead, heads.plain];
    const origin = { x: page.area.x + lineNumberRoom, y: page.area.y + head };
    const railFrom = railHead + heading.above - head;
    const railTo = sheet.depth + footRoom - railFoot;
    const links = linksOf[index] ?? [];
    const drawn = drawSheet({
      circuit,
      sheet,
      number,
      title: sheet.title ?? circuit.title,
      span,
      groups,
      arrangement,
      rails,
      origin,
      railFrom,
      railTo,
      firstLine: firstLines[index] as number,
      links,
      zoneOf: (point) => page.zoneOf(point),
    });
    const behindFuse =
      fuse && index === 0 ? setFuse(drawn.sheet, fuse, { x: origin.x, y: origin.y + railFrom }, span) - origin.y : undefined;
    nameRails(drawn.sheet, circuit, {
      head: heading,
      origin,
      room: { ...beside, span: span, right: beside.right + beside.span - span },
      from: railFrom,
      to: railTo,
      ...(behindFuse !== undefined ? { behindFuse } : {}),
      ...(index > 0 ? { comesFrom: endOf(broken, firstLines, index - 1, numbering) } : {}),
      ...(index < broken.length - 1 ? { goesTo: startOf(firstLines, index + 1, numbering) } : {}),
    });
    places.push(...drawn.places);
    return drawn.sheet;
  });
  const lines = broken.at(-1)?.rungs.reduce((sum, { lines }) => sum + lines.length, 0) ?? 0;
  return { sheets, places, nextLine: (firstLines.at(-1) ?? numbering.line) + lines };
}

/** Room for line numbers left of the live rail, mm. */
const lineNumberRoom: Mm = 14;
/** Over the first line: the rails' names, and the rails down to it. */
const headRoom: Mm = 14;
/** From the top of the sheet's room to where the rails begin. */
const railHead: Mm = 5.5;
const footRoom: Mm = 9;
const railFoot: Mm = 1;

/** The widest ladder from rail to rail that still reads well, mm. */
const widestSpan: Mm = 310;

/** Shares the width of a sheet between line numbers, rungs, references and function texts. */
function shareWidth(width: Mm) {
  const margin = { references: clamp(width * 0.065, 15, 26), words: clamp(width * 0.125, 24, 60) };
  const span = Math.min(width - lineNumberRoom - margin.references - margin.words - 8, widestSpan);
  return { margin, span };
}

const clamp = (value: number, least: number, most: number) => Math.min(Math.max(value, least), most);

function railNodes(circuit: LadderCircuit, machine: Machine): [NodeId, NodeId] {
  return circuit.supply.rails.map((rail) => machine.potentials.find((potential) => potential.rail === rail)?.id ?? -1) as [NodeId, NodeId];
}

/** A rung whose point is the rail itself begins or ends on the rail. */
function onRails(rung: Rung, [live, back]: [NodeId, NodeId]): Rung {
  const start: Rung["start"] = rung.start.node === live ? { kind: "rail", node: live } : rung.start;
  const end: Rung["end"] = rung.end.node === back ? { kind: "rail", node: back } : rung.end;
  return { ...rung, start, end };
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
  return sheets.map((sheet, index) => {
    const first = machine.drawing.lineNumbers === "running" ? running : (numbering.sheet + index) * 100 + 1;
    running += sheet.rungs.reduce((sum, { lines }) => sum + lines.length, 0);
    return first;
  });
}

const startOf = (firstLines: readonly number[], index: number, numbering: Numbering) =>
  `sheet ${numbering.sheet + index}, line ${firstLines[index]}`;
const endOf = (sheets: readonly RungSheet[], firstLines: readonly number[], index: number, numbering: Numbering) =>
  `sheet ${numbering.sheet + index}, line ${(firstLines[index] as number) + (sheets[index] as RungSheet).rungs.reduce((sum, { lines }) => sum + lines.length, 0) - 1}`;
