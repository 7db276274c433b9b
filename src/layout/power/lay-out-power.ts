import type { Mm } from "../../drawing/geometry.js";
import type { PartId } from "../../drawing/marks.js";
import type { Diagnostic } from "../../language/diagnostic.js";
import type { Machine, PowerBranch, PowerCircuit } from "../../machine/model.js";
import type { SymbolLibrary } from "../../symbols/library.js";
import type { Numbering } from "../ladder/lay-out-ladder.js";
import { type CircuitSheet, emptySheet, type PageArea, type Place } from "../placement.js";
import { powerArrangement } from "./arrangement.js";
import { drawPowerSheet } from "./draw-sheet.js";
import { type MeasuredPower, measurePower, type PowerGiven } from "./measure.js";

export interface PowerLayout {
  sheets: CircuitSheet[];
  places: [PartId, Place][];
  diagnostics: Diagnostic[];
  /** The line number after the last. */
  nextLine: number;
}

/**
 * What is tried one after the other until the longest branch fits: smaller gaps, then shares of the 2.5 mm module. Wires that hang need
 * the whole module: their numbers stand between them.
 */
const tries = {
  down: [
    { scale: 1, tight: false },
    { scale: 1, tight: true },
  ],
  right: [{ scale: 1, tight: false }, { scale: 1, tight: true }, ...[0.86, 0.74, 0.62, 0.5].map((scale) => ({ scale, tight: true }))],
};

/**
 * Lays a power circuit out on as many sheets as it needs: each branch whole on one sheet, the leads of a motor together, busbars from sheet to
 * sheet by references.
 * @param page the room on each sheet
 */
export function layOutPower(
  circuit: PowerCircuit,
  machine: Machine,
  symbols: SymbolLibrary,
  page: PageArea,
  numbering: Numbering,
): PowerLayout {
  if (circuit.branches.length === 0) return { sheets: [], places: [], diagnostics: [], nextLine: numbering.line };
  const arrangement = powerArrangement(machine);
  const { width, height } = page.area;
  const room = arrangement.flow === "down" ? { along: height, across: width } : { along: width, across: height };
  const tried = tries[arrangement.flow].map((one): PowerGiven => ({ circuit, machine, symbols, arrangement, ...one }));
  const fits = ({ along, across }: MeasuredPower) => along <= room.along && across <= room.across;
  const alone = (given: PowerGiven, index: number) => fits(measurePower(given, unitAt(circuit, index, "motors"), index === 0, false));
  const given = tried.find((one) => circuit.branches.every((_, index) => alone(one, index)));
  if (!given) {
    const smallest = tried.at(-1) as PowerGiven;
    const index = circuit.branches.findIndex((_, at) => !alone(smallest, at));
    const diagnostics: Diagnostic[] = [
      {
        code: "branch-too-long",
        severity: "error",
        message: `This branch does not go on a sheet of ${machine.drawing.paper}.`,
        at: circuit.branches[index]?.at ?? circuit.at,
        hint: "Choose a larger paper, or end it in a @point and go on from there behind a sheet break.",
      },
    ];
    return { sheets: [], places: [], diagnostics, nextLine: numbering.line };
  }
  const broken = breakSheets(circuit, (branches, first, last) => fits(measurePower(given, branches, first, last)));

  const places: [PartId, Place][] = [];
  let running = numbering.line;
  const sheets = broken.map(({ branches, title }, index) => {
    const number = numbering.sheet + index;
    const [first, last] = [index === 0, index === broken.length - 1];
    const measured = measurePower(given, branches, first, last);
    const bySheet = arrangement.flow === "down" ? 1 : number * 100 + 1;
    const firstLine = machine.drawing.lineNumbers === "running" ? running : bySheet;
    running += measured.plan.lanes.length;
    const out = emptySheet("power", circuit.id, number, title ?? circuit.title);
    const origin = { x: page.area.x, y: page.area.y };
    const zoneOf = (point: { x: Mm; y: Mm }) => page.zoneOf(point);
    places.push(...drawPowerSheet({ ...given, measured, branches, origin, first, last, firstLine, zoneOf }, out));
    return out;
  });
  return { sheets, places, diagnostics: [], nextLine: running };
}

/**
 * The branches from one on that must stand on one sheet with it.
 * @param by `motors`: those that lead to the leads of one motor; `points`: also those that go on from a point of another
 */
function unitAt({ branches }: PowerCircuit, index: number, by: "motors" | "points"): PowerBranch[] {
  let last = index;
  for (let at = index; at <= last; at++) {
    const branch = branches[at] as PowerBranch;
    branches.forEach((other, place) => {
      if (place > last && (sameMotor(branch, other) || (by === "points" && goesOn(branch, other)))) last = place;
    });
  }
  return branches.slice(index, last + 1);
}

function motorOf({ path, end }: PowerBranch): string | undefined {
  if (end.kind === "second") return end.device;
  const last = path.at(-1);
  return last?.kind === "main" && last.role === "load" && last.second ? last.device : undefined;
}

function sameMotor(one: PowerBranch, other: PowerBranch): boolean {
  const motor = motorOf(one);
  return motor !== undefined && motor === motorOf(other);
}

function goesOn({ path }: PowerBranch, { start }: PowerBranch): boolean {
  return start.kind === "point" && path.some((item) => item.kind === "power-point" && item.point === start.point);
}

interface BrokenSheet {
  branches: PowerBranch[];
  title?: string;
}

/** Shares the branches out: a new sheet where the author asks, and where the next do not go on any more. */
function breakSheets(
  circuit: PowerCircuit,
  fits: (branches: readonly PowerBranch[], first: boolean, last: boolean) => boolean,
): BrokenSheet[] {
  const asked = new Map(circuit.sheetBreaks.map((wanted) => [wanted.before, wanted]));
  const sheets: BrokenSheet[] = [];
  let sheet: BrokenSheet | undefined;
  const open = (title: string | undefined): BrokenSheet => {
    sheet = { branches: [], ...(title === undefined ? {} : { title }) };
    sheets.push(sheet);
    return sheet;
  };
  for (let index = 0; index < circuit.branches.length; ) {
    const wanted = asked.get(index);
    if (!sheet || (wanted && sheet.branches.length > 0)) sheet = open(wanted?.title);
    else if (wanted?.title !== undefined) sheet.title = wanted.title;
    const breaksWithin = (unit: readonly PowerBranch[]) => unit.some((_, place) => place > 0 && asked.has(index + place));
    const whole = unitAt(circuit, index, "points");
    const hard = unitAt(circuit, index, "motors");
    const goes = (unit: readonly PowerBranch[], on: BrokenSheet) =>
      fits([...on.branches, ...unit], sheets.length === 1, index + unit.length === circuit.branches.length);
    const unit = !breaksWithin(whole) && (goes(whole, sheet) || goes(whole, { branches: [] })) ? whole : hard;
    if (sheet.branches.length > 0 && !goes(unit, sheet)) sheet = open(sheet.title);
    sheet.branches.push(...unit);
    index += unit.length;
  }
  return sheets;
}
