import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { textBox } from "../../src/drawing/extent.js";
import { arcCurves, circle, polyline, rectangle } from "../../src/drawing/path.js";

describe("arcs as curves", () => {
  const coordinate = fc.double({ min: -100, max: 100, noNaN: true });

  test("end where the arc ends and stay on one circle", () => {
    fc.assert(
      fc.property(
        coordinate,
        coordinate,
        coordinate,
        coordinate,
        fc.double({ min: 0.5, max: 200, noNaN: true }),
        fc.boolean(),
        fc.boolean(),
        (x1, y1, x, y, radius, large, sweep) => {
          fc.pre(Math.hypot(x - x1, y - y1) > 0.01);
          const curves = arcCurves({ x: x1, y: y1 }, { op: "A", radius, large, sweep, x, y });
          expect(curves.at(-1)).toMatchObject({ x, y });
          // A circle through three points of the first curve passes through the rest.
          const r = Math.max(radius, Math.hypot(x - x1, y - y1) / 2);
          let from = { x: x1, y: y1 };
          let length = 0;
          for (const curve of curves) {
            const middle = {
              x: (from.x + 3 * curve.x1 + 3 * curve.x2 + curve.x) / 8,
              y: (from.y + 3 * curve.y1 + 3 * curve.y2 + curve.y) / 8,
            };
            const half = Math.hypot(curve.x - from.x, curve.y - from.y) / 2;
            const sagitta = Math.hypot(middle.x - (from.x + curve.x) / 2, middle.y - (from.y + curve.y) / 2);
            if (half > 1e-6) expect(half ** 2 / sagitta / 2 + sagitta / 2).toBeCloseTo(r, 0);
            length += 2 * Math.asin(Math.min(1, half / r));
            from = curve;
          }
          // The turn is more than half a circle exactly when the large arc is asked for.
          if (Math.hypot(x - x1, y - y1) < 1.99 * r) expect(length > Math.PI).toBe(large);
        },
      ),
    );
  });

  test("an arc swept positively turns clockwise on the sheet", () => {
    const [curve] = arcCurves({ x: 0, y: 0 }, { op: "A", radius: 5, large: false, sweep: true, x: 10, y: 0 });
    // From left to right over the top: the y of the handle is negative.
    expect(curve?.y1).toBeLessThan(0);
  });
});

test("shapes close and start where they say", () => {
  expect(rectangle({ x: 1, y: 2, width: 3, height: 4 }).at(-1)).toEqual({ op: "Z" });
  expect(circle({ x: 5, y: 5 }, 2)[0]).toEqual({ op: "M", x: 3, y: 5 });
  expect(
    polyline([
      { x: 0, y: 0 },
      { x: 1, y: 1 },
    ]),
  ).toEqual([
    { op: "M", x: 0, y: 0 },
    { op: "L", x: 1, y: 1 },
  ]);
});

test("the box of a text follows its anchor, and a turned one reads upwards", () => {
  const text = { text: "CR12", height: 2.5, at: { x: 50, y: 50 } };
  const plain = textBox({ ...text, anchor: "start" });
  expect(plain).toMatchObject({ x: 50, y: 47.5, height: 2.5 });
  expect(textBox({ ...text, anchor: "end" }).x).toBeCloseTo(50 - plain.width);
  expect(textBox({ ...text, anchor: "start", rotated: true })).toMatchObject({ x: 47.5, y: 50 - plain.width, width: 2.5 });
});
