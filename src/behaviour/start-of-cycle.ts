import type { Machine } from "../machine/model.js";
import { fluidsOf } from "../machine/walk.js";
import { FluidMap } from "./fluid-map.js";
import type { StartState } from "./start-state.js";
import { boxByCylinders } from "./valve-rest.js";

/** The machine at rest, as all drawings show it: where rods and valves stand and which switches the machine holds. */
export function startOfCycle(machine: Machine): StartState {
  const cylinders = new Map<string, number>();
  for (const { name, cylinder } of machine.components.values()) {
    if (cylinder && name !== undefined) cylinders.set(name, cylinder.start);
  }

  const held = new Set<string>();
  for (const { name, place } of machine.devices.values()) {
    const rod = place && cylinders.get(place.cylinder);
    if (place && rod !== undefined && place.from <= rod && rod <= place.to) held.add(name);
  }

  const valveBoxes = new Map<string, number>();
  const restingByStart = new Set<string>();
  for (const circuit of fluidsOf(machine)) {
    const map = new FluidMap(circuit);
    for (const component of circuit.components) {
      const { valve, name } = component;
      if (!valve || name === undefined) continue;
      if (valve.normal !== undefined) {
        valveBoxes.set(name, valve.normal);
        continue;
      }
      restingByStart.add(name);
      const box = valve.start === undefined ? boxByCylinders(map, component) : valve.start === "left" ? 0 : valve.boxes.length - 1;
      valveBoxes.set(name, box);
    }
  }
  return { cylinders, held, valveBoxes, restingByStart };
}
