import type { DrawingInfo } from "../machine/model.js";

/**
 * What is written at a pilot light for its colour. North-american: a letter in the circle (common practice; C is clear, and
 * what begins like another colour has two letters). International: the code of IEC 60757 beside the lamp, which has none for
 * amber (drawn as yellow, after IEC 60073 from memory) and none for clear.
 */
const codes: Record<string, Record<DrawingInfo["convention"], string>> = {
  red: { "north-american": "R", international: "RD" },
  green: { "north-american": "G", international: "GN" },
  yellow: { "north-american": "Y", international: "YE" },
  amber: { "north-american": "A", international: "YE" },
  orange: { "north-american": "O", international: "OG" },
  blue: { "north-american": "B", international: "BU" },
  white: { "north-american": "W", international: "WH" },
  clear: { "north-american": "C", international: "" },
  black: { "north-american": "BK", international: "BK" },
  grey: { "north-american": "GY", international: "GY" },
};

/** The code of a colour by its English name; empty for one the convention has no code for. */
export function lampColourCode(colour: string, convention: DrawingInfo["convention"]): string {
  return codes[colour]?.[convention] ?? "";
}
