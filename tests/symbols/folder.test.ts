import { Resvg } from "@resvg/resvg-js";
import { PNG } from "pngjs";
import { expect, test } from "vitest";
import { pathData } from "../../src/output/svg.js";
import { openSymbols } from "../../src/symbols/library.js";
import type { Direction, Symbol } from "../../src/symbols/symbol.js";
import { assets } from "../support/assets.js";
import { drawnBox, pieces, touch } from "./geometry.js";

const library = openSymbols(assets);
const textOf = (name: string) => new TextDecoder().decode(assets.readAsset(`symbols/${name}.svg`));

/** Modules from memory: ISO 1219-1:2012 has 2.0 mm for fluid symbols, IEC 60617 draws on a 2.5 mm grid. */
const moduleOf = (name: string) => (name.startsWith("fluid/") ? 2 : 2.5);

/** Empty space in a file around what is drawn, modules. */
const margin = 1.5;

const outward: Record<Direction, (symbol: Symbol, port: { x: number; y: number }) => number> = {
  left: ({ box }, { x }) => x - box.x,
  right: ({ box }, { x }) => box.x + box.width - x,
  up: ({ box }, { y }) => y - box.y,
  down: ({ box }, { y }) => box.y + box.height - y,
};

/** What every symbol file keeps to. */
const promises: Record<string, (name: string, symbol: Symbol, module: number) => void> = {
  "has a title, and draws something with a line of 0.25 mm": (_name, symbol) => {
    expect(symbol.title).toMatch(/^[A-Z].+/);
    const strokes = symbol.shapes.filter((shape) => shape.kind === "stroke");
    expect(strokes.length).toBeGreaterThan(0);
    expect(strokes.filter((stroke) => stroke.width !== 0.25)).toEqual([]);
  },

  "the box is what is drawn, and the file shows it with its margin": (name, symbol, module) => {
    const drawn = drawnBox(symbol);
    const words = symbol.shapes.filter((shape) => shape.kind === "text");
    for (const key of ["x", "y", "width", "height"] as const) {
      // Texts may reach out of the lines; the box is then larger.
      if (words.length === 0) expect(symbol.box[key], key).toBeCloseTo(drawn[key], 1);
    }
    expect(symbol.box.width).toBeGreaterThanOrEqual(drawn.width - 0.01);
    const [, width, height, view] = /width="([\d.]+)mm" height="([\d.]+)mm" viewBox="([^"]+)"/.exec(textOf(name)) ?? [];
    const [x, y, w, h] = (view ?? "").split(" ").map(Number) as [number, number, number, number];
    expect(Number(width)).toBeCloseTo(w * module, 3);
    expect(Number(height)).toBeCloseTo(h * module, 3);
    expect((x + margin) * module).toBeCloseTo(symbol.box.x, 2);
    expect((y + margin) * module).toBeCloseTo(symbol.box.y, 2);
    expect((w - 2 * margin) * module).toBeCloseTo(symbol.box.width, 2);
    expect((h - 2 * margin) * module).toBeCloseTo(symbol.box.height, 2);
  },

  "ports lie on the grid, on ink, and lead away from the symbol": (_name, symbol, module) => {
    const ink = pieces(symbol.shapes);
    for (const port of symbol.ports) {
      expect(
        [port.x / module, port.y / module].map((n) => n - Math.round(n)),
        port.name,
      ).toEqual([0, 0]);
      expect(
        ink.some((line) => touch([port], line)),
        `${port.name} on ink`,
      ).toBe(true);
    }
    // No line that leaves a port on its way out runs into the symbol.
    for (const port of symbol.ports) {
      const beyond = outward[port.direction](symbol, port);
      const sideways = port.direction === "left" || port.direction === "right";
      const way = port.direction === "left" || port.direction === "up" ? -1 : 1;
      const far = sideways ? { x: port.x + way * (beyond + 1), y: port.y } : { x: port.x, y: port.y + way * (beyond + 1) };
      const near = sideways ? { x: port.x + way, y: port.y } : { x: port.x, y: port.y + way };
      const hits = ink.filter((line) => line.some((p, i) => i > 0 && crosses(near, far, line[i - 1] as typeof p, p)));
      expect(hits.length, `${port.name} leaves freely`).toBe(0);
    }
  },

  "contacts and loads have a pin at each side, 4 modules out, in a north-american rung": (name, symbol) => {
    const pins = symbol.ports.filter((port) => port.name === "in" || port.name === "out");
    if (!name.startsWith("north-american/") || pins.length < 2 || symbol.spots["terminal-in"] === undefined) return;
    expect(pins.map(({ name: pin, x, y, direction }) => [pin, x, y, direction])).toEqual([
      ["in", -10, 0, "left"],
      ["out", 10, 0, "right"],
    ]);
  },

  "any viewer sees what the program reads": (name, symbol, module) => {
    // resvg, a general-purpose SVG renderer, draws the file; beside it what was read from it, written anew.
    const { box } = symbol;
    const size = `width="${box.width + 4}mm" height="${box.height + 4}mm" viewBox="${box.x - 2} ${box.y - 2} ${box.width + 4} ${box.height + 4}"`;
    const read = symbol.shapes.map((shape) => {
      if (shape.kind === "text") return "";
      const d = pathData(shape.path);
      if (shape.kind === "fill") return `<path d="${d}" fill="black"/>`;
      const dash = shape.dash ? ` stroke-dasharray="${shape.dash.join(" ")}"` : "";
      return `<path d="${d}" fill="none" stroke="black" stroke-width="${shape.width}" stroke-linecap="round" stroke-linejoin="round"${dash}/>`;
    });
    const own = `<svg xmlns="http://www.w3.org/2000/svg" ${size}>${read.join("")}</svg>`;
    const file = textOf(name)
      .replace(/<g [^>]*>(?:\s*<circle class="(?:port|spot)"[^>]*\/>)+\s*<\/g>/g, "")
      .replace(
        /width="[^"]*" height="[^"]*" viewBox="[^"]*"/,
        size.replace(
          /viewBox="([^"]*)"/,
          (_, v: string) =>
            `viewBox="${v
              .split(" ")
              .map((n) => Number(n) / module)
              .join(" ")}"`,
        ),
      );
    const paint = (svg: string) =>
      PNG.sync.read(
        new Resvg(svg, { fitTo: { mode: "zoom", value: 2 }, background: "white", font: { loadSystemFonts: false } }).render().asPng(),
      );
    const [a, b] = [paint(own), paint(file)];
    expect([a.width, a.height]).toEqual([b.width, b.height]);
    let ink = 0;
    let off = 0;
    for (let i = 0; i < a.data.length; i += 4) {
      if ((a.data[i] as number) < 128) ink++;
      if (Math.abs((a.data[i] as number) - (b.data[i] as number)) > 96) off++;
    }
    expect(ink).toBeGreaterThan(10);
    expect(off).toBeLessThanOrEqual(ink * 0.01);
  },
};

test.each(library.names())("%s keeps every promise of a symbol", (name) => {
  const symbol = library.get(name);
  for (const keeps of Object.values(promises)) keeps(name, symbol, moduleOf(name));
});

/** Whether two stretches cross or touch. */
function crosses(
  a: { x: number; y: number },
  b: { x: number; y: number },
  c: { x: number; y: number },
  d: { x: number; y: number },
): boolean {
  const side = (p: typeof a, q: typeof a, r: typeof a) => Math.sign((q.x - p.x) * (r.y - p.y) - (q.y - p.y) * (r.x - p.x));
  return side(a, b, c) !== side(a, b, d) && side(c, d, a) !== side(c, d, b);
}

test("a spot's text stands clear of the symbol", () => {
  // A designation of four letters, 2.5 mm high, is about 8 mm wide; coils and lamps carry theirs inside.
  for (const name of library.names()) {
    const symbol = library.get(name);
    const spot = symbol.spots.designation;
    if (!spot || /(coil|counter)/.test(name)) continue;
    const left = spot.anchor === "start" ? spot.x : spot.anchor === "end" ? spot.x - 8 : spot.x - 4;
    const corners = [
      [left, spot.y],
      [left + 8, spot.y],
      [left + 8, spot.y - 2.5],
      [left, spot.y - 2.5],
      [left, spot.y],
    ].map(([x, y]) => ({ x: x as number, y: y as number }));
    const inside = pieces(symbol.shapes)
      .flat()
      .filter(({ x, y }) => x > left && x < left + 8 && y < spot.y && y > spot.y - 2.5);
    const cut = pieces(symbol.shapes).filter((line) =>
      line.some((p, i) => i > 0 && corners.some((c, j) => j > 0 && crosses(corners[j - 1] as typeof c, c, line[i - 1] as typeof p, p))),
    );
    expect({ name, inside, cut }).toEqual({ name, inside: [], cut: [] });
  }
});
