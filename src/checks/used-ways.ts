import type { Passage } from "../behaviour/conduction.js";
import type { Networks } from "./networks.js";

/** Everything that lies on some way to some load; where the ways to a load are too many to tell, all that leads towards it. */
export function usedWays({ ways, loads }: Networks): Set<Passage> {
  const used = new Set<Passage>();
  const seen = new Set<object>();
  for (const load of loads) {
    const to = ways.to(load);
    if (to) for (const { passages } of to) for (const passage of passages) used.add(passage);
    else for (const passage of ways.towards(load, seen)) used.add(passage);
  }
  return used;
}
