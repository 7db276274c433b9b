import { fedLoads } from "../behaviour/conduction.js";
import type { ContactUse, LoadUse } from "../machine/model.js";
import type { Networks } from "./networks.js";

/** Says of a contact whether it is closed while some devices are on. */
export type Closes = (contact: ContactUse, on: ReadonlySet<string>) => boolean;

/** What stays energized when every load has been, relays dropping out one after another where nothing feeds them any more. */
export function whatStaysOn({ wiring, loads }: Networks, closes: Closes): Set<LoadUse> {
  let on = devicesOf(loads);
  for (;;) {
    const fed = fedLoads(wiring, (contact) => closes(contact, on));
    const still = new Set([...devicesOf(fed)].filter((device) => on.has(device)));
    if (still.size === on.size) return fed;
    on = still;
  }
}

/** What becomes energized when nothing has been, relays pulling in one after another. `closes` grows with what is on. */
export function whatComesOn({ wiring }: Networks, closes: Closes): Set<LoadUse> {
  let on = new Set<LoadUse>();
  for (;;) {
    const devices = devicesOf(on);
    const fed = fedLoads(wiring, (contact) => closes(contact, devices));
    if (fed.size === on.size) return fed;
    on = fed;
  }
}

function devicesOf(loads: Iterable<LoadUse>): Set<string> {
  return new Set([...loads].map(({ device }) => device));
}
