import type { Mm } from "../../drawing/geometry.js";
import { measureRailHead, nameRails } from "./name-rails.js";
import { northAmerican } from "./north-american.js";
import type { Plan, PlanGiven, RailEnd } from "./plan.js";
import { scaleSymbol } from "./scale-symbol.js";
import { fuseBlock, setFuse } from "./supply-fuse.js";

/** Upright rails with line numbers on their left, references and function texts on their right. */
export function planNorthAmerican({ circuit, machine, symbolOf, symbols, room: { width, height } }: PlanGiven): Plan {
  const { margin, span } = shareWidth(width);
  const fuse =
    circuit.supply.fuse && symbols.names().includes(fuseSymbol)
      ? fuseBlock(circuit.supply.fuse, scaleSymbol(symbols.get(fuseSymbol), fuseScale), "north-american")
      : undefined;
  const beside = { left: lineNumberRoom, span, right: width - lineNumberRoom - span };
  const plain = measureRailHead(circuit, beside, "next");
  const headed = measureRailHead(circuit, beside, fuse ? "fused" : "first");
  const firstHead = headRoom + headed.above + headed.below + (fuse?.length ?? 0);
  const nextHead = headRoom + plain.above;
  const headOf = (first: boolean) => (first ? { head: firstHead, heading: headed } : { head: nextHead, heading: plain });
  return {
    span,
    first: height - firstHead - footRoom,
    next: height - nextHead - footRoom,
    arrange: (scale) => northAmerican({ machine, symbolOf, margin, scale }),
    origin: (first) => ({ x: lineNumberRoom, y: headOf(first).head }),
    rails: (first, depth) => {
      const { head, heading } = headOf(first);
      return { from: railHead + heading.above - head, to: depth + footRoom - railFoot };
    },
    finish: (sheet, { first, origin, span, rails: { from, to }, comesFrom, goesTo }) => {
      const behindFuse = fuse && first ? setFuse(sheet, fuse, { x: origin.x, y: origin.y + from }, span, "upright") - origin.y : undefined;
      nameRails(sheet, circuit, {
        head: headOf(first).heading,
        origin,
        room: { ...beside, span, right: beside.right + beside.span - span },
        from,
        to,
        ...(behindFuse === undefined ? {} : { behindFuse }),
        ...(comesFrom ? { comesFrom: wordsOf(comesFrom) } : {}),
        ...(goesTo ? { goesTo: wordsOf(goesTo) } : {}),
      });
    },
  };
}

const fuseSymbol = "north-american/fuse";
/** A fuse in a rail is drawn on the smaller module, because its leads are the rail. */
const fuseScale = 0.72;

/** Room for line numbers left of the live rail, mm. */
const lineNumberRoom: Mm = 14;
/** Over the first line: the rails' names, and the rails down to it. */
const headRoom: Mm = 14;
/** From the top of the sheet's room to where the rails begin. */
const railHead: Mm = 5.5;
const footRoom: Mm = 9;
const railFoot: Mm = 1;

/** The widest ladder from rail to rail that still reads well, mm. */
const widestSpan: Mm = 310;

/** Shares the width of a sheet between line numbers, rungs, references and function texts. */
function shareWidth(width: Mm) {
  const margin = { references: clamp(width * 0.065, 15, 26), words: clamp(width * 0.125, 24, 60) };
  const span = Math.min(width - lineNumberRoom - margin.references - margin.words - 8, widestSpan);
  return { margin, span };
}

const clamp = (value: number, least: number, most: number) => Math.min(Math.max(value, least), most);

const wordsOf = ({ sheet, line }: RailEnd) => (sheet === undefined ? `line ${line}` : `sheet ${sheet}, line ${line}`);
