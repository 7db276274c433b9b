declare module "fontkit" {
  export interface Font {
    unitsPerEm: number;
    capHeight: number;
    ascent: number;
    descent: number;
    characterSet: number[];
    glyphsForString(text: string): { advanceWidth: number }[];
    glyphForCodePoint(code: number): { advanceWidth: number; bbox: { minY: number; maxY: number } };
  }
  export function create(data: Uint8Array): Font;
}
