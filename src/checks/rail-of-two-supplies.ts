import { rule } from "./rule.js";

export const railOfTwoSupplies = rule<{ rail: string; first: string; supply: string }>({
  code: "rail-of-two-supplies",
  severity: "warning",
  says: ({ rail, first, supply }) => `${rail} is the live rail of ${first} and of ${supply}: the drawing takes it as one wire.`,
  hint: ({ rail }) => `Give each supply a live rail of its own, such as 1${rail} and 2${rail}.`,
  find: ({ machine: { supplies } }) =>
    supplies.flatMap(({ name, rails: [rail], at }, index) => {
      const first = supplies.slice(0, index).find((other) => other.rails[0] === rail);
      if (!first) return [];
      return [{ rail, first: first.name, supply: name, at, seeAlso: [{ message: `${first.name} is declared here.`, at: first.at }] }];
    }),
});
