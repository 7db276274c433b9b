import { mkdirSync, renameSync, rmdirSync, rmSync, statSync, writeFileSync } from "node:fs";
import { dirname, join, resolve } from "node:path";
import type { OutputFile } from "./desk.js";

/**
 * Writes all files into a folder or leaves it as it was: each goes beside its place under a temporary name first, and all
 * are then renamed. Runs in one go without giving way, so an interrupt comes before or after it, never between.
 * @returns the reason in a sentence if nothing was written
 */
export function writeWhole(folder: string, files: readonly OutputFile[]): string | undefined {
  const made: string[] = [];
  const waiting: string[] = [];
  // With a listener the signal waits for the event loop; without one it would end the process between two files.
  const holdBack = () => {};
  const signals = ["SIGINT", "SIGTERM", "SIGHUP"] as const;
  for (const signal of signals) process.on(signal, holdBack);
  try {
    makeFolder(folder, made);
    for (const { name } of files) {
      if (isFolder(join(folder, name))) return `Cannot write ${join(folder, name)}: a folder stands in its place.`;
    }
    for (const { name, content } of files) {
      const temporary = join(folder, `.${name}.${process.pid}.part`);
      waiting.push(temporary);
      writeFileSync(temporary, content, { flag: "wx" });
    }
    for (const [index, { name }] of files.entries()) renameSync(waiting[index] as string, join(folder, name));
    made.length = 0;
    return undefined;
  } catch (error) {
    return `Cannot write to ${folder}: ${reason(error as NodeJS.ErrnoException)}.`;
  } finally {
    for (const temporary of waiting) leave(() => rmSync(temporary, { force: true }));
    // A folder somebody has put something into meanwhile stays.
    for (const path of made.reverse()) leave(() => rmdirSync(path));
    for (const signal of signals) process.off(signal, holdBack);
  }
}

/** Makes a folder and those above it, noting the new ones so that they can be taken away again. */
function makeFolder(folder: string, made: string[]): void {
  const path = resolve(folder);
  if (isFolder(path)) return;
  if (dirname(path) !== path) makeFolder(dirname(path), made);
  mkdirSync(path);
  made.push(path);
}

function isFolder(path: string): boolean {
  try {
    return statSync(path, { throwIfNoEntry: false })?.isDirectory() ?? false;
  } catch {
    return false;
  }
}

/** Tidies up as far as that goes: what cannot be removed was never there, or is no longer ours. */
function leave(remove: () => void): void {
  try {
    remove();
  } catch {}
}

const reasons: Record<string, string> = {
  EACCES: "no permission",
  EPERM: "not permitted",
  EROFS: "the file system is read-only",
  ENOSPC: "the disk is full",
  EFBIG: "the file is larger than is allowed",
  EDQUOT: "the disk quota is used up",
  ENOTDIR: "a file stands where a folder is needed",
  EEXIST: "a file stands where a folder is needed",
  ENAMETOOLONG: "the name is too long",
  ENOENT: "the folder is missing",
  EMFILE: "too many files are open",
};

function reason(error: NodeJS.ErrnoException): string {
  return reasons[error.code ?? ""] ?? error.message;
}
