import { InvalidArgumentError } from "commander";
import type { Overrides } from "../machine/build.js";
import { conventions } from "../machine/drawing.js";
import type { DrawingInfo } from "../machine/model.js";

/** The convention named on the command line. */
export function readConvention(text: string): DrawingInfo["convention"] {
  const named = conventions.find((convention) => convention === text);
  if (named === undefined) throw new InvalidArgumentError(`It is ${conventions.join(" or ")}.`);
  return named;
}

/** What the options of a command decide instead of the drawing's text. */
export function overridesOf({ convention }: Overrides): Overrides {
  return convention === undefined ? {} : { convention };
}
