import type { Passage } from "../behaviour/conduction.js";
import type { ContactUse } from "../machine/model.js";
import { nameOf } from "./names-of.js";
import type { Networks } from "./networks.js";
import { rule, type Subject } from "./rule.js";
import { isWithin, type Way } from "./ways.js";

/** Ways to one load that are held against each other. */
const mostCompared = 40;

/**
 * A contact beside a way that is open to current whenever its own is: `(PB1 | PB1 LS1)`, or `(CR1 | /CR1)`, one of which is
 * always closed.
 */
export const contactWithoutEffect = rule<{ contacts: string[]; beside: string[]; always: boolean }>({
  code: "contact-without-effect",
  severity: "warning",
  says: ({ contacts, beside, always }) => {
    const [mine, others] = [contacts.join(" "), beside.join(" ")];
    if (always) return `${mine} and ${others} side by side are no more than a wire: one of them is always closed.`;
    if (mine === others) return `${mine} stands beside another ${mine}: the second changes nothing.`;
    return `${mine} never ${contacts.length === 1 ? "matters" : "matter"}: whenever current could pass there, it passes ${others} beside it.`;
  },
  hint: ({ always }) => (always ? undefined : "Take it out, or see whether another contact was meant."),
  find: (subject) => (subject.networks.gaps ? [] : [...covered(subject.networks), ...opposites(subject)]),
});

function covered(networks: Networks) {
  const matters = new Set<Passage>();
  const seen = new Set<object>();
  const spare: { way: Way; by: Way }[] = [];
  for (const load of networks.loads) {
    const ways = networks.ways.to(load);
    if (!ways || ways.length > mostCompared) {
      for (const passage of networks.ways.towards(load, seen)) matters.add(passage);
      continue;
    }
    ways.forEach((way, index) => {
      // Of two that ask for the same, the first is the one that matters.
      const by = ways.find(
        (other, place) => place !== index && other.plain && isWithin(other, way) && (place < index || !isWithin(way, other)),
      );
      if (by) spare.push({ way, by });
      else for (const passage of way.passages) matters.add(passage);
    });
  }
  const told = new Set<Passage>();
  return spare.flatMap(({ way, by }) => {
    const without = way.passages.filter((passage) => passage.kind === "contact" && !matters.has(passage) && !told.has(passage));
    const [first] = without as ContactUse[];
    for (const passage of without) told.add(passage);
    const beside = by.passages.filter((passage) => passage.kind === "contact" && !way.passages.includes(passage));
    return first && beside.length > 0 ? [{ contacts: without.map(nameOf), beside: beside.map(nameOf), always: false, at: first.at }] : [];
  });
}

/** `CR1` and `/CR1` between the same two potentials. */
function opposites({ networks }: Subject) {
  const seen = new Map<string, ContactUse>();
  return networks.contacts.flatMap((contact) => {
    const { device, form, position, point, timed, from, to } = contact;
    const key = (side: ContactUse["form"]) => [device, position, point, timed, Math.min(from, to), Math.max(from, to), side].join(" ");
    const other = seen.get(key(form === "NO" ? "NC" : "NO"));
    seen.set(key(form), contact);
    return other && from !== to ? [{ contacts: [nameOf(other)], beside: [nameOf(contact)], always: true, at: contact.at }] : [];
  });
}
