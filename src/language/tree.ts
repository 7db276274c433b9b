import type { SourceRange } from "./diagnostic.js";
import type { Quantity } from "./quantity.js";

/**
 * The syntax tree: what the text says, before any name is looked up. It is plain data and always exists, however
 * broken the text; what could not be read is missing from it and has its diagnostic.
 */
export interface Tree {
  /** The name of the file given, as the user wrote it. */
  file: string;
  /** Statements in reading order; those of included files stand where the include stood. */
  statements: Statement[];
}

export interface Located {
  at: SourceRange;
  /** Set on a statement of which a part could not be read. The slip is already reported; what follows from it need not be. */
  incomplete?: true;
}

/** A keyword or designation with its place. */
export interface Word extends Located {
  text: string;
}

/** One piece of a declaration after its designation, uninterpreted: `bore`, `40 mm`, `"Clamp"`, `5/2`, `CLAMP.cap`, `@P`. */
export type Item =
  /** A bare word: a property word, a designation, a potential (`L+`), `5/2`, or a stroke (`CLAMP+`). */
  | ({ kind: "word"; text: string } & Located)
  /** `NAME.part`. */
  | ({ kind: "part"; name: string; part: string; text: string } & Located)
  | ({ kind: "point"; name: string } & Located)
  | ({ kind: "text"; text: string } & Located)
  /** A number with no unit behind it. */
  | ({ kind: "number"; value: number; text: string } & Located)
  | ({ kind: "quantity"; quantity: Quantity; text: string } & Located)
  | ({ kind: "symbol"; text: string } & Located);

export type Statement = DrawingBlock | Declaration | LadderBlock | PowerBlock | FluidBlock | SequenceBlock;

export interface DrawingBlock extends Located {
  kind: "drawing";
  title?: Word;
  fields: DrawingField[];
}

/** `revision A 2026-03-02 "First issue"`: the field's word, then its items. Dates and drawing numbers arrive as word items. */
export interface DrawingField extends Located {
  name: Word;
  items: Item[];
}

/** `KIND NAME "function text" items… { items… }`; block items follow the others in order. */
export interface Declaration extends Located {
  kind: "declaration";
  /** e.g. `relay`, `cylinder`, `supply`. Not yet known to be a kind. */
  keyword: Word;
  name?: Word;
  text?: Word;
  items: Item[];
}

export interface SheetBreak extends Located {
  kind: "sheet-break";
  title?: Word;
}

export interface LadderBlock extends Located {
  kind: "ladder";
  title?: Word;
  /** The name after `supply`. */
  supply?: Word;
  statements: (Rung | SheetBreak | Declaration)[];
}

export interface Rung extends Located {
  kind: "rung";
  title?: Word;
  path: Series;
}

/** Things side by side. `arrow` is the index of the first item behind `->`, if the arrow stood in this series. */
export interface Series extends Located {
  kind: "series";
  items: PathItem[];
  arrow?: number;
}

/** `( a | b )`; a bracket with no `|` is a parallel with one branch. */
export interface Parallel extends Located {
  kind: "parallel";
  branches: Series[];
}

export type PathItem = Parallel | PathReference | PathPoint;

/** `CR1`, `/CR1`, `CR1:23-24`, `S5.auto`, `/T1.inst`, `X1:4`. */
export interface PathReference extends Located {
  kind: "reference";
  /** Whether a slash stood before it: normally closed. */
  negated: boolean;
  name: Word;
  /** The word behind the dot. */
  part?: Word;
  /** The text behind the colon, e.g. `23-24` or `4`. */
  terminals?: Word;
}

export interface PathPoint extends Located {
  kind: "point";
  name: string;
}

export interface PowerBlock extends Located {
  kind: "power";
  title?: Word;
  /** Behind the title: `400 V AC 3 phase 50 Hz`, uninterpreted. */
  items: Item[];
  statements: (FeedStatement | BranchStatement | SheetBreak | Declaration)[];
}

/** `feed L1 L2 L3 PE: QS1 -> Q1, T1`: what the current passes on its way to the busbars, and what taps them. */
export interface FeedStatement extends Located {
  kind: "feed";
  conductors: Word[];
  path: Series;
  taps: PathReference[];
}

/** `branch "Pump" L1 L2 L3: FU2 KM1 OL1 -> M1`; no conductors are written where it has those of the busbars. */
export interface BranchStatement extends Located {
  kind: "branch";
  title?: Word;
  conductors: Word[];
  path: Series;
}

export interface FluidBlock extends Located {
  kind: "fluid";
  title?: Word;
  /** `hydraulic` or `pneumatic`, unchecked. */
  medium?: Word;
  statements: (Declaration | LineStatement | PlugStatement | SheetBreak)[];
}

/** `line a -- b, c -- d hose size 12 mm`: the groups between one `--` and the next, `[[a], [b, c], [d]]`, joined in order. */
export interface LineStatement extends Located {
  kind: "line";
  /** `line`, `pilot`, `drain` or `exhaust`. */
  role: Word;
  groups: LineEnd[][];
  /** Words behind the last end: `hose`, `size 12 mm`. */
  items: Item[];
}

export type LineEnd =
  /** `V1.A`, `FC1`, or a kind word for an unnamed component (`silencer`, `tank`). */
  ({ kind: "component"; name: Word; port?: Word } & Located) | ({ kind: "point"; name: string } & Located);

/** `plug V1.B, V1.A`. */
export interface PlugStatement extends Located {
  kind: "plug";
  ends: LineEnd[];
}

/** `cycle` or `trial`: kept as written, one step a line. */
export interface SequenceBlock extends Located {
  kind: "cycle" | "trial";
  title?: Word;
  steps: { at: SourceRange; items: Item[] }[];
}
