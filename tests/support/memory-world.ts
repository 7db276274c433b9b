import { posix } from "node:path";
import type { Desk, OutputFile } from "../../src/cli/desk.js";
import { decodeText, nodeWorld } from "../../src/node-world.js";

export interface MemoryDesk extends Desk {
  /** All files, by path: those given and those written. */
  files: Map<string, string | Uint8Array>;
  /** What was written since, by path. */
  written: Map<string, string | Uint8Array>;
  /** What was said so far. */
  stdout: string;
  stderr: string;
}

export interface MemoryOptions {
  /** Standard input. */
  input?: string | Uint8Array;
  environment?: Record<string, string>;
  terminal?: { out: boolean; err: boolean };
  /** Milliseconds that pass between two looks at the clock. */
  pace?: number;
  /** Folders nothing can be written to. */
  readOnly?: string[];
}

/** A world, and a whole desk around it, in memory. Symbols and templates are the project's own. */
export function memoryWorld(given: Record<string, string | Uint8Array> = {}, options: MemoryOptions = {}): MemoryDesk {
  const files = new Map(Object.entries(given).map(([path, content]) => [posix.normalize(path), content]));
  const bytes = (content: string | Uint8Array) => (typeof content === "string" ? new TextEncoder().encode(content) : content);
  let time = 0;
  const desk: MemoryDesk = {
    files,
    written: new Map(),
    stdout: "",
    stderr: "",
    async readText(path) {
      const name = posix.normalize(path);
      const content = files.get(name);
      if (content !== undefined) return decodeText(bytes(content));
      const isFolder = [...files.keys()].some((file) => file.startsWith(`${name}/`));
      return { problem: isFolder ? "folder" : "missing" };
    },
    readAsset: nodeWorld.readAsset,
    listAssets: nodeWorld.listAssets,
    readInput: async () => bytes(options.input ?? ""),
    out: (text) => {
      desk.stdout += text;
    },
    err: (text) => {
      desk.stderr += text;
    },
    terminal: options.terminal ?? { out: false, err: false },
    environment: options.environment ?? {},
    now: () => {
      time += options.pace ?? 0;
      return time;
    },
    identify: (path) => posix.resolve("/", path),
    list: (folder) =>
      [...files.keys()].filter((path) => posix.dirname(path) === posix.normalize(folder)).map((path) => posix.basename(path)),
    writeWhole(folder, output: readonly OutputFile[]) {
      if (options.readOnly?.includes(folder)) return `Cannot write to ${folder}: no permission.`;
      for (const { name, content } of output) {
        const path = posix.join(folder, name);
        files.set(path, content);
        desk.written.set(path, content);
      }
      return undefined;
    },
  };
  return desk;
}
