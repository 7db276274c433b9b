import type { StartState } from "../../behaviour/start-state.js";
import type { Box, Mm, Point } from "../../drawing/geometry.js";
import type { PartId } from "../../drawing/marks.js";
import type { FluidCircuit, FluidNodeId } from "../../machine/model.js";
import { type CircuitSheet, emptySheet, type PageArea, type Place, type PlacedText } from "../placement.js";
import { boxAt, type Placed, textHeight } from "./block.js";
import type { Composition, HeaderLine } from "./compose-sheet.js";
import type { LedLines, Terminal } from "./lead-lines.js";
import type { DrawnCircuit } from "./local-tanks.js";
import { module } from "./modules.js";
import { nameHeaders } from "./name-headers.js";
import { drawNet } from "./wires.js";

interface SheetToDraw {
  drawn: DrawnCircuit;
  start: StartState;
  page: PageArea;
  number: number;
  title: string;
  /** Where the composition's own origin lies, mm. */
  origin: Point;
  composition: Composition;
  led: LedLines;
}

/** Room for the name of a shared line and where it goes on. */
const pointRoom: Mm = 24;

/** Sets a composed sheet down in millimetres. */
export function drawFluidSheet({ drawn, start, page, number, title, origin, composition, led }: SheetToDraw): {
  sheet: CircuitSheet;
  places: [PartId, Place][];
} {
  const { circuit, standsFor, nodeOf } = drawn;
  const sheet = emptySheet("fluid", circuit.id, number, title);
  const places: [PartId, Place][] = [];
  const placeOf = (box: Box): Place => ({ sheet: number, zone: page.zoneOf({ x: box.x + box.width / 2, y: box.y + box.height / 2 }), box });
  const resting: string[] = [];
  for (const one of composition.placed) {
    const { block, at } = one;
    const { component } = block;
    const own = standsFor.get(component.id);
    sheet.symbols.push({
      part: own ?? component.id,
      ...(component.name === undefined ? {} : { device: component.name }),
      symbol: block.symbol,
      turn: block.turn,
      at: onSheet({ x: at.x + block.offset.x, y: at.y + block.offset.y }, origin),
    });
    for (const text of block.texts)
      sheet.texts.push({
        ...text,
        ...(own === undefined ? {} : { part: own }),
        at: onSheet({ x: at.x + text.at.x, y: at.y + text.at.y }, origin),
      });
    for (const stroke of block.strokes)
      sheet.strokes.push({ ...stroke, path: stroke.path.map(({ x, y }) => onSheet({ x: x + at.x, y: y + at.y }, origin)) });
    if (own === undefined) places.push([component.id, placeOf(boxAt(block.body, at, origin))]);
    for (const { part, extent } of block.parts) places.push([part, placeOf(boxAt(extent, at, origin))]);
    drawPlugs(one, origin, sheet);
    if (start.restingByStart.has(component.name ?? component.id)) resting.push(component.name ?? component.kind);
  }
  for (const [node, steps] of led.steps) {
    const { wires, dots } = drawNet(nodeOf.get(node) ?? node, steps, origin);
    sheet.wires.push(...wires);
    sheet.dots.push(...dots);
  }
  for (const header of composition.headers) drawContinuations(header, circuit, origin, sheet);
  for (const terminal of led.lost) drawLost(terminal, circuit, origin, sheet);
  nameHeaders(composition.headers, circuit, origin, sheet);
  if (resting.length > 0) sheet.notes = [restingNote(resting)];
  return { sheet, places };
}

/** Of valves without a normal position, in one sentence. */
function restingNote(valves: readonly string[]): string {
  const [first] = valves;
  if (valves.length === 1) return `${first} has no normal position; it is drawn as it stands at the start of the cycle.`;
  const names = `${valves.slice(0, -1).join(", ")} and ${valves.at(-1)}`;
  return `${names} have no normal position; they are drawn as they stand at the start of the cycle.`;
}

function onSheet({ x, y }: Point, origin: Point): Point {
  return { x: tidy(origin.x + x * module), y: tidy(origin.y + y * module) };
}

function tidy(value: Mm): Mm {
  return Math.round(value * 1e4) / 1e4;
}

const ahead = { up: [0, -1], down: [0, 1], left: [-1, 0], right: [1, 0] } as const;

/** A closed port carries a small cross. */
function drawPlugs({ block, at }: Placed, origin: Point, sheet: CircuitSheet): void {
  for (const { name, plugged } of block.component.ports) {
    const port = block.ports.find((one) => one.name === name);
    if (!plugged || !port) continue;
    const [dx, dy] = ahead[port.direction];
    const end = { x: port.x + at.x, y: port.y + at.y };
    // Beyond the port's name, which stands beside the lead.
    const centre = { x: end.x + 0.9 * dx, y: end.y + 0.9 * dy };
    sheet.strokes.push({ part: block.component.id, role: "plug", path: [onSheet(end, origin), onSheet(centre, origin)], width: 0.25 });
    for (const sign of [-1, 1]) {
      const path = [-1, 1].map((end) => onSheet({ x: centre.x + 0.4 * end, y: centre.y + 0.4 * end * sign }, origin));
      sheet.strokes.push({ part: block.component.id, role: "plug", path, width: 0.25 });
    }
  }
}

/** The name a shared line is spoken of by. */
function nameOf(node: FluidNodeId, circuit: FluidCircuit): string {
  const known = circuit.nodes.find(({ id }) => id === node);
  const port = known?.ports.find(({ port: name }) => /^[A-Z0-9]+$/.test(name))?.port;
  return known?.points[0] ?? `${port ?? "N"}${node}`;
}

/** An open arrow at the end of a line that goes on on another sheet, with the name and the other place over it. */
function drawContinuations(
  { node, y, from, to, fromLeft, toRight }: HeaderLine,
  circuit: FluidCircuit,
  origin: Point,
  sheet: CircuitSheet,
): void {
  const point = nameOf(node, circuit);
  const part = `${circuit.id}/${point}`;
  const ends = [
    ...(fromLeft ? [{ x: from, out: -1, anchor: "start" as const }] : []),
    ...(toRight ? [{ x: to, out: 1, anchor: "end" as const }] : []),
  ];
  for (const { x, out, anchor } of ends) {
    const tip = onSheet({ x: x + out, y }, origin);
    sheet.strokes.push({
      part,
      role: "continuation",
      width: 0.25,
      path: [
        onSheet({ x, y }, origin),
        onSheet({ x, y: y - 0.5 }, origin),
        tip,
        onSheet({ x, y: y + 0.5 }, origin),
        onSheet({ x, y }, origin),
      ],
    });
    const at = onSheet({ x: x + out, y: y - 1.2 }, origin);
    const text: PlacedText = {
      part,
      role: "reference",
      text: { to: "point", point, from: part, room: pointRoom },
      at,
      anchor,
      height: textHeight,
    };
    sheet.texts.push(text);
  }
}

/** A port no line could be led to names the line it belongs to. */
function drawLost({ node, x, y, direction }: Terminal, circuit: FluidCircuit, origin: Point, sheet: CircuitSheet): void {
  const point = nameOf(node, circuit);
  const [dx, dy] = ahead[direction];
  const end = onSheet({ x: x + dx, y: y + dy }, origin);
  sheet.strokes.push({ role: "continuation", width: 0.25, path: [onSheet({ x, y }, origin), end] });
  sheet.texts.push({ role: "reference", text: point, at: { x: end.x + 0.6, y: end.y }, anchor: "start", height: textHeight });
}
