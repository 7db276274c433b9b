import type { Box, Mm, Point } from "../../drawing/geometry.js";
import type { PartId } from "../../drawing/marks.js";
import { fitText } from "../../drawing/text.js";
import type { MainUse, NodeId, PowerBranch } from "../../machine/model.js";
import { isEarth } from "../../machine/power-kinds.js";
import type { Symbol } from "../../symbols/symbol.js";
import { joinWires, type Straight } from "../ladder/join-wires.js";
import { scaleSymbol } from "../ladder/scale-symbol.js";
import type { CircuitSheet, Place, PlacedText } from "../placement.js";
import type { DressedCell } from "./arrangement.js";
import { arrowLength, functionOf, functionWidth, type MeasuredPower, type PowerGiven } from "./measure.js";
import type { Cell, Lane } from "./plan.js";

/** What a sheet is drawn from. */
export interface PowerSheetGiven extends PowerGiven {
  measured: MeasuredPower;
  branches: readonly PowerBranch[];
  origin: Point;
  first: boolean;
  last: boolean;
  /** Printed number of the sheet's first lane. */
  firstLine: number;
  zoneOf(point: Point): string;
}

/** Sets everything of a power sheet down in millimetres, and says where its parts stand. */
export function drawPowerSheet(given: PowerSheetGiven, out: CircuitSheet): [PartId, Place][] {
  return new PowerDrawer(given, out).draw();
}

const earthScale = 0.65;

class PowerDrawer {
  private readonly pieces: Straight[] = [];
  private readonly places: [PartId, Place][] = [];
  private readonly lineOf = new Map<Lane, number>();

  constructor(
    private readonly given: PowerSheetGiven,
    private readonly out: CircuitSheet,
  ) {
    given.measured.plan.lanes.forEach((lane, index) => {
      this.lineOf.set(lane, given.firstLine + index);
    });
  }

  draw(): [PartId, Place][] {
    const { plan } = this.given.measured;
    this.drawLines();
    this.drawBus();
    if (this.given.first) this.drawFeed();
    for (const cell of plan.cells) {
      const dressed = this.given.measured.dressed.get(cell) as DressedCell;
      this.drawCell(
        cell.use,
        dressed,
        this.given.measured.slotAt(cell.slot),
        this.track(cell.lane, 0),
        this.lineOf.get(cell.lane) as number,
      );
    }
    this.drawStrands();
    this.drawRuns();
    this.drawNumbers();
    this.drawEnds();
    this.drawFunctions();
    this.join();
    return this.places;
  }

  // ------------------------------------------------------------ small things

  private at(along: Mm, across: Mm): Point {
    const { x, y } = this.given.arrangement.orient(along, across);
    return { x: tidy(this.given.origin.x + x), y: tidy(this.given.origin.y + y) };
  }

  private track(lane: Lane, track: number): Mm {
    return this.given.measured.trackAt(lane, track);
  }

  private text(placed: PlacedText, by: Point): void {
    this.out.texts.push({ ...placed, at: { x: tidy(placed.at.x + by.x), y: tidy(placed.at.y + by.y) } });
  }

  private piece(node: NodeId, from: { along: Mm; across: Mm }, to: { along: Mm; across: Mm }): void {
    this.pieces.push({ node, from, to });
  }

  private place(part: PartId, line: number, box: Box): void {
    const zone = this.given.zoneOf({ x: box.x + box.width / 2, y: box.y + box.height / 2 });
    this.places.push([part, { sheet: this.out.number, line, zone, box }]);
  }

  private wirePart(node: NodeId): PartId {
    return `${this.given.circuit.id}/wire${node}`;
  }

  private numberOf(node: NodeId): string {
    return this.given.machine.potentials[node]?.number.value ?? "";
  }

  private dot(node: NodeId, along: Mm, across: Mm): void {
    this.out.dots.push({ part: this.wirePart(node), at: this.at(along, across), diameter: 1.25 });
  }

  /** An arrowhead along or across, its tail at the place. */
  private arrow(part: PartId, along: Mm, across: Mm, way: "along" | "across"): void {
    const half = 0.8;
    const point = (forth: Mm, aside: Mm) =>
      way === "along" ? this.at(along + forth, across + aside) : this.at(along + aside, across + forth);
    const path = [point(0, 0), point(0, -half), point(arrowLength, 0), point(0, half), point(0, 0)];
    this.out.strokes.push({ part, role: "continuation", path, width: 0.25 });
  }

  // ------------------------------------------------------------ head: lines, busbars, feed

  private drawLines(): void {
    const { measured, arrangement } = this.given;
    for (const [lane, line] of this.lineOf) {
      const middle = (this.track(lane, 0) + this.track(lane, lane.tracks - 1)) / 2;
      this.text({ role: "line-number", text: String(line), ...arrangement.lineNumber }, this.at(0, middle));
      if (lane.way > 0) continue;
      const box = this.boxOf([
        this.at(measured.busAt(0), this.track(lane, 0)),
        this.at(measured.functionAt, this.track(lane, lane.tracks - 1)),
      ]);
      this.place(lane.branch.id, line, box);
    }
  }

  private boxOf(points: readonly Point[]): Box {
    const x = Math.min(...points.map((point) => point.x));
    const y = Math.min(...points.map((point) => point.y));
    return { x, y, width: Math.max(...points.map((point) => point.x)) - x, height: Math.max(...points.map((point) => point.y)) - y };
  }

  private drawBus(): void {
    const { circuit, measured, arrangement, first, last } = this.given;
    circuit.feed.bus.forEach(({ phase, node }, index) => {
      const along = measured.busAt(index);
      const from = measured.busFrom(index);
      const to = measured.busTo;
      this.out.wires.push({
        part: `${circuit.id}/bus/${phase}`,
        node,
        role: "rail",
        points: [this.at(along, from), this.at(along, to)],
        width: 0.5,
      });
      const ends: [side: "before" | "behind", across: Mm][] = [
        ...(first ? [] : [["before", from] as ["before", Mm]]),
        ...(last ? [] : [["behind", to] as ["behind", Mm]]),
      ];
      for (const [side, across] of ends) {
        const part = `${circuit.id}/bus/${phase}/${this.out.number}/${side}`;
        const tail = side === "before" ? across - arrowLength : across;
        this.arrow(part, along, tail, "across");
        const room = arrangement.busEnds - arrowLength - 2;
        const words = { to: "point", point: this.numberOf(node), from: part, way: side === "before" ? "in" : "out", room } as const;
        const by = this.at(along, side === "before" ? tail : across + arrowLength);
        this.text({ part, role: "reference", height: 1.8, text: words, ...arrangement.acrossArrow(side) }, by);
        const lines = [...this.lineOf.values()];
        this.place(part, (side === "before" ? lines[0] : lines.at(-1)) ?? this.given.firstLine, {
          x: by.x - 2,
          y: by.y - 2,
          width: 4,
          height: 4,
        });
      }
      if (isEarth(phase) && last) this.earth(`${circuit.id}/earth`, node, along, to, "across", phase);
    });
    for (const { from, lane, track, node } of measured.plan.strands)
      if (from.kind === "bus") this.dot(node, measured.stopAt(from), this.track(lane, track));
  }

  /** An earth at the end of wire that runs this way. It hangs: level wire turns down to it. */
  private earth(part: PartId, node: NodeId, along: Mm, across: Mm, way: "along" | "across", name?: string): void {
    const { symbols, machine, arrangement, scale } = this.given;
    const symbol = scaleSymbol(symbols.get(`${machine.drawing.convention}/protective-earth`), earthScale * scale);
    const port = symbol.ports[0] as Symbol["ports"][number];
    const down = (way === "across") === (arrangement.flow === "right");
    // Clear of the symbol it leads away from.
    const reach = down ? 2.5 : 4;
    const turn = way === "across" ? { along, across: across + reach } : { along: along + reach, across };
    this.piece(node, { along, across }, turn);
    // Down the sheet from the turn.
    const drop = 1.5;
    const end = down
      ? turn
      : arrangement.flow === "down"
        ? { along: turn.along + drop, across: turn.across }
        : { along: turn.along, across: turn.across + drop };
    if (!down) this.piece(node, turn, end);
    const at = this.at(end.along, end.across);
    const origin = { x: tidy(at.x - port.x), y: tidy(at.y - port.y) };
    this.out.symbols.push({ part, symbol, at: origin, turn: { quarter: 0 } });
    if (name !== undefined) {
      const { box } = symbol;
      this.text(
        {
          part,
          role: "designation",
          at: { x: box.x + box.width + 0.8, y: box.y + box.height / 2 + 1 },
          anchor: "start",
          height: 1.8,
          text: name,
        },
        origin,
      );
    }
  }

  private drawFeed(): void {
    const { circuit, measured, arrangement } = this.given;
    const { feed } = circuit;
    const line = this.given.firstLine;
    feed.conductors.forEach(({ phase }, index) => {
      const across = measured.feedTrack(index);
      const part = `${feed.id}/${phase}`;
      this.arrow(part, measured.feedStart, across, "along");
      const name = fitText(phase, 2.5, arrangement.flow === "down" ? 7 : arrangement.nameRow - 2);
      const by = this.at(measured.feedStart, across);
      const placed =
        arrangement.flow === "down"
          ? { at: { x: 0, y: -0.9 }, anchor: "middle" as const }
          : { at: { x: -0.9, y: 1.25 }, anchor: "end" as const };
      this.text({ part, role: "rail", height: 2.5, text: name, ...placed }, by);
    });
    const volts = this.voltsOf();
    if (volts !== "") {
      const beside = arrangement.headingRow === 0;
      const by = beside
        ? this.at(measured.feedStart, measured.feedTrack(feed.conductors.length - 1) + 6)
        : this.at(arrangement.lineRow, arrangement.headingRow);
      this.text({ role: "note", at: { x: 0, y: beside ? 1.5 : 0 }, anchor: "start", height: 2.5, text: volts }, by);
    }
    // Tracks are in the order of the conductors as written; poles take those they switch.
    const open = new Map(
      feed.conductors.map(({ phase, node }, index) => [
        phase,
        { node, along: measured.feedStart + arrowLength, across: measured.feedTrack(index) },
      ]),
    );
    for (const { use, dressed, middle } of measured.feed ?? []) {
      const first = Math.min(...use.ins.map(({ phase }) => open.get(phase)?.across ?? 0));
      this.drawCell(use, dressed, middle, first, line);
      use.ins.forEach(({ phase }, pin) => {
        const one = open.get(phase);
        if (!one) return;
        const across = first + pin * (measured.feedTrack(1) - measured.feedTrack(0));
        this.piece(one.node, { along: one.along, across: one.across }, { along: middle + dressed.ins, across });
        const out = use.outs[pin];
        if (!out) return;
        open.set(phase, { node: out.node, along: middle + dressed.outs, across });
        this.number(out.node, middle + Math.max(dressed.outs, dressed.after) + arrangement.numberRow, across, pin);
      });
    }
    feed.bus.forEach(({ phase }, index) => {
      const one = open.get(phase);
      // Where a busbar begins before what comes in, they meet in a dot.
      if (one && measured.busFrom(index) < one.across - 0.01) this.dot(one.node, measured.busAt(index), one.across);
      if (one) this.piece(one.node, { along: one.along, across: one.across }, { along: measured.busAt(index), across: one.across });
    });
    this.place(
      feed.id,
      line,
      this.boxOf([
        this.at(measured.feedStart, measured.feedTrack(0)),
        this.at(measured.busAt(0), measured.feedTrack(feed.conductors.length - 1)),
      ]),
    );
  }

  private voltsOf(): string {
    const { voltage, current, frequency, feed } = this.given.circuit;
    const phases = feed.conductors.filter(({ phase }) => /^L\d$/.test(phase)).length;
    return [voltage?.text, current, current === "AC" && phases === 3 ? "3 phase" : undefined, frequency?.text]
      .filter((word) => word !== undefined)
      .join(" ");
  }

  // ------------------------------------------------------------ lanes

  private drawCell(use: MainUse, dressed: DressedCell, middle: Mm, across: Mm, line: number): void {
    const by = this.at(middle, across);
    const origin = { x: tidy(by.x + dressed.shift.x), y: tidy(by.y + dressed.shift.y) };
    this.out.symbols.push({ part: use.id, device: use.device, symbol: dressed.symbol, at: origin, turn: { quarter: 0 } });
    for (const words of dressed.texts) this.text(words, by);
    this.place(use.id, line, { ...dressed.box, x: tidy(dressed.box.x + by.x), y: tidy(dressed.box.y + by.y) });
    const frame = dressed.symbol.ports.find(({ name }) => name === "pe");
    if (frame && use.frame !== undefined) {
      const { alongOf, acrossOf } = this.given.arrangement;
      const port = { x: frame.x + dressed.shift.x, y: frame.y + dressed.shift.y };
      this.earth(`${use.id}/earth`, use.frame, middle + alongOf(port), across + acrossOf(port), "across", "PE");
    }
  }

  private drawStrands(): void {
    const { measured } = this.given;
    for (const { node, lane, track, from, to } of measured.plan.strands) {
      const across = this.track(lane, track);
      const end = measured.stopAt(to);
      if (to.kind === "in" && to.pin === 1 && this.hangsBetween(to.cell)) {
        this.drawBack(node, to.cell, measured.stopAt(from), across);
        continue;
      }
      this.piece(node, { along: measured.stopAt(from), across }, { along: end, across });
    }
    for (const cell of measured.plan.cells) {
      if (
        cell.use.role === "load" &&
        cell.use.ins.length === 3 &&
        cell.use.outs.length === 0 &&
        this.portsOf(cell, "out") === 3 &&
        !cell.use.second
      )
        this.drawStar(cell);
    }
  }

  private portsOf(cell: Cell, side: "in" | "out"): number {
    const dressed = this.given.measured.dressed.get(cell) as DressedCell;
    return dressed.symbol.ports.filter(({ name }) => name.startsWith(`${side}-`)).length;
  }

  /** A lamp or a heater between two conductors: the second one passes it by and comes back to its far end. */
  private hangsBetween(cell: Cell): boolean {
    return cell.use.role === "load" && cell.use.ins.length === 2 && this.portsOf(cell, "in") === 1;
  }

  private drawBack(node: NodeId, cell: Cell, from: Mm, across: Mm): void {
    const far = this.given.measured.stopAt({ kind: "out", cell, pin: 0 });
    const turn = far + 2;
    const home = this.track(cell.lane, 0);
    this.piece(node, { along: from, across }, { along: turn, across });
    this.piece(node, { along: turn, across }, { along: turn, across: home });
    this.piece(node, { along: turn, across: home }, { along: far, across: home });
  }

  /** Three heating elements in star: their far ends are joined, and that is nobody else's wire. */
  private drawStar(cell: Cell): void {
    const far = this.given.measured.stopAt({ kind: "out", cell, pin: 0 });
    const node = -2 - this.given.measured.plan.cells.indexOf(cell);
    const [a, c] = [this.track(cell.lane, 0), this.track(cell.lane, 2)];
    this.piece(node, { along: far + 2, across: a }, { along: far + 2, across: c });
    for (const track of [0, 1, 2])
      this.piece(node, { along: far, across: this.track(cell.lane, track) }, { along: far + 2, across: this.track(cell.lane, track) });
  }

  private drawRuns(): void {
    const { measured } = this.given;
    for (const run of measured.plan.runs) {
      for (const { node, level, from, to } of run.wires) {
        const along = measured.levelAt(run, level);
        this.piece(node, { along, across: measured.spotAt(from) }, { along, across: measured.spotAt(to) });
      }
    }
  }

  private drawNumbers(): void {
    const { measured } = this.given;
    for (const { lane, track, boundary, node } of measured.plan.numbers)
      this.number(node, measured.numberRowEnd(boundary), this.track(lane, track), track);
  }

  private number(node: NodeId, along: Mm, across: Mm, track: number): void {
    const words = this.numberOf(node);
    this.text(
      { part: this.wirePart(node), role: "wire-number", ...this.given.arrangement.wireNumber(words, track) },
      this.at(along, across),
    );
  }

  private drawEnds(): void {
    const { measured, arrangement } = this.given;
    for (const { kind, lane, track, node, branch, name, index, at, boundary } of measured.plan.ends) {
      const room = arrangement.endRoom - 2;
      const part = `${branch.id}/${kind}/${name}/${index}`;
      if (kind === "rails") {
        const along = measured.endAt(boundary);
        const across = this.track(lane, track);
        this.arrow(part, along, across, "along");
        const supply = this.given.machine.supplies.find((one) => one.name === name);
        const by = this.at(along + arrowLength, across);
        this.text(
          {
            part,
            role: "reference",
            height: 1.8,
            text: { to: "rails", supply: name, rail: supply?.rails[index] ?? "", room },
            ...arrangement.alongArrow("behind"),
          },
          by,
        );
        this.place(part, this.lineOf.get(lane) as number, { x: by.x - 2, y: by.y - 2, width: 4, height: 4 });
        continue;
      }
      const point = this.numberOf(node);
      if (kind === "point-in") {
        const along = measured.stopAt({ kind: "end", end: { kind, lane, track, node, branch, name, index, boundary } }) - arrowLength;
        const across = this.track(lane, track);
        this.arrow(part, along, across, "along");
        const by = this.at(along, across);
        this.text(
          {
            part,
            role: "reference",
            height: 1.8,
            text: { to: "point", point, from: part, way: "in", room },
            ...arrangement.alongArrow("before"),
          },
          by,
        );
        this.place(part, this.lineOf.get(lane) as number, { x: by.x - 2, y: by.y - 2, width: 4, height: 4 });
      } else if (at) {
        const along = measured.levelAt(at.run, at.level);
        const across = measured.spotAt({ lane, track: lane.tracks - 1, beside: "out" });
        this.arrow(part, along, across, "across");
        const by = this.at(along, across + arrowLength);
        this.text(
          {
            part,
            role: "reference",
            height: 1.8,
            text: { to: "point", point, from: part, way: "out", room },
            ...arrangement.acrossArrow("behind"),
          },
          by,
        );
        this.place(part, this.lineOf.get(lane) as number, { x: by.x - 2, y: by.y - 2, width: 4, height: 4 });
      }
    }
  }

  private drawFunctions(): void {
    const { measured, machine, arrangement } = this.given;
    for (const branch of this.given.branches) {
      const lanes = measured.plan.lanes.filter((lane) => lane.branch === branch);
      const [first, last] = [lanes[0], lanes.at(-1)];
      if (!first || !last) continue;
      const words = functionOf(branch, machine);
      const [from, to] = [this.track(first, 0), this.track(last, last.tracks - 1)];
      const width = Math.max(functionWidth, to - from + 16);
      for (const placed of arrangement.functionText(words, width).texts) {
        this.text({ ...placed, part: branch.id }, this.at(measured.functionAt, (from + to) / 2));
      }
    }
  }

  private join(): void {
    const joined = joinWires(this.pieces, () => false);
    for (const { node, points } of joined.wires) {
      this.out.wires.push({ part: this.wirePart(node), node, role: "wire", points: points.map(({ x, y }) => this.at(x, y)), width: 0.25 });
    }
    for (const { node, at } of joined.dots) this.dot(node, at.x, at.y);
  }
}

/** Positions to a thousandth of a millimetre, so that sums of the same lengths are the same. */
const tidy = (value: Mm): Mm => Math.round(value * 1000) / 1000;
