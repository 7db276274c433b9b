/** Words that open a block or statement of their own at the top of a file. */
export const topKeywords = ["drawing", "include", "ladder", "fluid", "cycle", "trial", "power"] as const;

/** Words that open a statement within a circuit. */
const circuitKeywords = ["sheet", "rung", "feed", "branch", "line", "pilot", "drain", "exhaust", "plug"] as const;

/** The lines of a fluid circuit by what they carry. */
export const lineKeywords: readonly string[] = ["line", "pilot", "drain", "exhaust"];

/** The lines of a power circuit. */
export const powerKeywords: readonly string[] = ["feed", "branch"];

export type Keyword = (typeof topKeywords)[number] | (typeof circuitKeywords)[number];

const all: ReadonlySet<string> = new Set([...topKeywords, ...circuitKeywords]);

export function isKeyword(word: string): word is Keyword {
  return all.has(word);
}
