import type { Diagnostic, Severity, SourceRange } from "../language/diagnostic.js";
import { nearest } from "../language/nearest.js";

type More = Pick<Diagnostic, "hint" | "seeAlso" | "data">;

/** Collects what a stage finds, in the order found. */
export class Report {
  readonly diagnostics: Diagnostic[] = [];

  error(code: string, at: SourceRange, message: string, more: More = {}): void {
    this.add(code, "error", at, message, more);
  }

  warning(code: string, at: SourceRange, message: string, more: More = {}): void {
    this.add(code, "warning", at, message, more);
  }

  note(code: string, at: SourceRange, message: string, more: More = {}): void {
    this.add(code, "note", at, message, more);
  }

  /** Something a statement lacks; not said where a slip in the same statement may be that very thing. */
  missing(statement: SourceRange, at: SourceRange, message: string): void {
    const last = this.diagnostics.at(-1);
    const within = last && last.at.file === statement.file && last.at.line >= statement.line && last.at.line <= statement.endLine;
    if (!within || last.code !== "unknown-property") this.error("property-missing", at, message);
  }

  private add(code: string, severity: Severity, at: SourceRange, message: string, more: More): void {
    this.diagnostics.push({ code, severity, message, at, ...more });
  }
}

/** `Did you mean "CLAMP"?`, or nothing when no known name is close. `data.nearest` carries the name for a quick fix. */
export function didYouMean(written: string, known: Iterable<string>): More {
  const name = nearest(written, known);
  return name === undefined ? {} : { hint: `Did you mean "${name}"?`, data: { nearest: name } };
}

/** `a`, `a or b`, `a, b or c`. */
export function listed(words: readonly string[], joiner: "or" | "and" = "or"): string {
  if (words.length < 2) return words.join("");
  return `${words.slice(0, -1).join(", ")} ${joiner} ${words[words.length - 1]}`;
}

/** `a relay`, `an overload`. */
export function withArticle(noun: string): string {
  return `${/^[aeiou]/.test(noun) ? "an" : "a"} ${noun}`;
}

/** The first letter large, for the beginning of a sentence. */
export function capital(text: string): string {
  return `${text[0]?.toUpperCase() ?? ""}${text.slice(1)}`;
}
