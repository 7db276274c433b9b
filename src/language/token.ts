/** A token of the grammar: the name of its terminal, or the keyword or sign itself. Offsets into the text; the end is one past the last character. */
export interface Token {
  type: string;
  start: number;
  end: number;
}

/** Something wrong in the text, by offsets. */
export interface Problem {
  code: string;
  message: string;
  start: number;
  end: number;
  hint?: string;
  seeAlso?: { message: string; start: number; end: number };
  data?: Record<string, unknown>;
  /** Where the statement begins in which it was found, if that is not plain from its own place. */
  statement?: number;
}

export interface Tokens {
  tokens: Token[];
  problems: Problem[];
}
