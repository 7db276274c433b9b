import { deviceRoles } from "../machine/kinds.js";
import { rule } from "./rule.js";

/** What can be driven has a rule of its own, and so has an overload: it must open something. */
export const deviceUnused = rule<{ device: string }>({
  code: "device-unused",
  severity: "note",
  says: ({ device }) => `${device} is declared, but no circuit uses it.`,
  find: ({ machine, networks }) => {
    if (networks.gaps || networks.rungs.length === 0) return [];
    const needed = new Set<string>();
    for (const { guards, button } of machine.devices.values())
      for (const name of [guards, button?.lamp]) if (name !== undefined) needed.add(name);
    for (const { drivenBy } of machine.components.values()) if (drivenBy !== undefined) needed.add(drivenBy);
    for (const { from } of machine.supplies) if (from !== undefined) needed.add(from);
    return [...machine.devices.values()]
      .filter(({ name, kind, contacts, loads, throughs, mains }) => {
        if (kind === "overload" || (deviceRoles[kind].load && kind !== "input-card")) return false;
        return contacts.length + loads.length + throughs.length + mains.length === 0 && !needed.has(name);
      })
      .map(({ name, at }) => ({ device: name, at }));
  },
});
