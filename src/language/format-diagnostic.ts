import type { Diagnostic, Severity, SourceRange } from "./diagnostic.js";
import { splitLines } from "./source-text.js";

const tabWidth = 4;
/** A longer source line is shown around the fault only. */
const widestLine = 160;

const colours: Record<Severity, string> = { error: "31", warning: "33", note: "36" };

/**
 * Writes a diagnostic for people: its place and sentence, the source line with the text underlined, what to do about it, and
 * other places that matter. Lines are joined with `\n`, without one at the end. With `color`, ANSI colours are used.
 */
export function formatDiagnostic(d: Diagnostic, sources: ReadonlyMap<string, string>, options: { color: boolean }): string {
  const paint = (code: string, text: string): string => (options.color ? `\u001b[${code}m${text}\u001b[0m` : text);
  const severity = `${d.severity}[${d.code}]`;
  const lines = [`${paint("1", place(d.at, sources))} ${paint(`1;${colours[d.severity]}`, `${severity}:`)} ${visible(d.message)}`];
  lines.push(...quote(d.at, sources, (mark) => paint(`1;${colours[d.severity]}`, mark)));
  if (d.hint) lines.push(`  ${paint("1", "hint:")} ${visible(d.hint)}`);
  for (const other of d.seeAlso ?? []) {
    lines.push(`  ${paint("1", `${place(other.at, sources)} note:`)} ${visible(other.message)}`);
    lines.push(...quote(other.at, sources, (mark) => paint(colours.note, mark)));
  }
  return lines.join("\n");
}

/** Of a file that could not be read there is no line to name. */
function place(at: SourceRange, sources: ReadonlyMap<string, string>): string {
  return sources.get(at.file) ? `${visible(at.file)}:${at.line}:${at.column}:` : `${visible(at.file)}:`;
}

const sourceLines = new WeakMap<ReadonlyMap<string, string>, Map<string, string[]>>();

function lineOf(at: SourceRange, sources: ReadonlyMap<string, string>): string | undefined {
  const text = sources.get(at.file);
  if (text === undefined || text === "") return undefined;
  let files = sourceLines.get(sources);
  if (!files) {
    files = new Map();
    sourceLines.set(sources, files);
  }
  let lines = files.get(at.file);
  if (!lines) {
    lines = splitLines(text);
    files.set(at.file, lines);
  }
  return lines[at.line - 1];
}

/** The source line and a line of marks under the faulty stretch; a stretch over several lines is marked to the end of its first. */
function quote(at: SourceRange, sources: ReadonlyMap<string, string>, paintMark: (mark: string) => string): string[] {
  const line = lineOf(at, sources);
  if (line === undefined) return [];
  const from = Math.min(at.column - 1, line.length);
  const to = at.endLine > at.line ? line.length : Math.min(Math.max(at.endColumn - 1, from), line.length);

  let cutStart = 0;
  let cutEnd = line.length;
  if (line.length > widestLine) {
    cutStart = Math.max(0, Math.min(from - 40, line.length - widestLine));
    cutEnd = Math.min(line.length, cutStart + widestLine);
    // A character of two units is not cut in half.
    if (isLowSurrogate(line, cutStart)) cutStart--;
    if (isLowSurrogate(line, cutEnd)) cutEnd--;
  }
  const lead = cutStart > 0 ? "…" : "";
  const before = expand(lead + line.slice(cutStart, from), 0);
  const marked = expand(line.slice(from, Math.min(to, cutEnd)), before.width);
  const after = expand(line.slice(Math.min(to, cutEnd), cutEnd), before.width + marked.width);
  const gutter = String(at.line);
  const shown = `${before.text}${marked.text}${after.text}${cutEnd < line.length ? "…" : ""}`.trimEnd();
  const mark = `^${"~".repeat(Math.max(0, marked.width - 1))}`;
  return [`  ${gutter} | ${shown}`, `  ${" ".repeat(gutter.length)} | ${" ".repeat(before.width)}${paintMark(mark)}`];
}

function isLowSurrogate(text: string, at: number): boolean {
  const unit = text.charCodeAt(at);
  return unit >= 0xdc00 && unit <= 0xdfff;
}

/** The text as a terminal shows it, tabs spread to spaces, and how many cells it takes there, beginning at cell `start`. */
function expand(text: string, start: number): { text: string; width: number } {
  let shown = "";
  let cell = start;
  for (const char of text) {
    if (char === "\t") {
      const step = tabWidth - (cell % tabWidth);
      shown += " ".repeat(step);
      cell += step;
    } else {
      const printable = visible(char);
      shown += printable;
      cell += printable === char ? cellsOf(char) : printable.length;
    }
  }
  return { text: shown, width: cell - start };
}

/** Control characters by their picture, so that no text can steer the terminal. */
function visible(text: string): string {
  return text
    .replace(/[\u0000-\u001f]/g, (char) => String.fromCharCode(0x2400 + char.charCodeAt(0)))
    .replace(/[\u007f-\u009f\u202a-\u202e\u2066-\u2069]/g, "\ufffd");
}

/** Terminal cells of a character: none for combining marks, two for the wide scripts of East Asia and for pictographs (Unicode, UAX #11). */
function cellsOf(char: string): number {
  const code = char.codePointAt(0) ?? 0;
  if (/^(?:\p{Mn}|\p{Me})$/u.test(char) || (code >= 0x200b && code <= 0x200f) || code === 0xfeff) return 0;
  if (code < 0x1100) return 1;
  const wide =
    code <= 0x115f ||
    (code >= 0x2e80 && code <= 0x303e) ||
    (code >= 0x3041 && code <= 0xa4cf) ||
    (code >= 0xac00 && code <= 0xd7a3) ||
    (code >= 0xf900 && code <= 0xfaff) ||
    (code >= 0xfe30 && code <= 0xfe6f) ||
    (code >= 0xff00 && code <= 0xff60) ||
    (code >= 0xffe0 && code <= 0xffe6) ||
    (code >= 0x1f300 && code <= 0x1faff) ||
    (code >= 0x20000 && code <= 0x3fffd);
  return wide ? 2 : 1;
}
