import type { StartState } from "../behaviour/start-state.js";
import type { PartId } from "../drawing/marks.js";
import type { Diagnostic } from "../language/diagnostic.js";
import type { Device, DeviceUse, DrawingInfo, Machine } from "../machine/model.js";
import { symbolForDevice } from "../symbols/choose.js";
import type { SymbolLibrary } from "../symbols/library.js";
import { type LadderLayout, layOutLadder } from "./ladder/lay-out-ladder.js";
import type { CircuitSheet, Layout, PageArea, Place } from "./placement.js";
import { layOutPower } from "./power/lay-out-power.js";

/**
 * Sets every circuit down in millimetres: sheets in the order of the circuits, numbered on through the set, and the place of
 * every part. References are not worded yet; room is kept for them. Never throws for a machine that could be built.
 * @param pageFor the room on a sheet of this drawing
 */
export async function layOut(
  machine: Machine,
  start: StartState,
  symbols: SymbolLibrary,
  pageFor: (drawing: DrawingInfo) => PageArea,
): Promise<Layout> {
  const page = pageFor(machine.drawing);
  const symbolOf = (use: DeviceUse) =>
    symbolForDevice(use, machine.devices.get(use.device) as Device, start, machine.drawing.convention, symbols);
  const sheets: CircuitSheet[] = [];
  const places = new Map<PartId, Place>();
  const diagnostics: Diagnostic[] = [];
  // The last ladder on each supply: its rails may go on in a later one.
  const ladders = new Map<string, LadderLayout>();
  let line = 1;
  for (const circuit of machine.circuits) {
    const numbering = { sheet: sheets.length + 1, line };
    if (circuit.kind === "ladder") {
      const before = ladders.get(circuit.supply.name);
      const laid = layOutLadder(
        circuit,
        machine,
        symbolOf,
        symbols,
        page,
        before?.ends ? { ...numbering, follows: before.ends } : numbering,
      );
      if (laid.begins) {
        before?.finish(laid.begins);
        ladders.set(circuit.supply.name, laid);
      }
      line = laid.nextLine;
      sheets.push(...laid.sheets);
      for (const [part, place] of laid.places) places.set(part, place);
    } else if (circuit.kind === "fluid") {
      // Only a drawing with fluid sheets waits for their layout library.
      const { layOutFluid } = await import("./fluid/lay-out-fluid.js");
      const laid = await layOutFluid(circuit, machine, start, symbols, page, numbering);
      sheets.push(...laid.sheets);
      diagnostics.push(...laid.diagnostics);
      for (const [part, place] of laid.places) places.set(part, place);
    } else {
      const laid = layOutPower(circuit, machine, symbols, page, numbering);
      line = laid.nextLine;
      sheets.push(...laid.sheets);
      diagnostics.push(...laid.diagnostics);
      for (const [part, place] of laid.places) places.set(part, place);
    }
  }
  for (const laid of ladders.values()) laid.finish();
  return { sheets, places, diagnostics };
}
