import { getDocument } from "pdfjs-dist/legacy/build/pdf.mjs";

const pointsPerMm = 72 / 25.4;

export interface ReadPage {
  sizeMm: [number, number];
  texts: string[];
  /** Each link with its box in mm from the upper left corner, and where it lands. */
  links: { box: [number, number, number, number]; page: number; at: [number, number] }[];
}

export interface ReadPdf {
  title: string;
  author: string;
  subject: string;
  keywords: string;
  language: string | null;
  created: string;
  labels: string[] | null;
  pages: ReadPage[];
  outline: OutlineItem[];
}

export interface OutlineItem {
  title: string;
  page: number;
  items: OutlineItem[];
}

/** Reads a PDF back with pdfjs. */
export async function readPdf(bytes: Uint8Array): Promise<ReadPdf> {
  const task = getDocument({ data: new Uint8Array(bytes), useSystemFonts: false, verbosity: 0 });
  const pdf = await task.promise;
  const info = (await pdf.getMetadata()).info as Record<string, string>;
  const land = async (dest: unknown): Promise<{ page: number; at: [number, number] }> => {
    const explicit = (typeof dest === "string" ? await pdf.getDestination(dest) : dest) as unknown[] | null;
    if (!explicit) throw new Error(`Nothing is at ${JSON.stringify(dest)}.`);
    const page = (await pdf.getPageIndex(explicit[0] as Parameters<typeof pdf.getPageIndex>[0])) + 1;
    const height = (await pdf.getPage(page)).view[3] as number;
    const [left, top] = [Number(explicit[2] ?? 0), Number(explicit[3] ?? height)];
    return { page, at: [left / pointsPerMm, (height - top) / pointsPerMm] };
  };
  const pages: ReadPage[] = [];
  for (let number = 1; number <= pdf.numPages; number++) {
    const page = await pdf.getPage(number);
    const [, , width, height] = page.view as [number, number, number, number];
    const texts = (await page.getTextContent()).items.flatMap((item) => ("str" in item && item.str !== "" ? [item.str] : []));
    const links: ReadPage["links"] = [];
    for (const annotation of await page.getAnnotations()) {
      if (annotation.subtype !== "Link") continue;
      const [x1, y1, x2, y2] = annotation.rect as [number, number, number, number];
      const box = [x1, height - y2, x2 - x1, y2 - y1].map((value) => value / pointsPerMm) as [number, number, number, number];
      links.push({ box, ...(await land(annotation.dest)) });
    }
    pages.push({ sizeMm: [width / pointsPerMm, height / pointsPerMm], texts, links });
  }
  const items = async (found: { title: string; dest: unknown; items: unknown[] }[]): Promise<OutlineItem[]> => {
    const read: OutlineItem[] = [];
    for (const { title, dest, items: below } of found) {
      read.push({ title, page: (await land(dest)).page, items: await items(below as typeof found) });
    }
    return read;
  };
  const result: ReadPdf = {
    title: info.Title ?? "",
    author: info.Author ?? "",
    subject: info.Subject ?? "",
    keywords: info.Keywords ?? "",
    language: info.Language ?? null,
    created: info.CreationDate ?? "",
    labels: await pdf.getPageLabels(),
    pages,
    outline: await items(((await pdf.getOutline()) ?? []) as unknown as Parameters<typeof items>[0]),
  };
  await task.destroy();
  return result;
}
