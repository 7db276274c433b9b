import { listed } from "../machine/report.js";
import { nameOf } from "./names-of.js";
import { lonePoints } from "./point-used-once.js";
import { rule } from "./rule.js";

/** A part of the network that points join with itself: current that enters it has nowhere to go but back. */
export const contactLeadsNowhere = rule<{ through: string[] }>({
  code: "contact-leads-nowhere",
  severity: "warning",
  says: ({ through }) => `Nothing is fed through ${listed(through, "and")}: what they stand in begins and ends on the same wire.`,
  hint: () => "Look at the points their rungs begin and end at.",
  find: ({ machine, networks }) => {
    if (networks.gaps) return [];
    // A point that is named once has a message of its own.
    const lone = new Set(lonePoints(machine).map(({ point }) => point));
    return networks.ways.loops().flatMap((passages) => {
      const points = passages.flatMap(({ from, to }) => [from, to].flatMap((node) => machine.potentials[node]?.points ?? []));
      if (points.some((point) => lone.has(point))) return [];
      const sorted = [...passages].sort((a, b) => a.at.line - b.at.line || a.at.column - b.at.column);
      const [first] = sorted;
      return first ? [{ through: [...new Set(sorted.map(nameOf))], at: first.at }] : [];
    });
  },
});
