import type { World } from "../world.js";
import type { Diagnostic, SourceRange } from "./diagnostic.js";
import { parse } from "./parse.js";
import { withoutMark } from "./source-text.js";
import type { Statement, Tree } from "./tree.js";

/**
 * Reads a drawing with the files it includes. An include's path is relative to the file it stands in and stays within the folder
 * of the first file. A file included twice is read once, where it is first asked for. `sources` holds the text of every file read,
 * by the name its diagnostics carry.
 */
export async function readDrawing(
  path: string,
  world: World,
): Promise<{ tree: Tree; diagnostics: Diagnostic[]; sources: Map<string, string> }> {
  const reading: Reading = { world, root: folderOf(path), diagnostics: [], sources: new Map(), open: [] };
  const start: SourceRange = { file: path, line: 1, column: 1, endLine: 1, endColumn: 1 };
  const statements = await readFile(path, start, undefined, reading);
  return { tree: { file: path, statements }, diagnostics: reading.diagnostics, sources: reading.sources };
}

interface Reading {
  world: World;
  /** The folder no include leaves, with its `/`, or empty. */
  root: string;
  diagnostics: Diagnostic[];
  sources: Map<string, string>;
  /** Files being read, from the first to the present, each with the place that includes it. */
  open: { file: string; at: SourceRange }[];
}

/** Far beyond any drawing; a chain this long was made by a mistake and would only be slow. */
const longestChain = 100;

async function readFile(file: string, at: SourceRange, written: string | undefined, reading: Reading): Promise<Statement[]> {
  const loop = reading.open.findIndex((outer) => outer.file === file);
  if (loop >= 0 || reading.open.length >= longestChain) {
    const chain = reading.open.slice(loop >= 0 ? loop + 1 : 0).slice(0, 10);
    report(reading, "include-loop", at, loop >= 0 ? `"${written}" includes itself.` : `Includes stand more than ${longestChain} deep.`, {
      hint: "Leave out one of the includes.",
      seeAlso: chain.map((step) => ({ message: `"${step.file}" is included here.`, at: step.at })),
    });
    return [];
  }
  if (reading.sources.has(file)) return [];
  const read = await (written === undefined ? reading.world.readText(file) : reading.world.readText(file, reading.root));
  if ("problem" in read) {
    const { problem } = read;
    if (problem === "outside") {
      outside(written ?? file, at, reading);
      return [];
    }
    const name = written ?? file;
    if (written === undefined) reading.sources.set(file, "");
    const code = problem === "not-text" ? "not-text" : written === undefined ? `file-${problem}` : `include-${problem}`;
    report(
      reading,
      code,
      at,
      unreadable(name, problem),
      problem === "not-text" ? { hint: "A drawing is a plain text file in UTF-8, usually ending in .sprung." } : {},
    );
    return [];
  }
  reading.sources.set(file, withoutMark(read.text));
  const { tree, diagnostics, includes } = parse(read.text, file);
  for (const diagnostic of diagnostics) reading.diagnostics.push(diagnostic);
  reading.open.push({ file, at });
  const statements: Statement[] = [];
  let done = 0;
  for (const include of includes) {
    for (; done < include.index; done++) statements.push(tree.statements[done] as Statement);
    const target = within(reading.root, folderOf(file), include.path);
    if (target === undefined) outside(include.path, include.at, reading);
    else for (const statement of await readFile(target, include.at, include.path, reading)) statements.push(statement);
  }
  for (; done < tree.statements.length; done++) statements.push(tree.statements[done] as Statement);
  reading.open.pop();
  return statements;
}

function outside(path: string, at: SourceRange, reading: Reading): void {
  report(reading, "include-outside-folder", at, `"${path}" leads out of the folder of the drawing.`, {
    hint: `Write a path below ${reading.root === "" ? "the drawing's folder" : reading.root}, with "/" between folders.`,
  });
}

function unreadable(name: string, problem: "missing" | "unreadable" | "not-text" | "folder"): string {
  if (problem === "missing") return `There is no file "${name}".`;
  if (problem === "folder") return `"${name}" is a folder.`;
  if (problem === "not-text") return `"${name}" is not text.`;
  return `"${name}" cannot be read.`;
}

function report(reading: Reading, code: string, at: SourceRange, message: string, more: Partial<Diagnostic> = {}): void {
  reading.diagnostics.push({ code, severity: "error", message, at, ...more });
}

/** `a/b/c.sprung` → `a/b/`; empty for a bare file name. Backslashes of a path given on the command line count as well. */
function folderOf(path: string): string {
  return path.slice(0, Math.max(path.lastIndexOf("/"), path.lastIndexOf("\\")) + 1);
}

/** The file an include means, or undefined if that is not below the root folder. */
function within(root: string, folder: string, path: string): string | undefined {
  if (path.includes("\\") || path.includes("\0") || path.startsWith("/") || path.startsWith("~") || /^[a-zA-Z][a-zA-Z0-9+.-]*:/.test(path))
    return undefined;
  const steps: string[] = folder.slice(root.length).split("/").filter(Boolean);
  for (const step of path.split("/")) {
    if (step === "" || step === ".") continue;
    if (step !== "..") steps.push(step);
    else if (steps.pop() === undefined) return undefined;
  }
  return steps.length > 0 ? root + steps.join("/") : undefined;
}
