import { printRating } from "../machine/device-words.js";
import type { Rating, Supply } from "../machine/model.js";
import { laddersOf, usesOf } from "../machine/walk.js";
import { nameOf } from "./names-of.js";
import { rule } from "./rule.js";

/** Coils must work from 85 % to 110 % of their rated voltage (IEC 60947-5-1); other loads are held to the same. */
const [least, most] = [0.85, 1.1];

/** Something made for another voltage than it gets; only what states its voltage is looked at. */
export const loadVoltageUnlikeSupply = rule<{ device: string; rated: string; supply: string; given: string }>({
  code: "load-voltage-unlike-supply",
  severity: "warning",
  says: ({ device, rated, supply, given }) => `${device} is made for ${rated}; ${supply} gives ${given}.`,
  find: ({ machine }) =>
    laddersOf(machine).flatMap(({ supply, rungs }) => {
      const told = new Set<string>();
      return rungs.flatMap(({ path }) =>
        [...usesOf(path)].flatMap((use) => {
          const device = machine.devices.get(use.device);
          const card = device?.kind === "input-card" || device?.kind === "output-card";
          if (!device?.voltage || !supply.voltage || (use.kind !== "load" && !card) || suits(device.voltage, supply)) return [];
          if (told.has(device.name)) return [];
          told.add(device.name);
          return [
            {
              device: card ? device.name : nameOf(use),
              rated: printRating(device.voltage),
              supply: supply.name === "" ? "the supply" : supply.name,
              given: printRating({ voltage: supply.voltage, current: supply.current }),
              at: use.at,
              seeAlso: [{ message: `${device.name} is declared here.`, at: device.at }],
            },
          ];
        }),
      );
    }),
});

function suits({ voltage, current }: Rating, supply: Supply): boolean {
  if (!supply.voltage) return true;
  const share = supply.voltage.value / voltage.value;
  return share >= least && share <= most && (current === undefined || current === supply.current);
}
