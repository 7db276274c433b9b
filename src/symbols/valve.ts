import type { Box } from "../drawing/geometry.js";
import type { Medium, ValveActuator, ValveSpec } from "../machine/model.js";
import {
  type ActuatorDrawing,
  actuatorDrawings,
  camReach,
  camShapes,
  detentLength,
  detentReach,
  detentShapes,
  overrideReach,
  overrideShapes,
} from "./actuators.js";
import { extentOf } from "./extent.js";
import { directionIn, type Frame, fluidModule, frameAt, inFrame, mm, sketch } from "./notation.js";
import type { Port, Spot, Symbol } from "./symbol.js";
import { boxWidth, portName, valvePlaces, valvePositions } from "./valve-positions.js";

type Side = "left" | "right";

/**
 * A directional valve by the rules of ISO 1219-1: one box for each position side by side, the lines on the box shown, each
 * control at the end whose box it drives. The origin is the middle of the box shown, so the ports do not move with the box.
 *
 * Ports: P T A B or 1 2 3 4 5, and for fluid pilots X and Y or 14 (left) and 12 (right), with two or three main ports 12 (opens) and 10 (closes).
 * Spots: `designation` under a box without lines, `port-NAME` left of each lead, `left-solenoid` and `right-solenoid` over
 * the end, `left-reference` and `right-reference` under it.
 * @param shownBox the box its lines are drawn to, 0 leftmost
 * @param external pilot ports that solenoids with a pilot stage take from outside (else they are supplied inside the valve)
 */
export function composeValve(spec: ValveSpec, medium: Medium, shownBox: number, external: readonly string[] = []): Symbol {
  const shown = Math.min(Math.max(0, shownBox), spec.boxes.length - 1);
  const width = boxWidth(spec.ports);
  const frame: Frame = { module: fluidModule, x: 0, y: 0 };
  const valve: Symbol = {
    name: recipe(spec, medium, shown, external),
    title: titleOf(spec),
    box: emptyBox,
    ports: [],
    shapes: [],
    spots: {},
    actuators: [],
  };

  spec.boxes.forEach((code, index) => {
    const positions = valvePositions[spec.ports];
    const geometry = Object.hasOwn(positions, code) ? positions[code] : undefined;
    if (geometry === undefined) throw new Error(`There is no drawing for the position "${code}" of a valve with ${spec.ports} ports.`);
    const at = frameAt(frame, (index - shown) * width, 0);
    valve.shapes.push(...sketch(`R(${-width / 2},-2 ${width / 2},2) ${geometry}`, at, medium));
  });
  const continuous = [...spec.left, ...spec.right].some(({ kind }) => kind === "proportional-solenoid");
  addLeads(valve, spec, medium, frame, continuous);

  const edges = { left: -(shown + 0.5) * width, right: (spec.boxes.length - shown - 0.5) * width };
  if (continuous) {
    // Two lines along the boxes: any place between the positions can be held.
    valve.shapes.push(...sketch(`L(${edges.left},2.5 ${edges.right},2.5) L(${edges.left},-2.5 ${edges.right},-2.5)`, frame, medium));
  }
  for (const side of ["left", "right"] as const) {
    addEnd(valve, { spec, medium, side, shown, external, frame: { ...frame, x: edges[side], mirrored: side === "left" } });
  }

  // Under the neighbour of the box shown, where no line runs.
  const free = shown > 0 ? -width : width;
  valve.spots.designation = { ...inFrame(frame, { x: free, y: -3.75 }), anchor: "middle" };
  valve.box = extentOf(valve.shapes, valve.ports);
  return valve;
}

const emptyBox: Box = { x: 0, y: 0, width: 0, height: 0 };

function addLeads(valve: Symbol, spec: ValveSpec, medium: Medium, frame: Frame, continuous: boolean): void {
  // Port names stand clear of the lines along the boxes of a valve that holds any place.
  const clear = continuous ? 0.45 : 0;
  for (const { code, x, y } of valvePlaces[spec.ports]) {
    const end = y > 0 ? y + 1 : y - 1;
    const name = portName(code, spec.ports, medium);
    valve.shapes.push(...sketch(`L(${x},${y} ${x},${end})`, frame, medium));
    valve.ports.push({ name, ...inFrame(frame, { x, y: end }), direction: y > 0 ? "up" : "down" });
    valve.spots[`port-${name}`] = { ...inFrame(frame, { x: x - 0.3, y: y > 0 ? y + 0.4 + clear : y - 1.4 - clear }), anchor: "end" };
  }
}

interface End {
  spec: ValveSpec;
  medium: Medium;
  side: Side;
  shown: number;
  external: readonly string[];
  /** At the middle of the end's edge, x outward. */
  frame: Frame;
}

function addEnd(valve: Symbol, end: End): void {
  const { side, frame } = end;
  const groups = groupControls(end.spec[side]);
  let top = Number.NEGATIVE_INFINITY;
  let bottom = Number.POSITIVE_INFINITY;
  groups.forEach((group, index) => {
    // One control in the middle; alternatives stand over one another.
    const v = groups.length === 1 ? 0 : groups.length - 1 - 2 * index;
    let u = 0;
    for (const actuator of group) {
      const drawn = addControl(valve, actuator, end, frameAt(frame, u, v), v < 0, groups.length > 1);
      u += drawn.length;
      top = Math.max(top, v + drawn.top);
      bottom = Math.min(bottom, v + drawn.bottom);
    }
  });
  if (groups.length === 0) return;
  const anchor = side === "left" ? "end" : "start";
  valve.spots[`${side}-solenoid`] = { ...inFrame(frame, { x: 0.3, y: top + 0.5 }), anchor };
  valve.spots[`${side}-reference`] = { ...inFrame(frame, { x: 0.3, y: bottom - 1.6 }), anchor };
}

/**
 * Controls that stand over one another, each a list of what acts in line, innermost first. A detent holds the hand, foot or
 * cam control of its end, so it stands in line with it; springs come lowest.
 */
function groupControls(actuators: readonly ValveActuator[]): ValveActuator[][] {
  const detents = actuators.filter(({ kind }) => kind === "detent");
  const groups: ValveActuator[][] = [];
  for (const actuator of actuators) {
    if (actuator.kind === "detent" || actuator.kind === "spring") continue;
    const held = actuatorDrawings[actuator.kind].mechanical ? detents.shift() : undefined;
    groups.push(held ? [held, actuator] : [actuator]);
  }
  for (const detent of detents) groups.push([detent]);
  for (const spring of actuators.filter(({ kind }) => kind === "spring")) groups.push([spring]);
  return groups;
}

/** Draws one control and tells what room it takes. */
function addControl(
  valve: Symbol,
  actuator: ValveActuator,
  end: End,
  frame: Frame,
  low: boolean,
  stacked: boolean,
): { length: number; top: number; bottom: number } {
  const { medium, spec, side, shown } = end;
  if (actuator.kind === "detent") {
    // Seen from the edge outward the notches stand in the order of the boxes from this end.
    const inForce = side === "left" ? spec.positions - 1 - shown : shown;
    const at = low ? frameAt(frame, 0, 0, true) : frame;
    valve.shapes.push(...sketch(detentShapes(spec.positions, inForce), at, medium));
    valve.actuators?.push({ side, box: boxIn(frame, 0, detentLength, 0.5, -0.5) });
    return { length: detentLength, top: low ? -detentReach.bottom : detentReach.top, bottom: low ? -detentReach.top : detentReach.bottom };
  }
  const drawing = actuatorDrawings[actuator.kind];
  let { length, top, bottom } = drawing;
  valve.shapes.push(...sketch(drawing.shapes, frame, medium));
  if (drawing.pin) addPin(valve, pilotName(side, medium, spec), drawing.pin, frame);
  if (actuator.kind === "piloted-solenoid") bottom = Math.min(bottom, addPilotLines(valve, end, frame));
  const coil = drawing.coilFrom;
  if (actuator.override && coil !== undefined) {
    // Under the solenoid, or over it where a spring stands below.
    const over = stacked && !low;
    const at = frameAt(frame, coil, 0, over);
    valve.shapes.push(...sketch(overrideShapes, at, medium));
    if (over) top = Math.max(top, 1 + overrideReach);
    else bottom = Math.min(bottom, -1 - overrideReach);
  }
  if (actuator.kind === "roller" && pressedIn(spec, side, shown)) {
    valve.shapes.push(...sketch(camShapes, frame, medium));
    ({ length, top, bottom } = camReach);
  }
  valve.actuators?.push({
    side,
    ...(actuator.solenoid === undefined ? {} : { solenoid: actuator.solenoid }),
    box: controlBox(frame, drawing),
  });
  return { length, top, bottom };
}

/** A control at this end drives the box next to it; where that box is drawn though another is the normal one, the control is held in. */
function pressedIn({ normal, boxes }: ValveSpec, side: Side, shown: number): boolean {
  const driven = side === "left" ? 0 : boxes.length - 1;
  return shown === driven && normal !== undefined && normal !== driven;
}

/** External pilot lines of a two-stage valve; gives how far down they reach. */
function addPilotLines(valve: Symbol, end: End, frame: Frame): number {
  const { side, medium, external, spec } = end;
  const other = side === "left" ? "right" : "left";
  const here = pilotName(side, medium, spec);
  const names = external.filter(
    (name) => name === here || !spec[other].some(({ kind }) => kind === "piloted-solenoid" || kind === "pilot"),
  );
  const low = -(3 + frame.y);
  names.slice(0, 2).forEach((name, index) => {
    const u = name === here || names.length === 1 ? 1 : 2;
    if (valve.ports.some((port) => port.name === name)) return;
    valve.shapes.push(...sketch(`d:L(${u},-1 ${u},${low})`, frame, medium));
    addPin(valve, name, { x: u, y: low }, frame, index === 1 ? "right" : "left");
  });
  return names.length === 0 ? 0 : low;
}

function addPin(valve: Symbol, name: string, pin: { x: number; y: number }, frame: Frame, labelAt: Side = "left"): void {
  // Of two pilots at one end the first has the port.
  if (valve.ports.some((port) => port.name === name)) return;
  const sideways = pin.y === 0;
  const direction: Port["direction"] = sideways ? directionIn(frame, "right") : "down";
  valve.ports.push({ name, ...inFrame(frame, pin), direction });
  const at = inFrame(frame, sideways ? { x: pin.x - 1, y: 0.4 } : { x: pin.x, y: pin.y + 0.1 });
  const beside: Spot = { x: mm(at.x + (labelAt === "left" ? -0.6 : 0.6)), y: at.y, anchor: labelAt === "left" ? "end" : "start" };
  valve.spots[`port-${name}`] = sideways ? { ...at, anchor: "middle" } : beside;
}

/** The pilot port of an end: pneumatic ones by what they join after ISO 11727, 10 for one that closes port 1. */
function pilotName(side: Side, medium: Medium, { ports, boxes }: ValveSpec): string {
  if (medium === "hydraulic") return side === "left" ? "X" : "Y";
  if (ports > 3) return side === "left" ? "14" : "12";
  return (side === "left" ? boxes[0] : boxes.at(-1))?.startsWith("P>A") ? "12" : "10";
}

function controlBox(frame: Frame, { length, top, bottom, coilFrom }: ActuatorDrawing): Box {
  return coilFrom === undefined ? boxIn(frame, 0, length, top, bottom) : boxIn(frame, coilFrom, coilFrom + 3, 1, -1);
}

function boxIn(frame: Frame, from: number, to: number, top: number, bottom: number): Box {
  const a = inFrame(frame, { x: from, y: top });
  const b = inFrame(frame, { x: to, y: bottom });
  return { x: Math.min(a.x, b.x), y: Math.min(a.y, b.y), width: mm(Math.abs(b.x - a.x)), height: mm(Math.abs(b.y - a.y)) };
}

function titleOf({ ports, positions }: ValveSpec): string {
  return `Directional valve ${ports}/${positions}`;
}

function recipe({ ports, boxes, left, right, normal }: ValveSpec, medium: Medium, shown: number, external: readonly string[]): string {
  const end = (actuators: readonly ValveActuator[]) => actuators.map(({ kind, override }) => (override ? `${kind}!` : kind)).join("+");
  const pilots = external.length > 0 ? ` external ${external.join(" ")}` : "";
  return `valve ${medium} ${ports}/${boxes.length} [${end(left)}] ${boxes.join(" | ")} [${end(right)}] normal ${normal ?? "-"} shown ${shown}${pilots}`;
}
