import type { Diagnostic, Severity } from "../language/diagnostic.js";
import { formatDiagnostic } from "../language/format-diagnostic.js";

/** What was found in one drawing. */
export interface Findings {
  diagnostics: readonly Diagnostic[];
  sources: Map<string, string>;
}

/** The findings in the editor's sentences, those less grave than `least` left out, then their count; empty if there are none. */
export function wordFindings(findings: readonly Findings[], color: boolean, least: Severity = "note"): string {
  const shown = findings.map(({ diagnostics, sources }) => ({
    sources,
    diagnostics: diagnostics.filter(({ severity }) => rank[severity] <= rank[least]),
  }));
  const all = shown.flatMap(({ diagnostics }) => diagnostics);
  if (all.length === 0) return "";
  const texts = shown.flatMap(({ diagnostics, sources }) => diagnostics.map((d) => formatDiagnostic(d, sources, { color })));
  return [...texts.map((text) => `${text.trimEnd()}\n`), `${countFindings(all)}\n`].join("\n");
}

const rank: Record<Severity, number> = { error: 0, warning: 1, note: 2 };

/** `1 error, 2 warnings`. */
export function countFindings(diagnostics: readonly Diagnostic[]): string {
  const counts = (Object.keys(rank) as Severity[]).map((severity) => {
    const count = diagnostics.filter((d) => d.severity === severity).length;
    return count === 0 ? "" : `${count} ${severity}${count === 1 ? "" : "s"}`;
  });
  return counts.filter((text) => text !== "").join(", ");
}
