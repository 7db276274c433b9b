import type { Parallel, PathItem, PathReference, Series } from "../language/tree.js";
import { deviceRoles } from "./kinds.js";
import type { DeviceKind } from "./model.js";
import type { Report } from "./report.js";
import { withArticle } from "./report.js";

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

  private arrowMissing({ name }: PathReference): void {
    this.incomplete = true;
    this.report.error(
      "arrow-missing",
      name.at,
      `${name.text} is ${withArticle(this.kindOf(name.text) as string)}: "->" stands before what is driven.`,
      {
        hint: `Write -> ${name.text}.`,
      },
    );
  }

  private behindArrow(items: readonly PathItem[], depth: number, ownArrow: boolean): void {
    const found = items.findIndex((item) => this.canBeLoad(item, depth));
    const load = found >= 0 ? found : items.findIndex((item) => item.kind === "parallel" && this.holdsLoad(item, depth));
    if (load < 0 && ownArrow) this.nothingDriven(items);
    items.forEach((item, index) => {
      if (index !== load) this.asContact(item, "behind", depth);
      else if (item.kind === "reference") this.loads.add(item);
      else if (item.kind === "parallel") for (const branch of item.branches) this.decideSeries(branch, "load", depth + 1);
    });
  }

  private nothingDriven(items: readonly PathItem[]): void {
    this.incomplete = true;
    const first = items.find((item) => item.kind === "reference");
    if (first?.kind !== "reference") return;
    const kind = this.kindOf(first.name.text);
    // An unknown or unsuitable name, or part of one, has its own message.
    if (kind === undefined || kind === "motor" || (first.part && deviceRoles[kind].load && kind !== "timer" && !deviceRoles[kind].coils))
      return;
    const what =
      first.negated && deviceRoles[kind].load ? `/${first.name.text} is a contact` : `${first.name.text} is ${withArticle(kind)}`;
    this.report.error("not-a-load", first.at, `${what}, which cannot be driven: nothing behind "->" is a load.`, {
      hint: "A relay, contactor, timer, solenoid, pilot-light or horn is driven.",
    });
  }

  private canBeLoad(item: PathItem, depth: number): boolean {
    if (item.kind === "parallel") return depth < deepest && item.branches.every((branch) => this.branchHoldsLoad(branch, depth + 1));
    return item.kind === "reference" && this.mayBeDriven(item);
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
    return kind !== undefined && this.mayBeDriven(reference) && !deviceRoles[kind].contacts;
  }
}
