import type { SourceRange } from "../language/diagnostic.js";
import type { Device, DeviceUse, NodeId } from "../machine/model.js";
import { rule } from "./rule.js";

/**
 * A changeover contact's common terminal, a sensor's supply, a terminal of a strip, a pin of a plug or a point of a controller's
 * card is one piece of metal: it cannot lie on two potentials.
 */
export const terminalOnTwoWires = rule<{ device: string; terminal: string; what: string }>({
  code: "terminal-on-two-wires",
  severity: "warning",
  says: ({ device, terminal, what }) => `${what} ${terminal} of ${device} would be on two different wires.`,
  hint: ({ what }) =>
    what === "Terminal"
      ? "What shares a terminal must be joined there; or drive a relay and use its contacts."
      : `Join what stands at one ${what.toLowerCase()} with a @point, or take a further ${what.toLowerCase()}.`,
  find: ({ machine, networks }) => {
    if (networks.gaps) return [];
    return [...machine.devices.values()].flatMap((device) => {
      const first = new Map<string, { node: NodeId; at: SourceRange }>();
      return [...device.contacts, ...device.throughs].flatMap((use) => {
        const clash = piecesOf(device, use).find(([piece, node]) => {
          const known = first.get(piece);
          if (!known) first.set(piece, { node, at: use.at });
          return known !== undefined && known.node !== node;
        });
        if (!clash) return [];
        const [terminal] = clash;
        const where = first.get(terminal)?.at;
        const seeAlso = where ? [{ message: `${terminal} is first used here.`, at: where }] : [];
        return [{ device: device.name, terminal, what: nameOf(device), at: use.at, seeAlso }];
      });
    });
  },
});

/** The terminals of a use with the potential each lies on. */
function piecesOf({ kind }: Device, use: DeviceUse): [string, NodeId][] {
  if (use.kind === "through" && use.pin !== undefined) return [[use.pin, use.from]];
  // What feeds an output is the card's own; the other end is its terminal.
  if (kind === "output-card" && use.kind === "contact" && use.point !== undefined) return [[use.point, use.to]];
  const [from, to] = use.terminals.value;
  return [[from, use.from] as [string, NodeId], [to, use.to] as [string, NodeId]].filter(([terminal]) => terminal !== "");
}

function nameOf({ kind }: Device): string {
  return kind === "plug" ? "Pin" : kind === "output-card" ? "Point" : "Terminal";
}
