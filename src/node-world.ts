import { readdirSync, readFileSync } from "node:fs";
import { readFile, realpath } from "node:fs/promises";
import { sep } from "node:path";
import { fileURLToPath } from "node:url";
import type { World } from "./world.js";

/** The folder the package was installed in; this file stands one level below it, both as source and as built. */
const home = new URL("../", import.meta.url);

/** The world on disk: the user's files below the working folder, and the symbols and templates carried with the package. */
export const nodeWorld: World = {
  async readText(path, within) {
    try {
      if (within !== undefined) {
        const [file, folder] = await Promise.all([realpath(path), realpath(within || ".")]);
        if (!file.startsWith(folder.endsWith(sep) ? folder : folder + sep)) return { problem: "outside" };
      }
      return decodeText(await readFile(path));
    } catch (error) {
      const code = (error as NodeJS.ErrnoException).code;
      if (code === "EISDIR") return { problem: "folder" };
      return { problem: code === "ENOENT" || code === "ENOTDIR" ? "missing" : "unreadable" };
    }
  },
  readAsset(path) {
    return readFileSync(fileURLToPath(new URL(path, home)));
  },
  listAssets(folder) {
    return readdirSync(fileURLToPath(new URL(folder, home)), { withFileTypes: true })
      .filter((entry) => entry.isFile())
      .map((entry) => entry.name)
      .sort();
  },
};

/** The bytes as text, if they are UTF-8 and hold no NUL, which no text editor writes. */
export function decodeText(bytes: Uint8Array): { text: string } | { problem: "not-text" } {
  if (bytes.includes(0)) return { problem: "not-text" };
  try {
    return { text: new TextDecoder("utf-8", { fatal: true }).decode(bytes) };
  } catch {
    return { problem: "not-text" };
  }
}
