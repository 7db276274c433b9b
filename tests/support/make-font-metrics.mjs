// Writes src/drawing/font-metrics.ts from the fonts in templates/fonts. Run it after changing a font:
//   node tests/support/make-font-metrics.mjs
import { readFileSync, writeFileSync } from "node:fs";
import { create } from "fontkit";

const root = new URL("../../", import.meta.url);
const font = (name) => create(readFileSync(new URL(`templates/fonts/${name}`, root)));

/** Runs of consecutive code points, one a line: the first in hexadecimal, then the advance of each in thousandths of the em. */
function advances(face) {
  const lines = [];
  let next = -1;
  for (const code of [...face.characterSet].sort((a, b) => a - b)) {
    if (code < 0x20 || (code >= 0x7f && code < 0xa0)) continue;
    const advance = Math.round((face.glyphForCodePoint(code).advanceWidth * 1000) / face.unitsPerEm);
    if (code === next) lines[lines.length - 1] += ` ${advance}`;
    else lines.push(`${code.toString(16)} ${advance}`);
    next = code + 1;
  }
  return lines.join("\n");
}

const regular = font("SourceSans3-Regular.ttf");
const bold = font("SourceSans3-SemiBold.ttf");
writeFileSync(
  new URL("src/drawing/font-metrics.ts", root),
  `// Written by tests/support/make-font-metrics.mjs from templates/fonts; do not edit by hand.

/** Source Sans 3, in thousandths of the em. */
export const capHeight = ${regular.capHeight};
export const ascent = ${regular.ascent};
export const descent = ${-regular.descent};

/** Advance widths: on each line the first code point in hexadecimal, then one width for it and each that follows it. */
export const regularAdvances = \`
${advances(regular)}
\`;

export const boldAdvances = \`
${advances(bold)}
\`;
`,
);
