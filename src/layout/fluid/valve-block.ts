import type { Mm } from "../../drawing/geometry.js";
import type { FluidComponent, ValveActuator } from "../../machine/model.js";
import type { Symbol, Turn } from "../../symbols/symbol.js";
import { turnSymbol } from "../../symbols/turn.js";
import { addText, type Block, bareBlock, pitch, printedOn, smallHeight, textHeight, wordsOf } from "./block.js";
import { extentOf, module, moved } from "./modules.js";

/** Room for a solenoid's ladder line. */
const referenceRoom: Mm = 10.5;

/**
 * A directional valve, lying, with its port names at the leads, its designation over a box without lines, and at each
 * solenoid the coil's designation and the ladder line it is driven from.
 */
export function valveBlock(component: FluidComponent, symbol: Symbol, turn: Turn = { quarter: 0 }): Block {
  const block = bareBlock(component, symbol, turn);
  const turned = turnSymbol(symbol, turn);
  const { offset } = block;
  for (const port of block.ports) {
    const spot = turned.spots[`port-${port.name}`];
    if (!spot) continue;
    const at = { x: spot.x / module + offset.x, y: spot.y / module + offset.y };
    addText(block, { part: component.id, role: "port", text: port.name, height: smallHeight, anchor: spot.anchor, at });
  }
  const spec = component.valve;
  if (spec) for (const side of ["left", "right"] as const) addEnd(block, turned, side, spec[side]);
  addName(block);
  return block;
}

function addEnd(block: Block, turned: Symbol, side: "left" | "right", actuators: readonly ValveActuator[]): void {
  const { offset, component } = block;
  const part = `${component.id}/${side}`;
  const drawn = (turned.actuators ?? []).filter((actuator) => actuator.side === side);
  if (drawn.length > 0) {
    const boxes = drawn.map(({ box }) => moved(extentOf(box), offset));
    const extent = {
      left: Math.min(...boxes.map((box) => box.left)),
      right: Math.max(...boxes.map((box) => box.right)),
      top: Math.min(...boxes.map((box) => box.top)),
      bottom: Math.max(...boxes.map((box) => box.bottom)),
    };
    block.parts.push({ part, extent });
  }
  const coils = actuators.flatMap(({ solenoid }) => (solenoid === undefined ? [] : [solenoid]));
  if (coils.length === 0) return;
  const spots = block.symbol.spots;
  const flipped = block.turn.quarter === 2;
  const above = spots[`${side}-solenoid`];
  const below = spots[`${side}-reference`];
  if (!above || !below) return;
  // Upside down, what was free below the end is above it; texts stand on their baselines either way.
  const over = flipped ? { ...below, y: textHeight - below.y } : above;
  const under = flipped ? { ...above, y: textHeight - above.y } : below;
  coils.forEach((coil, index) => {
    const outward = side === "left" ? -0.4 : 0.4;
    const up = { x: over.x / module + offset.x + outward, y: over.y / module + offset.y - index * pitch };
    const down = { x: under.x / module + offset.x + outward, y: under.y / module + offset.y + index * pitch };
    addText(block, { part, role: "designation", text: printedOn(component, coil), height: textHeight, anchor: over.anchor, at: up });
    addText(block, {
      part,
      role: "reference",
      text: { to: "ladder-line", device: coil, room: referenceRoom },
      height: textHeight,
      anchor: under.anchor,
      at: down,
    });
  });
}

/** Designation and function text over the boxes left of the lines, or right of them where the lines stand at the left box. */
function addName(block: Block): void {
  const { component, ports } = block;
  const words = wordsOf(component, 24);
  if (words.length === 0) return;
  const upper = ports.filter(({ direction }) => direction === "up").map(({ x }) => x);
  const boxesLeft =
    block.body.left < Math.min(-3, ...ports.filter(({ direction }) => direction === "up" || direction === "down").map(({ x }) => x - 2.5));
  const x = boxesLeft ? Math.min(...upper, 0) - 2.3 : Math.max(...upper, 0) + 1;
  const y = -2 + block.offset.y - 1.4;
  // Over the designations of the solenoids.
  const highest = Math.min(
    y,
    ...block.texts.filter(({ role, at }) => role === "designation" && (boxesLeft ? at.x <= x : at.x >= x)).map(({ at }) => at.y - 1.9),
  );
  [...words].reverse().forEach(({ role, text }, index) => {
    addText(block, {
      part: component.id,
      role,
      text,
      height: textHeight,
      anchor: boxesLeft ? "end" : "start",
      at: { x, y: highest - index * pitch },
    });
  });
}
