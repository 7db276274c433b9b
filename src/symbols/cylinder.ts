import type { CylinderSpec, Medium } from "../machine/model.js";
import { extentOf } from "./extent.js";
import { type Frame, fluidModule, inFrame, sketch } from "./notation.js";
import type { Symbol } from "./symbol.js";

/** The barrel, modules. */
const barrel = 10;
/** Where the piston's left face stands, retracted and extended, and how far the rod's end is from the piston's right face. */
const retracted = 2;
const extended = 7;
const rodLength = 10;

/** What a cylinder's drawing depends on. */
export type CylinderForm = Pick<CylinderSpec, "action" | "cushion" | "returnedBy">;

/**
 * A cylinder after ISO 1219-1 with its piston where it stands. The origin is on the axis at the left end of the barrel; the
 * rod comes out to the right.
 *
 * Ports: `cap` and `rod`, on the lower edge; a single-acting cylinder has only the one that drives it.
 * Spots: `designation` over the barrel; `rod-end` on the axis at the rod's end, `rod-retracted` and `rod-extended` where it
 * stands at the ends of the stroke.
 * @param fraction of the stroke, 0 retracted to 1 extended
 */
export function composeCylinder(spec: CylinderForm, fraction: number, medium: Medium): Symbol {
  const stroke = Number.isFinite(fraction) ? Math.min(1, Math.max(0, fraction)) : 0;
  const frame: Frame = { module: fluidModule, x: 0, y: 0 };
  const piston = retracted + (extended - retracted) * stroke;
  const face = piston + 1;
  const rodEnd = face + rodLength;
  const single = spec.action === "single-acting";
  const pushesOut = single && spec.returnedBy === "spring-extend";

  const parts = [`R(0,-2 ${barrel},2)`, `R(${piston},-2 ${face},2)`, `L(${face},.5 ${rodEnd},.5 ${rodEnd},-.5 ${face},-.5)`];
  if (single && spec.returnedBy === "spring") parts.push(spring(face, barrel));
  if (pushesOut) parts.push(spring(0, piston));
  parts.push(...cushion(spec, piston));
  if (!single || !pushesOut) parts.push("L(1,-2 1,-3)");
  if (!single || pushesOut) parts.push("L(9,-2 9,-3)");
  // The other chamber of a single-acting cylinder breathes.
  if (single) parts.push(pushesOut ? vent(1, medium) : vent(9, medium));

  const symbol: Symbol = {
    name: `cylinder ${medium} ${spec.action} ${spec.returnedBy ?? "-"} ${spec.cushion} at ${stroke}`,
    title: `Cylinder, ${spec.action}`,
    box: { x: 0, y: 0, width: 0, height: 0 },
    ports: [],
    shapes: sketch(parts.join(" "), frame, medium),
    spots: {
      designation: { ...inFrame(frame, { x: barrel / 2, y: spec.cushion === "adjustable" ? 3.2 : 2.6 }), anchor: "middle" },
      "rod-end": { ...inFrame(frame, { x: rodEnd, y: 0 }), anchor: "middle" },
      "rod-retracted": { ...inFrame(frame, { x: retracted + 1 + rodLength, y: 0 }), anchor: "middle" },
      "rod-extended": { ...inFrame(frame, { x: extended + 1 + rodLength, y: 0 }), anchor: "middle" },
    },
  };
  if (!single || !pushesOut) symbol.ports.push({ name: "cap", ...inFrame(frame, { x: 1, y: -3 }), direction: "down" });
  if (!single || pushesOut) symbol.ports.push({ name: "rod", ...inFrame(frame, { x: 9, y: -3 }), direction: "down" });
  symbol.box = extentOf(symbol.shapes, symbol.ports);
  return symbol;
}

/** A spring between two faces; fewer strokes where it is pressed together, so that they stay apart on paper. */
function spring(from: number, to: number): string {
  const strokes = to - from < 4 ? 5 : 9;
  const points = Array.from({ length: strokes + 1 }, (_, i) => `${from + ((to - from) * i) / strokes},${i % 2 === 0 ? -1.25 : 1.25}`);
  return `L(${points.join(" ")})`;
}

/** Cushion sleeves on both sides of the piston; the arrow says they can be adjusted. */
function cushion({ cushion: kind }: CylinderForm, piston: number): string[] {
  if (kind === "none") return [];
  const sleeves = [`R(${piston - 0.5},-1 ${piston},1)`, `R(${piston + 1},-1 ${piston + 1.5},1)`];
  return kind === "adjustable" ? [...sleeves, `A(${piston - 1.25},-1.5 ${piston + 2.5},2.75)`] : sleeves;
}

/** Air goes out to the room; oil that leaks past the piston is drained. */
function vent(x: number, medium: Medium): string {
  return medium === "pneumatic"
    ? `L(${x},-2 ${x},-2.5) t(${x},-3.5 D)`
    : `d:L(${x},-2 ${x},-3) L(${x - 1},-2.5 ${x - 1},-3.5 ${x + 1},-3.5 ${x + 1},-2.5)`;
}
