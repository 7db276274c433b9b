import { readdirSync, readFileSync } from "node:fs";
import type { World } from "../../src/world.js";

const root = new URL("../../", import.meta.url);

/** The files carried with the program, and no others. */
export const assets: World = {
  readText: async () => ({ problem: "missing" }),
  readAsset: (path) => readFileSync(new URL(path, root)),
  listAssets: (folder) => readdirSync(new URL(folder, root)).sort(),
};
