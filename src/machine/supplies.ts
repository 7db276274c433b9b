import type { Declaration, Word } from "../language/tree.js";
import type { Supply } from "./model.js";
import { type PropertyTable, readerOf, readProperties } from "./reader.js";
import type { Report } from "./report.js";

interface SupplyDraft {
  supply: Supply;
  rails?: [Word, Word];
  current?: Word;
  fuse?: Word;
}

const table: PropertyTable<SupplyDraft> = {
  words: {
    AC: (draft, _read, word) => {
      draft.current = word;
    },
    DC: (draft, _read, word) => {
      draft.current = word;
    },
    rails: (draft, read, word) => {
      const live = read.name(word, "the live rail and the return rail, as in: rails L+ M");
      const back = live && read.name(word, "two rails, the live one and the return one");
      if (!live || !back) return;
      if (live.text === back.text) {
        read.report.error("rails-alike", back.at, `The return rail must have another name than the live rail ${live.text}.`);
        return;
      }
      draft.rails = [live, back];
    },
    fuse: (draft, read, word) => {
      draft.fuse = read.name(word, "the fuse and its rating, as in: fuse FU1 4 A");
      const rating = draft.fuse && read.positive(word, "current");
      if (draft.fuse && rating) draft.supply.fuse = { name: draft.fuse.text, rating: rating.text };
    },
  },
  bare: {
    voltage: (draft, quantity) => {
      draft.supply.voltage = quantity;
    },
    frequency: (draft, quantity) => {
      draft.supply.frequency = quantity;
    },
  },
};

/** Rails when the text names none: IEC 60445 names for direct current, the trade's L1 and L2 for alternating current. */
function usualRails(current: Supply["current"]): [string, string] {
  return current === "DC" ? ["L+", "M"] : ["L1", "L2"];
}

export interface ReadSupply {
  supply: Supply;
  /** The fuse's designation, to be claimed among the names. */
  fuse?: Word;
}

export function readSupply(declaration: Declaration & { name: Word }, report: Report): ReadSupply {
  const { name } = declaration;
  const supply: Supply = { name: name.text, current: "AC", rails: usualRails("AC"), at: name.at };
  const draft: SupplyDraft = { supply };
  readProperties(draft, readerOf(declaration, report), "a supply", table);
  supply.current = (draft.current?.text ?? (draft.rails?.[0].text.includes("+") ? "DC" : "AC")) as Supply["current"];
  supply.rails = draft.rails ? [draft.rails[0].text, draft.rails[1].text] : usualRails(supply.current);
  return { supply, fuse: draft.fuse };
}

/** What feeds a ladder in a drawing that declares no supply. */
export function unsaidSupply(at: Supply["at"]): Supply {
  return { name: "", current: "AC", rails: usualRails("AC"), at };
}
