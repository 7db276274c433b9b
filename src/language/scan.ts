import { isUnit, longestUnit } from "./units.js";

// The word shapes of the language, each tried at one offset. Written out rather than as patterns over the Unicode letters, as
// compiling those takes longer than reading a drawing.

/** Whether a letter, digit or `_` stands at this offset. */
export function isLetterAt(text: string, at: number): boolean {
  const code = text.charCodeAt(at);
  if (code < 0x80)
    return (code >= 0x61 && code <= 0x7a) || (code >= 0x41 && code <= 0x5a) || (code >= 0x30 && code <= 0x39) || code === 0x5f;
  if (Number.isNaN(code)) return false;
  return /[\p{L}\p{N}]/u.test(String.fromCodePoint(text.codePointAt(at) as number));
}

function isDigitAt(text: string, at: number): boolean {
  const code = text.charCodeAt(at);
  return code >= 0x30 && code <= 0x39;
}

function lettersEnd(text: string, at: number): number {
  let end = at;
  while (isLetterAt(text, end)) end += (text.codePointAt(end) as number) > 0xffff ? 2 : 1;
  return end;
}

/** Letters with single dashes, or other given joints, inside. */
function joinedEnd(text: string, at: number, joints: string): number {
  let end = lettersEnd(text, at);
  if (end === at) return -1;
  while (end < text.length && joints.includes(text[end] as string) && isLetterAt(text, end + 1)) end = lettersEnd(text, end + 1);
  return end;
}

function behind(sign: string): (text: string, at: number) => number {
  return (text, at) => (text[at] === sign ? joinedEnd(text, at + 1, "-") : -1);
}

function digitsEnd(text: string, at: number): number {
  let end = at;
  while (isDigitAt(text, end)) end++;
  return end > at ? end : -1;
}

function signEnd(text: string, at: number): number {
  return text[at] === "+" || text[at] === "-" ? at + 1 : at;
}

function decimalEnd(text: string, at: number, point: string): number {
  const whole = digitsEnd(text, signEnd(text, at));
  if (whole < 0 || text[whole] !== point) return -1;
  return digitsEnd(text, whole + 1);
}

function numberEnd(text: string, at: number): number {
  return Math.max(decimalEnd(text, at, "."), digitsEnd(text, signEnd(text, at)));
}

function isBlankAt(text: string, at: number): boolean {
  const code = text.charCodeAt(at);
  return code === 0x20 || code === 0x09 || code === 0xa0;
}

function blankEnd(text: string, at: number): number {
  let end = at;
  while (isBlankAt(text, end)) end++;
  return end > at ? end : -1;
}

/** A unit behind a number that ends at `at`, blanks between; -1 if none or if it is only the beginning of a longer word. */
function unitEnd(text: string, at: number): number {
  if (at < 0) return -1;
  const start = Math.max(blankEnd(text, at), at);
  for (let length = longestUnit; length > 0; length--) {
    const end = start + length;
    if (end > text.length || !isUnit(text.slice(start, end))) continue;
    const next = text[end];
    if (next === "+" || next === "/" || next === "³" || next === "²") continue;
    if ((next === "-" || next === "." || next === ":") && isLetterAt(text, end + 1)) continue;
    // 24VDC
    if (length === 1 && next !== undefined && text[start] === "V" && /^[AD]C(?!\w)/.test(text.slice(end, end + 3))) return end;
    if (!isLetterAt(text, end)) return end;
  }
  return -1;
}

/** `3/8 in`, `1-1/2 in`: only with units that are written so, for `5/2` is a valve. */
const fraction = /[+-]?(?:\d+[ -])?\d+\/\d+[ \t]*(?:inch|in|ft|hp|HP|gal)(?!\w)/y;

function byPattern(expression: RegExp): (text: string, at: number) => number {
  return (text, at) => {
    expression.lastIndex = at;
    return expression.test(text) ? expression.lastIndex : -1;
  };
}

/** Signs that open something, or that words are made of. All others mean nothing. */
const knownSigns = '"#@(){}|/:,+-';

/** Signs of no meaning. Quotation marks of books are taken one by one, as they may open a text. */
function unknownEnd(text: string, at: number): number {
  if (/[“”„]/.test(text[at] ?? "")) return at + 1;
  let end = at;
  while (
    end < text.length &&
    !knownSigns.includes(text[end] as string) &&
    !/[ \t\u00a0\r\n“”„]/.test(text[end] as string) &&
    !isLetterAt(text, end)
  ) {
    end += (text.codePointAt(end) as number) > 0xffff ? 2 : 1;
  }
  return end > at ? end : -1;
}

const shapes = {
  blank: blankEnd,
  newline: byPattern(/\r\n|\n|\r/y),
  comment: byPattern(/#[^\r\n]*/y),
  restOfLine: byPattern(/[^\r\n]*/y),
  untilBrace: byPattern(/[^\r\n{}#]*/y),
  text: byPattern(/"(?:\\.|[^"\\\r\n])*"/y),
  typographicText: byPattern(/[“”„][^“”"\r\n]*[“”]/y),
  name: (text: string, at: number) => joinedEnd(text, at, "-"),
  /** Where values stand, a slash may be part of a word: `mm/s`, `5/2`. */
  wordWithSlash: (text: string, at: number) => joinedEnd(text, at, "-/"),
  /** A stroke or a potential: the sign is the last thing of the word. */
  strokeSign: (text: string, at: number) => {
    const next = text[at + 1];
    if (text[at] !== "+" && (text[at] !== "-" || next === "-" || next === ">")) return -1;
    return isLetterAt(text, at + 1) ? -1 : at + 1;
  },
  port: behind("."),
  pins: behind(":"),
  point: behind("@"),
  number: numberEnd,
  quantity: (text: string, at: number) => unitEnd(text, numberEnd(text, at)),
  fraction: byPattern(fraction),
  decimalComma: (text: string, at: number) => unitEnd(text, decimalEnd(text, at, ",")),
  unknown: unknownEnd,
} as const;

export type Shape = keyof typeof shapes;

/** Where the shape ends if it stands at this offset, else -1. */
export function matchEnd(shape: Shape, text: string, at: number): number {
  return shapes[shape](text, at);
}

/**
 * The offset behind the bracket that closes the one at `open`, texts and comments aside. Where none does: the end of
 * the line before the first that `stopAt` picks, the brace in which a round bracket was left open, or the end of the text.
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
    else if (/[\r\n]/.test(sign[0] as string) && stopAt(lineContent(text, marks.lastIndex))) return { end: mark.index, closed: false };
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
