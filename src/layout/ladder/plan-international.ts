import type { Mm, Point } from "../../drawing/geometry.js";
import { fitText, measureText } from "../../drawing/text.js";
import { wrapNameAt, wrappedPitch } from "../../drawing/wrap-name.js";
import { usesOf } from "../../machine/walk.js";
import type { CircuitSheet, PlacedText } from "../placement.js";
import { depthOf } from "./foot-block.js";
import { brokenRoom, international, pathNumberRise } from "./international.js";
import { sourceGap, sourceOf, supplyWords } from "./name-rails.js";
import type { FinishedLadder, Plan, PlanGiven } from "./plan.js";
import { fuseBlock, setFuse } from "./supply-fuse.js";
import { textHeight } from "./under-words.js";

/**
 * Level rails, the live one on top. Over the paths stand their numbers, below the lower rail the contacts of each coil and what
 * each path is for; at both ends of the rails is said where they come from and go on.
 */
export function planInternational({ circuit, machine, symbolOf, symbols, room: { width, height } }: PlanGiven): Plan {
  const given = { machine, symbolOf, deepestFoot: height * deepestShare };
  const { margin } = international({ ...given, scale: 1 });
  const foot = Math.max(
    // The lower rail's name, and where it comes from, stand level with it and below.
    nameHeight / 2 + 2 * wrappedPitch(noteHeight) + noteHeight + nameHeight * 0.3 + besideGap,
    ...circuit.rungs.flatMap(({ title, path }) => {
      const titled = title ? { title } : {};
      const loads = [...usesOf(path)].flatMap((use) => (use.kind === "load" ? [use] : []));
      return [depthOf(margin(titled)), ...loads.map((load) => depthOf(margin({ ...titled, load })))];
    }),
  );
  const fuse =
    circuit.supply.fuse && symbols.names().includes(fuseSymbol)
      ? fuseBlock(circuit.supply.fuse, symbols.get(fuseSymbol), "international")
      : undefined;
  const widest = Math.max(...circuit.supply.rails.map((rail) => measureText(rail, nameHeight)));
  const left = Math.min(Math.max(widest, measureText("/88.88", noteHeight) + 1, brokenRoom - besideGap) + besideGap, mostBeside);
  const right = brokenRoom;
  const live = wrapRail(circuit.supply.rails[0], left - besideGap);
  const headRoom = Math.max(
    pathNumberRise + textHeight.usual + 0.5,
    (live.lines.length - 1) * wrappedPitch(live.height) + live.height / 2 + besideGap + noteHeight,
  );
  const fuseRoom = fuse ? Math.max(fuse.length + 2 * fuseLead, fuse.width + 1) : 0;
  const headOf = (first: boolean) => railLead + (first ? fuseRoom : 0);
  const across = (first: boolean) => width - left - headOf(first) - railFoot - right;
  return {
    span: height - headRoom - foot - 1,
    first: across(true),
    next: across(false),
    arrange: (scale) => international({ ...given, scale }),
    origin: (first) => ({ x: left + headOf(first), y: headRoom }),
    rails: (first, depth) => ({ from: -headOf(first), to: depth + railFoot }),
    finish: (sheet, ladder) => {
      const behindFuse =
        fuse && ladder.first
          ? setFuse(sheet, fuse, { x: ladder.origin.x + ladder.rails.from, y: ladder.origin.y }, fuseRoom, "level")
          : undefined;
      nameLevelRails(sheet, ladder, behindFuse);
    },
  };

  function nameLevelRails(sheet: CircuitSheet, { origin, span, rails, comesFrom, goesTo, first }: FinishedLadder, behindFuse?: Mm) {
    const say = (at: Point, anchor: PlacedText["anchor"], height: Mm, role: PlacedText["role"], text: string) => {
      if (text !== "") sheet.texts.push({ role, at, anchor, height, text });
    };
    const from = origin.x + rails.from - besideGap;
    const to = origin.x + rails.to + besideGap;
    circuit.supply.rails.forEach((rail, index) => {
      const upper = index === 0;
      const y = origin.y + (upper ? 0 : span);
      // Away from the paths: the upper rail's name grows upward from the rail, the lower one's downward.
      const away = upper ? -1 : 1;
      let outermost = y + nameHeight / 2;
      if (upper && behindFuse !== undefined) {
        say(
          { x: behindFuse + 1, y: y - overRail },
          "start",
          nameHeight,
          "rail",
          fitText(rail, nameHeight, origin.x + rails.to - behindFuse - 1),
        );
      } else {
        const { lines, height } = wrapRail(rail, left - besideGap);
        const nearest = y + (lines.length > 1 ? noteHeight : height) / 2;
        lines.forEach((line, row) => {
          outermost = nearest + away * (upper ? lines.length - 1 - row : row) * wrappedPitch(height);
          say({ x: from, y: outermost }, "end", height, "rail", line);
        });
        if (upper) outermost = nearest - (lines.length - 1) * wrappedPitch(height) - height;
      }
      const beside = outermost + (upper ? -besideGap : noteHeight + nameHeight * 0.3 + 0.5);
      if (comesFrom) say({ x: from, y: beside }, "end", noteHeight, "note", placeOf(comesFrom, sheet));
      if (goesTo) say({ x: to, y: y + noteHeight / 2 }, "start", noteHeight, "note", placeOf(goesTo, sheet));
    });
    if (!first) return;
    const [live] = circuit.supply.rails;
    const x = behindFuse === undefined ? origin.x + rails.from : behindFuse + 1 + measureText(live, nameHeight) + 4;
    const room = origin.x + rails.to - x;
    const words = fitText(supplyWords(circuit), noteHeight, room);
    say({ x, y: origin.y - overRail }, "start", noteHeight, "note", words);
    const behind = measureText(words, noteHeight) + sourceGap;
    const source = sourceOf(circuit, room - behind);
    if (source) sheet.texts.push({ ...source, at: { x: x + behind, y: origin.y - overRail } });
  }
}

/** The name of a rail beside its end: large in one line, small in up to three where it is long. */
function wrapRail(rail: string, width: Mm): { lines: string[]; height: Mm } {
  if (measureText(rail, nameHeight) <= width) return { lines: [rail], height: nameHeight };
  return wrapNameAt([noteHeight, leastHeight], rail, width, 3);
}

const fuseSymbol = "international/fuse";

/** From the beginning of the rails to the room of the first path, and from the last path to their end, mm. */
const railLead: Mm = 2;
const railFoot: Mm = 3;
/** Rail before and behind the supply's fuse, mm. */
const fuseLead: Mm = 2.5;
const [nameHeight, noteHeight, leastHeight]: [Mm, Mm, Mm] = [3.5, 2.5, 1.8];
/** From the end of a rail to what stands beside it, and from a rail to what stands over it, mm. */
const besideGap: Mm = 1.2;
const overRail: Mm = 1.5;
/** The most that names beside the rails take, mm. */
const mostBeside: Mm = 30;
/** What stands below the lower rail takes no larger share of the height. */
const deepestShare = 0.34;

const placeOf = ({ sheet, line }: { sheet?: number; line: number }, { number }: CircuitSheet) => `/${sheet ?? number}.${line}`;
