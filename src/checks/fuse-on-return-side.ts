import { rule } from "./rule.js";

/**
 * A fuse that opens the earthed return leaves the loads live (IEC 60204-1 and NFPA 79: protective devices stand in the unearthed
 * conductor). A breaker that opens both sides at once is another matter.
 */
export const fuseOnReturnSide = rule<{ device: string; kind: string }>({
  code: "fuse-on-return-side",
  severity: "note",
  says: ({ device, kind }) => `${device} stands on the return side: when ${kind} opens there, what it protects stays live.`,
  hint: () => "Put it before the load, next to the live rail.",
  find: ({ machine, networks }) => {
    if (networks.gaps) return [];
    const groups = (side: "live" | "return") => new Set([...networks.railsAt(side)].map((rail) => networks.groupOf(rail)));
    const [live, back] = [groups("live"), groups("return")];
    return [...machine.devices.values()].flatMap(({ name, kind, throughs }) => {
      if (kind !== "fuse" && kind !== "circuit-breaker") return [];
      const onReturn = throughs.filter(({ from }) => back.has(networks.groupOf(from)) && !live.has(networks.groupOf(from)));
      const [first] = onReturn;
      return first && onReturn.length === throughs.length
        ? [{ device: name, kind: kind === "fuse" ? "a fuse" : "a breaker", at: first.at }]
        : [];
    });
  },
});
