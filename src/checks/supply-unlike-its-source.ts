import { rule } from "./rule.js";

export const supplyUnlikeItsSource = rule<{ supply: string; has: string; source: string; gives: string }>({
  code: "supply-unlike-its-source",
  severity: "warning",
  says: ({ supply, has, source, gives }) => `${supply} is said to be ${has}, but ${source} gives ${gives}.`,
  find: ({ machine }) =>
    machine.supplies.flatMap(({ name, voltage, current, from, at }) => {
      const source = from === undefined ? undefined : machine.devices.get(from);
      const gives = source?.conversion?.secondary;
      if (!source || !gives || !voltage) return [];
      // A transformer passes alternating current alone.
      const kind = gives.current ?? (source.kind === "transformer" ? "AC" : undefined);
      if (voltage.value === gives.voltage.value && current === (kind ?? current)) return [];
      return [
        {
          supply: name,
          has: `${voltage.text} ${current}`,
          source: source.name,
          gives: kind ? `${gives.voltage.text} ${kind}` : gives.voltage.text,
          at,
          seeAlso: [{ message: `${source.name} is declared here.`, at: source.at }],
        },
      ];
    }),
});
