import type { Parallel, PathItem, PathReference, Series } from "../language/tree.js";
import { deviceRoles } from "./kinds.js";
import type { DeviceKind } from "./model.js";
import { listed, type Report, withArticle } from "./report.js";

/** Brackets within brackets beyond any real circuit; deeper ones are not read. */
export const deepest = 100;

/** Where a path stands: before any `->`, where the load stands, or elsewhere behind `->`. */
type Place = "before" | "load" | "behind";

/**
 * Says of each name in a rung whether it stands there as a contact or as what is driven.
 *
 * Before `->` everything is a contact. Behind it the first thing that can be driven is the load, or the first bracket whose
 * every branch can be; what follows is on the return side and is a contact again, unless it can only be driven.
 */
export class Roles {
  private readonly loads = new Set<PathReference>();
  /** Whether anything in the rung was not understood. */
  incomplete = false;

  constructor(
    private readonly kindOf: (name: string) => DeviceKind | undefined,
    private readonly report: Report,
  ) {}

  isLoad(reference: PathReference): boolean {
    return this.loads.has(reference);
  }

  decide(series: Series): void {
    this.decideSeries(series, "before", 0);
  }

  private decideSeries(series: Series, place: Place, depth: number): void {
    if (depth > deepest) return;
    const arrow = series.arrow ?? (place === "load" ? 0 : series.items.length);
    for (const item of series.items.slice(0, arrow)) this.asContact(item, place, depth);
    const behind = series.items.slice(arrow);
    if (behind.length > 0) this.behindArrow(behind, depth, series.arrow !== undefined);
  }

  private asContact(item: PathItem, place: Place, depth: number): void {
    if (item.kind === "parallel") for (const branch of item.branches) this.decideSeries(branch, place, depth + 1);
    else if (item.kind === "reference" && this.onlyDriven(item)) {
      this.loads.add(item);
      if (place === "before") this.arrowMissing(item);
    }
  }

  private arrowMissing({ name, part }: PathReference): void {
    this.incomplete = true;
    const whole = part ? `${name.text}.${part.text}` : name.text;
    const kind = this.kindOf(name.text) as DeviceKind;
    const what = deviceRoles[kind].coils ? "a coil" : kind === "input-card" ? "an input" : withArticle(kind);
    this.report.error("arrow-missing", name.at, `${whole} is ${what}: "->" stands before what is driven.`, { hint: `Write -> ${whole}.` });
  }

  /** `KL1` alone where a coil is due. */
  private coilMissing({ name, part, negated }: PathReference): boolean {
    const kind = this.kindOf(name.text);
    const coils = kind && deviceRoles[kind].coils;
    if (!coils || part || negated) return false;
    this.incomplete = true;
    this.report.error("coil-missing", name.at, `Which coil of ${name.text}? It has ${listed(coils, "and")}.`, {
      hint: `Write ${name.text}.${coils[0]}.`,
    });
    return true;
  }

  private behindArrow(items: readonly PathItem[], depth: number, ownArrow: boolean): void {
    const found = items.findIndex((item) => this.canBeLoad(item, depth));
    const load = found >= 0 ? found : items.findIndex((item) => item.kind === "parallel" && this.holdsLoad(item, depth));
    if (load < 0 && ownArrow) this.nothingDriven(items);
    else if (load < 0 && items.length === 1 && items[0]?.kind === "reference") this.coilMissing(items[0]);
    items.forEach((item, index) => {
      if (index !== load) this.asContact(item, "behind", depth);
      else if (item.kind === "reference") this.loads.add(item);
      else if (item.kind === "parallel") for (const branch of item.branches) this.decideSeries(branch, "load", depth + 1);
    });
  }

  private nothingDriven(items: readonly PathItem[]): void {
    this.incomplete = true;
    const first =
      items.find((item) => item.kind === "reference" && !this.isThrough(item)) ?? items.find((item) => item.kind === "reference");
    if (first?.kind !== "reference" || this.coilMissing(first)) return;
    const { name, part, negated } = first;
    const kind = this.kindOf(name.text);
    // An unknown or unsuitable name, or part of one, has its own message.
    if (kind === undefined || kind === "motor") return;
    const { load, contacts } = deviceRoles[kind];
    if (load && ((part && kind !== "timer") || (negated && !contacts))) return;
    const what = negated && load ? `/${name.text} is a contact` : `${name.text} is ${withArticle(kind)}`;
    this.report.error("not-a-load", first.at, `${what}, which cannot be driven: nothing behind "->" is a load.`, {
      hint:
        kind === "output-card"
          ? "A point of an output-card drives a rung; one of an input-card is driven."
          : "A relay, contactor, timer, solenoid, pilot-light, horn or heater is driven.",
    });
  }

  private canBeLoad(item: PathItem, depth: number): boolean {
    if (item.kind !== "parallel") return item.kind === "reference" && this.mayBeDriven(item);
    if (depth >= deepest) return false;
    // What only quenches a load stands beside it and is none: `(SOL1 | D1)`.
    const branches = item.branches.filter((branch) => !this.isQuenching(branch));
    return branches.length > 0 && branches.every((branch) => this.branchHoldsLoad(branch, depth + 1));
  }

  private isQuenching({ items, arrow }: Series): boolean {
    return arrow === undefined && items.length > 0 && items.every((item) => item.kind === "point" || this.isThrough(item));
  }

  private isThrough(item: PathItem): boolean {
    const kind = item.kind === "reference" && !item.part ? this.kindOf(item.name.text) : undefined;
    return kind !== undefined && deviceRoles[kind].through === true;
  }

  private holdsLoad(item: Parallel, depth: number): boolean {
    return depth < deepest && item.branches.some((branch) => this.branchHoldsLoad(branch, depth + 1));
  }

  private branchHoldsLoad(branch: Series, depth: number): boolean {
    return branch.arrow !== undefined || branch.items.some((item) => this.canBeLoad(item, depth));
  }

  private mayBeDriven({ negated, name, part }: PathReference): boolean {
    const kind = this.kindOf(name.text);
    if (kind === undefined || negated) return false;
    const { load, coils } = deviceRoles[kind];
    // `KL1.set` and `I0.5` are driven, `KL1` is a contact.
    if (kind === "input-card") return true;
    return coils ? part !== undefined && (coils as readonly string[]).includes(part.text) : load && part === undefined;
  }

  private onlyDriven(reference: PathReference): boolean {
    const kind = this.kindOf(reference.name.text);
    return kind !== undefined && this.mayBeDriven(reference) && (!deviceRoles[kind].contacts || deviceRoles[kind].coils !== undefined);
  }
}
