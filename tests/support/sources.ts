import { readdirSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { fileURLToPath } from "node:url";

/** The project's folder. */
export const root = fileURLToPath(new URL("../../", import.meta.url));

/** Files below a folder of the project whose names end so, by path from the project's folder, sorted. */
export function filesBelow(folder: string, ...endings: string[]): string[] {
  return readdirSync(join(root, folder), { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile() && endings.some((ending) => entry.name.endsWith(ending)))
    .map((entry) => join(entry.parentPath, entry.name).slice(root.length))
    .sort();
}

export function readText(path: string): string {
  return readFileSync(join(root, path), "utf8");
}
