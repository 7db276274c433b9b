import { rule } from "./rule.js";

export const valveEndBare = rule<{ valve: string; side: "left" | "right" }>({
  code: "valve-end-bare",
  severity: "error",
  says: ({ valve, side }) => `Nothing acts on the ${side} end of ${valve}, so it never shifts back.`,
  hint: ({ side }) => `Write for example "${side} spring".`,
  find: ({ machine }) =>
    [...machine.components.values()].flatMap(({ name, valve, at }) =>
      (["left", "right"] as const).flatMap((side) =>
        valve && name !== undefined && valve[side].length === 0 ? [{ valve: name, side, at }] : [],
      ),
    ),
});
