import type { Quantity } from "../language/quantity.js";
import type { Declaration, Word } from "../language/tree.js";
import { type ComponentDraft, commonWords, draftOf } from "./components.js";
import type { CylinderSpec, DrawingInfo, FluidComponent, Medium } from "./model.js";
import { type PropertyTable, readerOf, readProperties } from "./reader.js";
import { didYouMean, type Report } from "./report.js";

interface CylinderDraft extends ComponentDraft {
  spec: CylinderSpec;
  action?: Word;
  start?: { at: Word["at"]; place: "retracted" | "extended" | number };
}

/** mm of stroke assumed, for places along it, where the text gives none. It is never printed. */
export const assumedStroke = 100;

export function strokeOf(spec: CylinderSpec): number {
  return spec.stroke?.value ?? assumedStroke;
}

function setAction(draft: CylinderDraft, word: Word): void {
  draft.action = word;
  draft.spec.action = word.text as CylinderSpec["action"];
}

const table: PropertyTable<CylinderDraft> = {
  words: {
    ...(commonWords as PropertyTable<CylinderDraft>["words"]),
    "double-acting": (draft, _read, word) => setAction(draft, word),
    "single-acting": (draft, _read, word) => setAction(draft, word),
    "spring-return": ({ spec }) => {
      spec.returnedBy = "spring";
    },
    "spring-extend": ({ spec }) => {
      spec.returnedBy = "spring-extend";
    },
    "load-return": ({ spec }) => {
      spec.returnedBy = "load";
    },
    bore: ({ spec }, read, word) => {
      spec.bore = read.positive(word, "length");
    },
    rod: ({ spec }, read, word) => {
      spec.rod = read.positive(word, "length");
    },
    stroke: ({ spec }, read, word) => {
      spec.stroke = read.positive(word, "length");
    },
    // `cushioned`, `cushioned fixed`, `cushioned adjustable`
    cushioned: ({ spec }, read) => {
      spec.cushion = (read.take("fixed", "adjustable") ?? "adjustable") as CylinderSpec["cushion"];
    },
    start: (draft, read, word) => {
      const end = read.take("retracted", "extended") as "retracted" | "extended" | undefined;
      const item = read.peek();
      if (end) draft.start = { at: word.at, place: end };
      else if (item?.kind === "word") {
        read.next();
        read.report.error(
          "value-unknown",
          item.at,
          `"start" takes retracted, extended or a length, not "${item.text}".`,
          didYouMean(item.text, ["retracted", "extended"]),
        );
      } else {
        const length = read.quantity(word, "length");
        if (length && item) draft.start = { at: item.at, place: length.value };
      }
    },
  },
};

/** Reads a cylinder's declaration. */
export function readCylinder(declaration: Declaration & { name: Word }, medium: Medium, info: DrawingInfo, report: Report): ComponentDraft {
  const { name } = declaration;
  const spec: CylinderSpec = { action: "double-acting", cushion: "none", start: 0, switches: [] };
  const component: FluidComponent = {
    id: name.text,
    name: name.text,
    kind: "cylinder",
    medium,
    text: declaration.text?.text,
    values: [],
    ports: [],
    cylinder: spec,
    at: name.at,
  };
  const draft: CylinderDraft = Object.assign(draftOf(component, declaration), { spec });
  readProperties(draft, readerOf(declaration, report), "a cylinder", table);

  if (spec.returnedBy !== undefined && draft.action?.text === "double-acting") {
    report.error(
      "value-contradicts",
      draft.action.at,
      `A double-acting cylinder is brought back by pressure: ${name.text} cannot also have a return of its own.`,
    );
    spec.returnedBy = undefined;
  } else if (spec.returnedBy !== undefined) spec.action = "single-acting";
  if (spec.action === "single-acting") spec.returnedBy ??= "load";
  if (spec.bore && spec.rod && spec.rod.value >= spec.bore.value) {
    report.error(
      "value-out-of-range",
      name.at,
      `The rod of ${name.text} (${spec.rod.text}) must be thinner than its bore (${spec.bore.text}).`,
    );
  }
  component.ports = portNames(spec).map((port) => ({ name: port, plugged: false }));
  spec.start = startPlace(draft, report);
  const size = printedSize(spec, info.units);
  if (size !== "") component.values.unshift(size);
  return draft;
}

/** A single-acting cylinder has one port; its other chamber breathes. */
function portNames(spec: CylinderSpec): string[] {
  if (spec.action === "double-acting") return ["cap", "rod"];
  return spec.returnedBy === "spring-extend" ? ["rod"] : ["cap"];
}

function startPlace({ spec, start, component }: CylinderDraft, report: Report): number {
  const stroke = strokeOf(spec);
  if (start === undefined) return spec.returnedBy === "spring-extend" ? stroke : 0;
  if (start.place === "retracted") return 0;
  if (start.place === "extended") return stroke;
  if (start.place >= 0 && start.place <= stroke) return start.place;
  report.error(
    "value-out-of-range",
    start.at,
    `${component.name} has a stroke of ${spec.stroke?.text ?? `${stroke} mm`}; it cannot start beyond it.`,
  );
  return Math.min(stroke, Math.max(0, start.place));
}

/** Bore, rod and stroke as the trade writes them: `40/16 × 60`, in mm, or `2.5/1 × 10 in`. */
function printedSize({ bore, rod, stroke }: CylinderSpec, units: DrawingInfo["units"]): string {
  const figure = (length: Quantity) => (units === "inch" ? round(length.value / 25.4, 3) : round(length.value, 2));
  const across = [bore ? figure(bore) : undefined, rod ? figure(rod) : undefined];
  const diameters = bore && rod ? across.join("/") : bore ? `⌀${across[0]}` : rod ? `rod ${across[1]}` : "";
  const along = stroke ? `× ${figure(stroke)}` : "";
  const size = [diameters, along].filter((part) => part !== "").join(" ");
  return size !== "" && units === "inch" ? `${size} in` : size;
}

function round(value: number, places: number): string {
  return String(Number(value.toFixed(places)));
}
