import { printQuantity } from "../language/print-quantity.js";
import type { Quantity } from "../language/quantity.js";
import type { Declaration, Item, Word } from "../language/tree.js";
import type { FluidComponent, FluidKind, Medium } from "./model.js";
import { portsOf } from "./ports.js";
import { type ItemReader, type PropertyTable, readerOf, readProperties } from "./reader.js";
import type { Report } from "./report.js";

/** A fluid component with the names it mentions, which are looked up when everything is declared. */
export interface ComponentDraft {
  component: FluidComponent;
  declaration?: Declaration;
  /** What free flow leads to: a component, a port or a point. */
  freeTo?: Item;
  /** Pumps: the motor. */
  drive?: Word;
  /** Ports a line has named outright, so that no default may move them. */
  namedPorts: Set<string>;
  /** Ports it may have besides those it always has: external pilot supply and drain of a piloted valve. */
  optionalPorts: readonly string[];
}

export type ComponentTable = PropertyTable<ComponentDraft>;

export const commonWords: ComponentTable["words"] = {
  part: ({ component }, read, word) => {
    component.orderCode = read.text(word)?.text;
  },
  note: ({ component }, read, word) => {
    component.note = read.text(word)?.text;
  },
  location: ({ component }, read, word) => {
    component.location = (read.peek()?.kind === "text" ? read.text(word) : read.name(word, "a place"))?.text;
  },
};

const printed = ({ component }: ComponentDraft, quantity: Quantity) => {
  component.values.push(printQuantity(quantity));
};

const drive: ComponentTable["words"] = {
  drive: (draft, read, word) => {
    draft.drive = read.name(word, "the motor that drives it");
  },
  displacement: (draft, read, word) => {
    const displacement = read.positive(word, "displacement");
    if (displacement) printed(draft, displacement);
  },
};

const freeTo: ComponentTable["words"] = {
  "free-to": (draft, read, word) => {
    const item = read.reference();
    if (item?.kind === "word" || item?.kind === "part" || item?.kind === "point") draft.freeTo = item;
    else read.missing(word, "what the free flow leads to: a component or a @point");
  },
};

/** `3 phase` */
const phases = ({ component }: ComponentDraft, item: Item, read: ItemReader): boolean => {
  if (item.kind !== "number" || !(item.value === 1 || item.value === 3) || !read.take("phase")) return false;
  component.values.push(`${item.text}~`);
  return true;
};

/** How each kind's properties are read; cylinders and directional valves have files of their own. */
const tables: Record<Exclude<FluidKind, "cylinder" | "valve">, ComponentTable> = {
  tank: { words: commonWords, bare: { volume: printed } },
  pump: { words: { ...commonWords, ...drive }, bare: { displacement: printed, flow: printed, pressure: printed } },
  compressor: { words: { ...commonWords, ...drive }, bare: { flow: printed, pressure: printed, power: printed } },
  "electric-motor": {
    words: commonWords,
    bare: { power: printed, voltage: printed, current: printed, speed: printed, frequency: printed },
    other: phases,
  },
  "air-supply": { words: commonWords, bare: { pressure: printed, flow: printed } },
  "service-unit": { words: commonWords, bare: { pressure: printed, filtration: printed } },
  filter: { words: commonWords, bare: { filtration: printed } },
  "relief-valve": {
    words: commonWords,
    bare: {
      pressure: (draft, quantity) => {
        draft.component.setting = quantity;
        printed(draft, quantity);
      },
    },
  },
  "check-valve": { words: { ...commonWords, ...freeTo }, bare: { pressure: printed } },
  "pilot-operated-check-valve": { words: { ...commonWords, ...freeTo }, bare: { pressure: printed } },
  throttle: { words: commonWords, bare: { flow: printed, length: printed } },
  "one-way-flow-control": { words: { ...commonWords, ...freeTo }, bare: { flow: printed } },
  silencer: { words: commonWords },
  exhaust: { words: commonWords },
  gauge: { words: commonWords, bare: { pressure: printed } },
  "pressure-switch": { words: commonWords },
  "vacuum-switch": { words: commonWords },
  "flow-switch": { words: commonWords },
  "level-switch": { words: commonWords },
  "temperature-switch": { words: commonWords },
  "shut-off-valve": { words: commonWords },
};

/** A component with its usual ports and nothing joined. */
export function bareComponent(
  id: string,
  kind: Exclude<FluidKind, "cylinder" | "valve">,
  medium: Medium,
  at: FluidComponent["at"],
): FluidComponent {
  return { id, kind, medium, values: [], ports: portsOf(kind).map((name) => ({ name, plugged: false })), at };
}

export function draftOf(component: FluidComponent, declaration?: Declaration): ComponentDraft {
  return { component, declaration, namedPorts: new Set(), optionalPorts: [] };
}

/** Reads the declaration of any component but a cylinder or directional valve. */
export function readComponent(
  declaration: Declaration & { name: Word },
  kind: Exclude<FluidKind, "cylinder" | "valve">,
  medium: Medium,
  report: Report,
): ComponentDraft {
  const { name } = declaration;
  const component = bareComponent(name.text, kind, medium, name.at);
  component.name = name.text;
  component.text = declaration.text?.text;
  const draft = draftOf(component, declaration);
  readProperties(draft, readerOf(declaration, report), `${/^[aeiou]/.test(kind) ? "an" : "a"} ${kind}`, tables[kind]);
  return draft;
}
