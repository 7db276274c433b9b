import type { SourceRange } from "../language/diagnostic.js";
import type { NodeId } from "../machine/model.js";
import { rule } from "./rule.js";

/** A changeover contact's common terminal, or a sensor's supply, is one piece of metal: it cannot lie on two potentials. */
export const terminalOnTwoWires = rule<{ device: string; terminal: string }>({
  code: "terminal-on-two-wires",
  severity: "warning",
  says: ({ device, terminal }) => `Terminal ${terminal} of ${device} would be on two different wires.`,
  hint: () => "Contacts that share a terminal must be joined there; or drive a relay and use its contacts.",
  find: ({ machine, networks }) => {
    if (networks.gaps) return [];
    return [...machine.devices.values()].flatMap(({ name, contacts }) => {
      const first = new Map<string, { node: NodeId; at: SourceRange }>();
      return contacts.flatMap((contact) => {
        const [from, to] = contact.terminals.value;
        const clash = [[from, contact.from] as const, [to, contact.to] as const].find(([terminal, node]) => {
          const known = first.get(terminal);
          if (!known) first.set(terminal, { node, at: contact.at });
          return terminal !== "" && known !== undefined && known.node !== node;
        });
        if (!clash) return [];
        const [terminal] = clash;
        const where = first.get(terminal)?.at;
        return [
          { device: name, terminal, at: contact.at, seeAlso: where ? [{ message: `${terminal} is first used here.`, at: where }] : [] },
        ];
      });
    });
  },
});
