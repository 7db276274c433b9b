import { deviceRoles } from "../machine/kinds.js";
import { rule } from "./rule.js";

export const deviceUnused = rule<{ device: string }>({
  code: "device-unused",
  severity: "note",
  says: ({ device }) => `${device} is declared, but no circuit uses it.`,
  find: ({ machine, networks }) => {
    if (networks.gaps || networks.rungs.length === 0) return [];
    const needed = new Set<string>();
    for (const { guards, button } of machine.devices.values())
      for (const name of [guards, button?.lamp]) if (name !== undefined) needed.add(name);
    for (const { from } of machine.supplies) if (from !== undefined) needed.add(from);
    for (const { drivenBy } of machine.components.values()) if (drivenBy !== undefined) needed.add(drivenBy);
    return [...machine.devices.values()]
      .filter(
        ({ name, kind, contacts, throughs, mains }) =>
          !deviceRoles[kind].load && contacts.length + throughs.length + mains.length === 0 && !needed.has(name),
      )
      .map(({ name, at }) => ({ device: name, at }));
  },
});
