import type { Mm, Point } from "../drawing/geometry.js";
import { movePath, polyline } from "../drawing/path.js";
import { extentOf } from "./extent.js";
import { lineWidth, mm } from "./notation.js";
import type { Port, Shape, Symbol } from "./symbol.js";

/**
 * From one conductor to the next wherever several run side by side, mm: three modules of electrical symbols (project's choice),
 * so that a terminal number and a wire number have room between two of them.
 */
export const polePitch: Mm = 7.5;

/** Dashes of a mechanical link, on and off in mm (IEC 60617; the lengths are the project's choice). */
export const linkDash: readonly Mm[] = [1.5, 0.75];

/**
 * Several poles side by side and linked, out of symbols of one pole with the ports `in` and `out`: beside each other where the
 * current runs down, under each other where it runs to the right. Ports become `in-1`, `out-1`, `in-2` …; the spots are the
 * first pole's. The link runs between the spots `link` (to `link-end` where a pole
 * has one), and there is none where a pole has no such spot: each pole then works by itself.
 * @param first the pole that carries the handle, if there is one
 * @param further the poles after it
 */
export function gangPoles(first: Symbol, further: Symbol, count: number): Symbol {
  const level = first.ports.some(({ direction }) => direction === "left");
  const poles = Array.from({ length: count }, (_, index) => ({
    pole: index === 0 ? first : further,
    number: index + 1,
    by: level ? { x: 0, y: mm(index * polePitch) } : { x: mm(index * polePitch), y: 0 },
  }));
  const ports = poles.flatMap(({ pole, number, by }) =>
    pole.ports.map((port): Port => ({ ...moved(port, by), name: `${port.name}-${number}` })),
  );
  const shapes = poles.flatMap(({ pole, by }) => pole.shapes.map((shape) => moveShape(shape, by)));
  poles.slice(1).forEach(({ pole, by }, index) => {
    const before = poles[index] as (typeof poles)[number];
    const from = before.pole.spots.link;
    const to = pole.spots["link-end"] ?? pole.spots.link;
    if (from && to) {
      const path = polyline([moved(from, before.by), moved(to, by)].map(({ x, y }) => ({ x, y })));
      shapes.push({ kind: "stroke", path, width: lineWidth, dash: [...linkDash] });
    }
  });
  return {
    name: count === 1 ? first.name : `${first.name} × ${count}`,
    title: count === 1 ? first.title : `${first.title}, ${words[count] ?? count} poles`,
    box: extentOf(shapes, ports),
    ports,
    shapes,
    spots: first.spots,
  };
}

const words: Record<number, string> = { 2: "two", 3: "three", 4: "four" };

function moved<T extends Point>(point: T, by: Point): T {
  return { ...point, x: mm(point.x + by.x), y: mm(point.y + by.y) };
}

function moveShape(shape: Shape, by: Point): Shape {
  return shape.kind === "text" ? { ...shape, at: moved(shape.at, by) } : { ...shape, path: movePath(shape.path, by) };
}
