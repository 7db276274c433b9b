import fc from "fast-check";
import { startOfCycle } from "../../src/behaviour/start-of-cycle.js";
import type { Diagnostic } from "../../src/language/diagnostic.js";
import { parse } from "../../src/language/parse.js";
import { layOutFluid } from "../../src/layout/fluid/lay-out-fluid.js";
import type { CircuitSheet, Place } from "../../src/layout/placement.js";
import { buildMachine } from "../../src/machine/build.js";
import type { FluidCircuit, Machine } from "../../src/machine/model.js";
import { nodeWorld } from "../../src/node-world.js";
import { pageArea } from "../../src/sheets/page.js";
import { openSymbols } from "../../src/symbols/library.js";
import { netlistOf } from "./facts.js";

/** A machine's fluid circuits set down on sheets. */
export interface LaidFluid {
  machine: Machine;
  circuit: FluidCircuit;
  sheets: CircuitSheet[];
  places: Map<string, Place>;
  diagnostics: Diagnostic[];
  area: { x: number; y: number; width: number; height: number };
}

const symbols = openSymbols(nodeWorld);

/** Lays out the first fluid circuit of a drawing. */
export async function layOutText(text: string): Promise<LaidFluid> {
  const { tree } = parse(text, "test.sprung");
  const { machine } = buildMachine(tree);
  const circuit = machine.circuits.find((one) => one.kind === "fluid");
  if (circuit?.kind !== "fluid") throw new Error("The drawing has no fluid circuit.");
  const page = pageArea(machine.drawing);
  const { sheets, places, diagnostics } = await layOutFluid(circuit, machine, startOfCycle(machine), symbols, page, { sheet: 1 });
  return { machine, circuit, sheets, places: new Map(places), diagnostics, area: page.area };
}

/** Ports whose line found no way and only says its name. */
export function stubs(sheet: CircuitSheet): string[] {
  return sheet.strokes.filter(({ role, part }) => role === "continuation" && part === undefined).map(({ path }) => JSON.stringify(path));
}

/** Which ports the machine joins, as `part.port part.port …`, sorted; ports with nothing joined are left out. */
export function netsOfMachine(circuit: FluidCircuit): string[] {
  return circuit.nodes
    .map(({ ports }) =>
      ports
        .map(({ component, port }) => `${component}.${port}`)
        .sort()
        .join(" "),
    )
    .filter((net) => net.includes(" "))
    .sort();
}

/** Which ports the drawn lines join, over all sheets; lines that go on under the same name are one. */
export function netsOfSheets(sheets: readonly CircuitSheet[]): string[] {
  const nets: string[][] = [];
  const going = new Map<number, string[]>();
  for (const sheet of sheets) {
    const onward = new Set(
      sheet.strokes
        .filter(({ role }) => role === "continuation")
        .flatMap(({ path }) => {
          const [end] = path;
          return sheet.wires
            .filter(({ points }) => points.some(({ x, y }) => end && Math.abs(x - end.x) < 0.01 && Math.abs(y - end.y) < 0.01))
            .map(({ node }) => node);
        }),
    );
    for (const { nodes, ports } of netlistOf(sheet)) {
      const node = nodes.find((one) => onward.has(one));
      const shared = nets.find((net) => ports.some((port) => net.includes(port)));
      const known = (node === undefined ? undefined : going.get(node)) ?? shared;
      if (known) {
        known.push(...ports.filter((port) => !known.includes(port)));
        if (node !== undefined) going.set(node, known);
      } else {
        const net = [...ports];
        nets.push(net);
        if (node !== undefined) going.set(node, net);
      }
    }
  }
  return nets
    .map((net) => net.sort().join(" "))
    .filter((net) => net.includes(" "))
    .sort();
}

// ---------------------------------------------------------------- random circuits

const both = [
  "filter F",
  "check-valve CV",
  "pilot-operated-check-valve PC",
  "throttle TH",
  "one-way-flow-control FC",
  "shut-off-valve SV",
  "gauge PG",
  "relief-valve RV",
];
const parts: Record<"hydraulic" | "pneumatic", string[]> = {
  hydraulic: ["tank TK", "pump P", ...both],
  pneumatic: ["air-supply AIR", "service-unit FRL", "silencer SIL", ...both],
};

const portsOfKind: Record<string, string[]> = {
  filter: ["in", "out"],
  "check-valve": ["in", "out"],
  "pilot-operated-check-valve": ["in", "out", "X"],
  throttle: ["in", "out"],
  "one-way-flow-control": ["in", "out"],
  "shut-off-valve": ["in", "out"],
  gauge: ["P"],
  "relief-valve": ["P", "T"],
  tank: ["T"],
  pump: ["S", "P"],
  "air-supply": ["1"],
  "service-unit": ["in", "out"],
  silencer: ["in"],
};

const valveKinds = [
  "2/2 normally closed",
  "3/2 normally closed",
  "4/2",
  "4/3 centre closed",
  "4/3 centre float",
  "5/2",
  "5/3 centre closed",
];

function valvePortNames(kind: string, medium: "hydraulic" | "pneumatic"): string[] {
  const hydraulic = { 2: ["P", "A"], 3: ["P", "T", "A"], 4: ["P", "T", "A", "B"], 5: ["P", "T", "A", "B"] };
  const pneumatic = { 2: ["1", "2"], 3: ["1", "3", "2"], 4: ["1", "3", "4", "2"], 5: ["1", "5", "3", "4", "2"] };
  return (medium === "hydraulic" ? hydraulic : pneumatic)[Number(kind[0]) as 2 | 3 | 4 | 5];
}

/** Any components with any of their ports joined: right netlists that no designer would draw. */
export const anyCircuit: fc.Arbitrary<string> = fc
  .record({
    medium: fc.constantFrom("hydraulic" as const, "pneumatic" as const),
    cylinders: fc.integer({ min: 0, max: 3 }),
    valves: fc.array(fc.record({ kind: fc.nat(valveKinds.length - 1), spring: fc.boolean() }), { maxLength: 4 }),
    others: fc.array(fc.nat(9), { maxLength: 7 }),
    joins: fc.array(fc.tuple(fc.nat(999), fc.nat(999), fc.nat(9)), { minLength: 1, maxLength: 16 }),
  })
  .map(({ medium, cylinders, valves, others, joins }) => {
    const lines: string[] = [];
    const ports: string[] = [];
    for (let i = 1; i <= cylinders; i++) {
      lines.push(`cylinder C${i} "Cylinder ${i}" double-acting bore 40 mm rod 16 mm stroke 100 mm`);
      ports.push(`C${i}.cap`, `C${i}.rod`);
    }
    valves.forEach(({ kind, spring }, i) => {
      const name = (valveKinds[kind] as string).replace("5/", medium === "hydraulic" ? "4/" : "5/");
      const ends = name.includes("/3")
        ? `left solenoid SA${i} right solenoid SB${i} springs`
        : `left solenoid SA${i} right ${spring ? "spring" : `solenoid SB${i}`}`;
      lines.push(`valve V${i} "Valve ${i}" ${name} ${ends}`);
      ports.push(...valvePortNames(name, medium).map((port) => `V${i}.${port}`));
    });
    others.forEach((pick, i) => {
      const list = parts[medium];
      const [kind, stem] = (list[pick % list.length] as string).split(" ") as [string, string];
      lines.push(`${kind} ${stem}${i} "Part ${i}"`);
      ports.push(...(portsOfKind[kind] as string[]).map((port) => `${stem}${i}.${port}`));
    });
    for (const [a, b, role] of joins) {
      const [one, two] = [ports[a % ports.length], ports[b % ports.length]];
      if (one !== undefined && two !== undefined && one !== two) lines.push(`${role === 0 ? "pilot" : "line"} ${one} -- ${two}`);
    }
    if (ports.length === 0) lines.push("gauge PG99");
    return `drawing "Any" { paper A1 }\nfluid "Any" ${medium} {\n  ${lines.join("\n  ")}\n}\n`;
  });

/** Circuits as machines have them: a supply, actuators with their valves, and things in and on their lines. */
export const usualCircuit: fc.Arbitrary<string> = usualCircuitOn("A3", "A2", "A3");

export function usualCircuitOn(...papers: string[]): fc.Arbitrary<string> {
  return fc
    .record({
      medium: fc.constantFrom("hydraulic" as const, "pneumatic" as const),
      axes: fc.array(
        fc.record({
          valve: fc.constantFrom("4/2", "4/3", "5/2", "5/3", "3/2"),
          cap: fc.array(fc.constantFrom("throttle", "one-way-flow-control", "check-valve", "pilot-operated-check-valve"), { maxLength: 2 }),
          rod: fc.array(fc.constantFrom("throttle", "one-way-flow-control", "check-valve", "pilot-operated-check-valve"), { maxLength: 2 }),
          gauge: fc.boolean(),
          second: fc.boolean(),
          lock: fc.constantFrom("none", "none", "cap", "rod", "both"),
          switches: fc.nat(4),
          text: fc.constantFrom("Clamp", "Transfer slide to the second station", "X"),
        }),
        { minLength: 1, maxLength: 6 },
      ),
      tankHeader: fc.boolean(),
      gauge: fc.boolean(),
      filter: fc.boolean(),
      paper: fc.constantFrom(...papers),
    })
    .map(({ medium, axes, tankHeader, gauge, filter, paper }) => {
      const hydraulic = medium === "hydraulic";
      const lines: string[] = [];
      const switches: string[] = [];
      let count = 0;
      if (hydraulic) {
        lines.push(
          'tank TK1 "Tank" 100 l',
          "pump P1 displacement 16 cm3/rev",
          "relief-valve RV1 160 bar",
          'filter F1 "Return filter" 10 um',
        );
        lines.push("line TK1 -- P1 -- @P", "line @P -- RV1 -- tank");
      } else {
        lines.push("air-supply AIR1 6 bar", 'service-unit FRL1 "Air preparation" 5.5 bar');
        if (filter) lines.push('filter F1 "Main filter"', "line AIR1 -- F1 -- FRL1 -- @P");
        else lines.push("line AIR1 -- FRL1 -- @P");
      }
      if (gauge) lines.push('gauge PG1 "Line pressure"', "line @P -- PG1");
      axes.forEach(({ valve, cap, rod, gauge: own, second, lock, switches: marks, text }, i) => {
        const kind = hydraulic ? valve.replace("5/", "4/") : valve;
        const single = kind === "3/2";
        const [p, a, b] = hydraulic ? ["P", "A", "B"] : single ? ["1", "2", ""] : ["1", "4", "2"];
        const returns = hydraulic ? ["T"] : kind.startsWith("5") ? ["5", "3"] : ["3"];
        lines.push(
          `cylinder C${i} "${text}" ${single ? "spring-return" : "double-acting"} bore 50 mm ${single ? "" : "rod 20 mm "}stroke 200 mm`,
        );
        lines.push(
          `valve V${i} "${text}" ${kind} left solenoid SOL${2 * i} ${kind.endsWith("3") ? `centre closed right solenoid SOL${2 * i + 1} springs` : single ? "right spring normally closed" : i % 2 ? "right spring" : `right solenoid SOL${2 * i + 1}`}`,
        );
        const inline = (kinds: string[]) =>
          kinds.map((one) => {
            const name = `N${++count}`;
            lines.push(`${one} ${name}${one === "one-way-flow-control" ? ` "Speed" free-to C${i}` : ""}`);
            return ` -- ${name}`;
          });
        const locked = (side: string) => {
          if (single || (lock !== side && lock !== "both")) return "";
          lines.push(`pilot-operated-check-valve L${i}${side}`, `pilot V${i}.${side === "cap" ? b : a} -- L${i}${side}.X`);
          return ` -- L${i}${side}`;
        };
        lines.push(`line @P -- V${i}.${p}`, `line V${i}.${a}${locked("cap")}${inline(cap).join("")} -- C${i}.cap`);
        if (!single) lines.push(`line V${i}.${b}${locked("rod")}${inline(rod).join("")} -- C${i}.rod`);
        if (second && !single)
          lines.push(
            `cylinder D${i} double-acting bore 50 mm rod 20 mm stroke 200 mm`,
            `line C${i}.cap -- D${i}.cap`,
            `line C${i}.rod -- D${i}.rod`,
          );
        if (own) lines.push(`gauge G${i}`, `line C${i}.cap -- G${i}`);
        for (const port of returns)
          lines.push(
            hydraulic
              ? tankHeader
                ? `line V${i}.${port} -- @T`
                : `line V${i}.${port} -- tank`
              : `exhaust V${i}.${port} -- ${i % 2 ? "silencer" : "exhaust"}`,
          );
        for (let n = 0; n < marks; n++) {
          const place = n === 0 ? "at retracted" : n === 1 ? "at extended" : n === 2 ? "at 90 mm" : "from 120 mm to 150 mm";
          switches.push(`limit-switch LS${i}${n} "Place" on C${i} ${place}`);
        }
      });
      if (hydraulic && tankHeader) lines.push("line @T -- F1 -- TK1");
      else if (hydraulic) lines.push("line F1 -- TK1");
      return `drawing "Random" { paper ${paper} }\nfluid "Usual" ${medium} {\n  ${lines.join("\n  ")}\n}\n${switches.join("\n")}\n`;
    });
}
