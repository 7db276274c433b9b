import type { DrawingSet } from "../drawing/marks.js";
import { fileStem } from "../output/file-name.js";
import type { World } from "../world.js";
import type { OutputFile } from "./desk.js";

/** The files of a set in the formats asked for; both if none is. */
export async function writeFormats(set: DrawingSet, { svg, pdf }: { svg?: boolean; pdf?: boolean }, world: World): Promise<OutputFile[]> {
  const both = !svg && !pdf;
  const files: OutputFile[] = [];
  if (svg || both) {
    const { writeSvg } = await import("../output/svg.js");
    files.push(...(await writeSvg(set, world)).map(({ name, text }) => ({ name, content: text })));
  }
  if (pdf || both) {
    const { writePdf } = await import("../output/pdf.js");
    files.push({ name: `${fileStem(set.info)}.pdf`, content: await writePdf(set, world) });
  }
  return files;
}

/** `drawings/TS-2040.pdf`, as the user would write it. */
export function joinPath(folder: string, name: string): string {
  if (folder === "." || folder === "") return name;
  return folder.endsWith("/") ? folder + name : `${folder}/${name}`;
}
