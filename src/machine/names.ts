import type { SourceRange } from "../language/diagnostic.js";
import type { Word } from "../language/tree.js";
import { didYouMean, type Report, withArticle } from "./report.js";

interface Entry {
  kind: string;
  at: SourceRange;
}

/** Every designation of the drawing and where it is given: one name, one thing. */
export class Names {
  private readonly entries = new Map<string, Entry>();
  /** Things declared that this edition does not draw yet, or that were declared wrongly: their uses are passed over. */
  private readonly lost = new Set<string>();

  constructor(private readonly report: Report) {}

  /** Whether the name was still free; a second use of it is reported. */
  claim(name: Word, kind: string): boolean {
    const first = this.entries.get(name.text);
    if (!first) {
      this.entries.set(name.text, { kind, at: name.at });
      return true;
    }
    this.report.error("names-twice", name.at, `${name.text} is already ${withArticle(first.kind)}.`, {
      hint: "Every device and component has a designation of its own.",
      seeAlso: [{ message: `${name.text} is first declared here.`, at: first.at }],
      data: { name: name.text },
    });
    return false;
  }

  lose(name: string): void {
    this.lost.add(name);
  }

  isLost(name: string): boolean {
    return this.lost.has(name);
  }

  kindOf(name: string): string | undefined {
    return this.entries.get(name)?.kind;
  }

  /** Reports a name nobody declared. */
  unknown(name: Word, among: (kind: string) => boolean = () => true, hint?: string): void {
    const known: string[] = [];
    for (const [candidate, entry] of this.entries) if (among(entry.kind)) known.push(candidate);
    const guess = didYouMean(name.text, known);
    this.report.error("unknown-name", name.at, `There is no ${name.text} in this drawing.`, { ...guess, hint: guess.hint ?? hint });
  }
}
