import type { Device, DeviceKind, DrawingInfo } from "../machine/model.js";
import { gangPoles } from "./gang-poles.js";
import type { SymbolLibrary } from "./library.js";
import { mm } from "./notation.js";
import type { Port, Spot, Symbol } from "./symbol.js";
import { turnSymbol } from "./turn.js";

/** What stands in a power circuit: how many conductors reach it, and what the rest of the circuit says about it. */
export interface PowerUse {
  conductors: number;
  /** The way the current runs on the sheet. */
  flow: "down" | "right";
  /** Motors: the kind of current that reaches it. Absent: alternating. */
  current?: "AC" | "DC";
  /** Motors of three phases: both ends of each winding are led out (U1 V1 W1 and W2 U2 V2). */
  sixLead?: boolean;
}

/**
 * The symbol of a device in a power circuit, for any number of poles; undefined for a device that has no place there. Its ports
 * are `in-1`, `in-2` … where the current comes in and `out-1`, `out-2` … where it leaves, `polePitch` apart from left to right
 * or from top to bottom; motors and power supplies also have `pe`.
 */
export function symbolForPower(
  device: Device,
  use: PowerUse,
  convention: DrawingInfo["convention"],
  library: SymbolLibrary,
): Symbol | undefined {
  const symbol = standing(device.kind, use, (name) => library.get(`${convention}/${name}`));
  if (!symbol) return undefined;
  const home = convention === "international" ? "down" : "right";
  // Over the diagonal: the first pole stays the first, and what is beside it keeps its order.
  const turned = use.flow === home ? symbol : turnSymbol(symbol, { quarter: 1, mirrored: true });
  const terminals = turned.ports.map((port): [string, Spot] => [`terminal-${port.name}`, besidePin(port)]);
  return { ...turned, spots: { ...turned.spots, ...Object.fromEntries(terminals) } };
}

/** Where a terminal number stands: right of the lead of an upright symbol, over that of a level one. */
function besidePin({ x, y, direction }: Port): Spot {
  switch (direction) {
    case "up":
      return { x: mm(x + 0.9), y: mm(y + 1.9), anchor: "start" };
    case "down":
      return { x: mm(x + 0.9), y: mm(y - 0.1), anchor: "start" };
    case "left":
      return { x: mm(x + 0.25), y: mm(y - 0.75), anchor: "start" };
    case "right":
      return { x: mm(x - 0.25), y: mm(y - 0.75), anchor: "end" };
  }
}

/** The symbol as the convention has it at home: current downward (international) or to the right (north-american). */
function standing(kind: DeviceKind, use: PowerUse, get: (name: string) => Symbol): Symbol | undefined {
  const count = Math.max(1, use.conductors);
  const poles = (name: string): Symbol => gangPoles(get(name), get(name), count);
  switch (kind) {
    case "contactor":
    case "relay":
      return poles("contact-power");
    case "circuit-breaker":
      return poles("circuit-breaker-1p");
    case "disconnect":
      return gangPoles(get("disconnect-1p"), get("disconnect-pole"), count);
    case "fuse":
      return poles("fuse");
    case "overload":
      return poles("overload-heater");
    case "terminal-strip":
      return poles("terminal");
    case "plug":
      return poles("plug");
    case "motor":
      if (use.sixLead) return get("motor-6-lead");
      if (use.conductors > 2) return get("motor-3ph");
      return get(use.current === "DC" ? "motor-dc" : "motor-1ph");
    case "transformer":
      return get(use.conductors > 2 ? "transformer-3ph" : "transformer-control");
    case "power-supply":
      return get(use.conductors > 2 ? "power-supply-dc-3ph" : "power-supply-dc");
    case "rectifier":
      return get(use.conductors > 2 ? "rectifier-3ph" : "rectifier");
    case "heater":
      return poles("heater");
    case "pilot-light":
    case "horn":
    case "bell":
      return gangPoles(get(kind), get(kind), 1);
    default:
      return undefined;
  }
}
