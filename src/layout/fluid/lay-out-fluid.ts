import type { StartState } from "../../behaviour/start-state.js";
import type { Box, Point } from "../../drawing/geometry.js";
import type { PartId } from "../../drawing/marks.js";
import type { Diagnostic } from "../../language/diagnostic.js";
import type { FluidCircuit, FluidComponent, Machine } from "../../machine/model.js";
import { printedName } from "../../machine/walk.js";
import { symbolForComponent } from "../../symbols/choose.js";
import type { SymbolLibrary } from "../../symbols/library.js";
import type { CircuitSheet, PageArea, Place } from "../placement.js";
import type { Arrangement } from "./arrangement.js";
import type { DrawnComponent } from "./block.js";
import type { Composition } from "./compose-sheet.js";
import { type Division, divide } from "./divide.js";
import { drawFluidSheet } from "./draw-sheet.js";
import { placeByLayers, raiseCylinders } from "./elk-group.js";
import { FluidGraph } from "./graph.js";
import { type LedLines, leadLines } from "./lead-lines.js";
import { repeatTanks } from "./local-tanks.js";
import { type Extent, module } from "./modules.js";
import { placePowerUnit } from "./power-unit.js";
import { canPart, fillSheet, isWithin, type Parts, part, type Share, type SheetOf, shareOut } from "./share-out.js";
import { placeTower, planTower } from "./tower.js";

export interface FluidLayout {
  sheets: CircuitSheet[];
  places: [PartId, Place][];
  /** What does not fit on a sheet of this drawing; its sheet is left out. */
  diagnostics: Diagnostic[];
}

/** How often a sheet is set out anew with more room where a line found no way. */
const attempts = 4;

/** The circuit with its components told how the electrical names at them are printed. */
function withPrintedNames(circuit: FluidCircuit, { devices, drawing }: Machine): FluidCircuit {
  const isFed = (name: string | undefined) => name !== undefined && (devices.get(name)?.mains.length ?? 0) > 0;
  const printed = (name: string) => (devices.has(name) ? printedName(name, drawing.convention) : name);
  return {
    ...circuit,
    components: circuit.components.map((component): DrawnComponent => ({ ...component, printed, fed: isFed(component.name) })),
  };
}

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
  if (circuit.components.length === 0) return { sheets: [], places: [], diagnostics: [] };
  const drawn = repeatTanks(withPrintedNames(circuit, machine));
  const graph = new FluidGraph(drawn.circuit);
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
    const groups = division.groups.map((_, index): Parts["groups"][number] => {
      const plan = plans[index];
      const low = plan ? placeTower(plan, graph, symbolOf, slack) : (layered[index] as Arrangement);
      const known = new Map<number | undefined, Arrangement>([[undefined, low]]);
      const at = (height: number | undefined) => {
        const there =
          known.get(height) ?? (plan ? placeTower(plan, graph, symbolOf, slack, height) : raiseCylinders(low, height as number));
        known.set(height, there);
        return there;
      };
      return { height: low.height, at };
    });
    return { ...(unit ? { unit } : {}), groups };
  };
  const tries = [await place(0)];
  const partsOf = async (attempt: number) => {
    const known = tries[attempt] ?? (await place(attempt * 2));
    tries[attempt] = known;
    return known;
  };

  // 3. Which groups stand on which sheet, anew where lines that found no way need more room than a sheet has.
  const room = roomOf(page);
  const sheetOf = { division, width: room.width / module, height: room.height / module };
  let shares = shareOut(tries[0] as Parts, sheetOf, breaksOf(circuit, division));
  let set: SetOut[] = [];
  for (;;) {
    set = [];
    for (const index of shares.keys()) set.push(await setOut(index, shares, sheetOf, partsOf, graph));
    const outgrown = set.findIndex(({ fits }, index) => !fits && canPart(shares[index] as Share));
    if (outgrown < 0) break;
    shares = shares.flatMap((one, index) => (index === outgrown ? part(one) : [one]));
  }

  // 4. Every sheet set down in millimetres.
  const sheets: CircuitSheet[] = [];
  const places: [PartId, Place][] = [];
  const diagnostics: Diagnostic[] = [];
  for (const [index, { composition, led, extent, fits }] of set.entries()) {
    const one = shares[index] as Share;
    if (!fits) {
      diagnostics.push(tooSmall(one, extent, circuit, division, room));
      continue;
    }
    const { sheet, places: there } = drawFluidSheet({
      drawn,
      start,
      page,
      number: numbering.sheet + sheets.length,
      title: one.title ?? circuit.title,
      origin: originOf(extent, room),
      composition,
      led,
    });
    sheets.push(sheet);
    places.push(...there);
  }
  return { sheets, places, diagnostics };
}

/** A sheet composed, its lines led, and how much room all of it takes. */
interface SetOut {
  composition: Composition;
  led: LedLines;
  extent: Extent;
  fits: boolean;
}

/** Composes a sheet and leads its lines, with more and more room between its things until every line finds its way. */
async function setOut(
  index: number,
  shares: readonly Share[],
  sheetOf: SheetOf,
  partsOf: (attempt: number) => Promise<Parts>,
  graph: FluidGraph,
): Promise<SetOut> {
  let best: SetOut | undefined;
  let fitting: SetOut | undefined;
  for (let attempt = 0; attempt < attempts; attempt++) {
    const composition = fillSheet(await partsOf(attempt), index, shares, sheetOf, attempt === 0);
    const led = leadLines(composition, graph, attempt > 0);
    const extent = drawnExtent(composition, led);
    const fits = isWithin(extent, sheetOf);
    const one = { composition, led, extent, fits };
    if (!best || led.lost.length < best.led.lost.length) best = one;
    if (fits && (!fitting || led.lost.length < fitting.led.lost.length)) fitting = one;
    if (led.lost.length === 0) break;
  }
  // A port that only names its line is better than no sheet, but not than two sheets.
  return fitting && !canPart(shares[index] as Share) ? fitting : (best as SetOut);
}

/** What a sheet shows with the lines that run round it. */
function drawnExtent({ extent }: Composition, { steps }: LedLines): Extent {
  const drawn = { ...extent };
  for (const net of steps.values()) {
    for (const { a, b } of net) {
      drawn.left = Math.min(drawn.left, a.x);
      drawn.top = Math.min(drawn.top, a.y);
      drawn.right = Math.max(drawn.right, b.x);
      drawn.bottom = Math.max(drawn.bottom, b.y);
    }
  }
  return drawn;
}

function tooSmall(one: Share, { left, right, top, bottom }: Extent, circuit: FluidCircuit, division: Division, room: Box): Diagnostic {
  const group = division.groups[one.groups[0] ?? -1];
  const first = group?.find(({ kind }) => kind === "cylinder") ?? group?.[0];
  const what = first ? `What belongs to ${first.name ?? first.kind}` : "The power unit";
  const size = (across: number, down: number) => `${Math.ceil(across)} × ${Math.ceil(down)} mm`;
  const needs = size((right - left) * module, (bottom - top) * module);
  return {
    code: "sheet-too-small",
    severity: "error",
    message: `${what} does not fit on a sheet: it takes ${needs}, and there is room for ${Math.floor(room.width)} × ${Math.floor(room.height)} mm.`,
    at: circuit.at,
    hint: "Use a larger paper.",
  };
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

/** The room of a page above its title block. */
function roomOf({ area, reserved }: PageArea): Box {
  const height = reserved.width > 0 && reserved.height > 0 ? Math.max(0, reserved.y - area.y) : area.height;
  return { x: area.x, y: area.y, width: area.width, height };
}

/** Where the composition's own origin lies on the sheet, mm, so that what is drawn stands in the middle, a little above it. */
function originOf(extent: Extent, room: Box): Point {
  const width = (extent.right - extent.left) * module;
  const height = (extent.bottom - extent.top) * module;
  const left = room.x + Math.max(0, room.width - width) / 2;
  const top = room.y + Math.max(0, room.height - height) * 0.42;
  return { x: left - extent.left * module, y: top - extent.top * module };
}
