import { unitSpellings } from "./units.js";

// The word shapes of the language, as sticky patterns tried at one offset.

const letter = "[\\p{L}\\p{N}_]";
const name = `${letter}+(?:-${letter}+)*`;
const unit = unitSpellings.map((spelling) => spelling.replace(/[/]/g, "\\$&")).join("|");
/** Whatever would make a unit the beginning of a longer word. */
const unitEnd = `(?:(?=V[AD]C\\b)V|(?:${unit})(?![\\p{L}\\p{N}_³²+/]|-${letter}|[.:]${letter}))`;
const space = "[ \\t\\u00a0]";

const sticky = (pattern: string): RegExp => new RegExp(pattern, "uy");

const patterns = {
  blank: sticky(`${space}+`),
  newline: /\r\n|\n|\r/y,
  comment: /#[^\r\n]*/y,
  text: /"(?:\\.|[^"\\\r\n])*"/y,
  name: sticky(name),
  /** Where values stand, a slash may be part of a word: `mm/s`, `5/2`. */
  wordWithSlash: sticky(`${name}(?:/${name})*`),
  /** A stroke or a potential: the sign is the last thing of the word. */
  strokeSign: sticky(`\\+(?!${letter})|-(?![->]|${letter})`),
  port: sticky(`\\.${name}`),
  pins: sticky(`:${name}`),
  point: sticky(`@${name}`),
  number: sticky("[+-]?\\d+(?:\\.\\d+)?"),
  quantity: sticky(`[+-]?\\d+(?:\\.\\d+)?${space}*${unitEnd}`),
  fraction: sticky(`[+-]?(?:\\d+[ -])?\\d+\\/\\d+${space}*(?:inch|in|ft|hp|HP|gal)(?!${letter})`),
  decimalComma: sticky(`[+-]?\\d+,\\d+${space}*${unitEnd}`),
  restOfLine: /[^\r\n]*/y,
  untilBrace: /[^\r\n{}#]*/y,
  typographicText: /[“”„][^“”"\r\n]*[“”]/uy,
  /** Signs of no meaning. Quotation marks of books are taken one by one, as they may open a text. */
  unknown: sticky(`[“”„]|[^\\s“”„\\p{L}\\p{N}_"#@(){}|/:,+-]+`),
} as const;

export type Pattern = keyof typeof patterns;

/** Where the pattern ends if it matches at this offset, else -1. */
export function matchEnd(pattern: Pattern, text: string, at: number): number {
  const expression = patterns[pattern];
  expression.lastIndex = at;
  return expression.test(text) ? expression.lastIndex : -1;
}

/**
 * The offset behind the bracket that closes the one at `open`, texts and comments aside. Where none does: the beginning of the
 * first line that `stopAt` picks, the brace in which a round bracket was left open, or the end of the text.
 */
export function skipBalanced(text: string, open: number, stopAt: (lineStart: number) => boolean): { end: number; closed: boolean } {
  const opening = text[open];
  const closing = opening === "(" ? ")" : "}";
  const marks = /"(?:\\.|[^"\\\r\n])*"?|#[^\r\n]*|[(){}]|\r\n|\n|\r/g;
  marks.lastIndex = open;
  let depth = 0;
  for (let mark = marks.exec(text); mark; mark = marks.exec(text)) {
    const sign = mark[0];
    if (sign === opening) depth++;
    else if (sign === closing && --depth === 0) return { end: marks.lastIndex, closed: true };
    else if (opening === "(" && (sign === "{" || sign === "}")) return { end: mark.index, closed: false };
    else if (/[\r\n]/.test(sign[0] as string) && stopAt(lineContent(text, marks.lastIndex))) return { end: marks.lastIndex, closed: false };
  }
  return { end: text.length, closed: false };
}

/** Where a line's first sign stands. */
function lineContent(text: string, lineStart: number): number {
  return Math.max(matchEnd("blank", text, lineStart), lineStart);
}

/** How many more `{` than `}` the text has. */
export function unclosedBraces(text: string): number {
  const marks = /"(?:\\.|[^"\\\r\n])*"?|#[^\r\n]*|[{}]/g;
  let open = 0;
  for (let mark = marks.exec(text); mark; mark = marks.exec(text)) {
    if (mark[0] === "{") open++;
    else if (mark[0] === "}") open--;
  }
  return open;
}
