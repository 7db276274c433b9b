import type { DeviceKind } from "../machine/model.js";
import { motorsOf, waysToMotor, wholePowersOf } from "./power-ways.js";
import { rule } from "./rule.js";
import { hintOnly } from "./safety.js";

const guarding: ReadonlySet<DeviceKind | undefined> = new Set<DeviceKind>(["overload", "circuit-breaker"]);

/** A motor that nothing switches off when it draws too much for too long (IEC 60204-1, protection of motors against overheating). */
export const motorUnguarded = rule<{ motor: string }>({
  code: "motor-unguarded",
  severity: "note",
  says: ({ motor }) => `Nothing guards ${motor} against overload: there is no overload relay and no breaker on its way.`,
  hint: ({ motor }) => `Put one before it, as in "branch: FU1 KM1 OL1 -> ${motor}". ${hintOnly}`,
  find: ({ machine }) =>
    wholePowersOf(machine).flatMap((circuit) =>
      motorsOf(machine, circuit).flatMap(({ motor }) => {
        const ways = waysToMotor(circuit, motor);
        const guarded = [...machine.devices.values()].some(({ guards }) => guards === motor.device);
        if (!ways || guarded || ways.every((way) => way.some(({ device }) => guarding.has(machine.devices.get(device)?.kind)))) return [];
        return [{ motor: motor.device, at: motor.at }];
      }),
    ),
});
