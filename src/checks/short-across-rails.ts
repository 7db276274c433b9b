import { deviceRoles } from "../machine/kinds.js";
import type { ContactUse } from "../machine/model.js";
import { nameOf } from "./names-of.js";
import { rule } from "./rule.js";

/**
 * From a live rail through nothing but contacts and wire to a return rail: were all of them closed, there would be a short circuit.
 * Contacts that are never closed together (`CR1` and `/CR1`, two positions of one selector) make none. A diode beside a load has
 * rules of its own. What stands next to the return rail is named, with the others on the way.
 */
export const shortAcrossRails = rule<{ live: string; back: string; through: string[]; mayBeCoil?: string }>({
  code: "short-across-rails",
  severity: "error",
  says: ({ live, back, through }) => `${live} and ${back} are joined with no load in between, through ${through.join(", ")}.`,
  hint: ({ mayBeCoil }) =>
    mayBeCoil === undefined
      ? 'Every path between the rails needs something that is driven, behind "->".'
      : `If ${mayBeCoil} is driven here, write -> ${mayBeCoil}.`,
  find: ({ machine, networks }) =>
    networks.ways
      .shorts((passage) => networks.rungById.get(passage.rung)?.incomplete !== true && networks.quenchedBy(passage) === undefined)
      .map(({ live, back, passages }) => {
        const last = passages.at(-1) as (typeof passages)[number];
        const device = machine.devices.get(last.device);
        const couldBe =
          device && deviceRoles[device.kind].load && device.loads.length === 0 && last.kind === "contact" && last.form === "NO";
        return {
          live: networks.railName(live),
          back: networks.railName(back),
          through: passages.map(nameOf),
          ...(couldBe ? { mayBeCoil: (last as ContactUse).device } : {}),
          at: last.at,
        };
      }),
});
