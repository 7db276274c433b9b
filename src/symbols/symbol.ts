import type { Box, Mm, Point } from "../drawing/geometry.js";
import type { Anchor, Segment } from "../drawing/marks.js";

export type Direction = "up" | "down" | "left" | "right";

/** Where a line may join a symbol; `direction` is the way the line leaves it. */
export interface Port extends Point {
  name: string;
  direction: Direction;
}

export type Shape =
  | { kind: "stroke"; path: Segment[]; width: Mm; dash?: Mm[] }
  | { kind: "fill"; path: Segment[] }
  /** Text that belongs to the symbol itself (`M`, `3~`); it stays upright when the symbol is turned. `at` is the middle of its capitals. */
  | { kind: "text"; at: Point; text: string; height: Mm; anchor: Anchor };

/** A place for a text of 2.5 mm or less: its baseline stands on the point. */
export type Spot = Point & { anchor: Anchor };

/** A symbol in mm about its own origin, y down. The box holds every stroke, port and own text, without stroke width. */
export interface Symbol {
  /** e.g. `north-american/contact-no`, or the recipe of a composed valve. */
  name: string;
  title: string;
  box: Box;
  ports: Port[];
  shapes: Shape[];
  /**
   * Places for text by name, e.g. `designation`, `terminal-in`, `port-P`, `left-solenoid`: points that layout may use.
   * A symbol file marks them with `<circle class="spot" data-name=…>`. Not counted in the box.
   */
  spots: Record<string, Spot>;
  /** Valves: where each control is drawn, those of the left end first. A solenoid's box is that of its coil alone. */
  actuators?: { side: "left" | "right"; solenoid?: string; box: Box }[];
}

/** A symbol set down: turned by quarter turns counter-clockwise as seen, mirrored left-right before turning. */
export interface Turn {
  quarter: 0 | 1 | 2 | 3;
  mirrored?: boolean;
}
