declare module "svgdom" {
  /** An empty SVG document in a window without a screen. */
  export function createSVGWindow(): Window & typeof globalThis;
}
