import type { LoadUse, Machine } from "../machine/model.js";
import type { Networks } from "./networks.js";
import { mainsIn, wholePowersOf } from "./power-ways.js";
import { rule } from "./rule.js";
import { hintOnly } from "./safety.js";

interface Opposed {
  one: LoadUse;
  other: LoadUse;
  /** A valve, or a motor. */
  of: string;
  /** Whether both at once short-circuit the phases. */
  shorts: boolean;
}

/**
 * The two solenoids of one valve: with both on, it stands wherever friction and chance leave it, and an AC coil may burn out. The two
 * contactors of a reversing pair, or of star and delta: with both in, they short-circuit the phases.
 */
export const opposedCoilsNotInterlocked = rule<{ one: string; other: string; of: string; shorts: boolean }>({
  code: "opposed-coils-not-interlocked",
  severity: "note",
  says: ({ one, other, of, shorts }) =>
    `${one} and ${other} of ${of} can be energized at the same time${shorts ? ", which short-circuits the phases" : ""}: nothing in the circuit keeps them apart.`,
  hint: ({ one, other, shorts }) =>
    shorts
      ? `Put /${other} in the path of ${one}, and /${one} in that of ${other}. ${hintOnly}`
      : `Relays with crossed normally closed contacts keep ${one} and ${other} apart. ${hintOnly}`,
  find: ({ machine, networks }) =>
    networks.gaps
      ? []
      : [...valvePairs(machine), ...contactorPairs(machine)]
          .filter(({ one, other }) => !byProgram(networks, one) && !byProgram(networks, other))
          .filter(({ one, other }) =>
            networks.states.canBe([one, other].map(({ device }) => ({ subject: device, value: "on", holds: true }))),
          )
          .map(({ one, other, of, shorts }) => ({
            one: one.device,
            other: other.device,
            of,
            shorts,
            at: other.at,
            seeAlso: [{ message: `${one.device} is driven here.`, at: one.at }],
          })),
});

function valvePairs(machine: Machine): Opposed[] {
  return [...machine.components.values()].flatMap(({ name, valve }) => {
    const coil = (side: "left" | "right") => {
      const actuator = valve?.[side].find(({ kind }) => kind === "solenoid" || kind === "piloted-solenoid");
      return machine.devices.get(actuator?.solenoid ?? "")?.loads[0];
    };
    const [one, other] = [coil("left"), coil("right")];
    return one && other && name !== undefined ? [{ one, other, of: name, shorts: false }] : [];
  });
}

/** Contactors that must never be in together: those of a pair that exchanges phases, and star with delta. */
function contactorPairs(machine: Machine): Opposed[] {
  const found: Opposed[] = [];
  const pair = (ones: Iterable<string>, others: Iterable<string>, of: string) => {
    for (const a of ones)
      for (const b of others) {
        const [one, other] = [machine.devices.get(a)?.loads[0], machine.devices.get(b)?.loads[0]];
        if (a !== b && one && other) found.push({ one, other, of, shorts: true });
      }
  };
  const contactors = (path: Parameters<typeof mainsIn>[0]) =>
    [...mainsIn(path)].flatMap(({ device }) => (machine.devices.get(device)?.kind === "contactor" ? [device] : []));
  for (const { branches } of wholePowersOf(machine)) {
    for (const { path, title, end } of branches) {
      const load = path.at(-1);
      const of = end.kind === "load" && load?.kind === "main" ? load.device : (title ?? "one branch");
      for (const element of path) {
        if (element.kind !== "power-parallel") continue;
        const crossed = element.ways.map((way) => [...mainsIn(way)].some((use) => use.crossed));
        element.ways.forEach((way, i) => {
          element.ways.slice(i + 1).forEach((beside, j) => {
            const [ones, others] = [contactors(way), contactors(beside)];
            // A way that needs two contactors is open while one of them is.
            if (crossed[i] !== crossed[i + 1 + j] && ones.length === 1 && others.length === 1) pair(ones, others, of);
          });
        });
      }
    }
    for (const star of branches)
      for (const delta of branches)
        if (star.start.kind === "star" && star.end.kind === "second" && delta.start.kind !== "star" && delta.end.kind === "second")
          if (star.end.device === delta.end.device) pair(contactors(star.path), contactors(delta.path), star.end.device);
  }
  return found;
}

/** Whether a controller's output decides over it: what its program keeps apart is not in the drawing. */
function byProgram({ ways }: Networks, load: LoadUse): boolean {
  return (
    ways.to(load)?.every(({ passages }) => passages.some((passage) => passage.kind === "contact" && passage.point !== undefined)) ?? false
  );
}
