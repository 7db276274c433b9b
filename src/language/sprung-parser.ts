import type { CstNode, Grammar, LangiumParser, Lexer, LexerResult } from "langium";
import { AstUtils, createDefaultCoreModule, createDefaultSharedCoreModule, EmptyFileSystem, GrammarAST, inject } from "langium";
import type { Document } from "./generated/ast.js";
import { SprungTerminals } from "./generated/ast.js";
import { SprungGeneratedModule, SprungGeneratedSharedModule } from "./generated/module.js";
import type { Problem, Tokens } from "./token.js";

// The build packs this file and all it imports into one, because reading Langium's many small files takes several times
// as long as the work. It must therefore import nothing of this project that others import too, save types.

/** What the grammar's rules made of a text: its syntax nodes, and what was wrong with it. */
export interface Parsed {
  document: Document;
  problems: Problem[];
  /** Tokens no rule took. There are none while the lexer keeps its promise; a fuzz test holds it to that. */
  leftOver: { start: number; end: number }[];
}

/** Gives a parser for whole texts, reading tokens from the given lexer. Building it takes some tens of milliseconds. */
export function createSprungParser(tokenize: (text: string) => Tokens): (text: string) => Parsed {
  let problems: Problem[] = [];
  const shared = inject(createDefaultSharedCoreModule(EmptyFileSystem), SprungGeneratedSharedModule);
  const services = inject(createDefaultCoreModule({ shared }), SprungGeneratedModule, {
    parser: {
      Lexer: (own: { Grammar: Grammar }) =>
        new OwnLexer(own.Grammar, (text) => {
          const result = tokenize(text);
          problems = result.problems;
          return result;
        }),
      // One token ahead decides everywhere, which is much quicker than looking as far as it takes.
      ParserConfig: () => ({ maxLookahead: 1, recoveryEnabled: true, nodeLocationTracking: "full", skipValidations: true }),
    },
  });
  const parser: LangiumParser = services.parser.LangiumParser;
  skipHiddenNodes(parser);
  return (text) => {
    const result = parser.parse<Document>(text);
    const leftOver = result.parserErrors.map(({ token }) => ({
      start: Number.isFinite(token.startOffset) ? token.startOffset : text.length,
      end: Number.isFinite(token.endOffset) ? (token.endOffset as number) + 1 : text.length,
    }));
    return { document: result.value, problems, leftOver };
  };
}

/** Where a syntax node stands in the text; undefined for one without a token of its own. */
export function nodeExtent(node: { $cstNode?: CstNode | undefined }): { start: number; end: number } | undefined {
  const cst = node.$cstNode;
  if (!cst) return undefined;
  const { offset, end } = cst;
  return end === 0 && offset === 0 ? undefined : { start: offset, end };
}

type IToken = LexerResult["tokens"][number];

/** Hands the project's own tokens to the parser in its form. */
class OwnLexer implements Lexer {
  readonly definition: Lexer["definition"];

  constructor(
    grammar: Grammar,
    private readonly cut: (text: string) => Tokens,
  ) {
    const names = new Set(Object.keys(SprungTerminals));
    for (const node of AstUtils.streamAllContents(grammar)) if (GrammarAST.isKeyword(node)) names.add(node.value);
    // The parser tells tokens by their type alone; a pattern is never tried.
    this.definition = Object.fromEntries([...names].map((name) => [name, { name, PATTERN: /./ }]));
  }

  tokenize(text: string): LexerResult {
    const { tokens } = this.cut(text);
    return { tokens: tokens.map((token) => this.translate(token, text)), hidden: [], errors: [], report: { diagnostics: [] } };
  }

  /** Lines and columns are left at 1: places are told from offsets alone. */
  private translate({ type, start, end }: Tokens["tokens"][number], text: string): IToken {
    const tokenType = this.definition[type];
    if (!tokenType) throw new Error(`The grammar has no token ${type}.`);
    return {
      // A misspelt keyword that was understood is handed on as the keyword.
      image: isKeyword(type) ? type : text.slice(start, end),
      startOffset: start,
      endOffset: end - 1,
      startLine: 1,
      endLine: 1,
      startColumn: start + 1,
      endColumn: end,
      tokenType,
      tokenTypeIdx: tokenType.tokenTypeIdx as number,
    };
  }
}

function isKeyword(type: string): boolean {
  return /^[a-z]/.test(type);
}

/**
 * The lexer hands on no comments or blanks, but the parser still looks among all neighbours for the place of none of them, which
 * takes minutes for a line of a hundred thousand words. Its builder is therefore spared the call.
 */
function skipHiddenNodes(parser: LangiumParser): void {
  const { nodeBuilder } = parser as unknown as { nodeBuilder?: { addHiddenNodes?: () => void } };
  if (nodeBuilder?.addHiddenNodes) nodeBuilder.addHiddenNodes = () => {};
}
