import type { Box, Mm, Point } from "../../drawing/geometry.js";
import type { PartId } from "../../drawing/marks.js";
import type { LadderCircuit, NodeId } from "../../machine/model.js";
import type { CircuitSheet, Place, PlacedText } from "../placement.js";
import type { Arrangement, EndingText } from "./arrangement.js";
import type { RungSheet } from "./break-sheets.js";
import type { Link, Stop } from "./grid.js";
import { joinWires, type Straight } from "./join-wires.js";
import { endingSize } from "./measure-rungs.js";
import type { Columns } from "./set-columns.js";

/** What a ladder is drawn from, once every column, line and number is known. */
export interface LadderGiven {
  circuit: LadderCircuit;
  sheet: RungSheet;
  /** From rail to rail. */
  span: Mm;
  /** The columns that hold from one of the sheet's rungs on. */
  groups: { from: number; columns: Columns }[];
  arrangement: Arrangement;
  /** The live and the return rail. */
  rails: [NodeId, NodeId];
  /** Where the live rail and the room of the first line meet. */
  origin: Point;
  /** Ends of the rails, across from the origin. */
  railFrom: Mm;
  railTo: Mm;
  /** Printed number of the sheet's first line. */
  firstLine: number;
  /** Links that end or begin on this sheet, or pass over it. */
  links: Link[];
  zoneOf(point: Point): string;
}

/** Sets a ladder down in millimetres on its sheet, and says where its parts stand. */
export function drawLadder(given: LadderGiven, out: CircuitSheet): [PartId, Place][] {
  const { circuit, sheet, span, groups, arrangement, rails, origin, firstLine, links, zoneOf } = given;
  const { number } = out;
  const places: [PartId, Place][] = [];
  const pieces: Straight[] = [];
  const at = (along: Mm, across: Mm): Point => {
    const { x, y } = arrangement.orient(along, across);
    return { x: tidy(origin.x + x), y: tidy(origin.y + y) };
  };
  const text = (placed: PlacedText, by: Point) =>
    out.texts.push({ ...placed, at: { x: tidy(placed.at.x + by.x), y: tidy(placed.at.y + by.y) } });
  const place = (part: PartId, line: number, box: Box) =>
    places.push([part, { sheet: number, line, zone: zoneOf({ x: box.x + box.width / 2, y: box.y + box.height / 2 }), box }]);
  const across = (rung: number, line: number) => sheet.rungs[rung - sheet.first]?.lines[line];

  const columnsOf = (index: number) =>
    (groups.findLast(({ from }) => from <= index) ?? (groups[0] as LadderGiven["groups"][number])).columns;

  let line = firstLine;
  const lineOf = new Map<number, number>();
  for (const [index, { rung, lines }] of sheet.rungs.entries()) {
    const { grid, dressed, numbers, margins, endings } = rung;
    const columns = columnsOf(index);
    lineOf.set(index + sheet.first, line);
    const stop = (end: Stop): Mm => {
      if ("boundary" in end) return columns.boundary(end.boundary);
      const reach = dressed.get(end.cell)?.reach ?? 0;
      return columns.middle(end.cell.column) + (end.pin === 0 ? -reach : reach);
    };
    for (const [cell, look] of dressed) {
      const centre = at(columns.middle(cell.column), lines[cell.line] as Mm);
      const origin = { x: tidy(centre.x + look.shift.x), y: tidy(centre.y + look.shift.y) };
      out.symbols.push({ part: cell.use.id, device: cell.use.device, symbol: look.symbol, at: origin, turn: look.turn });
      for (const words of look.texts) text(words, centre);
      place(cell.use.id, line + cell.line, { ...look.box, x: look.box.x + centre.x, y: look.box.y + centre.y });
    }
    for (const run of grid.runs) {
      const y = lines[run.line] as Mm;
      pieces.push({ node: run.node, from: { along: stop(run.from), across: y }, to: { along: stop(run.to), across: y } });
    }
    for (const up of grid.uprights) {
      const x = columns.boundary(up.boundary);
      pieces.push({
        node: up.node,
        from: { along: x, across: lines[up.fromLine] as Mm },
        to: { along: x, across: lines[up.toLine] as Mm },
      });
    }
    for (const wanted of numbers) {
      const found = arrangement.wireNumber(wanted.node, wanted.beside);
      if (!found) continue;
      const { words, height, at: by, anchor } = found;
      text(
        { part: wirePart(circuit, wanted.node), role: "wire-number", at: by, anchor, height, text: words },
        at(columns.boundary(wanted.boundary), lines[wanted.line] as Mm),
      );
    }
    for (const { line: row, block } of margins) {
      const by = at(span, lines[row] as Mm);
      for (const words of block.texts) text(words, by);
      for (const stroke of block.strokes ?? []) {
        const path = stroke.path.map(({ x, y }) => ({ x: tidy(x + by.x), y: tidy(y + by.y) }));
        out.strokes.push({ ...stroke, path });
      }
    }
    for (const ending of endings) {
      const part = endingPart(rung.grid.rung.id, ending.point, ending.kind);
      const x = columns.boundary(ending.boundary);
      const y = lines[ending.line] as Mm;
      const { head, half } = endingSize;
      const { lead } = ending;
      const drop = rung.lines[ending.line]?.drop ?? 0;
      const { height, room, anchor, at: by } = arrangement.ending(ending.kind, ending.point);
      const reference = { to: "point", point: ending.point, from: part, way: ending.kind === "start" ? "in" : "out", room } as const;
      const words = { part, role: "reference", height, text: reference, anchor, at: by } as const;
      if (ending.kind === "start") {
        arrow(part, [
          [x - lead - head, y - half],
          [x - lead, y],
          [x - lead - head, y + half],
          [x - lead - head, y - half],
        ]);
        pieces.push({ node: ending.node, from: { along: x - lead, across: y }, to: { along: x, across: y } });
        text(words, at(x - lead - head, y));
      } else if (ending.kind === "end") {
        arrow(part, [
          [x + lead, y],
          [x + lead, y - half],
          [x + lead + head, y],
          [x + lead, y + half],
          [x + lead, y],
        ]);
        pieces.push({ node: ending.node, from: { along: x, across: y }, to: { along: x + lead, across: y } });
        text(words, at(x + lead + head, y));
      } else {
        arrow(part, [
          [x, y + drop],
          [x - half, y + drop],
          [x, y + drop + head],
          [x + half, y + drop],
          [x, y + drop],
        ]);
        pieces.push({ node: ending.node, from: { along: x, across: y }, to: { along: x, across: y + drop } });
        text(words, at(x, y + drop + head));
      }
      const mark = at(x, y);
      place(part, line + ending.line, { x: mark.x - 3, y: mark.y - 3, width: 6, height: 6 });
    }
    const first = at(columns.boundary(grid.start), (lines[0] as Mm) - 4);
    const last = at(span, (lines.at(-1) as Mm) + 4);
    place(grid.rung.id, line, { x: first.x, y: first.y, width: last.x - first.x, height: last.y - first.y });
    for (const y of lines) {
      text({ role: "line-number", ...arrangement.lineNumber, text: String(line) }, at(0, y));
      line++;
    }
  }

  for (const link of links) {
    const from = across(link.from.rung, link.from.line);
    const to = across(link.to.rung, link.to.line);
    if (from === undefined && to === undefined) continue;
    const x = columnsOf((from === undefined ? link.to.rung : link.from.rung) - sheet.first).boundary(link.boundary);
    const { head, half } = endingSize;
    if (from !== undefined && to !== undefined)
      pieces.push({ node: link.node, from: { along: x, across: from }, to: { along: x, across: to } });
    else if (from !== undefined) {
      const point = pointOf(link, link.from.rung);
      const { fromRailEnd, ...words } = arrangement.broken("foot", point);
      const end = given.railTo - head - fromRailEnd;
      pieces.push({ node: link.node, from: { along: x, across: from }, to: { along: x, across: end } });
      const shape: [Mm, Mm][] = [
        [x, end],
        [x - half, end],
        [x, end + head],
        [x + half, end],
        [x, end],
      ];
      broken(link, "foot", point, words, shape, at(x, end + head));
    } else if (to !== undefined) {
      const point = pointOf(link, link.to.rung);
      const { fromRailEnd, ...words } = arrangement.broken("head", point);
      const end = given.railFrom + head + fromRailEnd;
      pieces.push({ node: link.node, from: { along: x, across: end }, to: { along: x, across: to } });
      const shape: [Mm, Mm][] = [
        [x - half, end - head],
        [x, end],
        [x + half, end - head],
        [x - half, end - head],
      ];
      broken(link, "head", point, words, shape, at(x, end));
    }
  }
  for (const [index, node] of rails.entries()) {
    const x = index === 0 ? 0 : span;
    out.wires.push({
      part: railPart(circuit, index),
      node,
      role: "rail",
      points: [at(x, given.railFrom), at(x, given.railTo)],
      width: 0.5,
    });
  }
  const onRail = (along: Mm) => Math.abs(along) < 0.01 || Math.abs(along - span) < 0.01;
  const joined = joinWires(pieces, onRail);
  for (const { node, points } of joined.wires) {
    out.wires.push({ part: wirePart(circuit, node), node, role: "wire", points: points.map(({ x, y }) => at(x, y)), width: 0.25 });
  }
  for (const dot of joined.dots) out.dots.push({ part: wirePart(circuit, dot.node), at: at(dot.at.x, dot.at.y), diameter: 1.25 });
  return places;

  function arrow(part: PartId, points: [Mm, Mm][]) {
    out.strokes.push({ part, role: "continuation", path: points.map(([x, y]) => at(x, y)), width: 0.25 });
  }

  function pointOf(link: Link, rung: number): string {
    return sheet.rungs[rung - sheet.first]?.rung.grid.sites.find((site) => site.node === link.node)?.point ?? "";
  }

  /** A link that goes on on another sheet: an arrow at the end of the rails. */
  function broken(link: Link, end: "head" | "foot", point: string, words: EndingText, shape: [Mm, Mm][], by: Point) {
    const { height, room, anchor } = words;
    const site = end === "foot" ? link.from : link.to;
    const part = endingPart(sheet.rungs[site.rung - sheet.first]?.rung.grid.rung.id ?? circuit.id, point, end);
    arrow(part, shape);
    const reference = { to: "point", point, from: part, way: end === "head" ? "in" : "out", room } as const;
    text({ part, role: "reference", at: words.at, anchor, height, text: reference }, by);
    const stands = { x: words.at.x + by.x, y: words.at.y + by.y };
    place(part, (lineOf.get(site.rung) ?? firstLine) + site.line, { x: stands.x - 3, y: stands.y - 3, width: 6, height: 6 });
  }
}

/** Positions to a thousandth of a millimetre, so that sums of the same lengths are the same. */
const tidy = (value: Mm): Mm => Math.round(value * 1000) / 1000;

export const wirePart = (circuit: LadderCircuit, node: NodeId): PartId => `${circuit.id}/wire${node}`;
const railPart = (circuit: LadderCircuit, index: number): PartId => `${circuit.id}/rail${index + 1}`;
const endingPart = (rung: PartId, point: string, kind: string): PartId => `${rung}/@${point}/${kind}`;
