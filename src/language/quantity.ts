/** The dimensions a drawing speaks in. */
export type Dimension =
  | "length"
  | "pressure"
  | "time"
  | "voltage"
  | "current"
  | "power"
  | "apparent-power"
  | "frequency"
  | "speed"
  | "displacement"
  | "flow"
  | "volume"
  | "temperature"
  | "mass"
  | "force"
  | "angle"
  | "resistance"
  | "filtration"
  | "share";

/**
 * A number with its unit. `value` is in the dimension's own unit: mm, bar, s, V, A, W, VA, Hz, rpm, cm³/rev, l/min, l, °C,
 * kg, N, deg, Ω, µm, %. `text` is what the author wrote, single-spaced.
 */
export interface Quantity {
  dimension: Dimension;
  value: number;
  unit: string;
  text: string;
}
