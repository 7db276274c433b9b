import type { Box, Mm, Point } from "../drawing/geometry.js";
import type { Anchor, Segment } from "../drawing/marks.js";
import { mm } from "./notation.js";
import type { Direction, Port, Shape, Spot, Symbol, Turn } from "./symbol.js";

/**
 * The symbol mirrored left-right if the turn says so, then turned by quarter turns counter-clockwise as seen. Text stays
 * upright: a text within the symbol keeps its middle, and a spot beside the symbol stays beside it with an anchor that
 * keeps the text clear.
 */
export function turnSymbol(symbol: Symbol, turn: Turn): Symbol {
  if (turn.quarter === 0 && !turn.mirrored) return symbol;
  const move = (point: Point): Point => turnPoint(point, turn);
  const { actuators } = symbol;
  return {
    ...symbol,
    box: turnBox(symbol.box, turn),
    ports: symbol.ports.map((port): Port => ({ name: port.name, direction: turnDirection(port.direction, turn), ...move(port) })),
    shapes: symbol.shapes.map((shape): Shape => turnShape(shape, turn)),
    spots: Object.fromEntries(Object.entries(symbol.spots).map(([name, spot]) => [name, turnSpot(spot, symbol.box, turn)])),
    ...(actuators ? { actuators: actuators.map((actuator) => ({ ...actuator, box: turnBox(actuator.box, turn) })) } : {}),
  };
}

/** A point about the symbol's origin. */
function turnPoint({ x, y }: Point, { quarter, mirrored }: Turn): Point {
  const m = mirrored ? -x : x;
  switch (quarter) {
    case 0:
      return { x: m + 0, y };
    case 1:
      return { x: y, y: -m + 0 };
    case 2:
      return { x: -m + 0, y: -y + 0 };
    case 3:
      return { x: -y + 0, y: m + 0 };
  }
}

const compass: readonly Direction[] = ["right", "up", "left", "down"];

function turnDirection(direction: Direction, { quarter, mirrored }: Turn): Direction {
  let index = compass.indexOf(direction);
  if (mirrored && index % 2 === 0) index = 2 - index;
  return compass[(index + quarter) % 4] as Direction;
}

function turnBox(box: Box, turn: Turn): Box {
  const a = turnPoint(box, turn);
  const b = turnPoint({ x: box.x + box.width, y: box.y + box.height }, turn);
  const x = Math.min(a.x, b.x);
  const y = Math.min(a.y, b.y);
  return { x, y, width: mm(Math.max(a.x, b.x) - x), height: mm(Math.max(a.y, b.y) - y) };
}

function turnShape(shape: Shape, turn: Turn): Shape {
  if (shape.kind === "text") return { ...shape, at: turnPoint(shape.at, turn), anchor: turnAnchor(shape.anchor, turn) };
  return { ...shape, path: shape.path.map((segment) => turnSegment(segment, turn)) };
}

function turnSegment(segment: Segment, turn: Turn): Segment {
  switch (segment.op) {
    case "Z":
      return segment;
    case "C": {
      const one = turnPoint({ x: segment.x1, y: segment.y1 }, turn);
      const two = turnPoint({ x: segment.x2, y: segment.y2 }, turn);
      return { op: "C", x1: one.x, y1: one.y, x2: two.x, y2: two.y, ...turnPoint(segment, turn) };
    }
    case "A":
      return { ...segment, sweep: turn.mirrored ? !segment.sweep : segment.sweep, ...turnPoint(segment, turn) };
    default:
      return { op: segment.op, ...turnPoint(segment, turn) };
  }
}

/** A half turn or a mirroring changes sides; a quarter turn leaves a text that ran along the line centred on it. */
function turnAnchor(anchor: Anchor, { quarter, mirrored }: Turn): Anchor {
  if (anchor === "middle" || quarter % 2 === 1) return "middle";
  return (quarter === 2) !== (mirrored ?? false) ? (anchor === "start" ? "end" : "start") : anchor;
}

/** Height of the text spots are made for, mm. */
const spotText: Mm = 2.5;

/** A spot is turned by the point of its text nearest to the symbol and the way the text runs away from there. */
function turnSpot({ x, y, anchor }: Spot, box: Box, turn: Turn): Spot {
  const away = awayFrom({ x, y, anchor }, box);
  const hold: Point = away === "up" ? { x, y } : away === "down" ? { x, y: y - spotText } : { x, y: y - spotText / 2 };
  const at = turnPoint(hold, turn);
  const turned = away === undefined ? undefined : turnDirection(away, turn);
  switch (turned) {
    case "up":
      return { ...at, anchor: "middle" };
    case "down":
      return { x: at.x, y: mm(at.y + spotText), anchor: "middle" };
    case "left":
      return { x: at.x, y: mm(at.y + spotText / 2), anchor: "end" };
    case "right":
      return { x: at.x, y: mm(at.y + spotText / 2), anchor: "start" };
    case undefined:
      return { x: at.x, y: mm(at.y + spotText / 2), anchor: "middle" };
  }
}

/** Where a spot's text runs to; undefined for a text centred within the symbol. */
function awayFrom({ x, y, anchor }: Spot, box: Box): Direction | undefined {
  if (anchor === "start") return "right";
  if (anchor === "end") return "left";
  if (y <= box.y) return "up";
  if (y - spotText >= box.y + box.height) return "down";
  const inside = x >= box.x && x <= box.x + box.width && y - spotText >= box.y && y <= box.y + box.height;
  if (inside) return undefined;
  return y - spotText / 2 < box.y + box.height / 2 ? "up" : "down";
}
