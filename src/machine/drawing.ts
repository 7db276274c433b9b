import type { SourceRange } from "../language/diagnostic.js";
import type { DrawingBlock, DrawingField, Item, Word } from "../language/tree.js";
import type { DrawingInfo, PaperName } from "./model.js";
import { didYouMean, listed, type Report } from "./report.js";

const papers: readonly PaperName[] = ["A4", "A3", "A2", "A1", "A0", "ANSI-A", "ANSI-B", "ANSI-C", "ANSI-D", "ANSI-E"];

export const conventions: readonly DrawingInfo["convention"][] = ["north-american", "international"];

type FieldReader = (info: DrawingInfo, field: DrawingField, report: Report) => void;

/** The fields of a drawing block, most of them the data of an ISO 7200 title block. */
const fields: Record<string, FieldReader> = {
  number: text("number"),
  owner: text("owner"),
  creator: text("creator"),
  "approved-by": text("approvedBy"),
  department: text("department"),
  "document-type": text("documentType"),
  status: text("status"),
  date: (info, field, report) => {
    const date = oneValue(field, report);
    if (date && checkDate(date, report)) info.date = date.text;
  },
  language: text("language"),
  template: text("template"),
  revision: (info, field, report) => {
    const [index, date, description, extra] = field.items;
    if (!index || !date) return missing(field, 'an index, a date and a text, as in: revision A 2026-03-02 "First issue"', report);
    const day = { text: wordOf(date), at: date.at };
    if (!checkDate(day, report)) return;
    if (extra) tooMuch(field, extra, report);
    info.revisions.push({ index: wordOf(index), date: day.text, text: description ? wordOf(description) : "" });
  },
  note: (info, field, report) => {
    const note = oneValue(field, report);
    if (note) info.notes.push(note.text);
  },
  paper: choice("paper", papers),
  convention: choice("convention", conventions),
  "line-numbers": choice("lineNumbers", ["by-sheet", "running"]),
  "wire-numbers": choice("wireNumbers", ["by-line", "running"]),
  units: choice("units", ["metric", "inch"]),
};

type TextField = "number" | "owner" | "creator" | "approvedBy" | "department" | "documentType" | "status" | "language" | "template";

function text(name: TextField): FieldReader {
  return (info, field, report) => {
    const value = oneValue(field, report);
    if (value) info[name] = value.text;
  };
}

type ChoiceField = "paper" | "convention" | "lineNumbers" | "wireNumbers" | "units";

function choice<Name extends ChoiceField>(name: Name, choices: readonly DrawingInfo[Name][]): FieldReader {
  return (info, field, report) => {
    const value = oneValue(field, report);
    if (!value) return;
    if ((choices as readonly string[]).includes(value.text)) info[name] = value.text as DrawingInfo[Name];
    else {
      report.error(
        "value-unknown",
        value.at,
        `"${field.name.text}" takes ${listed(choices)}, not "${value.text}".`,
        didYouMean(value.text, choices),
      );
    }
  };
}

function oneValue(field: DrawingField, report: Report): Word | undefined {
  const [value, extra] = field.items;
  if (!value) {
    missing(field, "a value", report);
    return undefined;
  }
  if (extra) tooMuch(field, extra, report);
  return { text: wordOf(value), at: value.at };
}

function missing(field: DrawingField, what: string, report: Report): void {
  report.error("value-missing", field.name.at, `"${field.name.text}" is followed by ${what}.`);
}

function tooMuch(field: DrawingField, extra: Item, report: Report): void {
  const another = extra.kind === "word" && Object.hasOwn(fields, extra.text);
  const takes = field.name.text === "revision" ? "an index, a date and one text" : "one value";
  report.error("value-extra", extra.at, `"${field.name.text}" takes ${takes}.`, {
    hint: another ? `Put "${extra.text}" on a line of its own.` : 'Words that belong together stand in "double quotes".',
  });
}

function wordOf(item: Item): string {
  return item.kind === "point" ? `@${item.name}` : item.text;
}

function checkDate({ text, at }: Word, report: Report): boolean {
  const match = /^(\d{4})-(\d\d)-(\d\d)$/.exec(text);
  const [year, month, day] = (match ?? []).slice(1).map(Number);
  if (year !== undefined && month !== undefined && day !== undefined && month >= 1 && month <= 12) {
    const leap = (year % 4 === 0 && year % 100 !== 0) || year % 400 === 0;
    const days = [31, leap ? 29 : 28, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31][month - 1] as number;
    if (day >= 1 && day <= days) return true;
  }
  report.error("value-wrong", at, `"${text}" is not a date: write year, month and day, as in 2026-03-02.`);
  return false;
}

/** What a drawing has that says nothing of itself. */
export function emptyDrawingInfo(): DrawingInfo {
  return {
    title: "",
    number: "",
    owner: "",
    creator: "",
    approvedBy: "",
    department: "",
    documentType: "Circuit diagram",
    status: "",
    date: "",
    language: "en",
    revisions: [],
    notes: [],
    convention: "north-american",
    paper: "A3",
    template: "standard",
    lineNumbers: "by-sheet",
    wireNumbers: "running",
    units: "metric",
  };
}

/** Title-block data with a sensible default for everything the text leaves out. */
export function readDrawingInfo(blocks: readonly DrawingBlock[], file: string, report: Report): DrawingInfo {
  const stem = (file.split(/[\\/]/).pop() ?? "").replace(/\.sprung$/, "").replace(/^-$/, "");
  const info = emptyDrawingInfo();
  const [block, ...more] = blocks;
  for (const again of more) {
    report.error("drawing-twice", startOf(again.at, "drawing"), "The drawing's data is already given.", {
      hint: "Bring both blocks together in one.",
      seeAlso: block ? [{ message: "It is given here.", at: startOf(block.at, "drawing") }] : [],
    });
  }
  if (block?.title) info.title = block.title.text;
  const seen = new Map<string, DrawingField>();
  for (const field of block?.fields ?? []) {
    const read = Object.hasOwn(fields, field.name.text) ? fields[field.name.text] : undefined;
    if (!read) {
      const guess = didYouMean(field.name.text, Object.keys(fields));
      report.error("unknown-property", field.name.at, `"${field.name.text}" is not a field of a drawing.`, {
        ...guess,
        hint: guess.hint ?? `The fields are ${listed(Object.keys(fields), "and")}.`,
      });
      continue;
    }
    const first = seen.get(field.name.text);
    if (first && field.name.text !== "revision" && field.name.text !== "note") {
      report.error("property-twice", field.name.at, `"${field.name.text}" is already given.`, {
        seeAlso: [{ message: "First given here.", at: first.name.at }],
      });
      continue;
    }
    seen.set(field.name.text, field);
    read(info, field, report);
  }
  if (info.title === "") info.title = stem === "" ? "Drawing" : stem;
  if (info.number === "") info.number = stem === "" ? "drawing" : stem;
  // Some write the newest first: the sheets list them oldest first, and the last one is in force.
  info.revisions.sort((a, b) => (a.date < b.date ? -1 : a.date > b.date ? 1 : 0));
  if (info.date === "") info.date = info.revisions.at(-1)?.date ?? "";
  return info;
}

/** The keyword at the start of a block. */
export function startOf(at: SourceRange, keyword: string): SourceRange {
  return { ...at, endLine: at.line, endColumn: at.column + keyword.length };
}
