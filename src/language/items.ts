import type { Item, Word } from "./tree.js";

/**
 * An item read as a name or potential: a word, or a value written without a space, as in `2A`, `1S` or the potential `0V`, which
 * looks like a quantity until one knows that a name is due.
 */
export function nameOf(item: Item | undefined): Word | undefined {
  if (item?.kind === "word") return { text: item.text, at: item.at };
  if (item?.kind === "number" && /^\d+$/.test(item.text)) return { text: item.text, at: item.at };
  if (item?.kind === "quantity" && /^[\p{L}\p{N}_]+$/u.test(item.text)) return { text: item.text, at: item.at };
  return undefined;
}
