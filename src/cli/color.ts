import type { Desk } from "./desk.js";

/**
 * Whether text for this stream is coloured: an option decides, else NO_COLOR (any value but an empty one) or a dumb terminal says no, else a
 * terminal says yes.
 */
export function useColor(desk: Pick<Desk, "terminal" | "environment">, stream: "out" | "err", option: boolean | undefined): boolean {
  if (option !== undefined) return option;
  if (desk.environment.NO_COLOR || desk.environment.TERM === "dumb") return false;
  return desk.terminal[stream];
}
