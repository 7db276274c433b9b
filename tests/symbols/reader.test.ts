import { describe, expect, test } from "vitest";
import { openSymbols } from "../../src/symbols/library.js";
import { parsePathData } from "../../src/symbols/path-data.js";
import { readSymbol } from "../../src/symbols/svg-reader.js";
import type { World } from "../../src/world.js";

const file = (body: string, root = 'width="20mm" height="10mm" viewBox="-4 -2 8 4"') =>
  `<svg xmlns="http://www.w3.org/2000/svg" ${root} fill="none" stroke="black"><title>Thing</title>${body}</svg>`;
const read = (body: string, root?: string) => readSymbol(file(body, root), "test");

describe("a symbol file is read in millimetres", () => {
  test("lines, ports and spots", () => {
    const symbol = read(
      '<line x1="-4" y1="0" x2="-1" y2="0"/><circle class="port" id="port-in" cx="-4" cy="0" r=".3" data-direction="left"/><circle class="spot" data-name="designation" data-anchor="start" cx="1" cy="-1" r=".1"/>',
    );
    expect(symbol).toMatchObject({
      title: "Thing",
      ports: [{ name: "in", x: -10, y: 0, direction: "left" }],
      spots: { designation: { x: 2.5, y: -2.5, anchor: "start" } },
      shapes: [
        {
          kind: "stroke",
          width: 0.25,
          path: [
            { op: "M", x: -10, y: 0 },
            { op: "L", x: -2.5, y: 0 },
          ],
        },
      ],
      box: { x: -10, y: 0, width: 7.5, height: 0 },
    });
  });

  test("style comes from the element or those around it; filled and stroked gives both", () => {
    const { shapes } = read(
      '<g stroke-width="0.2" stroke-dasharray="0.8 0.4"><path d="M0 0H1"/></g><path fill="black" stroke="none" d="M0 0H1V1Z"/><rect fill="black" x="0" y="0" width="1" height="1"/>',
    );
    expect(shapes.map(({ kind }) => kind)).toEqual(["stroke", "fill", "fill", "stroke"]);
    expect(shapes[0]).toMatchObject({ width: 0.5, dash: [2, 1] });
  });

  test("circles, ellipses, polygons, polylines and rounded rectangles keep their extent", () => {
    const box = (body: string) => read(body).box;
    expect(box('<circle cx="0" cy="0" r="1"/>')).toEqual({ x: -2.5, y: -2.5, width: 5, height: 5 });
    expect(box('<ellipse cx="0" cy="0" rx="2" ry="1"/>')).toEqual({ x: -5, y: -2.5, width: 10, height: 5 });
    expect(box('<polygon points="0,0 1,0 1,1"/>')).toEqual({ x: 0, y: 0, width: 2.5, height: 2.5 });
    expect(box('<polyline points="0 0 1 0 1 2"/>')).toEqual({ x: 0, y: 0, width: 2.5, height: 5 });
    expect(box('<rect x="-1" y="-1" width="2" height="2" rx=".5"/>')).toEqual({ x: -2.5, y: -2.5, width: 5, height: 5 });
    expect(box('<path d="M-1 0A1 1 0 0 1 1 0"/>')).toEqual({ x: -2.5, y: -2.5, width: 5, height: 2.5 });
    expect(box('<path d="M-1 0A1 1 0 0 0 1 0"/>')).toEqual({ x: -2.5, y: 0, width: 5, height: 2.5 });
  });

  test("text stands on its baseline in the file and is kept by its middle", () => {
    const { shapes } = read('<path d="M0 0H1"/><text x="0" y=".5" font-size="1.5152" text-anchor="middle">M &amp; N</text>');
    expect(shapes[1]).toMatchObject({ kind: "text", text: "M & N", height: 2.5, anchor: "middle", at: { x: 0, y: 0 } });
  });
});

describe("path data", () => {
  test("absolute and relative, repeated and run together", () => {
    const wanted = [
      { op: "M", x: 1, y: 1 },
      { op: "L", x: 2, y: 1 },
      { op: "L", x: 2, y: 3 },
      { op: "L", x: 0, y: 0 },
      { op: "Z" },
      { op: "M", x: 2, y: 2 },
      { op: "L", x: 3, y: 2 },
    ];
    expect(parsePathData("M1 1 2 1V3L0,0ZM2 2H3")).toEqual(wanted);
    expect(parsePathData("m1,1 1 0v2l-2-3z m1 1h1")).toEqual(wanted);
    expect(parsePathData("M0 0A1 1 0 012 0")).toEqual([
      { op: "M", x: 0, y: 0 },
      { op: "A", radius: 1, large: false, sweep: true, x: 2, y: 0 },
    ]);
    expect(parsePathData("M0 0c1 0 1 1 .5.5")).toEqual([
      { op: "M", x: 0, y: 0 },
      { op: "C", x1: 1, y1: 0, x2: 1, y2: 1, x: 0.5, y: 0.5 },
    ]);
  });

  test.each([
    ["M0 0Q1 1 2 2", 'the command "Q"'],
    ["L0 0", "it must begin with M"],
    ["M0", '"the end" stands where a number should'],
    ["M0 0A1 2 0 0 0 1 1", "an arc must be part of a circle"],
    ["M0 0A1 1 0 2 0 1 1", '"2" stands where a flag should'],
    ["M0 0Z1 1", '"1" stands where a command should'],
  ])("%s is refused: %s", (data, says) => {
    expect(() => parsePathData(data)).toThrow(says);
  });
});

describe("a broken symbol file is named and the fault said", () => {
  const world = (text: string): World => ({
    readText: async () => ({ problem: "missing" }),
    readAsset: () => new TextEncoder().encode(text),
    listAssets: () => [],
  });
  test.each([
    ["nothing drawn", file(""), "it draws nothing"],
    ["not SVG", "<html></html>", "it begins with <html> and not with <svg>"],
    ["not XML", "<svg", "document must contain a root element"],
    ["no size in mm", file("", 'viewBox="0 0 1 1" width="20"'), "its width must be given in mm"],
    ["no viewBox", file("", 'width="20mm"'), "it needs a viewBox"],
    ["an element too many", file("<use/>"), "<use> is not permitted in a symbol"],
    ["a transform", file('<g transform="scale(2)"/>'), "<g>: the attribute transform is not permitted"],
    ["a port without a name", file('<circle class="port" id="in"/>'), 'the id of a port begins with "port-"'],
    ["a port that leads nowhere", file('<circle class="port" id="port-in"/>'), "data-direction is up, down, left or right"],
    ["a port twice", file('<circle class="port" id="port-in" data-direction="up"/>'.repeat(2)), "port in is there twice"],
    ["a number that is none", file('<line x1="wide"/>'), 'x1: "wide" is not a number'],
    ["a spot without a name", file('<circle class="spot"/>'), "a spot has no data-name"],
  ])("%s", (_, text, says) => {
    expect(() => openSymbols(world(text)).get("fluid/odd")).toThrow(says);
    expect(() => openSymbols(world(text)).get("fluid/odd")).toThrow(/^symbols\/fluid\/odd\.svg: /);
  });

  test("a file is read once, and only when asked for", () => {
    let reads = 0;
    const library = openSymbols({
      ...world(file('<path d="M0 0H1"/>')),
      readAsset: () => {
        reads++;
        return new TextEncoder().encode(file('<path d="M0 0H1"/>'));
      },
    });
    expect(reads).toBe(0);
    expect(library.get("fluid/one")).toBe(library.get("fluid/one"));
    expect(reads).toBe(1);
  });
});
