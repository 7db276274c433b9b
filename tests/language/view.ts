import type { SourceRange } from "../../src/language/diagnostic.js";
import { parse } from "../../src/language/parse.js";
import type { Item, LineEnd, PathItem, Series, Statement } from "../../src/language/tree.js";

/** `2:5-2:9`, lines and columns from 1, the end one past the last character. */
export function at({ line, column, endLine, endColumn }: SourceRange): string {
  return `${line}:${column}-${endLine}:${endColumn}`;
}

/** Each finding as `code 2:5-2:9`. */
export function findings(text: string): string[] {
  return parse(text, "m.sprung").diagnostics.map((d) => `${d.code} ${at(d.at)}`);
}

/** The statements of a text that must have no slip. */
export function statementsOf(text: string): Statement[] {
  const { tree, diagnostics } = parse(text, "m.sprung");
  if (diagnostics.length > 0) throw new Error(diagnostics.map((d) => `${at(d.at)} ${d.code} ${d.message}`).join("\n"));
  return tree.statements;
}

/** The statement of a text that has one. */
export function only<Kind extends Statement["kind"]>(kind: Kind, statements: readonly Statement[]): Statement & { kind: Kind } {
  const [statement] = statements;
  if (statements.length !== 1 || statement?.kind !== kind) throw new Error(`expected one ${kind}, got ${statements.map((it) => it.kind)}`);
  return statement as Statement & { kind: Kind };
}

/** An item in short: `word bore`, `quantity 40 mm`. */
export function showItem(item: Item): string {
  return item.kind === "point" ? `point ${item.name}` : `${item.kind} ${item.text}`;
}

/** A path written again in the language, which shows how it was understood. */
export function showPath(series: Series): string {
  const written = series.items.map(showPathItem);
  if (series.arrow !== undefined) written.splice(series.arrow, 0, "->");
  return written.join(" ");
}

function showPathItem(item: PathItem): string {
  if (item.kind === "parallel") return `(${item.branches.map(showPath).join(" | ")})`;
  if (item.kind === "point") return `@${item.name}`;
  const { negated, name, part, terminals } = item;
  return `${negated ? "/" : ""}${name.text}${part ? `.${part.text}` : ""}${terminals ? `:${terminals.text}` : ""}`;
}

export function showEnd(end: LineEnd): string {
  if (end.kind === "point") return `@${end.name}`;
  return end.port ? `${end.name.text}.${end.port.text}` : end.name.text;
}

/** The items of a declaration that stands alone in a text, in short. */
export function itemsOf(text: string): string[] {
  return only("declaration", statementsOf(text)).items.map(showItem);
}

/** The path of a rung that stands alone in a text, written again. */
export function pathOf(text: string): string {
  const ladder = only("ladder", statementsOf(text));
  const [rung] = ladder.statements;
  if (rung?.kind !== "rung") throw new Error("expected a rung");
  return showPath(rung.path);
}
