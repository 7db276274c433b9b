import { fedLoads } from "../behaviour/conduction.js";
import type { DeviceKind, LoadUse } from "../machine/model.js";
import { ableToPullIn } from "./pull-in.js";
import { rule } from "./rule.js";
import { hintOnly } from "./safety.js";
import { type Closes, whatStaysOn } from "./settle.js";

/** What drops out with its coil. */
const follows: ReadonlySet<DeviceKind> = new Set<DeviceKind>(["relay", "contactor", "timer"]);
/** Stands for the coil of a contact that stays open. */
const neverIn = "";
/** Relays looked into; a drawing with one slip has one. */
const mostLookedInto = 100;

/**
 * A relay that stays in through its own contact, directly or through those of others, while every normally closed contact in the
 * drawing is open and every switch is let go: only switching the supply off drops it out.
 */
export const holdWithoutStop = rule<{ coil: string }>({
  code: "hold-without-stop",
  severity: "note",
  says: ({ coil }) => `Once ${coil} is in, nothing but the supply drops it out: no contact opens its holding path.`,
  hint: ({ coil }) => `A stop opens it, as in /PB2 (PB1 | ${coil}) -> ${coil}. ${hintOnly}`,
  find: ({ machine, networks }) => {
    if (networks.gaps) return [];
    const kindOf = (name: string) => machine.devices.get(name)?.kind;
    const closes: Closes = ({ device, form }, on) => form === "NO" && on.has(device) && follows.has(kindOf(device) ?? "horn");
    const kept = whatStaysOn(networks, closes);
    // What comes in with the supply holds nothing: it follows from closed paths, or from relays that do.
    const always = ableToPullIn(networks.wiring, ({ device, form }) =>
      form === "NO" && follows.has(kindOf(device) ?? "horn") ? device : neverIn,
    );
    const on = new Set([...kept].map(({ device }) => device));
    const holdsItself = (load: LoadUse) => {
      const own = fedLoads(networks.wiring, (contact) => contact.device !== load.device && closes(contact, on));
      if (!own.has(load)) return true;
      // Others that feed it may be held by it in turn.
      return !whatStaysOn(networks, (contact, still) => contact.device !== load.device && closes(contact, still)).has(load);
    };
    return [...kept]
      .filter((load) => {
        const device = machine.devices.get(load.device);
        return device && follows.has(device.kind) && !always.has(load.device) && device.contacts.some(({ form }) => form === "NO");
      })
      .slice(0, mostLookedInto)
      .filter(holdsItself)
      .map(({ device, at }) => ({ coil: device, at }));
  },
});
