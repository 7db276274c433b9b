import type { Point } from "../drawing/geometry.js";
import type { ActuatorKind } from "../machine/model.js";

/** How a valve control is drawn, outward from the edge of the end box: x (u) outward, y (v) up; notation of notation.ts. */
export interface ActuatorDrawing {
  shapes: string;
  /** How far it reaches outward, modules. */
  length: number;
  /** How far its body reaches up and down. */
  top: number;
  bottom: number;
  /** The solenoid's own box from `from` to `from + 3`, if it has one. */
  coilFrom?: number;
  /** Where its pilot line joins. */
  pin?: Point;
  /** Whether it is worked by a hand, foot or cam, so that a detent may hold it. */
  mechanical?: boolean;
}

const stem = "L(0,.5 2,.5) L(0,-.5 2,-.5)";

const solenoid = (u: number) => `R(${u},-1 ${u + 3},1) L(${u},1 ${u + 3},-1)`;

/** Detents depend on the valve's positions and are drawn by `detentShapes`. */
export const actuatorDrawings: Record<Exclude<ActuatorKind, "detent">, ActuatorDrawing> = {
  solenoid: { shapes: solenoid(0), length: 3, top: 1, bottom: -1, coilFrom: 0 },
  "proportional-solenoid": { shapes: `${solenoid(0)} A(.5,-1.75 2.5,1.75)`, length: 3, top: 1.75, bottom: -1.75, coilFrom: 0 },
  // The pilot stage next to the valve, its supply taken inside; the solenoid acts on it.
  "piloted-solenoid": { shapes: `R(0,-1 2,1) t(.5,0 L) ${solenoid(2)}`, length: 5, top: 1, bottom: -1, coilFrom: 2 },
  spring: { shapes: "L(0,-.75 .5,.75 1,-.75 1.5,.75 2,-.75 2.5,.75)", length: 2.5, top: 0.75, bottom: -0.75 },
  pilot: { shapes: "t(0,0 L) d:L(1,0 3,0)", length: 3, top: 0.5, bottom: -0.5, pin: { x: 3, y: 0 } },
  "push-button": { shapes: `${stem} ARC(2,0 1 -90..90) L(2,-1 2,1)`, length: 3, top: 1, bottom: -1, mechanical: true },
  lever: { shapes: `${stem} L(2,-.5 2,.5) L(2,.5 3.04,1.99) C(3.2,2.3 .35)`, length: 3.55, top: 2.65, bottom: -0.5, mechanical: true },
  pedal: { shapes: `${stem} L(2,.5 2,-1) L(1.5,-1 3.5,.5)`, length: 3.5, top: 0.5, bottom: -1, mechanical: true },
  roller: {
    shapes: "L(0,.5 1.5,.5) L(0,-.5 1.5,-.5) L(1.5,-.5 1.5,.5) C(2,0 .5) CF(2,0 .12)",
    length: 2.5,
    top: 0.5,
    bottom: -0.5,
    mechanical: true,
  },
  plunger: { shapes: `${stem} ARC(2,0 .5 -90..90)`, length: 2.5, top: 0.5, bottom: -0.5, mechanical: true },
};

/** A hand pin on a solenoid, under its box. */
export const overrideShapes = "L(1,-1 1,-1.75) L(1.5,-1 1.5,-1.75) L(.75,-1.75 1.75,-1.75)";
export const overrideReach = 0.75;

/** A cam that holds a roller in. */
export const camShapes = "L(3.5,-3 2.5,-1 2.5,1 3.5,3)";
export const camReach = { length: 3.5, top: 3, bottom: -3 };

export const detentLength = 3;

/**
 * A detent with one notch for each position, and the catch in one of them.
 * @param inForce the notch that holds, counted outward from 0
 */
export function detentShapes(positions: number, inForce: number): string {
  const middle = (notch: number) => (detentLength * (notch + 0.5)) / positions;
  const top = Array.from({ length: positions }, (_, notch) => {
    const u = middle(notch);
    return `${u - 0.25},.5 ${u},.15 ${u + 0.25},.5`;
  }).join(" ");
  const u = middle(inForce);
  return `L(0,.5 ${top} ${detentLength},.5 ${detentLength},-.5 0,-.5) L(${u},.15 ${u},1.25)`;
}
export const detentReach = { top: 1.25, bottom: -0.5 };
