import type { ContactUse, Device, DeviceKind, Machine } from "../machine/model.js";

/** What must hold of a device for a contact to be closed: `CR1` is on, `/CR1` is not on, `S1.auto` stands at auto. */
export interface Condition {
  /** The device, or the part of it that changes by itself: `CR1`, `TR1.timed`, `Q0.3`, `KL1.set`. */
  subject: string;
  /** `on`, or a position of a switch. */
  value: string;
  holds: boolean;
}

/** The state that a timer's delayed contacts follow. */
export function timedOf(device: string): string {
  return `${device}.timed`;
}

export function conditionOf(contact: ContactUse, kind: DeviceKind | undefined): Condition {
  const { device, form, timed, position, point } = contact;
  const subject = timed && kind === "timer" ? timedOf(device) : point === undefined ? device : `${device}.${point}`;
  return { subject, value: position ?? "on", holds: form === "NO" };
}

export function keyOf({ subject, value, holds }: Condition): string {
  return `${holds ? "" : "/"}${subject}=${value}`;
}

interface Known {
  /** What it is, once known. */
  is?: string;
  /** What it is known not to be, and how often that was said. */
  not: Map<string, number>;
  said: number;
}

/**
 * Conditions that hold together. A switch stands in one position, a relay is in or out; a rod is at one place, so two switches on
 * it are not operated together unless their places overlap.
 */
export class Conditions {
  private readonly known = new Map<string, Known>();
  private readonly rods = new Map<string, { from: number; to: number }[]>();
  private readonly trail: Condition[] = [];

  constructor(
    private readonly devices: Machine["devices"],
    /** Whether what the machine's own motion rules out counts as ruled out. */
    private readonly mechanical = true,
  ) {}

  /** How many conditions were taken; what `backTo` takes. */
  get mark(): number {
    return this.trail.length;
  }

  /** Takes a condition, unless it contradicts what already holds: then nothing changes. */
  add(condition: Condition): boolean {
    if (this.stands(condition) === false) return false;
    const { subject, value, holds } = condition;
    const known = this.known.get(subject) ?? { not: new Map<string, number>(), said: 0 };
    this.known.set(subject, known);
    if (holds) {
      known.is = value;
      known.said++;
      const place = this.placeOf(subject);
      if (place) this.rods.set(place.cylinder, [...(this.rods.get(place.cylinder) ?? []), place]);
    } else known.not.set(value, (known.not.get(value) ?? 0) + 1);
    this.trail.push(condition);
    return true;
  }

  /** Forgets what was taken after a mark. */
  backTo(mark: number): void {
    while (this.trail.length > mark) {
      const { subject, value, holds } = this.trail.pop() as Condition;
      const known = this.known.get(subject) as Known;
      if (holds) {
        if (--known.said === 0) known.is = undefined;
        const place = this.placeOf(subject);
        if (place) this.rods.get(place.cylinder)?.pop();
      } else {
        const times = (known.not.get(value) ?? 1) - 1;
        if (times === 0) known.not.delete(value);
        else known.not.set(value, times);
      }
    }
  }

  /** Whether a condition is known to hold, known not to hold, or open. */
  stands({ subject, value, holds }: Condition): boolean | undefined {
    const known = this.known.get(subject);
    const is = this.valueIs(subject, value, known);
    return is === undefined ? undefined : is === holds;
  }

  /** The contrary of what a condition says. */
  static opposite(condition: Condition): Condition {
    return { ...condition, holds: !condition.holds };
  }

  private valueIs(subject: string, value: string, known: Known | undefined): boolean | undefined {
    if (known?.is !== undefined) return known.is === value;
    if (known?.not.has(value)) return false;
    const positions = this.devices.get(subject)?.selector?.positions;
    if (known && positions?.every((position) => position === value || known.not.has(position))) return true;
    const place = this.placeOf(subject);
    if (place && this.rods.get(place.cylinder)?.some(({ from, to }) => from > place.to || to < place.from)) return false;
    return undefined;
  }

  private placeOf(subject: string): Device["place"] {
    return this.mechanical ? this.devices.get(subject)?.place : undefined;
  }
}
