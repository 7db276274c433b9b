import fc from "fast-check";
import { describe, expect, test } from "vitest";
import type { ActuatorKind, Medium, ValveActuator, ValveSpec } from "../../src/machine/model.js";
import { pilotPort, valvePorts } from "../../src/machine/ports.js";
import { boxesOf, centreWords, fivePortCentreWords } from "../../src/machine/valve-boxes.js";
import { sketch } from "../../src/symbols/notation.js";
import { composeValve } from "../../src/symbols/valve.js";
import { boxWidth, valvePlaces, valvePositions } from "../../src/symbols/valve-positions.js";
import { drawnBox, groupsInTouch, pieces, touch } from "./geometry.js";

const kinds: ActuatorKind[] = [
  "solenoid",
  "proportional-solenoid",
  "piloted-solenoid",
  "spring",
  "detent",
  "pilot",
  "push-button",
  "lever",
  "pedal",
  "roller",
  "plunger",
];
const end = (...of: ActuatorKind[]): ValveActuator[] =>
  of.map((kind) => ({ kind, override: false, ...(kind.includes("solenoid") ? { solenoid: "SOL1" } : {}) }));
const M = 2;

/** `P>A·B·T` → groups of ports. */
const groupsOf = (code: string) =>
  code
    .replace(/[>!]/g, "")
    .split("·")
    .map((group) => [...group].sort().join(""))
    .sort();

const allCodes = ([2, 3, 4, 5] as const).flatMap((ports) => Object.keys(valvePositions[ports]).map((code) => [code, ports] as const));

describe.each(allCodes)("position %s of a %i-port valve", (code, ports) => {
  const shapes = sketch(valvePositions[ports][code] as string, { module: M, x: 0, y: 0 }, "hydraulic");
  const ink = pieces(shapes);
  const groups = groupsInTouch(ink);
  const portInk = (place: { x: number; y: number }) => {
    const at = { x: place.x * M, y: -place.y * M };
    return ink.findIndex((line) => touch([at], line));
  };

  test("joins the ports its code joins, and no others", () => {
    const joined = new Map<number, string[]>();
    for (const place of valvePlaces[ports]) {
      const piece = portInk(place);
      expect(piece, `something is drawn at ${place.code}`).toBeGreaterThanOrEqual(0);
      const group = groups[piece] as number;
      joined.set(group, [...(joined.get(group) ?? []), place.code]);
    }
    expect([...joined.values()].map((group) => group.sort().join("")).sort()).toEqual(groupsOf(code));
  });

  test("its arrows point from and to the ports its code says", () => {
    const tips = shapes.flatMap((shape) => (shape.kind === "fill" ? [shape.path[0] as { x: number; y: number }] : []));
    const portAt = ({ x, y }: { x: number; y: number }) =>
      valvePlaces[ports].find((place) => Math.hypot(place.x * M - x, -place.y * M - y) < 0.01)?.code;
    const pointed = tips.map(portAt);
    expect(pointed).not.toContain(undefined);
    for (const group of code.split("·")) {
      const [from, to] = group.replace("!", "").split(">");
      if (to === undefined || code.includes("!")) continue;
      expect(pointed, `an arrow at ${to}`).toContain(to);
      expect(pointed, `none back to ${from}`).not.toContain(from);
    }
    // A port that is shut off has no arrow.
    for (const lone of groupsOf(code).filter((group) => group.length === 1)) expect(pointed).not.toContain(lone);
  });

  test("stays within its box", () => {
    const box = drawnBox({ name: "", title: "", box: { x: 0, y: 0, width: 0, height: 0 }, ports: [], shapes, spots: {} });
    expect(box.x).toBeGreaterThanOrEqual((-boxWidth(ports) / 2) * M);
    expect(box.x + box.width).toBeLessThanOrEqual((boxWidth(ports) / 2) * M);
    expect(box.y).toBeGreaterThanOrEqual(-2 * M);
    expect(box.y + box.height).toBeLessThanOrEqual(2 * M);
  });
});

test("the four-port positions are all the ways to join four ports", () => {
  // The number of partitions of a set of four is the Bell number 15; they are built here one port at a time.
  let partitions: string[][] = [[]];
  for (const port of ["P", "T", "A", "B"]) {
    partitions = partitions.flatMap((groups) => [
      [...groups, port],
      ...groups.map((_, i) => groups.map((group, j) => (i === j ? group + port : group))),
    ]);
  }
  expect(partitions.length).toBe(15);
  const sorted = (groups: string[]) =>
    groups
      .map((group) => [...group].sort().join(""))
      .sort()
      .join("·");
  const drawn = new Set(Object.keys(valvePositions[4]).map((code) => sorted(groupsOf(code))));
  expect([...drawn].sort()).toEqual(partitions.map(sorted).sort());
});

test("every box the machine can ask for has a drawing", () => {
  for (const ports of [2, 3, 4, 5] as const) {
    for (const positions of [2, 3] as const) {
      if (positions === 3 && ports < 4) continue;
      const centres = positions === 2 ? [undefined] : ports === 5 ? fivePortCentreWords : centreWords;
      for (const centre of centres) {
        for (const normally of ["open", "closed"] as const) {
          for (const code of boxesOf(ports, positions, { centre, normally, springAt: "right" }))
            expect(valvePositions[ports]).toHaveProperty([code]);
        }
      }
    }
  }
});

test("boxes have the sizes of the standard", () => {
  // ISO 1219-1 from memory: a position box of up to four ports is 4 M square; wider with five.
  const valve = composeValve({ ports: 4, positions: 2, boxes: ["P>A·B>T", "P>B·A>T"], normal: 1, left: [], right: [] }, "hydraulic", 1);
  expect(valve.box).toMatchObject({ x: -12, width: 16, y: -6, height: 12 });
});

describe("a whole valve", () => {
  const five: ValveSpec = {
    ports: 5,
    positions: 2,
    boxes: ["1>4·2>3·5", "1>2·4>5·3"],
    normal: 1,
    left: end("solenoid"),
    right: end("spring"),
  };

  test("carries its lines on the box shown, wherever that is", () => {
    const [left, right] = [composeValve(five, "pneumatic", 0), composeValve(five, "pneumatic", 1)];
    // The origin moves with the box, so the ports stay and the boxes move by a width.
    expect(left.ports).toEqual(right.ports);
    expect(left.box.x - right.box.x).toBeCloseTo(6 * M);
  });

  test("has the ports the machine gives it, by the names of its medium", () => {
    for (const medium of ["hydraulic", "pneumatic"] as const) {
      for (const ports of medium === "hydraulic" ? ([2, 3, 4] as const) : ([2, 3, 4, 5] as const)) {
        const spec: ValveSpec = { ports, positions: 2, boxes: boxesOf(ports, 2, {}), left: end("pilot"), right: end("pilot") };
        const names = composeValve(spec, medium, 0).ports.map(({ name }) => name);
        expect([...names].sort()).toEqual(
          [...valvePorts(ports, medium), pilotPort("left", medium, spec), pilotPort("right", medium, spec)].sort(),
        );
      }
    }
  });

  test("tells where its solenoids are, at the end they stand at", () => {
    const valve = composeValve({ ...five, right: end("solenoid") }, "pneumatic", 1);
    const [left, right] = valve.actuators ?? [];
    expect(left).toMatchObject({ side: "left", solenoid: "SOL1", box: { width: 3 * M, height: 2 * M } });
    expect((left?.box.x as number) + (left?.box.width as number)).toBeCloseTo(-9 * M);
    expect(right).toMatchObject({ side: "right", box: { x: 3 * M } });
    expect(valve.spots["left-solenoid"]?.anchor).toBe("end");
    expect(valve.spots["right-solenoid"]?.anchor).toBe("start");
  });

  test("a roller that a cam holds is drawn against the cam", () => {
    const spec: ValveSpec = { ports: 3, positions: 2, boxes: ["P>A·T", "P·A>T"], normal: 1, left: end("roller"), right: end("spring") };
    const [held, free] = [composeValve(spec, "pneumatic", 0), composeValve(spec, "pneumatic", 1)];
    expect(held.shapes.length).toBe(free.shapes.length + 1);
    const cam = pieces([held.shapes.at(-2) as (typeof held.shapes)[0], held.shapes.at(-1) as (typeof held.shapes)[0]]);
    expect(cam.length).toBeGreaterThan(0);
  });

  test("pneumatic pilots are named by what they join (ISO 11727, from memory): 12 opens a three-port valve, 10 closes it", () => {
    const [closed, open] = [boxesOf(3, 2, {}), boxesOf(3, 2, {}).reverse()].map((boxes) => {
      const spec: ValveSpec = { ports: 3, positions: 2, boxes, left: end("pilot"), right: end("spring") };
      return composeValve(spec, "pneumatic", 1).ports.map(({ name }) => name);
    });
    expect(closed).toContain("12");
    expect(open).toContain("10");
  });

  test("external pilots take their own pins, downward", () => {
    const spec: ValveSpec = { ...five, left: end("piloted-solenoid"), right: end("piloted-solenoid") };
    expect(composeValve(spec, "pneumatic", 0).ports).toHaveLength(5);
    const piloted = composeValve(spec, "pneumatic", 0, ["14", "12"]);
    expect(piloted.ports.filter(({ name }) => name === "14" || name === "12").map(({ direction }) => direction)).toEqual(["down", "down"]);
  });

  test("an unknown position is said", () => {
    expect(() => composeValve({ ...five, boxes: ["1>9"] }, "pneumatic", 0)).toThrow('position "1>9" of a valve with 5 ports');
  });

  test("whatever is asked for: ports on the grid, once each, the box drawn, the ends clear of each other", () => {
    const actuators = fc.array(fc.record({ kind: fc.constantFrom(...kinds), override: fc.boolean() }), { maxLength: 3 });
    const cases = fc.constantFrom(2, 3, 4, 5).chain((ports) =>
      fc.record({
        ports: fc.constant(ports as ValveSpec["ports"]),
        boxes: fc.array(fc.constantFrom(...Object.keys(valvePositions[ports as ValveSpec["ports"]])), { minLength: 2, maxLength: 3 }),
        left: actuators,
        right: actuators,
        normal: fc.constantFrom(undefined, 0, 1),
        shown: fc.nat(2),
        medium: fc.constantFrom<Medium>("hydraulic", "pneumatic"),
      }),
    );
    fc.assert(
      fc.property(cases, ({ ports, boxes, left, right, normal, shown, medium }) => {
        const external = medium === "hydraulic" ? ["X", "Y"] : ports > 3 ? ["14", "12"] : ["12", "10"];
        const valve = composeValve({ ports, positions: boxes.length as 2 | 3, boxes, left, right, normal }, medium, shown, external);
        for (const port of valve.ports) expect([port.x % M, port.y % M].map(Math.abs)).toEqual([0, 0]);
        expect(new Set(valve.ports.map(({ name }) => name)).size).toBe(valve.ports.length);
        const drawn = drawnBox(valve);
        for (const key of ["x", "y", "width", "height"] as const) expect(valve.box[key]).toBeCloseTo(drawn[key], 1);
        const at = Math.min(shown, boxes.length - 1);
        const w = boxWidth(ports) * M;
        for (const { side, box } of valve.actuators ?? []) {
          if (side === "left") expect(box.x + box.width).toBeLessThanOrEqual(-(at + 0.5) * w + 0.001);
          else expect(box.x).toBeGreaterThanOrEqual((boxes.length - at - 0.5) * w - 0.001);
        }
      }),
    );
  });
});
