import type { FluidComponent } from "../../machine/model.js";
import type { SymbolOf } from "./arrangement.js";
import { addWords, type Block, bareBlock, chooseTurn, type Placed, portOf, type Side } from "./block.js";
import { type FluidGraph, throughPorts } from "./graph.js";
import { meet, moved, union } from "./modules.js";
import { valveBlock } from "./valve-block.js";

/** A component and the port at which the line comes to it. */
export interface Entered {
  component: FluidComponent;
  port: string;
}

/** A chain of components over or below a point of a line, at the origin. */
export interface Chain {
  placed: Placed[];
  left: number;
  right: number;
  top: number;
  bottom: number;
  /** Where the last one ends. */
  end: number;
}

/** A chain standing up from the origin, such as a gauge on its shut-off valve. */
export function standing(chain: readonly Entered[], side: Side, symbolOf: SymbolOf, graph: FluidGraph): Chain {
  return stack(chain, side, symbolOf, graph, "up");
}

/** A chain hanging down from the origin, such as a relief valve over its tank. */
export function hanging(chain: readonly Entered[], side: Side, symbolOf: SymbolOf, graph: FluidGraph): Chain {
  return stack(chain, side, symbolOf, graph, "down");
}

function stack(chain: readonly Entered[], side: Side, symbolOf: SymbolOf, graph: FluidGraph, way: "up" | "down"): Chain {
  const placed: Placed[] = [];
  const sign = way === "up" ? -1 : 1;
  let y = 0;
  chain.forEach(({ component, port }, index) => {
    const { block, near, far } = chainBlock(component, port, side, symbolOf, way);
    const first = portOf(block, near);
    const clear = (to: number) =>
      !placed.some((other) => meet(moved(other.block.full, other.at), moved(block.full, { x: -first.x, y: to - first.y })));
    if (index > 0) while (!clear(y)) y += sign;
    placed.push({ block, at: { x: -first.x, y: y - first.y } });
    const second = far === undefined ? undefined : portOf(block, far);
    if (!second || index === chain.length - 1) {
      if (second) y += second.y - first.y;
      return;
    }
    // Where more comes together than the two, there is room for it to come in.
    const meeting = graph.at(graph.nodeOf(component, far as string)).length;
    y += second.y - first.y + sign * (meeting > 2 ? 3 : 1);
  });
  const extent = union(placed.map(({ block, at }) => moved(block.full, at)));
  return { placed, ...extent, end: y };
}

/** A component of a chain turned so that the port nearest the line looks to it. */
function chainBlock(
  component: FluidComponent,
  near: string,
  side: Side,
  symbolOf: SymbolOf,
  way: "up" | "down",
): { block: Block; near: string; far?: string } {
  const symbol = symbolOf(component);
  const through = throughPorts(component) ?? (component.kind === "relief-valve" ? (["P", "T"] as [string, string]) : undefined);
  const far = through ? (near === through[0] ? through[1] : through[0]) : undefined;
  const toLine = way === "up" ? "down" : "up";
  if (component.kind === "valve") {
    // Upside down where the flow leads downward; left and right stay.
    const upright = symbol.ports.find(({ name }) => name === near)?.direction === toLine;
    return {
      block: valveBlock(component, symbol, upright ? { quarter: 0 } : { quarter: 2, mirrored: true }),
      near,
      ...(far === undefined ? {} : { far }),
    };
  }
  const turn = chooseTurn(
    symbol,
    { [near]: toLine, ...(far === undefined ? {} : { [far]: way }) },
    (turned) => turned.box.x * (side === "left" ? -1 : 1) * -1 * 0.01,
  );
  const block = bareBlock(component, symbol, turn);
  addWords(block, side, symbolOf.usesOf);
  return { block, near, ...(far === undefined ? {} : { far }) };
}
