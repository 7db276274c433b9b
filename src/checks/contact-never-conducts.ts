import type { ContactUse } from "../machine/model.js";
import { nameOf } from "./names-of.js";
import { rule } from "./rule.js";
import { usedWays } from "./used-ways.js";

/** `CR1 /CR1` in series, or two positions of one selector: when the one is closed the other is open. */
export const contactNeverConducts = rule<{ contact: string; other: string }>({
  code: "contact-never-conducts",
  severity: "warning",
  says: ({ contact, other }) => `No current ever passes ${contact}: ${other} in the same path is open whenever it is closed.`,
  find: ({ networks }) => {
    if (networks.gaps) return [];
    const used = usedWays(networks);
    const places = new Map(networks.contacts.map((contact, index) => [contact, index]));
    const told = new Set<ContactUse>();
    return [...networks.ways.contradictions].flatMap(([one, other]) => {
      if (one.kind !== "contact" || other.kind !== "contact" || (used.has(one) && used.has(other))) return [];
      // The one that is of no use is named; of two the later in the text.
      const [first, second] = [one, other].sort((a, b) => (places.get(a) ?? 0) - (places.get(b) ?? 0)) as [ContactUse, ContactUse];
      const [named, with_] = used.has(second) ? [first, second] : [second, first];
      if (told.has(named)) return [];
      told.add(named);
      return [
        {
          contact: nameOf(named),
          other: nameOf(with_),
          at: named.at,
          seeAlso: [{ message: `${nameOf(with_)} stands here.`, at: with_.at }],
        },
      ];
    });
  },
});
