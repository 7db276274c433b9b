import type { Device, LoadUse, Machine } from "../machine/model.js";
import { coilOf } from "../machine/walk.js";
import { type Condition, Conditions, timedOf } from "./conditions.js";
import { gather } from "./gather.js";
import type { Ways } from "./ways.js";

/** Choices tried before a question is given up. */
const mostChoices = 4_000;
/** Conditions that may hang on each other in one question. */
const longestAgenda = 400;

/**
 * Which states the devices can be in together once relays have followed their coils: a relay is in if some way to its coil
 * conducts, and out if none does. Whatever people, the machine or a controller may do is possible, and so is whatever latching
 * relays and counters remember.
 */
export class States {
  private readonly coils = new Map<string, LoadUse[]>();
  /** Timers by the name of their delayed state. */
  private readonly timers = new Map<string, Device>();

  constructor(
    private readonly machine: Machine,
    private readonly ways: Ways,
  ) {
    for (const load of ways.wiring.loads) gather(this.coils, coilOf(load), load);
    for (const device of machine.devices.values()) if (device.delay) this.timers.set(timedOf(device.name), device);
  }

  /**
   * Whether all conditions can hold at once; undefined where that could not be found out.
   * @param settled whether timers have run out, so that their delayed contacts stand as their coils do
   */
  canBe(conditions: readonly Condition[], settled = false): boolean | undefined {
    const question = new Question(
      new Conditions(this.machine.devices),
      (subject) => this.coils.get(subject),
      (subject) => this.timers.get(subject),
      this.ways,
      settled,
    );
    return question.answer(conditions);
  }
}

class Question {
  /** What holds and has yet to be brought about, in the order in which it was asked for. */
  private readonly agenda: Condition[] = [];
  private choices = 0;
  /** Whether the answer leans on a coil of which not all ways are known. */
  private guessed = false;

  constructor(
    private readonly held: Conditions,
    private readonly coilsOf: (subject: string) => readonly LoadUse[] | undefined,
    private readonly timerOf: (subject: string) => Device | undefined,
    private readonly ways: Ways,
    private readonly settled: boolean,
  ) {}

  answer(conditions: readonly Condition[]): boolean | undefined {
    if (!this.takeAll(conditions)) return false;
    const found = this.bringAbout(0);
    if (this.choices > mostChoices) return undefined;
    return found && this.guessed ? undefined : found;
  }

  private bringAbout(next: number): boolean {
    const condition = this.agenda[next];
    if (!condition) return true;
    if (++this.choices > mostChoices || next > longestAgenda) {
      this.choices = Number.POSITIVE_INFINITY;
      return false;
    }
    const timer = this.timerOf(condition.subject);
    if (timer) return this.followTimer(timer, condition, next);
    const coils = this.coilsOf(condition.subject);
    if (!coils) return this.bringAbout(next + 1);
    const ways: Condition[][] = [];
    for (const coil of coils) {
      const to = this.ways.to(coil);
      if (!to) {
        this.guessed = true;
        return this.bringAbout(next + 1);
      }
      ways.push(...to.map((way) => way.conditions));
    }
    return condition.holds ? this.feed(ways, next) : this.starve(ways, 0, next);
  }

  /** Some way to the coil conducts. */
  private feed(ways: readonly Condition[][], next: number): boolean {
    if (ways.some((way) => way.every((condition) => this.held.stands(condition) === true))) return this.bringAbout(next + 1);
    return ways.some((way) => this.tryWith(way, () => this.bringAbout(next + 1)));
  }

  /** No way to the coil conducts. */
  private starve(ways: readonly Condition[][], at: number, next: number): boolean {
    const way = ways[at];
    if (!way) return this.bringAbout(next + 1);
    if (way.some((condition) => this.held.stands(condition) === false)) return this.starve(ways, at + 1, next);
    return way.some((condition) => this.tryWith([Conditions.opposite(condition)], () => this.starve(ways, at + 1, next)));
  }

  /** A delayed contact follows its coil, at once the one way and after the delay the other. */
  private followTimer({ name, delay }: Device, { holds }: Condition, next: number): boolean {
    const atOnce = holds === (delay?.mode === "on-delay");
    if (!atOnce && !this.settled) return this.bringAbout(next + 1);
    return this.tryWith([{ subject: name, value: "on", holds }], () => this.bringAbout(next + 1));
  }

  private tryWith(conditions: readonly Condition[], then: () => boolean): boolean {
    if (this.choices > mostChoices) return false;
    const [mark, length] = [this.held.mark, this.agenda.length];
    const found = this.takeAll(conditions) && then();
    this.held.backTo(mark);
    this.agenda.length = length;
    return found;
  }

  private takeAll(conditions: readonly Condition[]): boolean {
    for (const condition of conditions) {
      const stands = this.held.stands(condition);
      if (stands === false) return false;
      if (stands === true) continue;
      this.held.add(condition);
      this.agenda.push(condition);
    }
    return true;
  }
}
