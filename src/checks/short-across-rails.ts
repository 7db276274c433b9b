import { deviceRoles } from "../machine/kinds.js";
import type { ContactUse, NodeId } from "../machine/model.js";
import { rule, type Subject } from "./rule.js";

/**
 * From a live rail through nothing but contacts to a return rail: whatever the contacts are, when all are closed there is a
 * short circuit. The contact next to the return rail is named, with the others on the way.
 */
export const shortAcrossRails = rule<{ live: string; back: string; through: string[]; mayBeCoil?: string }>({
  code: "short-across-rails",
  severity: "error",
  says: ({ live, back, through }) => `${live} and ${back} are joined with no load in between, through ${through.join(", ")}.`,
  hint: ({ mayBeCoil }) =>
    mayBeCoil === undefined
      ? 'Every path between the rails needs something that is driven, behind "->".'
      : `If ${mayBeCoil} is driven here, write -> ${mayBeCoil}.`,
  find: (subject) => [...subject.networks.railsAt("live")].flatMap((live) => shortsFrom(live, subject)),
});

function shortsFrom(live: NodeId, { networks, machine }: Subject) {
  const returns = networks.railsAt("return");
  if (returns.has(live)) return [];
  const at = networks.contactsAt();
  const cameBy = new Map<NodeId, ContactUse | undefined>([[live, undefined]]);
  const queue: NodeId[] = [live];
  const found: { live: string; back: string; through: string[]; mayBeCoil?: string; at: ContactUse["at"] }[] = [];
  for (let head = 0; head < queue.length; head++) {
    const here = queue[head] as NodeId;
    for (const contact of at.get(here) ?? []) {
      if (networks.rungById.get(contact.rung)?.incomplete) continue;
      const beyond = contact.from === here ? contact.to : contact.from;
      if (returns.has(beyond)) {
        const device = machine.devices.get(contact.device);
        const mayBeCoil =
          device && deviceRoles[device.kind].load && contact.form === "NO" && device.loads.length === 0 ? contact.device : undefined;
        found.push({
          live: networks.railName(live),
          back: networks.railName(beyond),
          through: [...wayTo(here, cameBy), contact].map(({ form, device: name }) => `${form === "NC" ? "/" : ""}${name}`),
          mayBeCoil,
          at: contact.at,
        });
      } else if (!cameBy.has(beyond)) {
        cameBy.set(beyond, contact);
        queue.push(beyond);
      }
    }
  }
  return found;
}

/** The contacts from the live rail to a node, in order. */
function wayTo(node: NodeId, cameBy: ReadonlyMap<NodeId, ContactUse | undefined>): ContactUse[] {
  const way: ContactUse[] = [];
  for (let here = node, contact = cameBy.get(here); contact; contact = cameBy.get(here)) {
    way.unshift(contact);
    here = contact.from === here ? contact.to : contact.from;
  }
  return way;
}
