import type { World } from "../world.js";

/** One file to be written. */
export interface OutputFile {
  name: string;
  content: string | Uint8Array;
}

/** Everything a command may touch: the world it reads, and where it writes and talks. Tests give one in memory. */
export interface Desk extends World {
  /** All of standard input, read once. */
  readInput(): Promise<Uint8Array>;
  /** Results. */
  out(text: string): void;
  /** Messages. */
  err(text: string): void;
  /** Whether the two are terminals. */
  terminal: { out: boolean; err: boolean };
  /** Columns of the terminal that takes the results, if it is one. */
  columns?: number;
  environment: Readonly<Record<string, string | undefined>>;
  /** Milliseconds on a clock that only runs forward, for deciding whether work is long enough to tell about. */
  now(): number;
  /** One spelling for each file, however a path leads to it; works for files not there yet. */
  identify(path: string): string;
  /** Names in a folder, empty if there is none. */
  list(folder: string): string[];
  /** Writes all files into a folder, which is made if missing, or none of them: then it gives the reason as a sentence. */
  writeWhole(folder: string, files: readonly OutputFile[]): string | undefined;
}
