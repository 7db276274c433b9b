import type { World } from "../world.js";

/** The family name under which the font is embedded. */
export const family = "Source Sans 3";

/** The whole font, for PDF. */
export function fontFile(world: World, bold: boolean): Uint8Array {
  return world.readAsset(`templates/fonts/SourceSans3-${bold ? "SemiBold" : "Regular"}.ttf`);
}

/** The carried pieces of the font for SVG and the characters each is for. */
const subsets = [
  {
    name: "latin",
    range: "U+0000-00FF,U+0131,U+0152-0153,U+02BB-02BC,U+02C6,U+02DA,U+02DC,U+2000-206F,U+20AC,U+2122,U+2191,U+2193,U+2212,U+2215",
  },
  {
    name: "latin-ext",
    range:
      "U+0100-0130,U+0132-0151,U+0154-02BA,U+02BD-02C5,U+02C7-02CC,U+02CE-02D7,U+02DD-02FF,U+1E00-1E9F,U+1EF2-1EFF,U+20A0-20AB,U+20AD-20C0,U+2113",
  },
  { name: "greek", range: "U+0370-03FF" },
  { name: "cyrillic", range: "U+0301,U+0400-045F,U+0490-0491,U+04B0-04B1,U+2116" },
];

/** `@font-face` rules, with the pieces of the font in them, for exactly the pieces that these characters need. */
export function fontFaces(world: World, characters: { regular: ReadonlySet<string>; bold: ReadonlySet<string> }): string {
  const rules: string[] = [];
  for (const [used, face, weight] of [
    [characters.regular, "Regular", 400],
    [characters.bold, "SemiBold", 600],
  ] as const) {
    for (const { name, range } of subsets) {
      if (![...used].some((character) => inRange(character, range))) continue;
      const data = base64(world, `templates/fonts/SourceSans3-${face}-${name}.woff2`);
      rules.push(
        `@font-face{font-family:"${family}";font-weight:${weight};src:url(data:font/woff2;base64,${data}) format("woff2");unicode-range:${range}}`,
      );
    }
  }
  return rules.join("\n");
}

const bounds = new Map<string, [number, number][]>();

/** Whether a character is among those that a piece is for; `range` is as CSS writes it. */
function inRange(character: string, range: string): boolean {
  let parts = bounds.get(range);
  if (!parts) {
    parts = range.split(",").map((part): [number, number] => {
      const [first = "", last = first] = part.slice(2).split("-");
      return [Number.parseInt(first, 16), Number.parseInt(last, 16)];
    });
    bounds.set(range, parts);
  }
  const code = character.codePointAt(0) as number;
  return parts.some(([first, last]) => code >= first && code <= last);
}

const encoded = new WeakMap<World, Map<string, string>>();

/** The piece as base64, read once however many sheets carry it. */
function base64(world: World, path: string): string {
  let known = encoded.get(world);
  if (!known) {
    known = new Map();
    encoded.set(world, known);
  }
  let text = known.get(path);
  if (text === undefined) {
    let bytes = "";
    for (const byte of world.readAsset(path)) bytes += String.fromCharCode(byte);
    text = btoa(bytes);
    known.set(path, text);
  }
  return text;
}
