import { FluidMap } from "../behaviour/fluid-map.js";
import { drivenBy, startsThere } from "../behaviour/valve-rest.js";
import { strokeOf } from "../machine/cylinder.js";
import { wholeFluidsOf } from "../machine/walk.js";
import { rule } from "./rule.js";

export const cylinderMovesAtStart = rule<{ cylinder: string; valve: string; drawn: string; to: string }>({
  code: "cylinder-moves-at-start",
  severity: "warning",
  says: ({ cylinder, valve, drawn, to }) =>
    `${cylinder} starts ${drawn}, but ${valve} at rest drives it ${to === "extended" ? "out" : "in"} as soon as there is pressure.`,
  hint: ({ cylinder, to }) => `Turn the valve round, or let ${cylinder} "start ${to}".`,
  find: ({ machine, start }) =>
    wholeFluidsOf(machine).flatMap((circuit) => {
      const map = new FluidMap(circuit);
      return circuit.components.flatMap((valve) => {
        const box = valve.name === undefined ? undefined : start.valveBoxes.get(valve.name);
        if (box === undefined) return [];
        return drivenBy(map, valve, box)
          .filter((driven) => !startsThere(driven))
          .map(({ cylinder: { name = "", cylinder: spec, at }, to }) => {
            const place = spec?.start ?? 0;
            const drawn = place === 0 ? "retracted" : spec && place === strokeOf(spec) ? "extended" : `at ${place} mm`;
            return {
              cylinder: name,
              valve: valve.name ?? "",
              drawn,
              to,
              at,
              seeAlso: [{ message: `${valve.name} is declared here.`, at: valve.at }],
            };
          });
      });
    }),
});
