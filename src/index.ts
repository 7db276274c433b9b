/**
 * Spoolrung as a library: `compile` a drawing, then write its set.
 *
 * ```ts
 * import { compile, nodeWorld, writePdf } from "spoolrung";
 * const { set, diagnostics } = await compile("samples/tray-stamper.sprung", nodeWorld);
 * const pdf = set && (await writePdf(set, nodeWorld));
 * ```
 */
export { type Compiled, compile, type Examined, examine, type Told } from "./compile.js";
export type { DrawingSet, DrawnSheet, Mark, PartId } from "./drawing/marks.js";
export type { Diagnostic, Severity, SourceRange } from "./language/diagnostic.js";
export { formatDiagnostic } from "./language/format-diagnostic.js";
export type { Layout } from "./layout/placement.js";
export type { Machine } from "./machine/model.js";
export { nodeWorld } from "./node-world.js";
export { writePdf } from "./output/pdf.js";
export { writeSvg } from "./output/svg.js";
export type { ContactReference, CrossReferenceRow } from "./schedules/rows.js";
export type { World } from "./world.js";
