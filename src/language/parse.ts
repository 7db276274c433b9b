import { convert, type IncludeStatement } from "./convert.js";
import type { Diagnostic } from "./diagnostic.js";
import { tokenize } from "./lexer.js";
import { SourceText, withoutMark } from "./source-text.js";
import { createSprungParser, nodeExtent } from "./sprung-parser.js";
import type { Problem } from "./token.js";
import type { Located, Tree } from "./tree.js";

let parser: ReturnType<typeof createSprungParser> | undefined;

/**
 * Reads one text. The tree always exists; every slip has its diagnostic, in the order of their places, and what follows a slip is
 * still understood. Other files are not read: `includes` says which are wanted, and `readDrawing` brings them in.
 */
export function parse(text: string, file: string): { tree: Tree; diagnostics: Diagnostic[]; includes: IncludeStatement[] } {
  const source = new SourceText(file, withoutMark(text));
  const unreadable = findUnreadable(source.text);
  if (unreadable?.stop) return { tree: { file, statements: [] }, diagnostics: [toDiagnostic(unreadable.problem, source)], includes: [] };

  parser ??= createSprungParser(tokenize);
  const { document, problems, leftOver } = parser(source.text);
  if (unreadable) problems.push(unreadable.problem);
  for (const { start, end } of leftOver) problems.push({ code: "unexpected-word", message: "This has no place here.", start, end });
  const { statements, includes } = convert(document, source, problems, nodeExtent);
  if (document.statements.length === 0 && problems.length === 0) {
    problems.push({
      code: "empty-file",
      message: "This file describes nothing.",
      start: 0,
      end: 0,
      hint: 'Begin with a device, such as "relay CR1", or a rung.',
    });
  }
  markIncomplete(
    statements,
    problems.map(({ start, statement }) => statement ?? start).sort((a, b) => a - b),
    source,
  );
  const diagnostics = problems.sort((a, b) => a.start - b.start || a.end - b.end).map((problem) => toDiagnostic(problem, source));
  return { tree: { file, statements }, diagnostics, includes };
}

/** NUL bytes are in no text; the replacement character stands where the bytes were not UTF-8. */
function findUnreadable(text: string): { problem: Problem; stop: boolean } | undefined {
  const nul = text.indexOf("\0");
  if (nul >= 0) {
    return {
      stop: true,
      problem: {
        code: "not-text",
        message: "This file is not text.",
        start: nul,
        end: nul + 1,
        hint: "A drawing is a plain text file, usually ending in .sprung.",
      },
    };
  }
  const broken = text.indexOf("\ufffd");
  if (broken < 0) return undefined;
  return {
    stop: false,
    problem: {
      code: "not-text",
      message: "A character here is not UTF-8.",
      start: broken,
      end: broken + 1,
      hint: "Save the file as UTF-8.",
    },
  };
}

function toDiagnostic(problem: Problem, source: SourceText): Diagnostic {
  const { code, message, start, end, hint, seeAlso, data } = problem;
  return {
    code,
    severity: "error",
    message,
    at: source.range(start, end),
    ...(hint && { hint }),
    ...(seeAlso && { seeAlso: [{ message: seeAlso.message, at: source.range(seeAlso.start, seeAlso.end) }] }),
    ...(data && { data }),
  };
}

/** Marks every statement in which a problem stands, the innermost ones and the blocks around them. The places are in order. */
function markIncomplete(statements: readonly Markable[], places: readonly number[], source: SourceText): void {
  for (const statement of statements) {
    const start = source.offset(statement.at.line, statement.at.column);
    let low = 0;
    let high = places.length;
    while (low < high) {
      const middle = (low + high) >> 1;
      if ((places[middle] as number) < start) low = middle + 1;
      else high = middle;
    }
    const first = places[low];
    if (first === undefined || first > source.offset(statement.at.endLine, statement.at.endColumn)) continue;
    statement.incomplete = true;
    if (statement.statements) markIncomplete(statement.statements, places, source);
  }
}

type Markable = Located & { statements?: readonly Markable[] };
