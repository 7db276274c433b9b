import type { Device, DeviceKind, DrawingInfo } from "../machine/model.js";
import { type PowerUse, symbolForPower } from "./choose-power.js";
import type { Example, ExampleFamily } from "./examples.js";
import type { SymbolLibrary } from "./library.js";

const threePoles: readonly DeviceKind[] = ["disconnect", "circuit-breaker", "fuse", "contactor", "overload", "terminal-strip", "plug"];

/** What stands in power circuits, as composed for the conductors that reach it: the ganged poles, and a few turned the other way. */
export function powerExamples(library: SymbolLibrary): ExampleFamily[] {
  return [
    { title: "Power circuits, north-american", examples: examples("north-american", "right", "down") },
    { title: "Power circuits, international", examples: examples("international", "down", "right") },
  ];

  function examples(convention: DrawingInfo["convention"], home: PowerUse["flow"], other: PowerUse["flow"]): Example[] {
    const example = (kind: DeviceKind, conductors: number, flow: PowerUse["flow"]): Example[] => {
      const symbol = symbolForPower(deviceOf(kind), { conductors, flow }, convention, library);
      const turned = flow === home ? "" : ", turned";
      return symbol ? [{ name: `${kind}${threePoles.includes(kind) ? ` × ${conductors}` : ""}${turned}`, symbol }] : [];
    };
    return [
      ...threePoles.flatMap((kind) => example(kind, 3, home)),
      ...example("circuit-breaker", 2, home),
      ...example("circuit-breaker", 4, home),
      ...[...threePoles.slice(0, 5), "motor" as const, "transformer" as const, "power-supply" as const].flatMap((kind) =>
        example(kind, 3, other),
      ),
    ];
  }
}

function deviceOf(kind: DeviceKind): Device {
  const at = { file: "", line: 1, column: 1, endLine: 1, endColumn: 1, from: 0, to: 0 };
  return { name: "", kind, at, values: [], contacts: [], loads: [], throughs: [], mains: [] };
}
