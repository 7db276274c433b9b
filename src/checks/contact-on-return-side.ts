import type { ContactUse, ParallelPath, SeriesPath } from "../machine/model.js";
import { usesOf } from "../machine/walk.js";
import { rule } from "./rule.js";

/**
 * A contact between a load and the earthed return lets an earth fault switch the load on past it. Only overload contacts
 * are commonly found there (NFPA 79 and IEC 60204-1 ask for one end of the coil on the return itself).
 */
export const contactOnReturnSide = rule<{ contact: string; load: string }>({
  code: "contact-on-return-side",
  severity: "warning",
  says: ({ contact, load }) => `The return side of ${load} is switched by ${contact}, which an earth fault can bridge.`,
  hint: ({ contact, load }) => `Put ${contact} before -> ${load}.`,
  find: ({ machine, networks }) =>
    networks.rungs.flatMap(({ path }) =>
      behindLoads(path)
        .filter(({ contact }) => machine.devices.get(contact.device)?.kind !== "overload")
        .map(({ contact, load }) => ({ contact: `${contact.form === "NC" ? "/" : ""}${contact.device}`, load, at: contact.at })),
    ),
});

function behindLoads(path: SeriesPath): { contact: ContactUse; load: string }[] {
  const found: { contact: ContactUse; load: string }[] = [];
  let load: string | undefined;
  for (const part of path.items) {
    if (part.kind === "point") continue;
    if (load !== undefined) {
      for (const use of part.kind === "parallel" ? usesOf(part) : [part]) if (use.kind === "contact") found.push({ contact: use, load });
    } else if (part.kind === "load") load = part.device;
    else if (part.kind === "parallel") {
      found.push(...part.branches.flatMap(behindLoads));
      load = loadIn(part);
    }
  }
  return found;
}

function loadIn(path: ParallelPath): string | undefined {
  for (const use of usesOf(path)) if (use.kind === "load") return use.device;
  return undefined;
}
