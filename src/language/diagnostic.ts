/** A stretch of a source file. Lines and columns count from 1; the end column is one past the last character. */
export interface SourceRange {
  file: string;
  line: number;
  column: number;
  endLine: number;
  endColumn: number;
}

export type Severity = "error" | "warning" | "note";

/** One finding about a drawing, with its place in the text. Every stage returns these; none throws for bad input. */
export interface Diagnostic {
  /** Stable, words joined with "-", e.g. "unknown-name". Never reworded once released. */
  code: string;
  severity: Severity;
  /** One plain sentence. */
  message: string;
  at: SourceRange;
  /** What to do about it, e.g. `Did you mean "CLAMP"?` */
  hint?: string;
  /** Other places that help to understand this one. */
  seeAlso?: { message: string; at: SourceRange }[];
  /** Facts for quick fixes, never read back from the sentence. */
  data?: Record<string, unknown>;
}
