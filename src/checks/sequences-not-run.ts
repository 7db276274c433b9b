import { rule } from "./rule.js";

export const sequencesNotRun = rule<{ count: number }>({
  code: "sequences-not-run",
  severity: "note",
  says: ({ count }) =>
    `What the machine must do is read, but not yet run: ${count} ${count === 1 ? "block" : "blocks"} of "cycle" or "trial".`,
  find: ({ machine: { sequences } }) => {
    const [first] = sequences;
    if (!first) return [];
    const at = { ...first.at, endLine: first.at.line, endColumn: first.at.column + first.kind.length };
    return [{ count: sequences.length, at }];
  },
});
