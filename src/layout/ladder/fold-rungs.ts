import type { NodeId, ParallelPath, PointUse, Rung, RungElement, RungEnd, SeriesPath } from "../../machine/model.js";
import { elementsOf } from "../../machine/walk.js";
import { contactWidth, type Gap, heightOf, type Item, lastLoad, placeOfLoad, returnWidth, widthOf, widthOfItem } from "./place-parts.js";

/** What one rung may take on a sheet: columns before its loads, columns behind them, columns of a piece without loads, and lines. */
export interface RungLimits {
  columns: number;
  returns: number;
  plain: number;
  lines: number;
}

export const noLimits: RungLimits = {
  columns: Number.POSITIVE_INFINITY,
  returns: Number.POSITIVE_INFINITY,
  plain: Number.POSITIVE_INFINITY,
  lines: Number.POSITIVE_INFINITY,
};

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
    const cutter = new Cutter(rung, limitsOf(index), letters);
    const queue = [rung];
    for (let next = queue.shift(); next; next = queue.shift()) {
      folded.rungs.push(cutter.cut(next));
      folded.origin.push(index);
      queue.unshift(...cutter.more.splice(0));
    }
  });
  return folded;
}

type Items = SeriesPath["items"];

/** Cuts one of the author's rungs and the pieces it falls into. */
class Cutter {
  /** What goes on on lines of its own behind the piece that was cut last. */
  readonly more: Rung[] = [];
  private pieces = 1;
  /** The point by which each wire of the piece is known. */
  private names = new Map<NodeId, string>();
  /** The wires whose point stays in the piece whatever else leaves it. */
  private placed = new Set<NodeId>();

  constructor(
    private readonly rung: Rung,
    private readonly limits: RungLimits,
    private readonly letters: () => string,
  ) {}

  cut(piece: Rung): Rung {
    this.names = new Map();
    this.placed = new Set(piece.path.items.flatMap((item) => (item.kind === "point" ? [item.from] : [])));
    for (const element of elementsOf(piece.path))
      if (element.kind === "point" && !this.names.has(element.from)) this.names.set(element.from, element.point);
    for (const end of [piece.start, piece.end]) if (end.kind === "point") this.names.set(end.node, end.point);
    return this.cutTall(this.cutWide(this.cutBehind(piece)));
  }

  /** Cuts a rung behind its loads where what lies there is too long; the rest goes on from the live side of a rung of its own. */
  private cutBehind(whole: Rung): Rung {
    const room = this.limits.returns;
    const at = lastLoad(whole.path);
    if (at < 0 || returnWidth(whole.path) <= room) return whole;
    const load = whole.path.items[at] as Item;
    const { items } = whole.path;
    const after = items.slice(at + 1);
    // Whatever lies behind the bracket needs one column at the least, for its arrow.
    const left = Math.max(room - Math.min(widthOf({ ...whole.path, items: after }), 1), 0);
    const own = load.kind === "parallel" ? this.narrowBehind(load, whole, left) : [load as RungElement];
    const inside = Math.max(0, ...own.map((item) => returnWidth(seriesOf([item as Item]))));
    const kept = this.fitting(after, room - inside);
    const head = [...items.slice(0, at), ...own, ...after.slice(0, kept)];
    return this.goOn(whole, head, after.slice(kept));
  }

  /** How many items stand in so many columns, with an arrow behind them if they are not all. */
  private fitting(items: Items, room: number): number {
    const long = items.reduce((sum, item) => sum + widthOfItem(item), 0);
    if (long <= room) return items.length;
    let kept = 0;
    for (let width = 0; kept < items.length; kept++) {
      width += widthOfItem(items[kept] as Item);
      if (width > room - 1) break;
    }
    while (kept < items.length && items[kept]?.kind === "point") kept++;
    return kept;
  }

  /** Cuts a rung at its widest that fits; the rest goes on as a rung of its own. */
  private cutWide(given: Rung): Rung {
    let whole = given;
    // What begins with an arrow gives a column to it; an arrow at the end stands where the load would.
    const arrow = whole.start.kind === "rail" ? 0 : 1;
    const loadRoom = Math.max(this.limits.columns - arrow, 1);
    const plainRoom = Math.max(this.limits.plain - arrow, 1);
    const fits = ({ path }: Rung) => contactWidth(path) <= (isLoaded(path) ? loadRoom : plainRoom);
    if (fits(whole)) return whole;
    let kept = 0;
    for (let width = 0; kept < whole.path.items.length; kept++) {
      let item = whole.path.items[kept] as Item;
      // Loads before the last stand among the contacts.
      const loaded = kept === lastLoad(whole.path);
      if (width >= 1 && isLoaded(seriesOf([item]))) break;
      const room = loaded ? loadRoom : plainRoom;
      if (item.kind === "parallel" && headWidth(item, loaded) > room && (width < 1 || room - width >= arrowsOfGap)) {
        // It fits on no line as it is: what stands in its long branches goes to lines of their own.
        const narrowed = this.narrow(item, loaded, whole, Math.max(room - width, 1));
        whole = withItems(whole, [...whole.path.items.slice(0, kept), ...narrowed, ...whole.path.items.slice(kept + 1)]);
        kept += narrowed.findIndex(({ kind }) => kind === "parallel");
        item = whole.path.items[kept] as Item;
      }
      if (loaded) break;
      // One part at least, or a bracket narrowed to two arrows, so that every cut gets on.
      if (width > 0 && width + widthOfItem(item) > plainRoom) break;
      width += widthOfItem(item);
    }
    if (kept === 0 || fits(whole)) return whole;
    const { items } = whole.path;
    while (kept < items.length && items[kept]?.kind === "point") kept++;
    if (items.slice(0, kept).every(({ kind }) => kind === "point")) return whole;
    return this.goOn(whole, items.slice(0, kept), items.slice(kept));
  }

  /** Ends a rung in an arrow behind `head`; the rest begins on lines of its own. */
  private goOn(whole: Rung, head: Items, rest: Items): Rung {
    const node = rest[0]?.from;
    if (node === undefined) return withItems(whole, head);
    const cut: RungEnd = { kind: "point", point: this.nameOf(node), node, at: whole.at };
    this.more.unshift({ ...this.continued(whole), start: cut, end: whole.end, path: seriesOf(rest, node, whole.path.to) });
    return { ...whole, end: cut, path: seriesOf(head, whole.path.from, node) };
  }

  /**
   * Makes a bracket fit before the loads: branches of a bracket of loads go to lines of their own, of others what stands in them.
   * @param loaded the loads of its branches stand in the load column
   */
  private narrow(parallel: ParallelPath, loaded: boolean, whole: Rung, room: number): Items {
    const size = (branch: SeriesPath) => (loaded ? contactWidth(branch, true) : widthOf(branch));
    const branches = this.keptOf(parallel, (branch) => loaded && size(branch) > room, size);
    const narrowed = branches.map((branch) => {
      if (size(branch) <= room) return branch;
      const at = loaded ? placeOfLoad(branch, true) : -1;
      const head = at < 0 ? branch.items : branch.items.slice(0, at);
      const tail = at < 0 ? [] : branch.items.slice(at);
      const long = head.reduce((sum, item) => sum + widthOfItem(item), 0);
      // Two arrows are no shorter than two contacts.
      const cut = long > arrowsOfGap && !head.some(isGap);
      const own = cut ? [this.elsewhere(whole, head, branch.from, tail[0]?.from ?? branch.to)] : head;
      const [inner, ...after] = tail;
      if (inner?.kind !== "parallel") return { ...branch, items: [...own, ...tail] };
      return { ...branch, items: [...own, ...this.narrow(inner, true, whole, room - Math.min(long, arrowsOfGap)), ...after] };
    });
    return this.besides(parallel, narrowed, whole, without(parallel.branches, branches));
  }

  /** Makes a bracket of loads fit behind them: branches go to lines of their own, of one that stays what lies behind its load. */
  private narrowBehind(parallel: ParallelPath, whole: Rung, room: number): Items {
    const branches = this.keptOf(parallel, (branch) => returnWidth(branch) > room, returnWidth);
    const narrowed = branches.map((branch) => {
      const at = lastLoad(branch);
      if (at < 0 || returnWidth(branch) <= room) return branch;
      const load = branch.items[at] as Items[number];
      const tail = branch.items.slice(at + 1);
      const long = tail.reduce((sum, item) => sum + widthOfItem(item), 0);
      const own = load.kind === "parallel" ? this.narrowBehind(load, whole, Math.max(room - Math.min(long, arrowsOfGap), 0)) : [load];
      const after = long > arrowsOfGap && !tail.some(isGap) ? [this.elsewhere(whole, tail, tail[0]?.from ?? branch.to, branch.to)] : tail;
      return { ...branch, items: [...branch.items.slice(0, at), ...own, ...after] };
    });
    return this.besides(parallel, narrowed, whole, without(parallel.branches, branches));
  }

  /** The branches of a bracket that fit where they are; if none does, the smallest. */
  private keptOf(parallel: ParallelPath, tooWide: (branch: SeriesPath) => boolean, size: (branch: SeriesPath) => number): SeriesPath[] {
    const kept = parallel.branches.filter((branch) => !tooWide(branch));
    return kept.length > 0 ? kept : [smallest(parallel.branches, size)];
  }

  /** Takes a stretch to lines of its own and leaves two arrows in its place. */
  private elsewhere(whole: Rung, items: Items, from: NodeId, to: NodeId): RungElement {
    const [out, back] = [this.letters(), this.letters()];
    this.more.push({
      ...this.continued(whole),
      start: { kind: "point", point: out, node: from, at: whole.at },
      end: { kind: "point", point: back, node: to, at: whole.at },
      path: seriesOf(items, from, to),
    });
    const gap: Gap = { kind: "gap", points: [out, back], from, to, rung: whole.id };
    return gap as unknown as RungElement;
  }

  /** Takes branches that have no room below the others to lines of their own. */
  private cutTall(whole: Rung): Rung {
    if (heightOf(whole.path) <= this.limits.lines) return whole;
    return { ...whole, path: this.lower(whole.path, whole, this.limits.lines) };
  }

  private lower(path: SeriesPath, whole: Rung, lines: number): SeriesPath {
    return {
      ...path,
      items: path.items.flatMap((item): Items => {
        if (item.kind !== "parallel" || heightOf({ ...path, items: [item] }) <= lines) return [item];
        let used = 0;
        let kept = 0;
        while (kept < item.branches.length && used + heightOf(item.branches[kept] as SeriesPath) <= lines)
          used += heightOf(item.branches[kept++] as SeriesPath);
        const own = kept > 0 ? item.branches.slice(0, kept) : [this.lower(item.branches[0] as SeriesPath, whole, lines)];
        return this.besides(item, own, whole, item.branches.slice(own.length));
      }),
    };
  }

  /** A bracket with the branches that stay in it, and the points from and to which the others are drawn on lines of their own. */
  private besides(parallel: ParallelPath, own: SeriesPath[], whole: Rung, rest: readonly SeriesPath[]): Items {
    const item = { ...parallel, branches: own };
    const [one] = rest;
    if (!one) return [item];
    const { from, to } = parallel;
    const endAt = (node: NodeId, end: RungEnd, made: PointUse[]): RungEnd => {
      if (end.node === node) return end;
      if (!this.placed.has(node)) {
        this.placed.add(node);
        const point = this.nameOf(node);
        made.push({ kind: "point", id: `${whole.id}/${point}`, point, from: node, to: node, rung: whole.id, at: whole.at });
      }
      return { kind: "point", point: this.nameOf(node), node, at: whole.at };
    };
    const before: PointUse[] = [];
    const behind: PointUse[] = [];
    const start = endAt(from, whole.start, before);
    const end = endAt(to, whole.end, behind);
    const path = rest.length === 1 ? one : seriesOf([{ ...parallel, branches: [...rest] }], from, to);
    this.more.push({ ...this.continued(whole), start, end, path });
    return [...before, item, ...behind];
  }

  /** The point by which a wire of the piece is known: its own, or a letter. */
  private nameOf(node: NodeId): string {
    const name = this.names.get(node) ?? this.letters();
    this.names.set(node, name);
    return name;
  }

  private continued(whole: Rung): Pick<Rung, "id" | "at"> {
    this.pieces++;
    return { id: `${this.rung.id}/part${this.pieces}`, at: whole.at };
  }
}

/** Columns that the two arrows of a gap take. */
const arrowsOfGap = 2;

function withItems(rung: Rung, items: Items): Rung {
  return { ...rung, path: { ...rung.path, items } };
}

function seriesOf(items: readonly Item[], from = (items[0] as Item).from, to = (items.at(-1) as Item).to): SeriesPath {
  return { kind: "series", items: items as Items, from, to };
}

function without(branches: readonly SeriesPath[], kept: readonly SeriesPath[]): SeriesPath[] {
  return branches.filter((branch) => !kept.includes(branch));
}

function smallest(branches: readonly SeriesPath[], size: (branch: SeriesPath) => number): SeriesPath {
  return branches.reduce((least, branch) => (size(branch) < size(least) ? branch : least));
}

/** How many columns an item takes before the load column. */
function headWidth(item: Item, loaded: boolean): number {
  return loaded ? contactWidth(seriesOf([item])) : widthOfItem(item);
}

const isGap = (item: Item) => item.kind === "gap";
const isLoaded = (path: SeriesPath) => lastLoad(path) >= 0;

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
