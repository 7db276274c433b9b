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
}

export interface Tokens {
  tokens: Token[];
  problems: Problem[];
}
