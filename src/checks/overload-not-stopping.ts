import { motorsOf, waysToMotor, wholePowersOf } from "./power-ways.js";
import { rule } from "./rule.js";
import { hintOnly } from "./safety.js";

/** With the overload tripped and every relay settled, some contactor on each way to its motor is open. */
export const overloadNotStopping = rule<{ overload: string; motor: string; contactors: string[] }>({
  code: "overload-not-stopping",
  severity: "note",
  says: ({ overload, motor, contactors }) => `When ${overload} trips, ${motor} may run on: ${contactors.join(" and ")} can stay energized.`,
  hint: ({ overload, contactors }) => `Put /${overload} in the path of ${contactors[0]}, or of a relay it hangs on. ${hintOnly}`,
  find: ({ machine, networks }) => {
    if (networks.gaps) return [];
    const told = new Set<string>();
    return wholePowersOf(machine).flatMap((circuit) =>
      motorsOf(machine, circuit).flatMap(({ motor }) =>
        (waysToMotor(circuit, motor) ?? []).flatMap((way) => {
          const ofKind = (kind: string) => way.flatMap(({ device }) => (machine.devices.get(device)?.kind === kind ? [device] : []));
          const contactors = ofKind("contactor");
          return ofKind("overload").flatMap((overload) => {
            const device = machine.devices.get(overload);
            // One that opens nothing at all has a message of its own.
            if (!device?.contacts.some(({ form }) => form === "NC") || contactors.length === 0 || told.has(overload)) return [];
            const runs = [overload, ...contactors].map((subject) => ({ subject, value: "on", holds: true }));
            if (networks.states.canBe(runs, true) !== true) return [];
            told.add(overload);
            return [{ overload, motor: motor.device, contactors, at: device.at }];
          });
        }),
      ),
    );
  },
});
