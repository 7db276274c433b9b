import type { DeviceKind } from "../machine/model.js";
import { coilOf } from "../machine/walk.js";
import { rule } from "./rule.js";

/** A timer that resets itself gives pulses, which is meant; so does what remembers. */
const followsAtOnce: ReadonlySet<DeviceKind> = new Set<DeviceKind>(["relay", "contactor"]);

/** As soon as it pulls in, its own contact opens every way to its coil: it buzzes until something burns. */
export const coilDropsItselfOut = rule<{ coil: string }>({
  code: "coil-drops-itself-out",
  severity: "note",
  says: ({ coil }) => `${coil} chatters: as soon as it pulls in, its own contact opens every path to it.`,
  hint: ({ coil }) => `Hold ${coil} with a normally open contact of its own, or open its path with another relay's contact.`,
  find: ({ machine, networks }) =>
    networks.gaps
      ? []
      : networks.loads.flatMap((load) => {
          const device = machine.devices.get(load.device);
          if (!device || !followsAtOnce.has(device.kind) || device.loads.length > 1) return [];
          const own = device.contacts.find(({ form }) => form === "NC");
          if (!own) return [];
          const given = (holds: boolean) => networks.ways.feeds(load, [{ subject: coilOf(load), value: "on", holds }]);
          if (given(false) !== true || given(true) !== false) return [];
          return [{ coil: device.name, at: load.at, seeAlso: [{ message: `/${device.name} stands here.`, at: own.at }] }];
        }),
});
