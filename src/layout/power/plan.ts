import type { Conductor, DeviceKind, MainUse, NodeId, PowerBranch, PowerCircuit } from "../../machine/model.js";
import { inTrackOrder } from "../../machine/power-kinds.js";

/**
 * What a power sheet is drawn from, before anything has millimetres: lanes of parallel tracks, elements in slots along them, and
 * runs of wire that lead across from lane to lane in the gaps between slots.
 */
export interface Plan {
  lanes: Lane[];
  cells: Cell[];
  /** Pieces of wire along a track. */
  strands: Strand[];
  runs: Run[];
  numbers: { lane: Lane; track: number; boundary: number; node: NodeId }[];
  ends: End[];
  /** The slot of motors and other loads: the last one. */
  loadSlot: number;
}

/** Conductors side by side, one on each track. A branch has a lane, and one more for every further way of its brackets. */
export interface Lane {
  branch: PowerBranch;
  /** 0 for the branch itself. */
  way: number;
  tracks: number;
}

/** An element in a slot of a lane; its poles take the first tracks. */
export interface Cell {
  use: MainUse;
  lane: Lane;
  slot: number;
}

/** Wire along a track. */
export interface Strand {
  node: NodeId;
  lane: Lane;
  track: number;
  from: Stop;
  to: Stop;
}

/** Where wire along a track begins or ends. */
export type Stop =
  | { kind: "bus"; phase: string }
  | { kind: "in" | "out"; cell: Cell; pin: number }
  /** On one of the levels of a run. */
  | { kind: "level"; run: Run; level: number }
  | { kind: "end"; end: End };

/**
 * Wires that lead across in the gap before a slot, each on a level of its own. `join` comes first in a gap: what ends there; then points,
 * then what is split off. Conductors that are joined come from their side lane on the levels in their order; those split off in the
 * reverse order, so that no wire has to cross another of the same run.
 */
export interface Run {
  boundary: number;
  band: "join" | "point" | "split";
  levels: number;
  /** On each level, from track to track. */
  wires: { node: NodeId; level: number; from: Spot; to: Spot }[];
}

/** A track of a lane; `beside` is where it is left for a moment: half a pitch behind its last track, or a short way out of the lane. */
export interface Spot {
  lane: Lane;
  track: number;
  beside?: "half" | "out";
}

/** Where wire leaves the sheet or comes onto it: an arrow with a reference. */
export interface End {
  kind: "rails" | "point-in" | "point-out";
  /** Before this slot. */
  boundary: number;
  lane: Lane;
  track: number;
  node: NodeId;
  branch: PowerBranch;
  /** The supply, or the point. */
  name: string;
  /** For rails: which of the two. */
  index: number;
  /** For points that go on: the level they lie on. */
  at?: { run: Run; level: number };
}

/** Plans the branches of one sheet; what they tap must stand on it, or it comes in with a reference. */
export function planSheet(
  circuit: PowerCircuit,
  branches: readonly PowerBranch[],
  kindOf: (device: string) => DeviceKind | undefined,
): Plan {
  return new Planner(circuit, branches, kindOf).plan();
}

/** A conductor under way: its node, and where its wire on this track begins. */
interface Strung {
  phase: string;
  node: NodeId;
  from: Stop;
}

interface Tap {
  lane: Lane;
  boundary: number;
  conductors: { phase: string; node: NodeId; track: number }[];
  run?: Run;
}

class Planner {
  private readonly lanes: Lane[] = [];
  private readonly cells: Cell[] = [];
  private readonly strands: Strand[] = [];
  private readonly runs: Run[] = [];
  private readonly numbers: Plan["numbers"] = [];
  private readonly ends: End[] = [];
  private readonly points = new Map<string, Tap>();
  private readonly numbered = new Set<NodeId>();
  /** Cells of motors, and the strands that lead to the second ends of their windings. */
  private readonly motors = new Map<string, Cell>();
  private readonly seconds: { device: string; lane: Lane; strung: Strung[] }[] = [];
  /** Loads wait for the last slot. */
  private readonly loads: { cell: Cell; strung: Strung[] }[] = [];
  private readonly protection: number;

  constructor(
    private readonly circuit: PowerCircuit,
    private readonly branches: readonly PowerBranch[],
    private readonly kindOf: (device: string) => DeviceKind | undefined,
  ) {
    this.protection = Math.min(3, Math.max(0, ...branches.map((branch) => this.leadingProtection(branch))));
  }

  plan(): Plan {
    for (const branch of this.branches) this.planBranch(branch);
    const last = Math.max(-1, ...this.cells.map(({ slot }) => slot), ...this.ends.map(({ boundary }) => boundary - 1));
    const loadSlot = this.loads.length > 0 ? last + 1 : last;
    for (const { cell, strung } of this.loads) {
      cell.slot = loadSlot;
      this.cells.push(cell);
      cell.use.ins.forEach(({ node }, pin) => {
        const one = strung.find((conductor) => conductor.node === node && conductor.phase === cell.use.ins[pin]?.phase) ?? strung[pin];
        if (one) this.strand(cell.lane, pin, one, { kind: "in", cell, pin });
      });
    }
    this.leadSeconds(loadSlot);
    for (const tap of this.points.values()) this.leadPointOut(tap);
    return {
      lanes: this.lanes,
      cells: this.cells,
      strands: this.strands,
      runs: this.runs,
      numbers: this.numbers,
      ends: this.ends,
      loadSlot,
    };
  }

  private planBranch(branch: PowerBranch): void {
    const lane: Lane = { branch, way: 0, tracks: tracksOf(branch) };
    this.lanes.push(lane);
    let { strung, cursor } = this.start(branch, lane);
    for (const item of branch.path) {
      if (item.kind === "power-point") {
        const conductors = strung.map(({ phase, node }, track) => ({ phase, node, track }));
        this.points.set(item.point, { lane, boundary: cursor, conductors });
        continue;
      }
      if (item.kind === "power-parallel") {
        ({ strung, cursor } = this.planParallel(item, branch, lane, strung, cursor));
        continue;
      }
      if (item.role === "load") {
        const cell: Cell = { use: item, lane, slot: -1 };
        if (this.circuit.branches.some(({ end }) => end.kind === "second" && end.device === item.device))
          this.motors.set(item.device, cell);
        this.loads.push({ cell, strung });
        return;
      }
      ({ strung, cursor } = this.planElement(item, lane, strung, cursor, true));
    }
    const { end } = branch;
    if (end.kind === "supply") {
      strung.forEach((one, track) => {
        const leaving: End = { kind: "rails", boundary: cursor, lane, track, node: one.node, branch, name: end.supply, index: track };
        this.ends.push(leaving);
        this.strand(lane, track, one, { kind: "end", end: leaving });
      });
    } else if (end.kind === "second") this.seconds.push({ device: end.device, lane, strung });
    else if (strung.length > 0) this.danglingPoint(branch, lane, strung);
  }

  /** A branch that ends in a point has its wire up to it. */
  private danglingPoint(branch: PowerBranch, lane: Lane, strung: Strung[]): void {
    const last = branch.path.at(-1);
    if (last?.kind !== "power-point") return;
    const tap = this.points.get(last.point);
    if (!tap || !this.circuit.branches.some(({ start }) => start.kind === "point" && start.point === last.point)) return;
    const run = this.pointRun(tap, strung.length);
    strung.forEach((one, track) => {
      this.strand(lane, track, one, { kind: "level", run, level: strung.length - 1 - track });
    });
  }

  private start(branch: PowerBranch, lane: Lane): { strung: Strung[]; cursor: number } {
    const { start, conductors } = branch;
    const ordered = inTrackOrder(conductors);
    if (start.kind === "bus") {
      return { strung: ordered.map(({ phase, node }) => ({ phase, node, from: { kind: "bus", phase } })), cursor: 0 };
    }
    if (start.kind === "star") {
      const slot = this.protection;
      const run: Run = { boundary: slot, band: "split", levels: 1, wires: [] };
      this.runs.push(run);
      const node = conductors[0]?.node ?? -1;
      run.wires.push({ node, level: 0, from: { lane, track: 0 }, to: { lane, track: ordered.length - 1 } });
      return { strung: ordered.map(({ phase }) => ({ phase, node, from: { kind: "level", run, level: 0 } })), cursor: slot };
    }
    const tap = this.points.get(start.point);
    if (!tap) {
      const strung = ordered.map(({ phase, node }, track): Strung => {
        const end: End = { kind: "point-in", boundary: 0, lane, track, node, branch, name: start.point, index: track };
        this.ends.push(end);
        return { phase, node, from: { kind: "end", end } };
      });
      return { strung, cursor: 0 };
    }
    const run = this.pointRun(tap, tap.conductors.length);
    const strung = ordered.map(({ phase, node }, track): Strung => {
      const source = tap.conductors.find((one) => one.phase === phase);
      const level = tap.conductors.length - 1 - (source?.track ?? track);
      run.wires.push({ node, level, from: { lane: tap.lane, track: source?.track ?? track }, to: { lane, track } });
      return { phase, node, from: { kind: "level", run, level } };
    });
    return { strung, cursor: tap.boundary };
  }

  private pointRun(tap: Tap, levels: number): Run {
    tap.run ??= { boundary: tap.boundary, band: "point", levels, wires: [] };
    if (!this.runs.includes(tap.run)) this.runs.push(tap.run);
    return tap.run;
  }

  /** Where a point goes on on other sheets, its wires run out of the lane to arrows. */
  private leadPointOut(tap: Tap): void {
    const point = [...this.points].find(([, one]) => one === tap)?.[0] ?? "";
    const elsewhere = this.circuit.branches.filter(
      (branch) => branch.start.kind === "point" && branch.start.point === point && !this.branches.includes(branch),
    );
    if (elsewhere.length === 0) return;
    const run = this.pointRun(tap, tap.conductors.length);
    const farthest = run.wires.reduce((far, { to }) => (this.lanes.indexOf(to.lane) > this.lanes.indexOf(far) ? to.lane : far), tap.lane);
    for (const { node, track } of tap.conductors) {
      const level = tap.conductors.length - 1 - track;
      run.wires.push({ node, level, from: { lane: tap.lane, track }, to: { lane: farthest, track: farthest.tracks - 1, beside: "out" } });
      this.ends.push({
        kind: "point-out",
        boundary: tap.boundary,
        lane: farthest,
        track,
        node,
        branch: tap.lane.branch,
        name: point,
        index: track,
        at: { run, level },
      });
    }
  }

  private planElement(use: MainUse, lane: Lane, strung: Strung[], cursor: number, numbered: boolean): { strung: Strung[]; cursor: number } {
    const slot = Math.max(cursor, this.usualSlot(use));
    const cell: Cell = { use, lane, slot };
    this.cells.push(cell);
    use.ins.forEach((_, pin) => {
      const one = strung[pin];
      if (one) this.strand(lane, pin, one, { kind: "in", cell, pin });
    });
    const straight = use.role === "conversion" ? [] : strung.slice(use.ins.length);
    const outs = use.outs.map(({ phase, node }, pin): Strung => ({ phase, node, from: { kind: "out", cell, pin } }));
    const behind = use.crossed && lane.way === 0 ? this.exchange(outs, lane, slot + 1) : outs;
    if (numbered) this.number(lane, behind, slot + 1);
    return { strung: [...behind, ...straight], cursor: slot + 1 };
  }

  /** Motors' contactors stand in one row over the branches, and so do overloads. */
  private usualSlot({ device, role }: MainUse): number {
    if (role === "conversion") return 0;
    const kind = this.kindOf(device);
    return kind === "contactor" ? this.protection : kind === "overload" ? this.protection + 1 : 0;
  }

  /** How many elements of a branch stand before its first contactor. */
  private leadingProtection({ start, path }: PowerBranch): number {
    const elements = path.filter((item) => item.kind !== "power-point");
    const index = elements.findIndex(
      (item) => item.kind === "power-parallel" || ["contactor", "overload"].includes(this.kindOf(item.device) ?? ""),
    );
    return start.kind === "bus" ? Math.max(0, index) : 0;
  }

  /** The first and the last conductor change tracks behind an element of the lane itself; the last one steps aside for it. */
  private exchange(outs: Strung[], lane: Lane, boundary: number): Strung[] {
    const last = outs.length - 1;
    if (last < 1) return outs;
    const run: Run = { boundary, band: "join", levels: 3, wires: [] };
    this.runs.push(run);
    const [first, end] = [outs[0] as Strung, outs[last] as Strung];
    this.strand(lane, last, end, { kind: "level", run, level: 0 });
    run.wires.push({ node: end.node, level: 0, from: { lane, track: last }, to: { lane, track: last, beside: "half" } });
    this.strands.push({
      node: end.node,
      lane,
      track: last + 0.5,
      from: { kind: "level", run, level: 0 },
      to: { kind: "level", run, level: 2 },
    });
    run.wires.push({ node: end.node, level: 2, from: { lane, track: last, beside: "half" }, to: { lane, track: 0 } });
    this.strand(lane, 0, first, { kind: "level", run, level: 1 });
    run.wires.push({ node: first.node, level: 1, from: { lane, track: 0 }, to: { lane, track: last } });
    return outs.map((one, track): Strung => {
      if (track === 0) return { ...end, from: { kind: "level", run, level: 2 } };
      return track === last ? { ...first, from: { kind: "level", run, level: 1 } } : one;
    });
  }

  private planParallel(
    { ways, from, to }: { ways: readonly PowerBranch["path"][]; from: readonly Conductor[]; to: readonly Conductor[] },
    branch: PowerBranch,
    lane: Lane,
    strung: Strung[],
    cursor: number,
  ): { strung: Strung[]; cursor: number } {
    const before = inTrackOrder(from);
    const behind = inTrackOrder(to);
    const passed = before.map(({ node }, track) => behind[track]?.node !== node);
    const uses = ways.map((way) => way.filter((item) => item.kind === "main"));
    // All ways begin in the same gap and end in the same gap.
    const first = Math.max(cursor, Math.min(...uses.map(([use]) => (use ? Math.max(cursor, this.usualSlot(use)) : cursor))));
    let end = first;
    for (const way of uses) {
      let slot = first;
      for (const use of way) slot = Math.max(slot, this.usualSlot(use)) + 1;
      end = Math.max(end, slot);
    }
    let main: Strung[] = strung;
    uses.forEach((way, index) => {
      const side = index === 0 ? lane : this.sideLane(branch, index, lane.tracks);
      let here = strung;
      if (index > 0) here = this.split(lane, side, strung, passed, first);
      let slot = first;
      way.forEach((use, place) => {
        const inner = place < way.length - 1;
        ({ strung: here, cursor: slot } = this.planElement(use, side, here, slot, inner));
      });
      if (index === 0) main = here;
      else this.join(lane, side, here, behind, passed, end);
    });
    this.number(lane, main, end);
    return { strung: main, cursor: end };
  }

  private sideLane(branch: PowerBranch, way: number, tracks: number): Lane {
    const known = this.lanes.find((lane) => lane.branch === branch && lane.way === way);
    if (known) return known;
    const lane = { branch, way, tracks };
    this.lanes.push(lane);
    return lane;
  }

  private split(lane: Lane, side: Lane, strung: Strung[], passed: readonly boolean[], boundary: number): Strung[] {
    const run: Run = { boundary, band: "split", levels: passed.filter((one) => one).length, wires: [] };
    this.runs.push(run);
    let level = run.levels;
    return strung.flatMap((one, track): Strung[] => {
      if (!passed[track]) return [];
      level--;
      run.wires.push({ node: one.node, level, from: { lane, track }, to: { lane: side, track } });
      return [{ phase: one.phase, node: one.node, from: { kind: "level", run, level } }];
    });
  }

  private join(lane: Lane, side: Lane, strung: Strung[], behind: readonly Conductor[], passed: readonly boolean[], boundary: number): void {
    const run: Run = { boundary, band: "join", levels: passed.filter((one) => one).length, wires: [] };
    this.runs.push(run);
    strung.forEach((one, track) => {
      if (track >= run.levels) return;
      this.strand(side, track, one, { kind: "level", run, level: track });
      const target = behind.findIndex(({ node }) => node === one.node);
      run.wires.push({ node: one.node, level: track, from: { lane: side, track }, to: { lane, track: target < 0 ? track : target } });
    });
  }

  /** The second ends of the windings: behind the motor, on levels under the loads. */
  private leadSeconds(loadSlot: number): void {
    for (const [device, cell] of this.motors) {
      const leading = this.seconds.filter((one) => one.device === device);
      if (leading.length === 0) continue;
      const pins = cell.use.second ?? [];
      const run: Run = { boundary: loadSlot + 1, band: "join", levels: pins.length, wires: [] };
      this.runs.push(run);
      pins.forEach(({ node }, pin) => {
        const level = pins.length - 1 - pin;
        this.strands.push({ node, lane: cell.lane, track: pin, from: { kind: "out", cell, pin }, to: { kind: "level", run, level } });
        for (const { lane, strung } of leading) {
          const one = strung[pin];
          if (!one) continue;
          this.strand(lane, pin, one, { kind: "level", run, level });
          run.wires.push({ node, level, from: { lane: cell.lane, track: pin }, to: { lane, track: pin } });
        }
      });
    }
  }

  private strand(lane: Lane, track: number, { node, from }: Strung, to: Stop): void {
    this.strands.push({ node, lane, track, from, to });
  }

  private number(lane: Lane, strung: readonly Strung[], boundary: number): void {
    strung.forEach(({ node, from }, track) => {
      if (from.kind === "bus" || this.numbered.has(node)) return;
      this.numbered.add(node);
      this.numbers.push({ lane, track, boundary, node });
    });
  }
}

/** The most conductors that run side by side anywhere in a branch. */
function tracksOf({ conductors, path }: PowerBranch): number {
  const widths = path.map((item) => (item.kind === "main" ? Math.max(item.ins.length, item.outs.length, item.second?.length ?? 0) : 0));
  return Math.max(1, conductors.length, ...widths);
}
