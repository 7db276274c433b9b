import { startOfCycle } from "./behaviour/start-of-cycle.js";
import { check } from "./checks/check.js";
import type { DrawingSet } from "./drawing/marks.js";
import type { Diagnostic } from "./language/diagnostic.js";
import { readDrawing } from "./language/read-drawing.js";
import { layOut } from "./layout/lay-out.js";
import type { Layout } from "./layout/placement.js";
import { buildMachine, type Overrides } from "./machine/build.js";
import type { Machine } from "./machine/model.js";
import { crossReference } from "./schedules/cross-reference.js";
import type { CrossReferenceRow } from "./schedules/rows.js";
import { numberWires } from "./schedules/wire-numbers.js";
import { composeSheets } from "./sheets/compose.js";
import { pageArea } from "./sheets/page.js";
import { openSymbols } from "./symbols/library.js";
import type { World } from "./world.js";

/** What is known of a drawing after its text is read and checked. */
export interface Examined {
  /** As much of the machine as could be understood; it is whole only if no diagnostic is an error. */
  machine: Machine;
  /** Findings of all stages, in the order of the text: file by file as read, then by line and column. */
  diagnostics: Diagnostic[];
  /** The text of each file read, by its name in the diagnostics. */
  sources: Map<string, string>;
}

/** What becomes of a drawing: the last three are there only if it has no error. */
export interface Compiled extends Examined {
  layout?: Layout;
  rows?: CrossReferenceRow[];
  set?: DrawingSet;
}

/** Called as each phase begins, with what it does in a word or two, for showing progress. */
export type Told = (phase: string) => void;

/**
 * Reads and checks a drawing without laying it out.
 * @param path the drawing's file, as the user wrote it
 */
export async function examine(path: string, world: World, told: Told = () => {}, overrides: Overrides = {}): Promise<Examined> {
  // 1. Text → syntax tree, with the included files in their places. The tree always exists.
  told("reading");
  const { tree, sources, diagnostics: readFindings } = await readDrawing(path, world);

  // 2. Syntax tree → machine: every name resolved, every unit converted.
  const { machine, diagnostics: buildFindings } = buildMachine(tree, overrides);

  // 3. Machine → its state at the start of the cycle, which is the state drawn.
  const start = startOfCycle(machine);

  // 4. Design rules on the machine.
  told("checking");
  const diagnostics = inReadingOrder([...readFindings, ...buildFindings, ...check(machine, start)], sources);
  return { machine, diagnostics, sources };
}

/**
 * The whole way from a text file to a drawing set. Never throws for a bad drawing: it stops after checking and says why in
 * the diagnostics. The set goes to `writeSvg` and `writePdf`.
 * @param path the drawing's file, as the user wrote it
 */
export async function compile(path: string, world: World, told: Told = () => {}, overrides: Overrides = {}): Promise<Compiled> {
  // 1 – 4. Text → machine, checked. An error ends it here.
  const examined = await examine(path, world, told, overrides);
  if (examined.diagnostics.some(({ severity }) => severity === "error")) return examined;
  const { machine } = examined;

  // 5. Machine and symbols → places in millimetres, sheet by sheet; room is kept for references.
  told("placing");
  const layout = await layOut(machine, startOfCycle(machine), openSymbols(world), pageArea);
  const diagnostics = inReadingOrder([...examined.diagnostics, ...(layout.diagnostics ?? [])], examined.sources);
  if (diagnostics.some(({ severity }) => severity === "error")) return { ...examined, diagnostics };

  // 6. Machine and places → wire numbers by line, cross-reference rows.
  numberWires(machine, layout);
  const rows = crossReference(machine, layout);

  // 7. Places and rows → whole sheets: references worded, tables set, frame and title block.
  told("drawing");
  const set = composeSheets(machine, layout, rows, world);
  return { ...examined, diagnostics, layout, rows, set };
}

/** Sorts findings by place; those at one place keep the order in which the stages found them. */
function inReadingOrder(diagnostics: Diagnostic[], sources: ReadonlyMap<string, string>): Diagnostic[] {
  const files = new Map([...sources.keys()].map((file, index) => [file, index]));
  const rank = (file: string) => files.get(file) ?? files.size;
  return diagnostics
    .map((diagnostic, found) => ({ diagnostic, found }))
    .sort(({ diagnostic: { at: a }, found: m }, { diagnostic: { at: b }, found: n }) => {
      return rank(a.file) - rank(b.file) || a.line - b.line || a.column - b.column || m - n;
    })
    .map(({ diagnostic }) => diagnostic);
}
