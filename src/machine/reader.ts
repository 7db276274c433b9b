import type { SourceRange } from "../language/diagnostic.js";
import { nameOf } from "../language/items.js";
import type { Dimension, Quantity } from "../language/quantity.js";
import type { Declaration, Item, Word } from "../language/tree.js";
import { unitsOf } from "../language/units.js";
import { didYouMean, listed, type Report } from "./report.js";

/** Reads the items of one declaration from left to right, and says plainly what is missing or wrong. */
export class ItemReader {
  private index = 0;

  private readonly items: Item[];

  constructor(
    items: readonly Item[],
    readonly report: Report,
    /** What is being read, for messages: `CLAMP` or `this supply`. */
    readonly owner: string,
    /** Where the declaration stands, for what is missing altogether. */
    readonly at: SourceRange,
  ) {
    this.items = [...items];
  }

  get done(): boolean {
    return this.index >= this.items.length;
  }

  peek(ahead = 0): Item | undefined {
    return this.items[this.index + ahead];
  }

  next(): Item | undefined {
    return this.items[this.index++];
  }

  /** Whether the next item is one of these words; it is taken if so. */
  take(...words: string[]): string | undefined {
    const item = this.peek();
    if (item?.kind !== "word" || !words.includes(item.text)) return undefined;
    this.index++;
    return item.text;
  }

  /** A value with a unit for the property just read. What stands in its place is taken only if it is a number. */
  quantity(property: Word, ...dimensions: [Dimension, ...Dimension[]]): Quantity | undefined {
    const item = this.peek();
    if (item?.kind === "quantity") {
      this.index++;
      return this.checked(item, dimensions, `"${property.text}"`);
    }
    if (item?.kind === "number") {
      this.index++;
      this.unitMissing(item, dimensions, `"${property.text}"`);
      return undefined;
    }
    this.missing(property, `a value in ${listed(dimensions.flatMap(unitsOf))}`);
    return undefined;
  }

  /** Like `quantity`, but the value must be greater than zero. */
  positive(property: Word, ...dimensions: [Dimension, ...Dimension[]]): Quantity | undefined {
    const item = this.peek();
    const quantity = this.quantity(property, ...dimensions);
    if (!quantity || !item || quantity.value > 0) return quantity;
    this.report.error("value-out-of-range", item.at, `"${property.text}" must be more than zero.`);
    return undefined;
  }

  /** The quantity of an item if its unit suits, else an error naming the units that do. */
  checked(item: Item & { kind: "quantity" }, dimensions: readonly Dimension[], what: string): Quantity | undefined {
    if (dimensions.includes(item.quantity.dimension)) return item.quantity;
    const units = dimensions.flatMap(unitsOf);
    this.report.error("unit-wrong", item.at, `${what} takes ${listed(units)}, not ${item.quantity.unit}.`, { data: { units } });
    return undefined;
  }

  unitMissing(item: Item & { kind: "number" }, dimensions: readonly Dimension[], what: string): void {
    const units = dimensions.flatMap(unitsOf);
    this.report.error("unit-missing", item.at, `${what} needs a unit: ${listed(units)}.`, {
      hint: `Write for example ${item.text} ${units[0]}.`,
      data: { number: item.value, units },
    });
  }

  /** A whole number from nought up. */
  count(property: Word): number | undefined {
    const item = this.peek();
    if (item?.kind !== "number" && item?.kind !== "quantity") {
      this.missing(property, "a whole number");
      return undefined;
    }
    this.index++;
    if (item.kind === "number" && Number.isInteger(item.value) && item.value >= 0 && item.value <= 999) return item.value;
    this.report.error("value-wrong", item.at, `"${property.text}" takes a whole number.`);
    return undefined;
  }

  /** A designation or potential: a bare word, a number standing as one, or a value written in one, such as `0V`. */
  name(property: Word, what: string): Word | undefined {
    this.partNames();
    const name = nameOf(this.peek());
    if (name) {
      this.index++;
      return name;
    }
    this.missing(property, what);
    return undefined;
  }

  /** What a name, a `NAME.part` or a `@point` stands for; a value written like a name is one. */
  reference(): Item | undefined {
    const item = this.next();
    const name = nameOf(item);
    return name ? { kind: "word", ...name } : item;
  }

  /** `1 N` looks like a value; where names are due it is two of them. */
  private partNames(): void {
    const item = this.peek();
    if (item?.kind !== "quantity") return;
    const [first, second, more] = item.text.split(" ");
    if (first === undefined || second === undefined || more !== undefined) return;
    const { at } = item;
    const [before, behind] = [first, second].map((text) => text.length) as [number, number];
    const number: Item = { kind: "number", value: Number(first), text: first, at: { ...at, endColumn: at.column + before } };
    this.items.splice(this.index, 1, number, { kind: "word", text: second, at: { ...at, column: at.endColumn - behind } });
  }

  text(property: Word): Word | undefined {
    const item = this.peek();
    if (item?.kind === "text") {
      this.index++;
      return { text: item.text, at: item.at };
    }
    this.missing(property, 'a text in "double quotes"');
    return undefined;
  }

  /** One of a few words. */
  choice<Choice extends string>(property: Word, choices: readonly Choice[]): Choice | undefined {
    const item = this.peek();
    if (item?.kind === "word") {
      this.index++;
      if ((choices as readonly string[]).includes(item.text)) return item.text as Choice;
      this.report.error(
        "value-unknown",
        item.at,
        `"${property.text}" takes ${listed(choices)}, not "${item.text}".`,
        didYouMean(item.text, choices),
      );
      return undefined;
    }
    this.missing(property, listed(choices));
    return undefined;
  }

  /** `hint` says what the property takes. */
  missing(property: Word, expected: string): void {
    this.report.error("value-missing", property.at, `"${property.text}" is followed by ${expected}.`);
  }
}

/** How to read the items of one kind of declaration into a draft of it. */
export interface PropertyTable<Draft> {
  /** By the word a property begins with. The word itself has been taken. */
  words: Record<string, (draft: Draft, read: ItemReader, word: Word) => void>;
  /** Values that stand without a word of their own: `6 bar` at an air supply. */
  bare?: Partial<Record<Dimension, (draft: Draft, quantity: Quantity, at: SourceRange) => void>>;
  /** What no other reader knows; gives whether it took the item. */
  other?: (draft: Draft, item: Item, read: ItemReader) => boolean;
  /** Words that `other` takes, for guessing what was meant. */
  values?: readonly string[];
  /** Words the language has for this kind that this edition does not draw yet. */
  later?: readonly string[];
  /** Words that may be written more than once. */
  repeatable?: readonly string[];
}

/** Reads every item of a declaration; what no table knows is reported, never skipped in silence. */
export function readProperties<Draft>(draft: Draft, read: ItemReader, kind: string, table: PropertyTable<Draft>): void {
  const seen = new Map<string, Word>();
  for (;;) {
    const item = read.next();
    if (item === undefined) return;
    if (item.kind === "word" && Object.hasOwn(table.words, item.text)) {
      const first = seen.get(item.text);
      if (first && !table.repeatable?.includes(item.text)) {
        read.report.error("property-twice", item.at, `"${item.text}" is already given.`, {
          seeAlso: [{ message: "First given here.", at: first.at }],
        });
      }
      seen.set(item.text, item);
      table.words[item.text]?.(draft, read, item);
      continue;
    }
    if (table.other?.(draft, item, read)) continue;
    if (item.kind === "quantity") readBare(draft, item, read, table);
    else if (item.kind === "number") readBareNumber(item, read, table);
    else if (item.kind === "word" && table.later?.includes(item.text)) {
      read.report.error("not-yet-supported", item.at, `"${item.text}" is not yet supported.`);
      skipValues(read, table);
    } else unknownProperty(item, read, kind, table);
  }
}

function readBare<Draft>(draft: Draft, item: Item & { kind: "quantity" }, read: ItemReader, table: PropertyTable<Draft>): void {
  const taker = table.bare?.[item.quantity.dimension];
  if (taker) {
    taker(draft, item.quantity, item.at);
    return;
  }
  const units = bareUnits(table);
  if (units.length > 0) read.checked(item, Object.keys(table.bare ?? {}) as Dimension[], read.owner);
  else read.report.error("unknown-property", item.at, `${read.owner} takes no value here: say what ${item.text} is.`);
}

function readBareNumber<Draft>(item: Item & { kind: "number" }, read: ItemReader, table: PropertyTable<Draft>): void {
  const dimensions = Object.keys(table.bare ?? {}) as Dimension[];
  if (dimensions.length > 0) read.unitMissing(item, dimensions, read.owner);
  else read.report.error("unknown-property", item.at, `${read.owner} takes no number here: say what ${item.text} is.`);
}

function bareUnits<Draft>(table: PropertyTable<Draft>): string[] {
  return (Object.keys(table.bare ?? {}) as Dimension[]).flatMap(unitsOf);
}

function unknownProperty<Draft>(item: Item, read: ItemReader, kind: string, table: PropertyTable<Draft>): void {
  const written = item.kind === "point" ? `@${item.name}` : item.kind === "quantity" ? item.text : item.text;
  const words = Object.keys(table.words);
  const guess =
    item.kind === "text" && Object.hasOwn(table.words, "note")
      ? { hint: "A function text stands once, directly behind the designation; any other text behind the word that says what it is." }
      : item.kind === "word"
        ? didYouMean(item.text, [...words, ...(table.values ?? [])])
        : {};
  read.report.error("unknown-property", item.at, `"${written}" is not a property of ${kind}.`, {
    ...guess,
    hint: guess.hint ?? (words.length > 0 ? `It may have ${listed([...words, ...(table.values ?? [])].sort(), "and")}.` : undefined),
  });
  // The values of a word nobody knows say nothing either: one message is enough.
  if (item.kind === "word") skipValues(read, table);
}

/** Passes over what follows a word nobody knows, up to the next that somebody does. */
function skipValues<Draft>(read: ItemReader, table: PropertyTable<Draft>): void {
  for (;;) {
    const item = read.peek();
    if (item === undefined || item.kind === "symbol") return;
    if (item.kind === "word" && (Object.hasOwn(table.words, item.text) || table.values?.includes(item.text) || item.text.includes("/")))
      return;
    if (item.kind === "quantity" && table.bare?.[item.quantity.dimension]) return;
    read.next();
  }
}

/** A reader over a declaration's items. */
export function readerOf(declaration: Declaration, report: Report): ItemReader {
  const word = declaration.name ?? declaration.keyword;
  return new ItemReader(declaration.items, report, declaration.name?.text ?? `This ${declaration.keyword.text}`, word.at);
}
