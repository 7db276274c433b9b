import type { Mm, Size } from "../drawing/geometry.js";
import type { PaperName } from "../machine/model.js";

/** A sheet size with its frame. Lengths in mm. */
export interface Paper {
  name: PaperName;
  standard: "iso" | "asme";
  size: Size;
  margin: { left: Mm; right: Mm; top: Mm; bottom: Mm };
  /** Number of fields along the width and along the height. */
  zones: { across: number; down: number };
  /** Title block: in the corner beside the notes, or over the whole width with the notes above it. */
  titleBlock: { template: string; size: Size; wholeWidth: boolean };
}

const inch = 25.4;

/** ISO 216 sizes, framed after ISO 5457: 20 mm at the filing side, 10 mm elsewhere. */
function iso(name: PaperName, width: Mm, height: Mm): Paper {
  return {
    name,
    standard: "iso",
    size: { width, height },
    margin: { left: 20, right: 10, top: 10, bottom: 10 },
    // Fields of 50 mm count from the centring marks; what is left over lengthens or shortens the last one of each half.
    zones: { across: 2 * Math.round(width / 100), down: 2 * Math.round(height / 100) },
    titleBlock: { template: "iso", size: { width: 180, height: 30 }, wholeWidth: width - 30 <= 180 },
  };
}

/** Sizes, margins (top and bottom, left and right) and zones after ASME Y14.1, given in inches there. */
function asme(name: PaperName, down: number, across: number, ends: number, sides: number, zones: { across: number; down: number }): Paper {
  const large = down >= 22 && across >= 34;
  return {
    name,
    standard: "asme",
    size: { width: across * inch, height: down * inch },
    margin: { left: sides * inch, right: sides * inch, top: ends * inch, bottom: ends * inch },
    zones,
    titleBlock: {
      template: large ? "asme-large" : "asme",
      size: large ? { width: 7.62 * inch, height: 2.5 * inch } : { width: 6.25 * inch, height: 2 * inch },
      wholeWidth: false,
    },
  };
}

/** Every sheet size, A4 upright and all others lying. ASME divides size A into no zones; here it takes those of B, for references need them. */
export const papers: Record<PaperName, Paper> = {
  A4: iso("A4", 210, 297),
  A3: iso("A3", 420, 297),
  A2: iso("A2", 594, 420),
  A1: iso("A1", 841, 594),
  A0: iso("A0", 1189, 841),
  "ANSI-A": asme("ANSI-A", 8.5, 11, 0.38, 0.25, { across: 4, down: 2 }),
  "ANSI-B": asme("ANSI-B", 11, 17, 0.38, 0.62, { across: 4, down: 2 }),
  "ANSI-C": asme("ANSI-C", 17, 22, 0.75, 0.5, { across: 4, down: 4 }),
  "ANSI-D": asme("ANSI-D", 22, 34, 0.5, 1, { across: 8, down: 4 }),
  "ANSI-E": asme("ANSI-E", 34, 44, 1, 0.5, { across: 8, down: 8 }),
};
