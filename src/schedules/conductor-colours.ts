import type { DrawingInfo, Supply } from "../machine/model.js";

/** The colour of a conductor's insulation. */
export type ConductorColour = "black" | "red" | "blue" | "light blue" | "white" | "orange" | "green-and-yellow";

/**
 * The colour of a conductor.
 *
 * IEC 60204-1:2005, 13.2: power black, AC control red, DC control blue, neutral light blue, circuits that stay live with the supply
 * disconnected orange, protective conductor green-and-yellow. NFPA 79, chapter 13, recalled and not looked up again, has the
 * same but for the neutral, which is white.
 * @param phase the name of the rail, or which conductor of a power circuit it is
 * @param supply of the ladder it belongs to; none in a power circuit
 */
export function conductorColour(
  phase: string | undefined,
  supply: Pick<Supply, "current" | "excepted"> | undefined,
  convention: DrawingInfo["convention"],
): ConductorColour {
  if (phase !== undefined && /^(PE|GND|GRD)\d*$/.test(phase)) return "green-and-yellow";
  if (supply?.current !== "DC" && phase !== undefined && /^N\d*$/.test(phase))
    return convention === "north-american" ? "white" : "light blue";
  if (!supply) return "black";
  if (supply.excepted) return "orange";
  return supply.current === "AC" ? "red" : "blue";
}
