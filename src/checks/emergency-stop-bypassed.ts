import { deviceRoles } from "../machine/kinds.js";
import type { Device, LoadUse, MainUse } from "../machine/model.js";
import { mainsIn, motorsOf, waysToMotor, wholePowersOf } from "./power-ways.js";
import { rule, type Subject } from "./rule.js";
import { hintOnly } from "./safety.js";
import { whatStaysOn } from "./settle.js";

/**
 * With every emergency stop pressed and every relay settled, what moves the machine is without current (IEC 60204-1, stop
 * categories 0 and 1: power is taken from the actuators at the end). Whatever else is pressed, turned or remembered.
 */
export const emergencyStopBypassed = rule<{ stop: string; load?: string }>({
  code: "emergency-stop-bypassed",
  severity: "note",
  says: ({ stop, load }) =>
    load === undefined
      ? `${stop} stops nothing that moves: every solenoid and contactor can be energized while it is pressed.`
      : `${load} can be energized while ${stop} is pressed: there is a path to it that no emergency stop opens.`,
  hint: () => `Feed it from behind the emergency stop, or through a relay that the emergency stop drops out. ${hintOnly}`,
  find: (subject) => {
    const { machine, networks } = subject;
    const stops = [...machine.devices.values()].filter((device) => isStop(device) && device.contacts.length > 0);
    const [stop] = stops;
    if (networks.gaps || !stop) return [];
    const movers = networks.loads.filter(({ device }) => moves(machine.devices.get(device)));
    const suspects = stillFed(subject);
    const pressed = stops.map(({ name }) => ({ subject: name, value: "on", holds: true }));
    const bypassing = movers.filter(
      (load) =>
        suspects.has(load) && networks.states.canBe([...pressed, { subject: load.device, value: "on", holds: true }], true) === true,
    );
    if (bypassing.length > 1 && bypassing.length === movers.length) return [{ stop: stop.name, at: stop.contacts[0]?.at ?? stop.at }];
    return [...bypassing, ...motorsAlwaysOn(subject)].map(({ device, at }) => ({ stop: stop.name, load: device, at }));
  },
});

/** Motors that no contactor stands before, in their branch or in the feed. */
function motorsAlwaysOn({ machine }: Subject): MainUse[] {
  const isContactor = ({ device }: MainUse) => machine.devices.get(device)?.kind === "contactor";
  return wholePowersOf(machine).flatMap((circuit) =>
    [...mainsIn(circuit.feed.path)].some(isContactor)
      ? []
      : motorsOf(machine, circuit).flatMap(({ motor }) =>
          waysToMotor(circuit, motor)?.some((way) => !way.some(isContactor)) ? [motor] : [],
        ),
  );
}

function isStop({ kind }: Device): boolean {
  return kind === "emergency-stop" || kind === "cable-pull";
}

function moves(device: Device | undefined): boolean {
  return device?.kind === "solenoid" || device?.kind === "contactor";
}

/** What may stay energized, taking every contact but the stops' and those of dropped relays as closed. */
function stillFed({ machine, networks }: Subject): Set<LoadUse> {
  return whatStaysOn(networks, ({ device: name, form }, on) => {
    const device = machine.devices.get(name);
    if (!device) return true;
    if (isStop(device)) return form === "NO";
    const { load, coils } = deviceRoles[device.kind];
    return form === "NC" || !load || coils !== undefined || on.has(name);
  });
}
