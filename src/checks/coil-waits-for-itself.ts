import { fedLoads } from "../behaviour/conduction.js";
import { deviceRoles } from "../machine/kinds.js";
import { coilOf } from "../machine/walk.js";
import { ableToPullIn, coilBehind } from "./pull-in.js";
import { rule } from "./rule.js";

/** Coils looked into; a drawing with one slip has one. */
const mostLookedInto = 50;

/** `CR1 -> CR1`: the contact that would hold the relay is the only one that would pull it in. */
export const coilWaitsForItself = rule<{ coil: string }>({
  code: "coil-waits-for-itself",
  severity: "warning",
  says: ({ coil }) => `${coil} can never pull in: every path to it leads through a contact that closes only when ${coil} is in.`,
  hint: ({ coil }) => `A holding contact stands beside what starts it, as in (PB1 | ${coil}) -> ${coil}.`,
  find: ({ machine, networks: { gaps, wiring, loads } }) => {
    if (gaps) return [];
    const able = ableToPullIn(wiring, (contact) => coilBehind(machine, contact));
    const stuck = loads.filter((load) => !able.has(coilOf(load)));
    if (stuck.length === 0) return [];
    // What no wire leads to has a message of its own, and so has a coil that waits for another which never comes.
    const wired = fedLoads(wiring, () => true);
    return stuck
      .filter((load) => wired.has(load) && deviceRoles[machine.devices.get(load.device)?.kind ?? "horn"].contacts)
      .slice(0, mostLookedInto)
      .flatMap((load) => {
        const coil = coilOf(load);
        const helped = ableToPullIn(wiring, (contact) => {
          const behind = coilBehind(machine, contact);
          return behind === coil ? undefined : behind;
        });
        return helped.has(coil) ? [{ coil, at: load.at }] : [];
      });
  },
});
