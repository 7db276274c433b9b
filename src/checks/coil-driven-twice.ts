import { coilOf } from "../machine/walk.js";
import { rule } from "./rule.js";

export const coilDrivenTwice = rule<{ coil: string; first: string }>({
  code: "coil-driven-twice",
  severity: "error",
  says: ({ coil, first }) => `${coil} is already driven${first === "" ? "" : ` in rung "${first}"`}.`,
  hint: () => "Bring both paths to one place as parallel branches.",
  find: ({ machine, networks }) =>
    [...machine.devices.values()].flatMap(({ loads }) =>
      loads.flatMap((load, index) => {
        const coil = coilOf(load);
        const one = loads.slice(0, index).find((other) => coilOf(other) === coil);
        if (!one) return [];
        const first = networks.rungById.get(one.rung)?.title ?? "";
        return [{ coil, first, at: load.at, seeAlso: [{ message: `${coil} is first driven here.`, at: one.at }] }];
      }),
    ),
});
