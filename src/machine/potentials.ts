import type { DrawingInfo, Potential } from "./model.js";

/**
 * What a wire number takes the room of until the lines are known: the widest it can become, a line number of four digits
 * and a letter.
 */
export const widestLineNumber = "0000W";

/**
 * Numbers the potentials. Rails keep their names. Running numbers rise from 1 in reading order, across each device from
 * left to right, and start behind rails that are numbers themselves: with rails 1 and N the first wire is 2.
 * Conductors of a power circuit have their names already. Numbers by line are known only when the sheets are laid out; `widestLineNumber` stands in for them here.
 */
export function numberPotentials(
  named: readonly { rail?: string; points: string[]; conductor?: string }[],
  wireNumbers: DrawingInfo["wireNumbers"],
): Potential[] {
  const numericRails = named.flatMap(({ rail }) => (rail !== undefined && /^\d{1,9}$/.test(rail) ? [Number(rail)] : []));
  let next = Math.max(0, ...numericRails) + 1;
  return named.map(({ rail, points, conductor }, id) => {
    if (rail !== undefined) return { id, rail, points, number: { value: rail, by: "rail" } };
    if (conductor !== undefined) return { id, points, number: { value: conductor, by: "conductor" } };
    if (wireNumbers === "by-line") return { id, points, number: { value: widestLineNumber, by: "room for the line" } };
    return { id, points, number: { value: String(next++), by: "running" } };
  });
}
