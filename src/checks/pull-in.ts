import { type Link, leads, type Wiring } from "../behaviour/conduction.js";
import { deviceRoles } from "../machine/kinds.js";
import type { ContactUse, LoadUse, Machine, NodeId } from "../machine/model.js";
import { coilOf } from "../machine/walk.js";
import { gather } from "./gather.js";

/** The coil that must be energized before a normally open contact closes; none for a switch, nor for what nothing drives. */
export function coilBehind(machine: Machine, { device: name, form }: ContactUse): string | undefined {
  const device = machine.devices.get(name);
  if (!device || form === "NC" || !deviceRoles[device.kind].load) return undefined;
  const coil = deviceRoles[device.kind].coils?.[0];
  const subject = coil === undefined ? name : `${name}.${coil}`;
  return device.loads.some((load) => coilOf(load) === subject) ? subject : undefined;
}

/**
 * The coils that can come to be energized from a machine at rest, whatever is pressed and whatever moves, one after another: what
 * has been energized closes contacts for the next. Normally closed contacts and switches are taken as closed.
 * @param behind the coil that must have been energized before a contact closes
 */
export function ableToPullIn({ at, feeds, loads }: Wiring, behind: (contact: ContactUse) => string | undefined): Set<string> {
  const able = new Set<string>();
  const waiting = new Map<string, (() => void)[]>();
  const loadsAt = new Map<NodeId, LoadUse[]>();
  for (const load of loads) for (const node of new Set([load.from, load.to])) gather(loadsAt, node, load);

  const queue: (() => void)[] = [];
  for (const { supply, live, back } of feeds) {
    for (const [positive, negative] of supply.current === "AC" ? [[live, back] as const, [back, live] as const] : [[live, back] as const]) {
      const sides = { out: new Set<NodeId>(), in: new Set<NodeId>() };
      const arrive = (node: NodeId, way: "out" | "in") => {
        if (sides[way].has(node)) return;
        sides[way].add(node);
        for (const load of loadsAt.get(node) ?? []) {
          const { from, to } = load;
          if ((sides.out.has(from) && sides.in.has(to)) || (sides.out.has(to) && sides.in.has(from))) energize(coilOf(load));
        }
        for (const link of at.get(node) ?? []) if (leads(link, node, way)) cross(link, node, way);
      };
      const cross = (link: Link, node: NodeId, way: "out" | "in") => {
        const { use } = link;
        const beyond = use.from === node ? use.to : use.from;
        const coil = use.kind === "contact" ? behind(use) : undefined;
        if (coil === undefined || able.has(coil)) queue.push(() => arrive(beyond, way));
        else gather(waiting, coil, () => arrive(beyond, way));
      };
      queue.push(
        () => arrive(positive, "out"),
        () => arrive(negative, "in"),
      );
    }
  }
  const energize = (coil: string) => {
    if (able.has(coil)) return;
    able.add(coil);
    queue.push(...(waiting.get(coil) ?? []));
    waiting.delete(coil);
  };
  for (let next = queue.pop(); next; next = queue.pop()) next();
  return able;
}
