import type { SourceRange } from "./diagnostic.js";

/** Lines of a text: `\n`, `\r\n` and a lone `\r` each end one. */
export function splitLines(text: string): string[] {
  return text.split(/\r\n|\n|\r/);
}

/** The text without a byte order mark. */
export function withoutMark(text: string): string {
  return text.charCodeAt(0) === 0xfeff ? text.slice(1) : text;
}

/** Turns offsets of one text into lines and columns, counted from 1. A column is one UTF-16 unit; a tab is one column. */
export class SourceText {
  private readonly lineStarts: number[] = [0];

  constructor(
    readonly file: string,
    readonly text: string,
  ) {
    const breaks = /\r\n|\n|\r/g;
    while (breaks.exec(text)) this.lineStarts.push(breaks.lastIndex);
  }

  place(offset: number): { line: number; column: number } {
    let low = 0;
    let high = this.lineStarts.length - 1;
    while (low < high) {
      const middle = (low + high + 1) >> 1;
      if ((this.lineStarts[middle] as number) <= offset) low = middle;
      else high = middle - 1;
    }
    return { line: low + 1, column: offset - (this.lineStarts[low] as number) + 1 };
  }

  /** The offset of a place that `place` gave. */
  offset(line: number, column: number): number {
    return (this.lineStarts[line - 1] ?? this.text.length) + column - 1;
  }

  range(start: number, end: number): SourceRange {
    const from = this.place(start);
    const to = this.place(Math.max(start, end));
    return { file: this.file, line: from.line, column: from.column, endLine: to.line, endColumn: to.column };
  }
}
