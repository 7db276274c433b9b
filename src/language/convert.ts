import type { SourceRange } from "./diagnostic.js";
import type * as Syntax from "./generated/ast.js";
import { lineKeywords } from "./keywords.js";
import { nearest } from "./nearest.js";
import type { SourceText } from "./source-text.js";
import type { Problem } from "./token.js";
import type {
  BranchStatement,
  Declaration,
  DrawingBlock,
  FeedStatement,
  FluidBlock,
  Item,
  LadderBlock,
  LineEnd,
  LineStatement,
  Parallel,
  PathItem,
  PathReference,
  PlugStatement,
  PowerBlock,
  Rung,
  SequenceBlock,
  Series,
  SheetBreak,
  Statement,
  Word,
} from "./tree.js";
import { parseNumber, parseQuantity } from "./units.js";

/** An `include` and the index in the statements where those of the other file belong. */
export interface IncludeStatement {
  path: string;
  at: SourceRange;
  index: number;
}

export interface Converted {
  statements: Statement[];
  includes: IncludeStatement[];
}

type Extent = { start: number; end: number };
type ExtentOf = (node: { $cstNode?: unknown }) => Extent | undefined;

/**
 * Turns the parser's syntax nodes into the plain tree. What stands where it should not is added to `problems`; the rest of its
 * statement is kept.
 */
export function convert(document: Syntax.Document, source: SourceText, problems: Problem[], extentOf: unknown): Converted {
  return new Conversion(source, problems, extentOf as ExtentOf).document(document);
}

/** The words of a statement without its brackets, arrows and dashes, of which only the first is complained about. */
interface Reader {
  /** How many signs stood where none is due. */
  signs: number;
}

class Conversion {
  private readonly statements: Statement[] = [];
  private readonly includes: IncludeStatement[] = [];

  constructor(
    private readonly source: SourceText,
    private readonly problems: Problem[],
    private readonly extentOf: ExtentOf,
  ) {}

  document(document: Syntax.Document): Converted {
    let loose: LadderBlock | undefined;
    for (const node of document.statements) {
      if (node.$type === "Rung" || (node.$type === "SheetBreak" && loose)) {
        // Rungs outside any ladder make one of their own: a file with one rung draws.
        const statement = node.$type === "Rung" ? this.rung(node) : this.sheetBreak(node);
        if (loose) {
          loose.statements.push(statement);
          loose.at = { ...loose.at, endLine: statement.at.endLine, endColumn: statement.at.endColumn };
        } else {
          loose = { kind: "ladder", statements: [statement], at: statement.at };
          this.statements.push(loose);
        }
        continue;
      }
      loose = undefined;
      this.topStatement(node);
    }
    return { statements: this.statements, includes: this.includes };
  }

  private topStatement(node: Syntax.Statement): void {
    switch (node.$type) {
      case "Drawing":
        this.keep(this.drawing(node));
        break;
      case "Include":
        this.include(node);
        break;
      case "Ladder":
        this.ladder(node);
        break;
      case "Fluid":
        this.fluid(node);
        break;
      case "Sequence":
        this.keep(this.sequence(node));
        break;
      case "Power":
        this.power(node);
        break;
      case "Declaration":
        this.keep(this.declaration(node));
        break;
      case "SheetBreak":
      case "Rung":
        this.misplaced(node, node.keyword, "belongs between the rungs of a ladder or the statements of another circuit");
        break;
      case "PowerLine":
        this.misplaced(node, node.keyword, "belongs inside a power circuit", 'Put it within power "…" 400 V AC 3 phase { … }.');
        break;
      case "Line":
      case "Plug":
        this.misplaced(node, node.keyword, "belongs inside a fluid circuit", 'Put it within fluid "…" hydraulic { … } or pneumatic.');
        break;
    }
  }

  private keep(statement: Statement | undefined): void {
    if (statement) this.statements.push(statement);
  }

  // ------------------------------------------------------------ blocks

  private drawing(node: Syntax.Drawing): DrawingBlock {
    const { title, rest } = this.head(node, node.head);
    this.refuse(rest);
    const fields: DrawingBlock["fields"] = [];
    for (const field of node.fields) {
      const [first, ...items] = this.items(field.items);
      if (first?.kind === "word") fields.push({ name: { text: first.text, at: first.at }, items, ...this.located(field) });
      else if (first)
        this.report(
          "field-expected",
          this.extent(field.items[0] as Syntax.Item),
          "A line of the drawing block begins with the name of a field.",
          'Write it as in "number TS-2040".',
        );
    }
    return { kind: "drawing", ...(title && { title }), fields, ...this.located(node) };
  }

  private include(node: Syntax.Include): void {
    const { title, rest } = this.head(node, node.head, "A path");
    this.refuse(rest);
    if (title) this.includes.push({ path: title.text, at: title.at, index: this.statements.length });
    else if (rest.length === 0)
      this.report(
        "text-expected",
        this.extent(node),
        'The path of the file is missing behind "include".',
        'Write it as in include "valves.sprung".',
      );
  }

  private ladder(node: Syntax.Ladder): void {
    const { title, rest } = this.head(node, node.head);
    const block: LadderBlock = { kind: "ladder", ...(title && { title }), statements: [], ...this.located(node) };
    this.statements.push(block);
    let left = rest;
    const [first, second] = rest;
    if (first?.kind === "word" && first.text === "supply" && second?.kind === "word") {
      block.supply = { text: second.text, at: second.at };
      left = rest.slice(2);
    } else if (first?.kind === "word" && first.text === "supply") {
      this.report("name-missing", this.extentOfRange(first.at), 'The name of the supply is missing behind "supply".');
      left = rest.slice(1);
    }
    this.refuse(left, ["supply"]);
    this.expectBlock(node);
    for (const statement of node.statements) {
      if (statement.$type === "Rung") block.statements.push(this.rung(statement));
      else if (statement.$type === "SheetBreak") block.statements.push(this.sheetBreak(statement));
      else if (statement.$type === "Declaration") {
        const declaration = this.declaration(statement);
        if (declaration) block.statements.push(declaration);
      } else if (statement.$type === "Line" || statement.$type === "Plug")
        this.misplaced(statement, statement.keyword, "belongs inside a fluid circuit");
      else if (statement.$type === "PowerLine") this.misplaced(statement, statement.keyword, "belongs inside a power circuit");
      else this.lift(statement, "ladder");
    }
  }

  private power(node: Syntax.Power): void {
    const { title, rest } = this.head(node, node.head);
    const block: PowerBlock = { kind: "power", ...(title && { title }), items: rest, statements: [], ...this.located(node) };
    this.statements.push(block);
    this.expectBlock(node);
    for (const statement of node.statements) {
      if (statement.$type === "PowerLine")
        block.statements.push(statement.keyword === "feed" ? this.feed(statement) : this.branch(statement));
      else if (statement.$type === "SheetBreak") block.statements.push(this.sheetBreak(statement));
      else if (statement.$type === "Declaration") {
        const declaration = this.declaration(statement);
        if (declaration) block.statements.push(declaration);
      } else if (statement.$type === "Rung")
        this.misplaced(statement, "rung", "belongs inside a ladder", 'A line of a power circuit is a "branch".');
      else if (statement.$type === "Line" || statement.$type === "Plug")
        this.misplaced(statement, statement.keyword, "belongs inside a fluid circuit");
      else this.lift(statement, "power");
    }
  }

  private fluid(node: Syntax.Fluid): void {
    const { title, rest } = this.head(node, node.head);
    const block: FluidBlock = { kind: "fluid", ...(title && { title }), statements: [], ...this.located(node) };
    this.statements.push(block);
    const [first] = rest;
    if (first?.kind === "word") block.medium = { text: first.text, at: first.at };
    this.refuse(first?.kind === "word" ? rest.slice(1) : rest, ["hydraulic", "pneumatic"]);
    this.expectBlock(node);
    for (const statement of node.statements) {
      if (statement.$type === "Line") block.statements.push(this.line(statement));
      else if (statement.$type === "Plug") block.statements.push(this.plug(statement));
      else if (statement.$type === "SheetBreak") block.statements.push(this.sheetBreak(statement));
      else if (statement.$type === "Declaration") {
        const declaration = this.declaration(statement);
        if (declaration) block.statements.push(declaration);
      } else if (statement.$type === "Rung") this.misplaced(statement, "rung", "belongs inside a ladder");
      else if (statement.$type === "PowerLine") this.misplaced(statement, statement.keyword, "belongs inside a power circuit");
      else this.lift(statement, "fluid");
    }
  }

  /** Without its braces a circuit is empty, and what was meant for it stands beside it. */
  private expectBlock(node: Syntax.Ladder | Syntax.Power | Syntax.Fluid): void {
    const { start, end } = this.extent(node);
    if (
      node.statements.length > 0 ||
      this.source.text
        .slice(start, end)
        .replace(/"(\\.|[^"\\])*"/g, "")
        .includes("{")
    )
      return;
    const what = { ladder: "rungs", power: "branches", fluid: "components and lines" }[node.keyword];
    this.report(
      "block-missing",
      { start, end: start + node.keyword.length },
      `The "{" of "${node.keyword}" is missing.`,
      `Put "{" at the end of this line, and "}" behind the last of its ${what}.`,
    );
  }

  /** A block that stands in another: it is understood as if it stood behind it. */
  private lift(
    node: Syntax.Drawing | Syntax.Include | Syntax.Ladder | Syntax.Power | Syntax.Fluid | Syntax.Sequence,
    within: string,
  ): void {
    this.misplaced(node, node.keyword, `cannot stand inside "${within}"`, `Put it outside the braces of "${within}".`);
    this.topStatement(node);
  }

  private sequence(node: Syntax.Sequence): SequenceBlock {
    const { title, rest } = this.head(node, node.head);
    this.refuse(rest);
    const steps: SequenceBlock["steps"] = [];
    for (const step of node.steps) {
      const items = this.items(step.items);
      if (items.length > 0) steps.push({ at: this.range(step), items });
    }
    return { kind: node.keyword, ...(title && { title }), steps, ...this.located(node) };
  }

  private sheetBreak(node: Syntax.SheetBreak): SheetBreak {
    const { title, rest } = this.head(node, node.head);
    this.refuse(rest);
    return { kind: "sheet-break", ...(title && { title }), ...this.located(node) };
  }

  // ------------------------------------------------------------ declarations

  private declaration(node: Syntax.Declaration): Declaration | undefined {
    const reader: Reader = { signs: 0 };
    const [first, ...behind] = node.items;
    const keyword = first && first.$type === "Name" && !first.port && !first.pins ? this.word(first, first.name) : undefined;
    if (!first) return undefined;
    if (!keyword) {
      const dashes = behind.some((item) => item.$type === "Sign" && item.text === "--");
      this.report(
        "statement-expected",
        this.extent(first),
        "A statement begins with a word that says what it is.",
        dashes ? 'Write "line" first.' : 'Write it as in "relay CR1".',
      );
      return undefined;
    }
    let next = 0;
    const declaration: Declaration = { kind: "declaration", keyword, items: [], ...this.located(node) };
    const named = behind[next];
    if (named?.$type === "Name" && !named.port && !named.pins) {
      declaration.name = this.word(named, named.name);
      next++;
    }
    const text = behind[next];
    if (text?.$type === "Text") {
      declaration.text = this.text(text);
      next++;
    }
    declaration.items = this.items([...behind.slice(next), ...node.block], reader);
    return declaration;
  }

  // ------------------------------------------------------------ rungs

  private rung(node: Syntax.Rung): Rung {
    const extent = this.extent(node);
    const title = node.title && this.text(node.title);
    if (!node.colon) {
      const behind = node.title ? this.extent(node.title) : { start: extent.start, end: extent.start + "rung".length };
      this.report(
        "colon-missing",
        { start: behind.end - 1, end: behind.end },
        `A ":" is missing before the rung's path.`,
        'Write it as in rung "Start": PB1 -> CR1.',
      );
    }
    return { kind: "rung", ...(title && { title }), path: this.series(node.path, extent.end), ...this.located(node) };
  }

  /** `place` is where the series stands if nothing is in it. */
  private series(nodes: readonly Syntax.PathItem[], place: number): Series {
    const items: PathItem[] = [];
    let arrow: number | undefined;
    for (const item of nodes) {
      if (item.$type === "Parallel") items.push(this.parallel(item));
      else if (item.$type === "Reference") items.push(this.reference(item));
      else if (item.$type === "Point") items.push({ kind: "point", name: item.name.slice(1), at: this.range(item) });
      else if (item.$type === "Arrow") {
        if (arrow === undefined) arrow = items.length;
        else
          this.report(
            "arrow-twice",
            this.extent(item),
            'A second "->" stands in the same path.',
            'What is driven stands behind one "->"; put several loads in ( a | b ).',
          );
      } else this.strayInPath(item);
    }
    const [first] = nodes;
    const last = nodes[nodes.length - 1];
    if (last?.$type === "Arrow" && arrow === items.length) {
      this.report("load-missing", this.extent(last), 'Nothing stands behind this "->".', "Name what is driven, as in -> CR1.");
    }
    const at = first && last ? this.source.range(this.extent(first).start, this.extent(last).end) : this.source.range(place, place);
    return { kind: "series", items, ...(arrow !== undefined && { arrow }), at };
  }

  private strayInPath(node: Syntax.Stray): void {
    const extent = this.extent(node);
    const { text } = node;
    if (text === "|")
      this.report("branch-without-bracket", extent, '"|" stands outside brackets.', "Put the branches in brackets: ( a | b ).");
    else if (text.startsWith('"'))
      this.report("unexpected-text", extent, "A text has no place in a rung's path.", "The function text stands before the colon.");
    else if (text === ":")
      this.report("unexpected-symbol", extent, '":" has no place here.', 'Terminals stand directly behind a name, as in "CR1:13-14".');
    else if (text === ",")
      this.report("unexpected-symbol", extent, `"," has no place in a rung's path.`, "Contacts in series stand side by side.");
    else
      this.report(
        "unexpected-symbol",
        extent,
        `"${text}" has no place in a rung's path.`,
        text === "--" ? 'Contacts in series stand side by side; "->" stands before the load.' : undefined,
      );
  }

  private parallel(node: Syntax.Parallel): Parallel {
    let place = this.extent(node).start + 1;
    const branches: Series[] = [];
    let branch: Syntax.PathItem[] = [];
    for (const item of node.inside) {
      if (item.$type === "Bar") {
        branches.push(this.series(branch, place));
        branch = [];
        place = this.extent(item).end;
      } else branch.push(item);
    }
    branches.push(this.series(branch, place));
    return { kind: "parallel", branches, at: this.range(node) };
  }

  private reference(node: Syntax.Reference): PathReference {
    const extent = this.extent(node);
    const pinsStart = extent.end - (node.pins?.length ?? 0);
    const portStart = pinsStart - (node.port?.length ?? 0);
    const nameStart = portStart - node.name.length;
    return {
      kind: "reference",
      negated: node.negated,
      name: { text: node.name, at: this.source.range(nameStart, portStart) },
      ...(node.port && { part: { text: node.port.slice(1), at: this.source.range(portStart + 1, pinsStart) } }),
      ...(node.pins && { terminals: { text: node.pins.slice(1), at: this.source.range(pinsStart + 1, extent.end) } }),
      at: this.range(node),
    };
  }

  // ------------------------------------------------------------ power circuits

  private feed(node: Syntax.PowerLine): FeedStatement {
    const { conductors, path } = this.powerLine(node);
    const arrow = path.findIndex((item) => item.$type === "Arrow");
    const before = arrow < 0 ? path : path.slice(0, arrow);
    const behind = arrow < 0 ? [] : path.slice(arrow + 1);
    if (arrow >= 0 && behind.length === 0)
      this.report(
        "load-missing",
        this.extent(path[arrow] as Syntax.Arrow),
        'Nothing stands behind this "->".',
        "Name what taps the busbars, as in -> Q1, T1.",
      );
    const taps: PathReference[] = [];
    let due = true;
    for (const item of behind) {
      if (item.$type === "Comma") {
        if (due) this.report("end-missing", this.extent(item), 'A name is missing before ",".');
        due = true;
      } else if (item.$type === "Reference") {
        if (!due)
          this.report(
            "comma-missing",
            this.extent(item),
            'A "," is missing before this name.',
            "What taps the busbars is listed with commas; what stands behind it belongs in its branch.",
          );
        taps.push(this.reference(item));
        due = false;
      } else this.strayInPower(item);
    }
    const last = behind.at(-1);
    if (last?.$type === "Comma") this.report("end-missing", this.extent(last), 'A name is missing behind ",".');
    return { kind: "feed", conductors, path: this.powerSeries(before, this.extent(node).end), taps, ...this.located(node) };
  }

  private branch(node: Syntax.PowerLine): BranchStatement {
    const title = node.title && this.text(node.title);
    const { conductors, path } = this.powerLine(node);
    return {
      kind: "branch",
      ...(title && { title }),
      conductors,
      path: this.powerSeries(path, this.extent(node).end),
      ...this.located(node),
    };
  }

  /** What stands before the colon of a feed or a branch, and what behind it. */
  private powerLine(node: Syntax.PowerLine): { conductors: Word[]; path: Syntax.PowerItem[] } {
    const colon = node.items.findIndex((item) => item.$type === "Colon");
    const bare = colon < 0 && node.keyword === "feed" && node.items.every((item) => item.$type === "Reference");
    if (colon < 0 && !bare) {
      const { start } = this.extent(node);
      const end = node.title ? this.extent(node.title).end : start + node.keyword.length;
      this.report(
        "colon-missing",
        { start: end - 1, end },
        `A ":" is missing before the path of this ${node.keyword}.`,
        'Write it as in branch "Pump": FU1 KM1 OL1 -> M1.',
      );
      return { conductors: [], path: node.items };
    }
    const conductors: Word[] = [];
    for (const item of bare ? node.items : node.items.slice(0, colon)) {
      if (item.$type === "Reference" && !item.negated) conductors.push({ text: item.name, at: this.range(item) });
      else
        this.report(
          "unexpected-symbol",
          this.extent(item),
          `Only conductors stand before the colon of a ${node.keyword}.`,
          "Write them as in L1 L2 L3 PE.",
        );
    }
    return { conductors, path: bare ? [] : node.items.slice(colon + 1) };
  }

  private powerSeries(items: readonly Syntax.PowerItem[], place: number): Series {
    const path = items.filter((item): item is Syntax.PathItem => {
      if (item.$type !== "Comma" && item.$type !== "Colon") return true;
      this.strayInPower(item);
      return false;
    });
    return this.series(path, place);
  }

  private strayInPower(node: Syntax.PowerItem): void {
    if (node.$type === "Stray") this.strayInPath(node);
    else if (node.$type === "Arrow")
      this.report(
        "arrow-twice",
        this.extent(node),
        'A second "->" stands in the same line.',
        "What is driven stands at the end of a branch.",
      );
    else {
      const { start, end } = this.extent(node);
      const written = this.source.text.slice(start, end);
      this.report(
        "unexpected-symbol",
        { start, end },
        `"${written}" has no place here.`,
        written === "," ? "Things in series stand side by side." : undefined,
      );
    }
  }

  // ------------------------------------------------------------ fluid lines

  private line(node: Syntax.Line): LineStatement {
    const { start } = this.extent(node);
    const groups = node.groups.map((group) => group.ends.map((end) => this.lineEnd(end)));
    const reader: Reader = { signs: 0 };
    let { items } = node;
    for (;;) {
      // `V1.4 - C1.cap`: what joins two ends is plain, though it is not written as a line writes it.
      const [sign, end, ...rest] = items;
      if (sign?.$type !== "Sign" || !/^[-=>]+$/.test(sign.text) || (end?.$type !== "Name" && end?.$type !== "Point")) break;
      if (sign.text !== "--" && reader.signs++ === 0)
        this.report(
          "unexpected-symbol",
          this.extent(sign),
          `"${sign.text}" has no place here.`,
          'The ends of a line are joined with "--".',
        );
      groups.push([this.lineEnd(end)]);
      items = rest;
    }
    return {
      kind: "line",
      role: this.keyword(start, node.keyword),
      groups,
      items: this.items(items, reader),
      ...this.located(node),
    };
  }

  private plug(node: Syntax.Plug): PlugStatement {
    const ends = node.ends.map((end) => this.lineEnd(end));
    this.refuse(this.items(node.items));
    return { kind: "plug", ends, ...this.located(node) };
  }

  private lineEnd(node: Syntax.LineEnd): LineEnd {
    if (node.$type === "Point") return { kind: "point", name: node.name.slice(1), at: this.range(node) };
    const { start, end } = this.extent(node);
    const portStart = start + node.name.length;
    if (node.pins)
      this.report(
        "unexpected-symbol",
        { start: end - node.pins.length, end },
        "Terminals have no place in a fluid line.",
        'A port stands behind a dot, as in "V1.A".',
      );
    return {
      kind: "component",
      name: { text: node.name, at: this.source.range(start, portStart) },
      ...(node.port && { port: { text: node.port.slice(1), at: this.source.range(portStart + 1, portStart + node.port.length) } }),
      at: this.range(node),
    };
  }

  // ------------------------------------------------------------ items

  /** The text in front, and what is left of a block's first line. */
  private head(node: Syntax.Statement, head: Syntax.Item[], what = "A title"): { title?: Word; rest: Item[] } {
    const items = this.items(head);
    const [first, ...rest] = items;
    if (first?.kind === "text") return { title: { text: first.text, at: first.at }, rest };
    if (
      first?.kind === "word" &&
      node.$type !== "Include" &&
      node.$type !== "Fluid" &&
      node.$type !== "Power" &&
      !(node.$type === "Ladder" && first.text === "supply")
    ) {
      this.report("text-not-quoted", this.extentOfRange(first.at), `${what} stands in quotation marks.`, `Write "${first.text}".`);
      return { title: { text: first.text, at: first.at }, rest };
    }
    return { rest: items };
  }

  /** Reports what has no place; only the first word, as the others follow from it. */
  private refuse(items: Item[], known: string[] = []): void {
    const [first] = items;
    if (!first) return;
    const written = "text" in first ? first.text : `@${first.name}`;
    const near = nearest(written, known);
    this.report(
      "unexpected-word",
      this.extentOfRange(first.at),
      `"${written}" has no place here.`,
      near ? `Did you mean "${near}"?` : undefined,
    );
  }

  private items(nodes: Syntax.Item[], reader: Reader = { signs: 0 }): Item[] {
    const items: Item[] = [];
    for (const node of nodes) {
      const item = this.item(node, reader);
      if (item) items.push(item);
    }
    return items;
  }

  private item(node: Syntax.Item, reader: Reader): Item | undefined {
    const at = this.range(node);
    switch (node.$type) {
      case "Text":
        return { kind: "text", text: unquote(node.text), at };
      case "Point":
        return { kind: "point", name: node.name.slice(1), at };
      case "Quantity": {
        const quantity = parseQuantity(node.text);
        if (quantity) return { kind: "quantity", quantity, text: quantity.text, at };
        this.report("number-unreadable", this.extent(node), `"${node.text}" is no number.`);
        return undefined;
      }
      case "BareNumber":
        return { kind: "number", value: parseNumber(node.text) ?? 0, text: node.text, at };
      case "Name": {
        const text = `${node.name}${node.port ?? ""}${node.pins ?? ""}`;
        if (node.port && !node.pins) return { kind: "part", name: node.name, part: node.port.slice(1), text, at };
        return { kind: "word", text, at };
      }
      case "Sign":
        if (node.text === ",") return { kind: "symbol", text: ",", at };
        // One complaint a statement: the other signs follow from the first.
        if (reader.signs++ === 0)
          this.report("unexpected-symbol", this.extent(node), `"${node.text}" has no place here.`, signHints[node.text]);
        return undefined;
    }
  }

  private text(node: Syntax.Text): Word {
    return { text: unquote(node.text), at: this.range(node) };
  }

  private word(node: Syntax.Name, text: string): Word {
    return { text, at: this.range(node) };
  }

  private keyword(start: number, text: string): Word {
    return { text, at: this.source.range(start, start + text.length) };
  }

  // ------------------------------------------------------------ places and problems

  private extent(node: { $cstNode?: unknown }): Extent {
    return this.extentOf(node) ?? { start: 0, end: 0 };
  }

  private range(node: { $cstNode?: unknown }): SourceRange {
    const { start, end } = this.extent(node);
    return this.source.range(start, end);
  }

  private located(node: { $cstNode?: unknown }): { at: SourceRange } {
    return { at: this.range(node) };
  }

  private extentOfRange(at: SourceRange): Extent {
    return { start: this.source.offset(at.line, at.column), end: this.source.offset(at.endLine, at.endColumn) };
  }

  private misplaced(node: Syntax.Statement, keyword: string, where: string, hint?: string): void {
    const { start } = this.extent(node);
    this.report("misplaced", { start, end: start + keyword.length }, `"${keyword}" ${where}.`, hint);
  }

  private report(code: string, { start, end }: Extent, message: string, hint?: string): void {
    this.problems.push({ code, message, start, end, ...(hint && { hint }) });
  }
}

const signHints: Record<string, string> = {
  "->": 'An arrow belongs in a rung: rung "…": PB1 -> CR1.',
  "--": `Dashes join the ends of a line, which begins with "${lineKeywords.join('", "')}".`,
  ":": 'Terminals stand directly behind a name, as in "X1:4".',
  "(": "Branches belong in a rung.",
  ")": "Branches belong in a rung.",
  "|": "Branches belong in a rung.",
};

/** What the author meant by a text as written, with or without its closing mark. */
function unquote(written: string): string {
  const inner = written.replace(/^["“”„]/, "");
  const closed = /^["“”„]/.test(written) && /["“”]$/.test(inner) && !/(?:^|[^\\])(?:\\\\)*\\"$/.test(inner);
  return (closed ? inner.slice(0, -1) : inner).replace(/\\(["\\])/g, "$1");
}
