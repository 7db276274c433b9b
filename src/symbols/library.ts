import type { World } from "../world.js";
import { readSymbol } from "./svg-reader.js";
import type { Symbol } from "./symbol.js";

/** The symbols carried with the program, by name: the file's path below `symbols/` without its ending. */
export interface SymbolLibrary {
  /**
   * The symbol of that name, read when first asked for.
   * @throws Error naming the file and what is wrong with it; a missing or broken file is a broken installation
   */
  get(name: string): Symbol;
  /** All names, sorted. */
  names(): string[];
}

export const symbolFolders = ["fluid", "international", "north-american"] as const;

/** Opens the carried symbols. Nothing is read yet. */
export function openSymbols(world: World): SymbolLibrary {
  const known = new Map<string, Symbol>();
  const decoder = new TextDecoder();
  return {
    get(name) {
      let symbol = known.get(name);
      if (!symbol) {
        symbol = read(name);
        known.set(name, symbol);
      }
      return symbol;
    },
    names() {
      return symbolFolders.flatMap((folder) =>
        world
          .listAssets(`symbols/${folder}`)
          .filter((file) => file.endsWith(".svg"))
          .map((file) => `${folder}/${file.slice(0, -".svg".length)}`)
          .sort(),
      );
    },
  };

  function read(name: string): Symbol {
    const file = `symbols/${name}.svg`;
    const text = decoder.decode(world.readAsset(file));
    try {
      return readSymbol(text, name);
    } catch (error) {
      throw new Error(`${file}: ${error instanceof Error ? error.message : String(error)}`);
    }
  }
}
