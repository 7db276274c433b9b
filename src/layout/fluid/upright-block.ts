import type { FluidComponent } from "../../machine/model.js";
import type { Direction } from "../../symbols/symbol.js";
import type { SymbolOf } from "./arrangement.js";
import { addWords, type Block, bareBlock, chooseTurn } from "./block.js";
import { cylinderBlock } from "./cylinder-block.js";
import { type FluidGraph, isSink, throughPorts } from "./graph.js";
import { valveBlock } from "./valve-block.js";

/** A component on its own, as it stands where nothing else is known: a line through it leads upward, and down where it ends in a tank. */
export function uprightBlock(component: FluidComponent, graph: FluidGraph, symbolOf: SymbolOf): Block {
  const symbol = symbolOf(component);
  if (component.kind === "cylinder") return cylinderBlock(component, symbol, symbolOf.usesOf);
  if (component.kind === "valve") return valveBlock(component, symbol);
  const through = throughPorts(component);
  const toSink = through && graph.others(graph.nodeOf(component, through[1]), component).some((joint) => isSink(joint.component));
  const wanted: Record<string, Direction> = through ? { [through[0]]: toSink ? "up" : "down", [through[1]]: toSink ? "down" : "up" } : {};
  const block = bareBlock(component, symbol, chooseTurn(symbol, wanted));
  addWords(block, "right", symbolOf.usesOf);
  return block;
}
