import { linkOf } from "../behaviour/conduction.js";
import type { LoadUse, Machine, Supply, ThroughUse } from "../machine/model.js";
import { laddersOf } from "../machine/walk.js";
import { nameOf } from "./names-of.js";
import type { Networks } from "./networks.js";
import { rule } from "./rule.js";

/** On alternating current a diode beside a coil is a short circuit in every second half wave. */
export const diodeAcrossAcLoad = rule<{ diode: string; load: string }>({
  code: "diode-across-ac-load",
  severity: "warning",
  says: ({ diode, load }) => `${diode} short-circuits every second half wave at ${load}: it stands beside a load on alternating current.`,
  hint: () => "For alternating current take a varistor or a resistor with a capacitor.",
  find: ({ machine, networks }) =>
    besideLoads(machine, networks).flatMap(({ diode, load, supply }) =>
      supply.current === "AC" ? [{ diode: diode.device, load: nameOf(load), at: diode.at }] : [],
    ),
});

/** The cathode lies on the live side; turned round, the diode carries the whole short-circuit current. */
export const diodeTurnedRound = rule<{ diode: string; load: string; instead: string }>({
  code: "diode-turned-round",
  severity: "warning",
  says: ({ diode, load }) => `${diode} short-circuits the supply whenever ${load} is energized: its cathode K belongs on the live side.`,
  hint: ({ instead }) => `Write ${instead}.`,
  find: ({ machine, networks }) =>
    besideLoads(machine, networks).flatMap(({ diode, load, supply }) => {
      const { oneWay } = linkOf(diode, "diode");
      const live = networks.railNode(supply.rails[0]);
      if (supply.current === "AC" || !oneWay || live === undefined) return [];
      if (networks.groupOf(oneWay.from) !== networks.groupOf(live)) return [];
      const instead = `${diode.device}:${[...diode.terminals.value].reverse().join("-")}`;
      return [{ diode: diode.device, load: nameOf(load), instead, at: diode.at }];
    }),
});

/** Diodes across a load with nothing that limits what flows. */
function besideLoads(machine: Machine, networks: Networks): { diode: ThroughUse; load: LoadUse; supply: Supply }[] {
  const supplies = new Map(laddersOf(machine).flatMap(({ supply, rungs }) => rungs.map(({ id }) => [id, supply] as const)));
  return networks.throughs.flatMap((diode) => {
    const across = networks.quenchedBy(diode);
    const supply = supplies.get(diode.rung);
    if (machine.devices.get(diode.device)?.kind !== "diode" || !across || across.limited || !supply) return [];
    return networks.rungById.get(diode.rung)?.incomplete ? [] : [{ diode, load: across.load, supply }];
  });
}
