import { strokeOf } from "../machine/cylinder.js";
import type { FluidComponent } from "../machine/model.js";
import { fedBy, portInBox } from "../machine/valve-boxes.js";
import type { FluidMap } from "./fluid-map.js";

/** Where a valve standing in one of its boxes drives a cylinder once pressure is on. */
export interface DrivenCylinder {
  cylinder: FluidComponent;
  to: "extended" | "retracted";
}

/** The cylinders a valve moves, and where to, if it stands in the given box. Cylinders it lets stand are left out. */
export function drivenBy(map: FluidMap, { valve, ports }: FluidComponent, box: number): DrivenCylinder[] {
  const code = valve?.boxes[box];
  if (!valve || code === undefined) return [];
  const fed = fedBy(code);
  // Chambers joined with this valve's working ports, and whether they get pressure.
  const chambers = new Map<FluidComponent, Map<string, boolean>>();
  for (const { name, node } of ports) {
    if (node === undefined || !isWorkingPort(name)) continue;
    const underPressure = fed.has(portInBox(name, valve.ports));
    for (const { component, port } of map.reachedFrom(node)) {
      if (!component.cylinder) continue;
      const of = chambers.get(component) ?? new Map<string, boolean>();
      chambers.set(component, of.set(port, underPressure));
    }
  }
  const driven: DrivenCylinder[] = [];
  for (const [cylinder, of] of chambers) {
    const to = movement(cylinder, of.get("cap"), of.get("rod"));
    if (to) driven.push({ cylinder, to });
  }
  return driven;
}

function isWorkingPort(name: string): boolean {
  return name === "A" || name === "B" || name === "2" || name === "4";
}

function movement({ cylinder }: FluidComponent, cap: boolean | undefined, rod: boolean | undefined): DrivenCylinder["to"] | undefined {
  if (cylinder?.action === "single-acting") {
    if (cylinder.returnedBy === "spring-extend") return rod ? "retracted" : "extended";
    return cap ? "extended" : "retracted";
  }
  if (cap && rod) return undefined;
  return cap ? "extended" : rod ? "retracted" : undefined;
}

/** Whether the cylinder starts where it is driven to, so that it does not move when pressure comes on. */
export function startsThere({ cylinder, to }: DrivenCylinder): boolean {
  const spec = cylinder.cylinder;
  if (!spec) return true;
  return spec.start === (to === "extended" ? strokeOf(spec) : 0);
}

/** The box in which a valve without a normal position agrees best with where its cylinders start; the right one if none does better. */
export function boxByCylinders(map: FluidMap, valve: FluidComponent): number {
  const boxes = valve.valve?.boxes ?? [];
  let best = Math.max(0, boxes.length - 1);
  let bestScore = Number.NEGATIVE_INFINITY;
  for (let box = boxes.length - 1; box >= 0; box--) {
    let score = 0;
    for (const { cylinder, to } of drivenBy(map, valve, box)) {
      const spec = cylinder.cylinder;
      if (spec) score += spec.start > strokeOf(spec) / 2 === (to === "extended") ? 1 : -1;
    }
    if (score > bestScore) [best, bestScore] = [box, score];
  }
  return best;
}
