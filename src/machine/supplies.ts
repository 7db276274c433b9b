import type { Declaration, Word } from "../language/tree.js";
import type { Device, Supply } from "./model.js";
import type { Names } from "./names.js";
import { type PropertyTable, readerOf, readProperties } from "./reader.js";
import { type Report, withArticle } from "./report.js";

export interface SupplyDraft {
  supply: Supply;
  rails?: [Word, Word];
  current?: Word;
  /** The fuse's designation, to be claimed among the names. */
  fuse?: Word;
  /** The transformer or power supply, to be looked up when everything is declared. */
  from?: Word;
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
    from: (draft, read, word) => {
      draft.from = read.name(word, "the transformer or power supply the rails come from, as in: from G1");
    },
    excepted: ({ supply }) => {
      supply.excepted = true;
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

export function readSupply(declaration: Declaration & { name: Word }, report: Report): SupplyDraft {
  const { name } = declaration;
  const supply: Supply = { name: name.text, current: "AC", rails: usualRails("AC"), at: name.at };
  const draft: SupplyDraft = { supply };
  readProperties(draft, readerOf(declaration, report), "a supply", table);
  settle(draft);
  return draft;
}

/** Alternating current unless the text, the live rail's name or the source says otherwise. */
function settle({ supply, current, rails }: SupplyDraft, source?: "AC" | "DC"): void {
  supply.current = (current?.text ?? (rails?.[0].text.includes("+") ? "DC" : (source ?? "AC"))) as Supply["current"];
  supply.rails = rails ? [rails[0].text, rails[1].text] : usualRails(supply.current);
}

/** Kinds of device whose secondary can be the rails of a ladder. */
const sources: readonly Device["kind"][] = ["transformer", "power-supply", "rectifier"];

/** Finds what the rails come from. What the supply does not say of itself, its source says. */
export function linkSupplies(drafts: readonly SupplyDraft[], devices: ReadonlyMap<string, Device>, names: Names, report: Report): void {
  for (const draft of drafts) {
    const { supply, from } = draft;
    if (!from || names.isLost(from.text)) continue;
    const source = devices.get(from.text);
    const kind = names.kindOf(from.text);
    if (source && sources.includes(source.kind)) {
      supply.from = source.name;
      const { secondary } = source.conversion ?? {};
      supply.voltage ??= secondary?.voltage;
      settle(draft, secondary?.current);
    } else if (kind !== undefined) {
      report.error(
        "wrong-kind",
        from.at,
        `${from.text} is ${withArticle(kind)}; rails come from a transformer, power-supply or rectifier.`,
      );
    } else {
      names.unknown(
        from,
        (other) => (sources as readonly string[]).includes(other),
        `Declare it, as in "power-supply ${from.text} primary 400 V secondary 24 V DC".`,
      );
    }
  }
}

/** What feeds a ladder in a drawing that declares no supply. */
export function unsaidSupply(at: Supply["at"]): Supply {
  return { name: "", current: "AC", rails: usualRails("AC"), at };
}
