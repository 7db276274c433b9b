import { isKeyword, lineKeywords, powerKeywords, topKeywords } from "./keywords.js";
import { nearest } from "./nearest.js";
import { matchEnd, type Shape, skipBalanced, unclosedBraces } from "./scan.js";
import type { Problem, Token, Tokens } from "./token.js";

/** Brackets and braces within one another beyond this are no drawing. */
export const deepestNesting = 64;

/**
 * What the braces around the current place hold. `through` braces were not due: their contents are read as if the braces were
 * not there.
 */
type BlockKind = "file" | "circuit" | "power" | "fluid" | "drawing" | "sequence" | "items";

interface Block {
  kind: BlockKind;
  /** Offset of its `{`. */
  open: number;
  /** Columns, from 0, of the statement that opened it and of its first line within. */
  indent: number;
  contentIndent?: number;
  keyword: string;
  through?: boolean;
  /** The statement its `{` interrupted, taken up again behind `}`. */
  resume?: StatementState;
}

/** How the words of the statement are read: values, a rung's path, or the ends of lines. */
type StatementKind = "items" | "declaration" | "path" | "ends" | "step";

interface StatementState {
  kind: StatementKind;
  keyword: string;
  keywordStart: number;
  /** Index of its first token. */
  first: number;
  indent: number;
  /** What its braces would hold; absent if it takes none. */
  takes?: BlockKind;
  /** Rungs, feeds and branches: whether the colon has been. */
  colon: boolean;
  /** Lines: whether an end is due, and the sign it is due behind; `done` once the words behind the ends begin. */
  due: boolean;
  done: boolean;
  /** Indices of the open brackets' tokens. */
  brackets: number[];
}

/**
 * Cuts a text into the grammar's tokens. Statements are ended, contextual keywords told from names, numbers joined with their
 * units, and whatever was left open or closed twice is reported and set right, so that the tokens always fit the grammar.
 */
export function tokenize(text: string): Tokens {
  return new Lexing(text).run();
}

class Lexing {
  private readonly tokens: Token[] = [];
  private readonly problems: Problem[] = [];
  private readonly blocks: Block[] = [{ kind: "file", open: 0, indent: -1, keyword: "" }];
  private statement: StatementState | undefined;
  private at = 0;
  private lineStart = 0;
  private freshLine = true;
  /** Blocks that the text never closes; only then is the layout of the text taken as a hint where they end. */
  private missingBraces: number;

  constructor(private readonly text: string) {
    this.missingBraces = unclosedBraces(text);
  }

  run(): Tokens {
    while (this.at < this.text.length) this.readOne();
    this.endInner(this.text.length);
    while (this.block.kind !== "file") {
      this.closeUnclosed(this.text.length);
      this.endInner(this.text.length);
    }
    return { tokens: this.tokens, problems: this.problems };
  }

  private get block(): Block {
    return this.blocks[this.blocks.length - 1] as Block;
  }

  private get char(): string {
    return this.text[this.at] ?? "";
  }

  private match(shape: Shape, at = this.at): number {
    return matchEnd(shape, this.text, at);
  }

  private emit(type: string, start: number, end: number): void {
    this.tokens.push({ type, start, end });
  }

  private report(code: string, start: number, end: number, message: string, more: Partial<Problem> = {}): void {
    this.problems.push({ code, message, start, end, ...(this.statement && { statement: this.statement.keywordStart }), ...more });
  }

  // ------------------------------------------------------------ lines

  private readOne(): void {
    const blank = this.match("blank");
    if (blank > 0) {
      this.at = blank;
      return;
    }
    if (this.char === "#") {
      this.at = this.match("restOfLine");
      return;
    }
    const newline = this.match("newline");
    if (newline > 0) {
      this.endLine(newline);
      return;
    }
    if (this.freshLine) this.startLine();
    if (this.char === "{") this.openBrace();
    else if (this.char === "}") this.closeBrace();
    else if (!this.statement) this.startStatement();
    else this.readWithin(this.statement);
  }

  private endLine(next: number): void {
    const end = this.at;
    this.at = next;
    this.lineStart = next;
    this.freshLine = true;
    if (!this.statement || this.statement.brackets.length > 0 || this.block.kind === "items") return;
    if (this.goesOn(this.statement) || this.nextSign() === "{") return;
    this.endStatement(end);
  }

  /** Whether the statement's last token says that it goes on in the next line. */
  private goesOn(statement: StatementState): boolean {
    const last = this.tokens[this.tokens.length - 1];
    if (!last || this.tokens.length <= statement.first) return false;
    const written = this.text.slice(last.start, last.end);
    return written === "|" || written === "--" || written === "->" || written === "," || (last.type === "WORD" && written === "then");
  }

  /** The first sign that is neither blank nor comment, in this or a later line, if this statement could take braces. */
  private nextSign(): string {
    if (!this.statement?.takes) return "";
    let at = this.at;
    for (;;) {
      const next = Math.max(this.match("blank", at), this.match("newline", at), this.match("comment", at));
      if (next <= at) return this.text[at] ?? "";
      at = next;
    }
  }

  /** Looks at the beginning of a line for signs that something before it was left open. */
  private startLine(): void {
    this.freshLine = false;
    const column = this.at - this.lineStart;
    const statement = this.statement;
    if (statement && this.char !== "}" && this.block.kind !== "items" && this.opensStatement(this.at, statement.kind)) {
      if (statement.brackets.length === 0) this.reportGoesOn();
      this.endStatement();
    }
    if (this.char !== "}" && this.char !== "{") {
      while (this.block.kind !== "file" && this.mustHaveEnded(this.block, column)) {
        this.endInner(this.at);
        this.closeUnclosed(this.at);
      }
    }
    if (this.block.contentIndent === undefined) this.block.contentIndent = column;
  }

  private reportGoesOn(): void {
    const last = this.tokens[this.tokens.length - 1] as Token;
    const sign = this.text.slice(last.start, last.end);
    this.report("statement-unfinished", last.start, last.end, `The line ends in "${sign}", but nothing follows it.`, {
      hint: `Write what comes behind "${sign}", or leave it out.`,
    });
    if (this.statement) this.statement.due = false;
    if (sign !== "then") this.tokens.pop();
  }

  /**
   * Whether the block cannot go on at this line. How far lines are indented counts only where the text has a brace too few, or
   * where a block begins that belongs at the top.
   */
  private mustHaveEnded(block: Block, column: number): boolean {
    const line = this.text.slice(this.at, this.at + 200);
    if (block.kind === "items" && /^(?:(?:rung|branch)[ \t]*[":]|sheet[ \t]*")/.test(line)) return true;
    const outdented = block.contentIndent !== undefined && block.contentIndent > block.indent && column <= block.indent;
    const opensBlock = /^(?:(?:drawing|include|ladder|fluid|cycle|trial|power)[ \t]*"|supply[ \t]+[\w-]+[ \t]+\d)/.test(line);
    if (opensBlock && (outdented || block.kind === "items")) return true;
    return this.missingBraces > 0 && (opensBlock || outdented);
  }

  /** Whether the line at this offset can only be a new statement. */
  private opensStatement(at: number, kind: StatementKind): boolean {
    const line = this.text.slice(at, at + 200);
    if (/^(?:(?:rung|branch)[ \t]*[":]|(?:drawing|include|ladder|fluid|cycle|trial|power|sheet)[ \t]*")/.test(line)) return true;
    if (kind === "ends" && /^(?:line|pilot|drain|exhaust|plug)[ \t]+[\w@]/.test(line)) return true;
    return (kind === "ends" || kind === "path") && /^[a-z][a-z-]*[ \t]+[\w-]+[ \t]*"/.test(line);
  }

  // ------------------------------------------------------------ statements

  private startStatement(): void {
    const start = this.at;
    const holder = this.block.kind;
    const statement: StatementState = {
      kind: "items",
      keyword: "",
      keywordStart: start,
      first: this.tokens.length,
      indent: start - this.lineStart,
      colon: false,
      due: false,
      done: false,
      brackets: [],
    };
    this.statement = statement;
    const end = this.match("name");
    if (holder === "drawing" || holder === "sequence") {
      statement.kind = "step";
      this.readItem();
      return;
    }
    if (end < 0) {
      this.statement = undefined;
      this.readStrayStart();
      return;
    }
    const written = this.text.slice(start, end);
    const keyword = this.keywordHere(written, end, holder);
    statement.keyword = keyword ?? written;
    if (keyword) {
      if (keyword !== written) {
        this.report("unknown-keyword", start, end, `"${written}" opens no statement.`, {
          hint: `Did you mean "${keyword}"?`,
          data: { nearest: keyword },
        });
      }
      this.emit(keyword, start, end);
      this.at = end;
      this.prepare(statement, keyword);
      return;
    }
    statement.kind = "declaration";
    statement.takes = "items";
    this.readWord("wordWithSlash");
  }

  /** The keyword that opens the statement here, also when it is misspelt beyond doubt. */
  private keywordHere(word: string, end: number, holder: BlockKind): string | undefined {
    if (isKeyword(word)) return word === "plug" && holder !== "fluid" ? undefined : word;
    // A declaration has a name behind its kind: a text or a colon there tells a misspelt keyword, and so does `--` behind one more word.
    const rest = this.text.slice(end, end + 200);
    const lines = holder === "power" ? powerKeywords : ["rung"];
    if (/^[ \t]*:(?:[ \t]|$)/m.test(rest)) return nearest(word, lines);
    if (/^[ \t]*"/.test(rest)) return nearest(word, [...topKeywords, "sheet", ...lines]);
    if (holder === "power" && /^[ \t]+[^"#{}\r\n]*:(?:[ \t]|$)/m.test(rest)) return nearest(word, lines);
    if (/^[ \t]+@?[\w.]+[ \t]*--/.test(rest)) return nearest(word, lineKeywords);
    return undefined;
  }

  private prepare(statement: StatementState, keyword: string): void {
    if (keyword === "rung" || powerKeywords.includes(keyword)) statement.kind = "path";
    else if (keyword === "plug" || lineKeywords.includes(keyword)) {
      statement.kind = "ends";
      statement.due = true;
      if (keyword !== "plug") statement.takes = "items";
    } else if (keyword === "drawing") statement.takes = "drawing";
    else if (keyword === "ladder") statement.takes = "circuit";
    else if (keyword === "fluid") statement.takes = "fluid";
    else if (keyword === "cycle" || keyword === "trial") statement.takes = "sequence";
    else if (keyword === "power") statement.takes = "power";
  }

  /** Something that can begin no statement: reported and left out with what follows it in the line. */
  private readStrayStart(): void {
    const start = this.at;
    if (this.readUnknown()) return;
    const line = this.text.slice(start, this.match("untilBrace")).trimEnd();
    this.report("statement-expected", start, start + Math.max(1, line.length), "A statement begins with a word.", {
      hint: `Write what it is first, such as ${firstWords[this.block.kind] ?? '"relay CR1"'}.`,
    });
    this.at = start + Math.max(1, line.length);
  }

  /** Ends the statement, closing its open brackets; nothing happens between statements. */
  private endStatement(end = this.at): void {
    const statement = this.statement;
    if (!statement) return;
    while (statement.brackets.length > 0) this.closeBracketFor(statement);
    const last = this.tokens[this.tokens.length - 1];
    if (statement.kind === "ends" && statement.due && last) this.reportEndMissing(statement, last);
    this.statement = undefined;
    const place = last && this.tokens.length > statement.first ? last.end : end;
    this.emit("NEWLINE", place, place);
  }

  private reportEndMissing(statement: StatementState, last: Token): void {
    const sign = this.text.slice(last.start, last.end);
    statement.due = false;
    this.report("end-missing", last.start, last.end, `A port, a component or an @point is missing behind "${sign}".`);
    if (last.type === "--" || last.type === ",") this.tokens.pop();
  }

  /** Ends the statement within the present braces; what stands in a declaration's braces belongs to the declaration. */
  private endInner(end: number): void {
    if (this.block.kind !== "items") this.endStatement(end);
  }

  // ------------------------------------------------------------ braces

  private openBrace(): void {
    const statement = this.statement;
    const open = this.at;
    if (this.tooDeep(open)) return;
    this.at++;
    if (statement?.takes && statement.brackets.length === 0) {
      if (statement.kind === "ends" && statement.due) this.reportEndMissing(statement, this.tokens[this.tokens.length - 1] as Token);
      const kind = statement.takes;
      statement.takes = undefined;
      statement.done = true;
      this.blocks.push({ kind, open, indent: statement.indent, keyword: statement.keyword, resume: statement });
      this.emit("{", open, open + 1);
      if (kind !== "items") this.statement = undefined;
      return;
    }
    if (!this.block.through) {
      this.report(
        "brace-not-expected",
        open,
        open + 1,
        statement?.keyword ? `"${statement.keyword}" takes no "{".` : 'A "{" has no place here.',
      );
    }
    this.blocks.push({ ...this.block, open, through: true, resume: undefined });
  }

  private closeBrace(): void {
    const at = this.at;
    this.at++;
    if (this.block.kind === "file" && !this.block.through) {
      this.endStatement(at);
      this.report("block-not-opened", at, at + 1, 'This "}" closes nothing.', { hint: 'Leave it out, or look for a "{" missing above.' });
      return;
    }
    const block = this.blocks.pop() as Block;
    if (block.through) return;
    if (block.kind !== "items") this.endStatement(at);
    this.finishBlock(block, at, at + 1);
  }

  private finishBlock(block: Block, start: number, end: number): void {
    this.emit("}", start, end);
    this.statement = block.resume;
    if (this.statement) this.statement.brackets = [];
    this.endStatement();
  }

  private closeUnclosed(at: number): void {
    const block = this.blocks.pop() as Block;
    this.missingBraces--;
    if (block.through) return;
    this.reportBlockOpen(block.keyword, block.open, block.resume?.keywordStart ?? block.open);
    const last = this.tokens[this.tokens.length - 1];
    const place = last ? last.end : at;
    this.finishBlock(block, place, place);
  }

  private reportBlockOpen(keyword: string, open: number, start: number): void {
    this.problems.push({
      code: "block-not-closed",
      message: `The "{" of "${keyword}" is never closed.`,
      start: open,
      end: open + 1,
      hint: 'Put a "}" behind its last line.',
      seeAlso: { message: `"${keyword}" begins here.`, start, end: start + keyword.length },
    });
  }

  private tooDeep(open: number): boolean {
    const depth = this.blocks.length - 1 + (this.statement?.brackets.length ?? 0);
    if (depth < deepestNesting) return false;
    this.report("nesting-too-deep", open, open + 1, `Brackets stand more than ${deepestNesting} deep here.`, {
      hint: "Split the rung at an @point.",
      data: { deepest: deepestNesting },
    });
    const path = this.text[open] === "(";
    this.at = skipBalanced(this.text, open, (line) => path && this.opensStatement(line, "path")).end;
    return true;
  }

  // ------------------------------------------------------------ brackets

  private openBracket(statement: StatementState): void {
    if (this.tooDeep(this.at)) return;
    statement.brackets.push(this.tokens.length);
    this.emit("(", this.at, this.at + 1);
    this.at++;
  }

  private closeBracket(statement: StatementState): void {
    if (statement.brackets.pop() === undefined) {
      this.report("branch-not-opened", this.at, this.at + 1, 'This ")" closes nothing.', {
        hint: 'Leave it out, or open the branches with "(".',
      });
    } else this.emit(")", this.at, this.at + 1);
    this.at++;
  }

  /**
   * Closes the innermost open bracket of an ended statement. If the rung's only arrow stands in it, it is taken to end there:
   * what is driven seldom stands in a branch alone.
   */
  private closeBracketFor(statement: StatementState): void {
    const index = statement.brackets.pop() as number;
    const open = this.tokens[index] as Token;
    const deepHere = this.problems.some((problem) => problem.code === "nesting-too-deep" && problem.start >= open.start);
    if (!deepHere) {
      this.report("branch-not-closed", open.start, open.end, 'This "(" is never closed.', { hint: 'Put a ")" behind the last branch.' });
    }
    let place = this.tokens.length;
    const arrowsBefore = this.tokens.slice(statement.first, index).some((token) => token.type === "->");
    if (!arrowsBefore) {
      let depth = 0;
      for (let i = index + 1; i < this.tokens.length; i++) {
        const { type } = this.tokens[i] as Token;
        if (type === "(") depth++;
        else if (type === ")") depth--;
        else if (type === "->" && depth === 0) {
          place = i;
          break;
        }
      }
    }
    if (this.tokens[place - 1]?.type === "|") {
      this.tokens.splice(place - 1, 1);
      place--;
    }
    const end = (this.tokens[place - 1] as Token).end;
    this.tokens.splice(place, 0, { type: ")", start: end, end });
  }

  // ------------------------------------------------------------ within a statement

  private readWithin(statement: StatementState): void {
    if (statement.kind === "path") this.readPath(statement);
    else if (statement.kind === "ends" && !statement.done) this.readEnd(statement);
    else if (statement.kind === "declaration" && this.tokens.length === statement.first + 1) this.readName();
    else this.readItem();
  }

  private readPath(statement: StatementState): void {
    const start = this.at;
    const isFirst = this.tokens.length === statement.first + 1;
    const power = powerKeywords.includes(statement.keyword);
    if (!power && !statement.colon && isFirst && this.char !== '"') this.readBareTitle();
    if (this.at !== start) return;
    const two = this.text.slice(start, start + 2);
    if (this.char === "(") this.openBracket(statement);
    else if (this.char === ")") this.closeBracket(statement);
    else if (this.char === "|") {
      this.emit(statement.brackets.length > 0 ? "|" : "SYMBOL", start, start + 1);
      this.at++;
    } else if (two === "->") {
      this.emit("->", start, start + 2);
      this.at += 2;
    } else if (this.char === "/") this.readSlash();
    else if (this.char === ":" && !statement.colon && (power || this.atColon(statement))) {
      statement.colon = true;
      this.emit(":", start, start + 1);
      this.at++;
    } else if (this.char === "," && power && statement.brackets.length === 0) {
      this.emit(",", start, start + 1);
      this.at++;
    } else if (this.char === '"') this.readText();
    else if (this.char === "@") this.readPoint();
    else if (power && !statement.colon && this.match("name") > 0) this.readConductor();
    else if (this.match("name") > 0) this.readWord("name");
    else if (!this.readUnknown()) this.readSymbol();
  }

  /** Whether nothing but a rung's word and its function text stands before this place. */
  private atColon({ first }: StatementState): boolean {
    const count = this.tokens.length - first;
    return count === 1 || (count === 2 && this.tokens[first + 1]?.type === "TEXT");
  }

  /** A rung's function text written without quotation marks. */
  private readBareTitle(): void {
    const match = /^([^":()|@\r\n/#>]+):(?=[ \t\r\n]|$)/.exec(this.text.slice(this.at, this.match("restOfLine")));
    if (!match?.[1]?.trim()) return;
    const end = this.at + match[1].trimEnd().length;
    this.report("text-not-quoted", this.at, end, "A function text stands in quotation marks.", { hint: `Write "${match[1].trimEnd()}".` });
    this.emit("TEXT", this.at, end);
    this.at = end;
  }

  /** The slash of a normally closed contact. */
  private readSlash(): void {
    const start = this.at;
    const blank = this.match("blank", start + 1);
    const next = blank > 0 ? blank : start + 1;
    if (this.match("name", next) > 0) {
      this.emit("/", start, start + 1);
      this.at = next;
      this.readWord("name");
      return;
    }
    this.report("name-missing", start, start + 1, 'A name is missing behind "/".', { hint: 'Write it as in "/CR1".' });
    this.at++;
  }

  private readEnd(statement: StatementState): void {
    const start = this.at;
    const joiner = statement.keyword === "plug" ? "," : "--";
    const sign = this.text.startsWith("--", start) ? "--" : this.char === "," ? "," : undefined;
    if (sign && !(sign === "--" && joiner === ",")) {
      this.at += sign.length;
      if (statement.due) {
        this.report("end-missing", start, this.at, `A port, a component or an @point is missing before "${sign}".`);
        return;
      }
      this.emit(sign, start, this.at);
      statement.due = true;
      return;
    }
    const isPoint = this.char === "@";
    const name = isPoint ? this.match("point") : this.match("name");
    if (statement.due) {
      if (name > 0) {
        statement.due = false;
        if (isPoint) this.readPoint();
        else this.readWord("name");
      } else if (this.char === "@") this.readPoint();
      else if (!this.readUnknown()) {
        const end = this.char === '"' ? Math.max(this.match("text"), start + 1) : start + 1;
        this.report("end-expected", start, end, "A line goes from port to port.", {
          hint: 'Write its ends as in "V1.A -- CYL.cap" or "@P -- V1.P".',
        });
        this.at = end;
      }
      return;
    }
    const behindName = name > 0 ? Math.max(this.match("port", name), -1) : -1;
    const behind = behindName > 0 ? behindName : name;
    const goesOn = name > 0 && /^[ \t]*(?:--|,)/.test(this.text.slice(behind, behind + 80));
    if (name > 0 && (isPoint || behindName > 0 || goesOn)) {
      this.report("dash-missing", start, behind, `A "${joiner}" is missing before "${this.text.slice(start, behind)}".`);
      const last = this.tokens[this.tokens.length - 1] as Token;
      this.emit(joiner, last.end, last.end);
      if (isPoint) this.readPoint();
      else this.readWord("name");
      return;
    }
    statement.done = true;
    this.readItem();
  }

  /** The designation behind a declaration's kind: `2A` is a name there, not two amperes. */
  private readName(): void {
    const end = this.match("name");
    if (end > 0 && !/^\d+$/.test(this.text.slice(this.at, end))) this.readWord("name");
    else if (this.char === "-" && this.match("name", this.at + 1) > 0) this.readTypedDash();
    else this.readItem();
  }

  private readTypedDash(): void {
    const end = this.match("name", this.at + 1);
    this.report("dash-not-typed", this.at, this.at + 1, "The dash before a designation is not typed.", {
      hint: `Write ${this.text.slice(this.at + 1, end)}; the international convention adds the dash.`,
    });
    this.at++;
    this.readWord("name");
  }

  private readItem(): void {
    if (this.char === '"') this.readText();
    else if (this.char === "@") this.readPoint();
    else if (/[\d+-]/.test(this.char) && this.readNumber()) return;
    else if (this.match("name") > 0) this.readWord("wordWithSlash");
    else if (this.char === "-" && this.match("name", this.at + 1) > 0) this.readTypedDash();
    else if (!this.readUnknown()) this.readSymbol();
  }

  /** A number, with its unit if one follows. False if the digits begin a word, as in `1CR`, `13-14` or `5/2`. */
  private readNumber(): boolean {
    const start = this.at;
    const quantity = Math.max(this.match("fraction"), this.match("quantity"));
    if (quantity > 0) {
      this.emit("QUANTITY", start, quantity);
      this.at = quantity;
      return true;
    }
    const comma = this.match("decimalComma");
    if (comma > 0) {
      const written = this.text.slice(start, comma);
      this.report("decimal-comma", start, comma, "Decimals are written with a point.", { hint: `Write ${written.replace(",", ".")}.` });
      this.emit("QUANTITY", start, comma);
      this.at = comma;
      return true;
    }
    const end = this.match("number");
    if (end < 0) return false;
    const word = Math.max(this.match("wordWithSlash"), start);
    if (word > end || this.match("port", end) > 0 || this.match("pins", end) > 0) {
      if (!this.text.slice(start, end).includes(".") && /\d/.test(this.char)) return false;
    }
    this.emit("NUMBER", start, end);
    this.at = end;
    return true;
  }

  /** A word with what is glued to it: `CLAMP+`, `V1.A`, `T1.inst:55-56`. */
  private readWord(shape: "name" | "wordWithSlash"): void {
    const start = this.at;
    let end = this.match(shape);
    const sign = this.match("strokeSign", end);
    if (sign > 0) end = sign;
    this.emit("WORD", start, end);
    const port = this.match("port", end);
    if (port > 0) {
      this.emit("PORT", end, port);
      end = port;
    } else if (this.text[end] === ".") {
      this.report("name-missing", start, end + 1, `A name is missing behind "${this.text.slice(start, end + 1)}".`, {
        hint: 'Write the part directly behind the dot, as in "V1.A".',
      });
      end++;
    }
    const pins = this.match("pins", end);
    if (pins > 0) {
      this.emit("PINS", end, pins);
      end = pins;
    }
    this.at = end;
  }

  /** A conductor before the colon of a feed or a branch: what is glued to it is the colon, not terminals. */
  private readConductor(): void {
    const start = this.at;
    const end = this.match("name");
    const sign = this.match("strokeSign", end);
    this.at = Math.max(end, sign);
    this.emit("WORD", start, this.at);
  }

  private readPoint(): void {
    const start = this.at;
    const end = this.match("point");
    if (end > 0) {
      this.emit("POINT", start, end);
      this.at = end;
      return;
    }
    this.report("name-missing", start, start + 1, 'A name is missing behind "@".', { hint: 'Write it as in "@run".' });
    this.at++;
  }

  private readText(): void {
    const start = this.at;
    let end = this.match("text");
    if (end < 0) {
      end = this.endOfOpenText(start);
      this.report("text-not-closed", start, end, "This text has no closing quotation mark.", {
        hint: 'Put a " behind it, in the same line.',
      });
    } else {
      for (const sequence of this.text.slice(start, end).matchAll(/\\(.)/g)) {
        if (sequence[1] === '"' || sequence[1] === "\\") continue;
        const place = start + sequence.index;
        this.report("unknown-escape", place, place + 2, `"\\${sequence[1]}" means nothing in a text.`, {
          hint: 'Write \\\\ for a backslash and \\" for a quotation mark.',
        });
      }
    }
    this.emit("TEXT", start, end);
    this.at = end;
  }

  /** Where a text without its closing mark is taken to end: before a rung's colon or a block's brace, else with the line. */
  private endOfOpenText(start: number): number {
    const line = this.text.slice(start, this.match("restOfLine", start));
    const cut = this.statement?.kind === "path" && !this.statement.colon ? line.search(/:(?=[ \t]|$)/) : -1;
    if (cut > 0) return start + line.slice(0, cut).trimEnd().length;
    return start + line.replace(/[ \t]*\{[ \t]*$/, "").trimEnd().length;
  }

  private readSymbol(): void {
    const start = this.at;
    const two = this.text.slice(start, start + 2);
    const end = start + (two === "->" || two === "--" ? 2 : 1);
    this.emit("SYMBOL", start, end);
    this.at = end;
  }

  /** Signs the language does not have. Those commonly written for one it has are named, and read as that where it is plain. */
  private readUnknown(): boolean {
    const start = this.at;
    if (this.text.startsWith("//", start)) {
      this.at = this.match("restOfLine");
      this.report("unexpected-character", start, start + 2, '"//" opens no comment.', { hint: "A comment begins with #." });
      return true;
    }
    const typographic = this.match("typographicText");
    if (typographic > 0 && this.statement && !this.statement.due) {
      const end = typographic;
      this.report("unexpected-character", start, start + 1, "Typographic quotation marks hold no text here.", {
        hint: 'Write plain ones: "…".',
      });
      this.emit("TEXT", start, end);
      this.at = end;
      return true;
    }
    const end = this.match("unknown");
    if (end < 0) return false;
    const written = this.text.slice(start, end);
    const hint = signHints.find(([sign]) => written.startsWith(sign))?.[1];
    this.report("unexpected-character", start, end, `${show(written)} has no meaning here.`, hint ? { hint } : {});
    this.at = end;
    if (written === "→" && this.statement?.kind === "path") this.emit("->", start, end);
    return true;
  }
}

/** How a statement may begin. */
const firstWords: Partial<Record<BlockKind, string>> = { fluid: '"line" or "valve V1"', circuit: '"rung:"', power: '"feed" or "branch"' };

const signHints: [string, string][] = [
  [";", "A statement ends with its line."],
  ["=", 'Write the value directly behind the word, as in "bore 40 mm".'],
  ["[", "Branches stand in round brackets: ( a | b )."],
  ["]", "Branches stand in round brackets: ( a | b )."],
  ["→", "Write ->."],
  ["–", "Write --."],
  ["—", "Write --."],
  ["'", 'Texts stand in double quotation marks: "…".'],
  ["&", "Contacts in series stand side by side."],
  ["!", 'A normally closed contact is written with a slash, as in "/CR1".'],
];

/** A sign as it can be printed: control characters by their number. */
function show(written: string): string {
  const first = written.codePointAt(0) ?? 0;
  const printable =
    !/\s/.test(written) &&
    first > 0x20 &&
    !(first >= 0x7f && first < 0xa1) &&
    !(first >= 0x200b && first <= 0x200f) &&
    first !== 0xfeff &&
    first !== 0xfffd;
  if (printable) return `"${written.length > 12 ? `${[...written].slice(0, 12).join("")}…` : written}"`;
  return `The character U+${first.toString(16).toUpperCase().padStart(4, "0")}`;
}
