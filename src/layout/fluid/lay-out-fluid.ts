import type { StartState } from "../../behaviour/start-state.js";
import type { Point } from "../../drawing/geometry.js";
import type { PartId } from "../../drawing/marks.js";
import type { FluidCircuit, FluidComponent, FluidNodeId, Machine } from "../../machine/model.js";
import { symbolForComponent } from "../../symbols/choose.js";
import type { SymbolLibrary } from "../../symbols/library.js";
import type { CircuitSheet, PageArea, Place } from "../placement.js";
import type { Arrangement } from "./arrangement.js";
import { type Composition, compose } from "./compose-sheet.js";
import { type Division, divide } from "./divide.js";
import { drawFluidSheet } from "./draw-sheet.js";
import { placeByLayers, raiseCylinders } from "./elk-group.js";
import { FluidGraph } from "./graph.js";
import { type LedLines, leadLines } from "./lead-lines.js";
import { module } from "./modules.js";
import { type PowerUnit, placePowerUnit } from "./power-unit.js";
import { placeTower, planTower, type Tower } from "./tower.js";

export interface FluidLayout {
  sheets: CircuitSheet[];
  places: [PartId, Place][];
}

/** How often a sheet is set out anew with more room where a line found no way. */
const attempts = 4;

/**
 * Lays a fluid circuit out on as many sheets as it needs: energy flows upward from the power unit at the bottom left to the
 * actuators along the top, in the order of declaration.
 * @param symbols the carried symbols
 * @param page the room on each sheet
 * @param numbering the number of the first sheet
 */
export async function layOutFluid(
  circuit: FluidCircuit,
  machine: Machine,
  start: StartState,
  symbols: SymbolLibrary,
  page: PageArea,
  numbering: { sheet: number },
): Promise<FluidLayout> {
  if (circuit.components.length === 0) return { sheets: [], places: [] };
  const graph = new FluidGraph(circuit);
  const known = new Map<FluidComponent, ReturnType<typeof symbolForComponent>>();
  const symbolOf = Object.assign(
    (component: FluidComponent) => {
      const symbol = known.get(component) ?? symbolForComponent(component, start, symbols);
      known.set(component, symbol);
      return symbol;
    },
    { usesOf: (device: string) => machine.devices.get(device)?.contacts.length ?? 0 },
  );
  // 1. The circuit in its parts: power unit, groups, shared nodes.
  const division = divide(graph);
  const headers = new Set(division.headers.map(({ node }) => node));
  const plans = division.groups.map((group) => planTower(group, graph, headers, symbolOf));

  // 2. Each group by itself, with as much room between its things as this try gives.
  const place = async (slack: number): Promise<Parts> => {
    const unit = division.unit.length > 0 ? placePowerUnit(division.unit, graph, headers, symbolOf, slack) : undefined;
    const layered: (Arrangement | undefined)[] = [];
    for (const [index, group] of division.groups.entries()) {
      layered.push(plans[index] ? undefined : await placeByLayers(group, graph, headers, symbolOf, slack));
    }
    const groups = division.groups.map((_, index) => ({
      height: plans[index] ? placeTower(plans[index] as Tower, graph, symbolOf, slack).height : layered[index]?.height,
      at: (height: number | undefined): Arrangement =>
        plans[index]
          ? placeTower(plans[index] as Tower, graph, symbolOf, slack, height)
          : height === undefined
            ? (layered[index] as Arrangement)
            : raiseCylinders(layered[index] as Arrangement, height),
    }));
    return { ...(unit ? { unit } : {}), groups };
  };
  const parts = await place(0);

  // 3. Which groups stand on which sheet.
  const breaks = breaksOf(circuit, division);
  const shares = share(parts, division, graph, page, breaks);

  // 4. Every sheet composed, its lines led, and set down in millimetres.
  const sheets: CircuitSheet[] = [];
  const places: [PartId, Place][] = [];
  for (const [index, one] of shares.entries()) {
    let composed: { composition: Composition; led: LedLines } | undefined;
    for (let tries = 0; tries < attempts; tries++) {
      const roomier = tries === 0 ? parts : await place(tries * 2);
      const composition = fill(roomier, one, index, shares, division, graph, page, tries === 0);
      const led = leadLines(composition, graph, tries > 0);
      if (!composed || led.lost.length < composed.led.lost.length) composed = { composition, led };
      if (led.lost.length === 0) break;
    }
    if (!composed) continue;
    const number = numbering.sheet + index;
    const drawn = drawFluidSheet({
      circuit,
      start,
      page,
      number,
      title: one.title ?? circuit.title,
      origin: originOf(composed.composition, page),
      ...composed,
    });
    sheets.push(drawn.sheet);
    places.push(...drawn.places);
  }
  return { sheets, places };
}

/** The parts of a circuit with a certain amount of room; groups are set down at the height their sheet gives them. */
interface Parts {
  unit?: PowerUnit;
  groups: { height: number | undefined; at(height: number | undefined): Arrangement }[];
}

/** What stands on one sheet. */
interface Share {
  groups: number[];
  unit: boolean;
  title?: string;
}

/** Groups before which the author asked for a new sheet. */
function breaksOf(circuit: FluidCircuit, { groups }: Division): Map<number, string | undefined> {
  const breaks = new Map<number, string | undefined>();
  for (const { before, title } of circuit.sheetBreaks) {
    const later = new Set(circuit.components.slice(before));
    // The group whose first actuator, or failing that first component, is written after the break.
    const index = groups.findIndex((group) => later.has((group.find(({ kind }) => kind === "cylinder") ?? group[0]) as FluidComponent));
    if (index >= 0) breaks.set(index, title);
  }
  return breaks;
}

/** Fills sheets one after the other, each with as many groups as it takes. */
function share(
  parts: Parts,
  division: Division,
  graph: FluidGraph,
  page: PageArea,
  breaks: ReadonlyMap<number, string | undefined>,
): Share[] {
  const shares: Share[] = [];
  let open: Share = { groups: [], unit: parts.unit !== undefined };
  const fits = (candidate: Share) => {
    const room = roomOf(page);
    const more = (candidate.groups.at(-1) ?? -1) < parts.groups.length - 1;
    const { extent } = compositionOf(parts, candidate, shares.length > 0, more, division, graph, { ...tight, width: room.width / module });
    return (extent.right - extent.left) * module <= room.width && (extent.bottom - extent.top) * module <= room.height;
  };
  if (open.unit && parts.groups.length > 0 && !fits({ ...open, groups: [0] }) && fits({ unit: false, groups: [0] })) {
    shares.push(open);
    open = { groups: [], unit: false };
  }
  for (let index = 0; index < parts.groups.length; index++) {
    const asked = breaks.has(index);
    const candidate = { ...open, groups: [...open.groups, index] };
    if (open.groups.length > 0 && (asked || !fits(candidate))) {
      shares.push(open);
      open = { groups: [index], unit: false, ...(breaks.get(index) === undefined ? {} : { title: breaks.get(index) as string }) };
    } else {
      open = candidate;
      if (asked && breaks.get(index) !== undefined) open.title = breaks.get(index) as string;
    }
  }
  if (open.groups.length > 0 || open.unit) shares.push(open);
  return shares;
}

function compositionOf(
  parts: Parts,
  one: Share,
  before: boolean,
  after: boolean,
  division: Division,
  graph: FluidGraph,
  { gap, taller, even, width }: Spacing,
  elsewhere?: Elsewhere,
): Composition {
  const heights = one.groups.flatMap((index) => parts.groups[index]?.height ?? []);
  const height = heights.length > 0 ? Math.max(...heights) + taller : undefined;
  const groups = one.groups.map((index) =>
    (parts.groups[index] as Parts["groups"][number]).at(parts.groups[index]?.height === undefined ? undefined : height),
  );
  const headers = division.headers.map(({ node, kind }) => ({
    node,
    kind,
    before: elsewhere ? elsewhere.before(node) : before,
    after: elsewhere ? elsewhere.after(node) : after,
  }));
  const here = headers.filter(({ node }) => onSheet(node, groups, one.unit ? parts.unit : undefined) || !elsewhere);
  return compose({ groups, ...(one.unit && parts.unit ? { unit: parts.unit } : {}), headers: here, gap, even, width }, graph);
}

/** How far apart things stand on a sheet, modules. */
interface Spacing {
  gap: number;
  taller: number;
  even: boolean;
  /** The width of the sheet. */
  width: number;
}

const tight = { gap: 3, taller: 0, even: false };

interface Elsewhere {
  before(node: FluidNodeId): boolean;
  after(node: FluidNodeId): boolean;
}

function onSheet(node: FluidNodeId, groups: readonly Arrangement[], unit: PowerUnit | undefined): boolean {
  return [...groups, ...(unit ? [unit] : [])].some(({ placed }) =>
    placed.some(({ block }) => block.component.ports.some((port) => port.node === node)),
  );
}

/** A sheet with its spare room shared out between its groups. */
function fill(
  parts: Parts,
  one: Share,
  index: number,
  shares: readonly Share[],
  division: Division,
  graph: FluidGraph,
  page: PageArea,
  generous: boolean,
): Composition {
  const reaches = (other: Share, node: FluidNodeId) => {
    const members = [...other.groups.flatMap((group) => division.groups[group] ?? []), ...(other.unit ? division.unit : [])];
    return members.some(({ ports }) => ports.some((port) => port.node === node));
  };
  const elsewhere: Elsewhere = {
    before: (node) => shares.slice(0, index).some((other) => reaches(other, node)),
    after: (node) => shares.slice(index + 1).some((other) => reaches(other, node)),
  };
  const room = roomOf(page);
  const width = room.width / module;
  const least = compositionOf(parts, one, false, false, division, graph, { ...tight, width }, elsewhere);
  if (!generous) return least;
  const spareDown = room.height / module - (least.extent.bottom - least.extent.top);
  const taller = Math.max(0, Math.min(6, Math.floor(spareDown / 4)));
  // Even distances where they fit, and then as much air between the groups as is pleasant.
  for (const even of [true, false]) {
    const gaps = Math.max(1, one.groups.length - 1);
    const first = compositionOf(parts, one, false, false, division, graph, { gap: 3, taller, even, width }, elsewhere);
    const spare = room.width / module - (first.extent.right - first.extent.left);
    if (spare < 0) continue;
    const gap = 3 + Math.max(0, Math.min(9, Math.floor(spare / (gaps + 2))));
    return compositionOf(parts, one, false, false, division, graph, { gap, taller, even, width }, elsewhere);
  }
  return least;
}

/** The room of a page above its title block. */
function roomOf({ area, reserved }: PageArea): { x: number; y: number; width: number; height: number } {
  const height = reserved.width > 0 && reserved.height > 0 ? Math.max(0, reserved.y - area.y) : area.height;
  return { x: area.x, y: area.y, width: area.width, height };
}

/** Where a composition's own origin lies on the sheet, mm, so that it stands in the middle, a little above it. */
function originOf({ extent }: Composition, page: PageArea): Point {
  const room = roomOf(page);
  const width = (extent.right - extent.left) * module;
  const height = (extent.bottom - extent.top) * module;
  const left = room.x + Math.max(0, room.width - width) / 2;
  const top = room.y + Math.max(0, room.height - height) * 0.45;
  return { x: left - extent.left * module, y: top - extent.top * module };
}
