import { rule } from "./rule.js";

type Side = "left" | "right";

export const valveEndBare = rule<{ valve: string; sides: Side[] }>({
  code: "valve-end-bare",
  severity: "error",
  says: ({ valve, sides: [side, both] }) =>
    both ? `Nothing acts on ${valve}, so it never shifts.` : `Nothing acts on the ${side} end of ${valve}, so it never shifts back.`,
  hint: ({ sides: [side, both] }) =>
    both ? 'Write for example "left solenoid SOL1 right spring".' : `Write for example "${side} spring".`,
  find: ({ machine }) =>
    [...machine.components.values()].flatMap(({ name, valve, at }) => {
      const sides = valve ? (["left", "right"] as const).filter((side) => valve[side].length === 0) : [];
      return name !== undefined && sides.length > 0 ? [{ valve: name, sides, at }] : [];
    }),
});
