import type { FluidNodeId } from "../../machine/model.js";
import type { Arrangement } from "./arrangement.js";
import { type Composition, compose } from "./compose-sheet.js";
import type { Division } from "./divide.js";
import type { Extent } from "./modules.js";
import type { PowerUnit } from "./power-unit.js";

/** The parts of a circuit with a certain amount of room; groups are set down at the height their sheet gives them. */
export interface Parts {
  unit?: PowerUnit;
  groups: { height: number | undefined; at(height: number | undefined): Arrangement }[];
}

/** What stands on one sheet. */
export interface Share {
  groups: number[];
  unit: boolean;
  title?: string;
}

/** What is shared out, and the room of a sheet in modules. */
export interface SheetOf {
  division: Division;
  width: number;
  height: number;
}

/** How far apart things stand on a sheet, modules. */
interface Spacing {
  gap: number;
  taller: number;
  even: boolean;
  beside: boolean;
}

/** Texts of neighbouring groups are at least 2 mm apart. */
const leastGap = 1;
const pleasantGap = 12;

/** Fills sheets one after the other, and where several are needed gives each about as many groups. */
export function shareOut(parts: Parts, sheetOf: SheetOf, breaks: ReadonlyMap<number, string | undefined>): Share[] {
  const last = parts.groups.length - 1;
  const fits = ({ groups, unit }: Share) => {
    const share = { groups, unit };
    const [first = 0, final = last] = [groups[0], groups.at(-1)];
    const reach: Reach = { before: () => first > 0 || (parts.unit !== undefined && !unit), after: () => final < last, all: true };
    return ways(share).some((beside) => isWithin(composed(parts, share, sheetOf, { ...tight, beside }, reach).extent, sheetOf));
  };
  const shares: Share[] = [];
  let unit = parts.unit !== undefined;
  if (parts.groups.length === 0) return [{ groups: [], unit }];
  for (const run of runsOf(parts.groups.length, breaks)) {
    const title = breaks.get(run[0] as number);
    // A unit that leaves no room for a single group has a sheet of its own.
    if (unit && !fits({ groups: run.slice(0, 1), unit }) && fits({ groups: run.slice(0, 1), unit: false })) {
      shares.push({ groups: [], unit });
      unit = false;
    }
    const filled: Share[] = [];
    for (const index of run) {
      const open = filled.at(-1);
      if (open && fits({ ...open, groups: [...open.groups, index] })) open.groups.push(index);
      else filled.push({ groups: [index], unit: unit && filled.length === 0 });
    }
    const even = evenly(run, filled.length, unit).find((candidate) => candidate.every(fits)) ?? filled;
    unit = false;
    shares.push(...even.map((one) => (title === undefined ? one : { ...one, title })));
  }
  return shares;
}

/** Groups that follow each other without a break asked for. */
function runsOf(count: number, breaks: ReadonlyMap<number, string | undefined>): number[][] {
  const runs: number[][] = [];
  for (let index = 0; index < count; index++) {
    const run = runs.at(-1);
    if (run && !breaks.has(index)) run.push(index);
    else runs.push([index]);
  }
  return runs;
}

/** A run in so many nearly equal shares, the larger ones first or last. */
function evenly(run: readonly number[], count: number, unit: boolean): Share[][] {
  const less = Math.floor(run.length / count);
  const larger = run.length - less * count;
  return [(i: number) => i < larger, (i: number) => i >= count - larger].map((isLarger) => {
    let from = 0;
    return Array.from({ length: count }, (_, i): Share => {
      const groups = run.slice(from, from + less + (isLarger(i) ? 1 : 0));
      from += groups.length;
      return { groups, unit: unit && i === 0 };
    });
  });
}

/** Whether what stands on a sheet could stand on two. */
export function canPart({ groups, unit }: Share): boolean {
  return groups.length > 1 || (unit && groups.length > 0);
}

/** A share on two sheets: half of its groups each, or the power unit apart from its only group. */
export function part({ groups, unit, title }: Share): Share[] {
  const half = Math.ceil(groups.length / 2);
  const shares = groups.length > 1 ? [groups.slice(0, half), groups.slice(half)] : [[], groups];
  return shares.map((some, index) => ({ groups: some, unit: unit && index === 0, ...(title === undefined ? {} : { title }) }));
}

const tight = { gap: leastGap, taller: 0, even: false };

export function isWithin({ left, right, top, bottom }: Extent, { width, height }: SheetOf): boolean {
  return right - left <= width && bottom - top <= height;
}

/** The unit stands below the groups, or beside them where a sheet is not high enough. */
function ways({ groups, unit }: Pick<Share, "groups" | "unit">): boolean[] {
  return unit && groups.length > 0 ? [false, true] : [false];
}

/** On which other sheets a node goes on. */
interface Reach {
  before(node: FluidNodeId): boolean;
  after(node: FluidNodeId): boolean;
  /** Every shared node is reckoned with, whether it is on this sheet or not. */
  all?: boolean;
}

/** A sheet with its spare room shared out between its groups. */
export function fillSheet(parts: Parts, index: number, shares: readonly Share[], sheetOf: SheetOf, generous: boolean): Composition {
  const { division, width, height } = sheetOf;
  const share = shares[index] as Share;
  const reaches = (other: Share, node: FluidNodeId) => {
    const members = [...other.groups.flatMap((group) => division.groups[group] ?? []), ...(other.unit ? division.unit : [])];
    return members.some(({ ports }) => ports.some((port) => port.node === node));
  };
  const reach: Reach = {
    before: (node) => shares.slice(0, index).some((other) => reaches(other, node)),
    after: (node) => shares.slice(index + 1).some((other) => reaches(other, node)),
  };
  const set = (spacing: Spacing) => composed(parts, share, sheetOf, spacing, reach);
  for (const beside of ways(share)) {
    const least = set({ ...tight, beside });
    if (!isWithin(least.extent, sheetOf)) continue;
    if (!generous) {
      const roomier = set({ ...tight, gap: 3, beside });
      return isWithin(roomier.extent, sheetOf) ? roomier : least;
    }
    const spareDown = height - (least.extent.bottom - least.extent.top);
    const taller = Math.max(0, Math.min(6, Math.floor(spareDown / 4)));
    // Even distances where they fit, and then as much air between the groups as is pleasant.
    for (const even of [true, false]) {
      const close = set({ gap: leastGap, taller, even, beside });
      const spare = width - (close.extent.right - close.extent.left);
      if (spare < 0) continue;
      const gaps = Math.max(1, share.groups.length - 1);
      const gap = Math.min(pleasantGap, leastGap + Math.floor(spare / (gaps + (spare > 2 * gaps ? 2 : 0))));
      const airy = set({ gap, taller, even, beside });
      return isWithin(airy.extent, sheetOf) ? airy : close;
    }
    return least;
  }
  return set({ ...tight, beside: false });
}

function composed(
  parts: Parts,
  share: Pick<Share, "groups" | "unit">,
  { division, width }: SheetOf,
  spacing: Spacing,
  reach: Reach,
): Composition {
  const heights = share.groups.flatMap((index) => parts.groups[index]?.height ?? []);
  const height = heights.length > 0 ? Math.max(...heights) + spacing.taller : undefined;
  const groups = share.groups.map((index) => {
    const group = parts.groups[index] as Parts["groups"][number];
    return group.at(group.height === undefined ? undefined : height);
  });
  const unit = share.unit ? parts.unit : undefined;
  const headers = division.headers
    .filter(({ node }) => reach.all || isOn(node, unit ? [...groups, unit] : groups))
    .map(({ node, kind }) => ({ node, kind, before: reach.before(node), after: reach.after(node) }));
  return compose({ groups, ...(unit ? { unit } : {}), headers, gap: spacing.gap, even: spacing.even, beside: spacing.beside, width });
}

function isOn(node: FluidNodeId, arrangements: readonly Arrangement[]): boolean {
  return arrangements.some(({ placed }) => placed.some(({ block }) => block.component.ports.some((port) => port.node === node)));
}
