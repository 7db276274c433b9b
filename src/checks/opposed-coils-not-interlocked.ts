import type { LoadUse } from "../machine/model.js";
import type { Networks } from "./networks.js";
import { rule } from "./rule.js";
import { hintOnly } from "./safety.js";

/** The two solenoids of one valve: with both on, it stands wherever friction and chance leave it, and an AC coil may burn out. */
export const opposedCoilsNotInterlocked = rule<{ one: string; other: string; valve: string }>({
  code: "opposed-coils-not-interlocked",
  severity: "note",
  says: ({ one, other, valve }) =>
    `${one} and ${other} of ${valve} can be energized at the same time: nothing in the circuit keeps them apart.`,
  hint: ({ one, other }) => `Relays with crossed normally closed contacts keep ${one} and ${other} apart. ${hintOnly}`,
  find: ({ machine, networks }) => {
    if (networks.gaps) return [];
    return [...machine.components.values()].flatMap(({ name, valve }) => {
      const coil = (side: "left" | "right") => {
        const actuator = valve?.[side].find(({ kind }) => kind === "solenoid" || kind === "piloted-solenoid");
        const load = machine.devices.get(actuator?.solenoid ?? "")?.loads[0];
        return load && !driven(networks, load) ? load : undefined;
      };
      const [one, other] = [coil("left"), coil("right")];
      if (!one || !other || name === undefined) return [];
      const both = [one, other].map(({ device }) => ({ subject: device, value: "on", holds: true }));
      if (networks.states.canBe(both) !== true) return [];
      return [
        {
          one: one.device,
          other: other.device,
          valve: name,
          at: other.at,
          seeAlso: [{ message: `${one.device} is driven here.`, at: one.at }],
        },
      ];
    });
  },
});

/** Whether a controller's output decides over it: what its program keeps apart is not in the drawing. */
function driven({ ways }: Networks, load: LoadUse): boolean {
  return (
    ways.to(load)?.every(({ passages }) => passages.some((passage) => passage.kind === "contact" && passage.point !== undefined)) ?? false
  );
}
