import type { Declaration, Item, Word } from "../language/tree.js";
import { type ComponentDraft, commonWords, draftOf } from "./components.js";
import type { ActuatorKind, Device, FluidComponent, Medium, ValveActuator, ValveSpec } from "./model.js";
import { pilotPort, valvePorts } from "./ports.js";
import { type ItemReader, type PropertyTable, readerOf, readProperties } from "./reader.js";
import { listed, type Report } from "./report.js";
import { boxesOf, type Centre, centreWords, fivePortCentreWords, type Normally } from "./valve-boxes.js";

type Side = "left" | "right";

/** A valve with the coils it carries. */
export interface ValveDraft extends ComponentDraft {
  type?: { ports: ValveSpec["ports"]; positions: ValveSpec["positions"]; at: Word["at"] };
  centre?: { value: Centre; at: Word["at"] };
  normally?: { value: Normally; at: Word["at"] };
  start?: { value: Side; at: Word["at"] };
  left: ValveActuator[];
  right: ValveActuator[];
  springs?: Word;
  override?: Word;
  coils: { name: Word; side: Side }[];
  /** Ratings of its coils. */
  coil: NonNullable<Device["coil"]>;
}

/** What may act on an end of a valve, by the word that says it. */
const actuatorWords: Record<string, ActuatorKind> = {
  solenoid: "solenoid",
  proportional: "proportional-solenoid",
  "piloted-solenoid": "piloted-solenoid",
  spring: "spring",
  detent: "detent",
  pilot: "pilot",
  "push-button": "push-button",
  lever: "lever",
  pedal: "pedal",
  roller: "roller",
  plunger: "plunger",
};

export function isSolenoid(actuator: ValveActuator): boolean {
  return actuator.kind === "solenoid" || actuator.kind === "proportional-solenoid" || actuator.kind === "piloted-solenoid";
}

function readEnd(side: Side): PropertyTable<ValveDraft>["words"][string] {
  return (draft, read, word) => {
    const before = draft[side].length;
    for (;;) {
      const item = read.peek();
      const kind = item?.kind === "word" && Object.hasOwn(actuatorWords, item.text) ? actuatorWords[item.text] : undefined;
      if (item?.kind !== "word" || kind === undefined) break;
      read.next();
      const actuator: ValveActuator = { kind, override: false };
      if (isSolenoid(actuator)) {
        // `left solenoid right spring`: a word that goes on with the other end is not the coil's name.
        const [following, behind] = [read.peek(), read.peek(1)];
        const goesOn = following?.kind === "word" && (following.text === "left" || following.text === "right");
        const isEnd = goesOn && behind?.kind === "word" && Object.hasOwn(actuatorWords, behind.text);
        if (isEnd) read.missing(item, "the designation of its coil");
        const name = isEnd ? undefined : read.name(item, "the designation of its coil");
        if (name) {
          actuator.solenoid = name.text;
          draft.coils.push({ name, side });
        }
      }
      if (read.take("override")) actuator.override = true;
      draft[side].push(actuator);
    }
    if (draft[side].length > before) return;
    read.choice(word, Object.keys(actuatorWords));
    // Something acts there, though it is not known what.
    draft[side].push({ kind: "spring", override: false });
  };
}

const table: PropertyTable<ValveDraft> = {
  words: {
    ...(commonWords as PropertyTable<ValveDraft>["words"]),
    left: readEnd("left"),
    right: readEnd("right"),
    springs: (draft, _read, word) => {
      draft.springs = word;
    },
    detent: (draft) => {
      draft.right.push({ kind: "detent", override: false });
    },
    override: (draft, _read, word) => {
      draft.override = word;
    },
    centre: (draft, read, word) => {
      const at = read.peek()?.at ?? word.at;
      const value = read.choice<Centre>(word, [...new Set([...centreWords, ...fivePortCentreWords])]);
      if (value) draft.centre = { value, at };
    },
    normally: (draft, read, word) => {
      const value = read.choice<Normally>(word, ["open", "closed"]);
      if (value) draft.normally = { value, at: word.at };
    },
    start: (draft, read, word) => {
      const value = read.choice<Side>(word, ["left", "right"]);
      if (value) draft.start = { value, at: word.at };
    },
    coil: (draft, read, word) => {
      draft.coil.power = read.positive(word, "power", "apparent-power", "current");
    },
    inrush: (draft, read, word) => {
      draft.coil.inrush = read.positive(word, "apparent-power", "power", "current");
    },
  },
  other: (draft, item, read) => readType(draft, item, read),
};

const offered = ["2/2", "3/2", "4/2", "4/3", "5/2", "5/3"] as const;

/** `5/2`: ports and positions. */
function readType(draft: ValveDraft, item: Item, read: ItemReader): boolean {
  if (item.kind !== "word" || !/^\d+\/\d+$/.test(item.text)) return false;
  if (draft.type) {
    read.report.error("property-twice", item.at, `${read.owner} already has its ports and positions.`, {
      seeAlso: [{ message: "First given here.", at: draft.type.at }],
    });
  } else if ((offered as readonly string[]).includes(item.text)) {
    const [ports, positions] = item.text.split("/").map(Number) as [ValveSpec["ports"], ValveSpec["positions"]];
    draft.type = { ports, positions, at: item.at };
  } else {
    const known = ["3/3", "4/4", "6/2", "6/3"].includes(item.text);
    read.report.error(
      known ? "not-yet-supported" : "value-unknown",
      item.at,
      known ? `A ${item.text} valve is not yet supported.` : `There is no ${item.text} valve: ports and positions are ${listed(offered)}.`,
    );
    draft.type = { ports: 4, positions: item.text.endsWith("/3") ? 3 : 2, at: item.at };
  }
  return true;
}

/** Reads a directional valve's declaration. */
export function readValve(declaration: Declaration & { name: Word }, medium: Medium, report: Report): ValveDraft {
  const { name } = declaration;
  const component: FluidComponent = {
    id: name.text,
    name: name.text,
    kind: "valve",
    medium,
    text: declaration.text?.text,
    values: [],
    ports: [],
    at: name.at,
  };
  const draft: ValveDraft = Object.assign(draftOf(component, declaration), { left: [], right: [], coils: [], coil: {} });
  readProperties(draft, readerOf(declaration, report), "a valve", table);

  if (!draft.type) {
    report.missing(declaration.at, name.at, `${name.text} needs its ports and positions, as in "5/2": ${listed(offered)}.`);
  }
  let { ports, positions } = draft.type ?? { ports: medium === "hydraulic" ? 4 : 5, positions: 2 };
  if (ports === 5 && medium === "hydraulic") {
    report.error("value-contradicts", draft.type?.at ?? name.at, "A hydraulic valve has 2, 3 or 4 ports.");
    ports = 4;
  }
  if (draft.springs) {
    for (const side of ["left", "right"] as const) {
      if (!draft[side].some(({ kind }) => kind === "spring")) draft[side].push({ kind: "spring", override: false });
    }
  }
  giveOverride(draft, report);
  const springAt = springEnd(draft, positions, report);
  const spec: ValveSpec = {
    ports,
    positions,
    boxes: boxesOf(ports, positions, {
      centre: readCentre(draft, ports, positions, report),
      normally: readNormally(draft, ports, report),
      springAt,
    }),
    left: draft.left,
    right: draft.right,
  };
  if (positions === 3) spec.normal = 1;
  else if (springAt) spec.normal = springAt === "left" ? 0 : 1;
  if (draft.start) {
    if (spec.normal === undefined) spec.start = draft.start.value;
    else {
      report.error(
        "value-contradicts",
        draft.start.at,
        `${name.text} has a normal position, in which it starts; "start" is for valves without one.`,
      );
    }
  }
  component.valve = spec;
  givePorts(draft, spec, medium);
  return draft;
}

function giveOverride({ left, right, override, component }: ValveDraft, report: Report): void {
  if (!override) return;
  const solenoids = [...left, ...right].filter(isSolenoid);
  if (solenoids.length === 0) {
    report.error("value-contradicts", override.at, `${component.name} has no solenoid to override.`);
  }
  for (const solenoid of solenoids) solenoid.override = true;
}

/** The end with the spring of a two-position valve. */
function springEnd({ left, right, component, springs }: ValveDraft, positions: number, report: Report): Side | undefined {
  if (positions === 3) return undefined;
  const [atLeft, atRight] = [left, right].map((end) => end.some(({ kind }) => kind === "spring"));
  if (atLeft && atRight) {
    report.error(
      "value-contradicts",
      springs?.at ?? component.at,
      `A two-position valve rests at the end with its spring: ${component.name} cannot have one at both ends.`,
    );
  }
  return atRight ? "right" : atLeft ? "left" : undefined;
}

function readCentre({ centre, component }: ValveDraft, ports: number, positions: number, report: Report): Centre | undefined {
  if (positions === 2 || ports < 4) {
    if (centre) report.error("value-contradicts", centre.at, `${component.name} has two positions and so no centre.`);
    return undefined;
  }
  const words: readonly Centre[] = ports === 5 ? fivePortCentreWords : centreWords;
  if (!centre) {
    report.missing(component.at, component.at, `${component.name} needs its centre position: "centre" with ${listed(words)}.`);
  } else if (!words.includes(centre.value)) {
    report.error("value-unknown", centre.at, `The centre of a ${ports}/3 valve is ${listed(words)}, not "${centre.value}".`);
    return undefined;
  }
  return centre?.value;
}

function readNormally({ normally, component }: ValveDraft, ports: number, report: Report): Normally | undefined {
  if (normally && ports > 3) {
    report.error(
      "value-contradicts",
      normally.at,
      `Only valves with 2 or 3 ports are normally open or closed; ${component.name} has ${ports}.`,
    );
  }
  return normally?.value;
}

function givePorts(draft: ValveDraft, spec: ValveSpec, medium: Medium): void {
  const { ports, left, right } = spec;
  const names = [...valvePorts(ports, medium)];
  for (const [side, end] of [
    ["left", left],
    ["right", right],
  ] as const) {
    if (end.some(({ kind }) => kind === "pilot")) names.push(pilotPort(side, medium, spec));
  }
  draft.component.ports = names.map((name) => ({ name, plugged: false }));
  if ([...left, ...right].some(({ kind }) => kind === "piloted-solenoid")) {
    draft.optionalPorts = (["left", "right"] as const).map((side) => pilotPort(side, medium, spec)).filter((name) => !names.includes(name));
  }
}
