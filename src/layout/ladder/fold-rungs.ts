import type { NodeId, ParallelPath, PointUse, Rung, RungElement, SeriesPath } from "../../machine/model.js";
import { bearsLoad, contactWidth, type Gap, heightOf, type Item, widthOfItem } from "./place-parts.js";

/** What one rung may take on a sheet: columns before its loads, and lines. */
export interface RungLimits {
  columns: number;
  lines: number;
}

export interface Folded {
  rungs: Rung[];
  /** Index of the author's rung each comes from. */
  origin: number[];
  /** Points made by cutting: what begins or ends there is never joined by wire. */
  letters: Set<string>;
}

/**
 * Cuts rungs that are too wide or too tall for any sheet into pieces that are not. Each cut ends in an arrow with a letter,
 * and the piece that goes on begins with the same letter on lines of its own below. Rungs within their limits stay as they are.
 */
export function foldRungs(rungs: readonly Rung[], limitsOf: (index: number) => RungLimits, taken: ReadonlySet<string>): Folded {
  const folded: Folded = { rungs: [], origin: [], letters: new Set() };
  const fresh = lettersExcept(taken);
  const letters = () => {
    const letter = fresh();
    folded.letters.add(letter);
    return letter;
  };
  rungs.forEach((rung, index) => {
    const limits = limitsOf(index);
    const queue = [rung];
    let piece = 0;
    for (let next = queue.shift(); next; next = queue.shift()) {
      const more: Rung[] = [];
      const whole = cutTall(cutWide(next));
      folded.rungs.push(whole);
      folded.origin.push(index);
      queue.unshift(...more);

      /** Cuts a rung at its widest that fits; the rest goes on as a rung of its own. */
      function cutWide(given: Rung): Rung {
        let whole = given;
        // What begins with an arrow gives a column to it; an arrow at the end stands where the load would.
        const room = Math.max(limits.columns - (whole.start.kind === "rail" ? 0 : 1), 1);
        if (contactWidth(whole.path) <= room) return whole;
        let kept = 0;
        for (let width = 0; kept < whole.path.items.length; kept++) {
          let item = whole.path.items[kept] as Item;
          if (isLoad(item) && kept > 0) break;
          if (item.kind === "parallel" && headWidth(item) > room && (kept === 0 || room - width >= 2)) {
            // It fits on no line as it is: what stands in its long branches goes to lines of their own.
            const at = kept;
            const narrowed = narrow(item, Math.max(room - width, 2));
            const items = whole.path.items.map((other, index) => (index === at ? narrowed : other));
            whole = { ...whole, path: { ...whole.path, items } };
            item = narrowed;
          }
          if (isLoad(item)) break;
          // One part at least, or a bracket narrowed to two arrows, so that every cut gets on.
          if (kept > 0 && width + headWidth(item) > room) break;
          width += headWidth(item);
        }
        const { items } = whole.path;
        if (kept === 0 || contactWidth(whole.path) <= room) return whole;
        while (kept < items.length && items[kept]?.kind === "point") kept++;
        const rest = items.slice(kept);
        const node = rest[0]?.from ?? whole.path.to;
        if (rest.length === 0) return whole;
        const letter = letters();
        more.unshift({
          ...continued(whole, letter, node),
          end: whole.end,
          path: { kind: "series", items: rest, from: node, to: whole.path.to },
        });
        return {
          ...whole,
          end: { kind: "point", point: letter, node, at: whole.at },
          path: { kind: "series", items: items.slice(0, kept), from: whole.path.from, to: node },
        };
      }

      function narrow(parallel: ParallelPath, room: number): ParallelPath {
        return {
          ...parallel,
          branches: parallel.branches.map((branch) => {
            if (contactWidth(branch) <= room) return branch;
            const load = branch.items.findIndex((item) => isLoad(item));
            const head = load < 0 ? branch.items : branch.items.slice(0, load);
            const tail = load < 0 ? [] : branch.items.slice(load);
            const long = head.filter((item) => item.kind !== "point");
            if (long.length === 0) {
              const inner = tail[0];
              return inner?.kind === "parallel" ? { ...branch, items: [...head, narrow(inner, room), ...tail.slice(1)] } : branch;
            }
            const from = branch.from;
            const to = tail[0]?.from ?? branch.to;
            const [out, back] = [letters(), letters()];
            more.push({
              ...continued(next as Rung, out, from),
              end: { kind: "point", point: back, node: to, at: (next as Rung).at },
              path: { kind: "series", items: head, from, to },
            });
            const gap: Gap = { kind: "gap", points: [out, back], from, to, rung: (next as Rung).id };
            return { ...branch, items: [gap as unknown as RungElement, ...tail] };
          }),
        };
      }

      /** Takes branches that have no room below the others to lines of their own. */
      function cutTall(whole: Rung): Rung {
        if (heightOf(whole.path) <= limits.lines) return whole;
        return { ...whole, path: lower(whole.path, whole, limits.lines) };
      }

      function lower(path: SeriesPath, whole: Rung, lines: number): SeriesPath {
        return {
          ...path,
          items: path.items.flatMap((item): SeriesPath["items"] => {
            if (item.kind !== "parallel" || heightOf({ ...path, items: [item] }) <= lines) return [item];
            let used = 0;
            let kept = 0;
            while (kept < item.branches.length && used + heightOf(item.branches[kept] as SeriesPath) <= lines)
              used += heightOf(item.branches[kept++] as SeriesPath);
            const own = kept > 0 ? item.branches.slice(0, kept) : [lower(item.branches[0] as SeriesPath, whole, lines)];
            const rest = item.branches.slice(own.length);
            if (rest.length === 0) return [{ ...item, branches: own }];
            const fromRail = whole.start.kind === "rail" && whole.start.node === item.from;
            const toRail = whole.end.kind === "rail" && whole.end.node === item.to;
            const [out, back] = [fromRail ? "" : letters(), toRail ? "" : letters()];
            const beside: SeriesPath =
              rest.length === 1
                ? (rest[0] as SeriesPath)
                : { kind: "series", items: [{ ...item, branches: rest }], from: item.from, to: item.to };
            more.push({
              ...continued(whole, out, item.from),
              ...(fromRail ? { start: whole.start } : {}),
              end: toRail ? whole.end : { kind: "point", point: back, node: item.to, at: whole.at },
              path: beside,
            });
            const point = (name: string, node: NodeId): PointUse[] =>
              name === ""
                ? []
                : [{ kind: "point", id: `${whole.id}/${name}`, point: name, from: node, to: node, rung: whole.id, at: whole.at }];
            return [...point(out, item.from), { ...item, branches: own }, ...point(back, item.to)];
          }),
        };
      }

      function continued(whole: Rung, letter: string, node: NodeId): Omit<Rung, "end" | "path"> {
        piece++;
        return { id: `${rung.id}/part${piece + 1}`, start: { kind: "point", point: letter, node, at: whole.at }, at: whole.at };
      }
    }
  });
  return folded;
}

/** How many columns an item takes before the load column. */
function headWidth(item: Item): number {
  return isLoad(item)
    ? contactWidth({ kind: "series", items: [item] as SeriesPath["items"], from: item.from, to: item.to })
    : widthOfItem(item);
}

const isLoad = (item: Item) => item.kind === "load" || (item.kind === "parallel" && item.branches.some(bearsLoad));

/** A, B … Z, A2, B2 …, without names that are in use. */
function lettersExcept(taken: ReadonlySet<string>): () => string {
  let next = 0;
  return () => {
    for (;;) {
      const round = Math.floor(next / 26);
      const name = String.fromCharCode(65 + (next % 26)) + (round > 0 ? round + 1 : "");
      next++;
      if (!taken.has(name)) return name;
    }
  };
}
