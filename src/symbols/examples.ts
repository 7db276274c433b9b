import type { ActuatorKind, CylinderSpec, Medium, ValveActuator, ValveSpec } from "../machine/model.js";
import { type CylinderForm, composeCylinder } from "./cylinder.js";
import type { Symbol } from "./symbol.js";
import { composeValve } from "./valve.js";
import { valvePositions } from "./valve-positions.js";

/** A composed symbol with a name short enough to print under it. */
export interface Example {
  name: string;
  symbol: Symbol;
}

export interface ExampleFamily {
  title: string;
  examples: Example[];
}

const end = (...kinds: (ActuatorKind | "override")[]): ValveActuator[] => {
  const actuators: ValveActuator[] = [];
  for (const kind of kinds) {
    const last = actuators.at(-1);
    if (kind !== "override") actuators.push({ kind, override: false });
    else if (last) last.override = true;
  }
  return actuators;
};

const boxesOf4 = (centre: string) => ["P>A·B>T", centre, "P>B·A>T"];
const boxesOf5 = ["1>4·2>3·5", "1>2·4>5·3"];

/** Symbols that are composed and not read from a file: every position box, every control, and whole valves and cylinders as they are commonly met. */
export function composedExamples(): ExampleFamily[] {
  return [
    { title: "Directional valves, position boxes", examples: positionBoxes() },
    { title: "Directional valves, controls", examples: controls() },
    { title: "Directional valves, whole", examples: wholeValves() },
    { title: "Cylinders", examples: cylinders() },
  ];
}

function positionBoxes(): Example[] {
  return ([2, 3, 4, 5] as const).flatMap((ports) =>
    Object.keys(valvePositions[ports]).map((code) => {
      const spec: ValveSpec = { ports, positions: 2, boxes: [code], normal: 0, left: [], right: [] };
      return { name: code, symbol: composeValve(spec, "hydraulic", 0) };
    }),
  );
}

function controls(): Example[] {
  const at = (
    name: string,
    left: ValveActuator[],
    right: ValveActuator[] = end("spring"),
    shown = 1,
    medium: Medium = "pneumatic",
    external: string[] = [],
  ): Example => ({
    name,
    symbol: composeValve(
      {
        ports: 3,
        positions: 2,
        boxes: ["P>A·T", "P·A>T"],
        normal: right.some(({ kind }) => kind === "spring") ? 1 : undefined,
        left,
        right,
      },
      medium,
      shown,
      external,
    ),
  });
  const plain: ActuatorKind[] = [
    "solenoid",
    "proportional-solenoid",
    "piloted-solenoid",
    "pilot",
    "push-button",
    "lever",
    "pedal",
    "roller",
    "plunger",
  ];
  return [
    ...plain.map((kind) => at(kind, end(kind))),
    at("solenoid, override", end("solenoid", "override")),
    at("pilot, hydraulic", end("pilot"), end("spring"), 1, "hydraulic"),
    at("piloted-solenoid, external 14", end("piloted-solenoid"), end("spring"), 1, "pneumatic", ["14"]),
    at("piloted-solenoid, X and Y", end("piloted-solenoid"), end("spring"), 1, "hydraulic", ["X", "Y"]),
    at("roller, held", end("roller"), end("spring"), 0),
    at("lever, detent", end("lever"), end("detent")),
    at("lever with detent", end("detent", "lever"), end()),
    at("two solenoids, detent", end("solenoid"), end("solenoid", "detent"), 0),
    at("solenoid or push-button", end("solenoid", "push-button")),
  ];
}

function wholeValves(): Example[] {
  const valve = (
    name: string,
    spec: Omit<ValveSpec, "positions">,
    medium: Medium,
    shown = spec.normal ?? spec.boxes.length - 1,
  ): Example => ({
    name,
    symbol: composeValve({ ...spec, positions: spec.boxes.length === 3 ? 3 : 2 }, medium, shown),
  });
  const sprung = end("solenoid", "spring");
  return [
    valve("2/2 normally closed", { ports: 2, boxes: ["P>A", "P·A"], normal: 1, left: end("solenoid"), right: end("spring") }, "hydraulic"),
    valve("2/2 seat valve", { ports: 2, boxes: ["P>A", "P>A!"], normal: 1, left: end("solenoid"), right: end("spring") }, "hydraulic"),
    valve(
      "3/2 normally closed",
      { ports: 3, boxes: ["P>A·T", "P·A>T"], normal: 1, left: end("solenoid", "override"), right: end("spring") },
      "pneumatic",
    ),
    valve(
      "3/2 normally open",
      { ports: 3, boxes: ["P·A>T", "P>A·T"], normal: 1, left: end("push-button"), right: end("spring") },
      "pneumatic",
    ),
    valve(
      "4/2 spring return",
      { ports: 4, boxes: ["P>A·B>T", "P>B·A>T"], normal: 1, left: end("solenoid"), right: end("spring") },
      "hydraulic",
    ),
    valve("4/2 two solenoids", { ports: 4, boxes: ["P>A·B>T", "P>B·A>T"], left: end("solenoid"), right: end("solenoid") }, "hydraulic", 0),
    valve("4/3 closed centre", { ports: 4, boxes: boxesOf4("P·T·A·B"), normal: 1, left: sprung, right: sprung }, "hydraulic"),
    valve(
      "4/3 float centre, piloted",
      { ports: 4, boxes: boxesOf4("P·TAB"), normal: 1, left: end("piloted-solenoid", "spring"), right: end("piloted-solenoid", "spring") },
      "hydraulic",
    ),
    valve(
      "4/3 proportional",
      {
        ports: 4,
        boxes: boxesOf4("P·T·A·B"),
        normal: 1,
        left: end("proportional-solenoid", "spring"),
        right: end("proportional-solenoid", "spring"),
      },
      "hydraulic",
    ),
    valve(
      "4/3 lever and detent",
      { ports: 4, boxes: boxesOf4("PT·A·B"), normal: 1, left: end("lever"), right: end("detent") },
      "hydraulic",
    ),
    valve(
      "5/2 spring return",
      { ports: 5, boxes: boxesOf5, normal: 1, left: end("solenoid", "override"), right: end("spring") },
      "pneumatic",
    ),
    valve("5/2 two pilots", { ports: 5, boxes: boxesOf5, left: end("pilot"), right: end("pilot") }, "pneumatic"),
    valve(
      "5/2 two solenoids, piloted",
      { ports: 5, boxes: boxesOf5, left: end("piloted-solenoid"), right: end("piloted-solenoid") },
      "pneumatic",
      0,
    ),
    valve(
      "5/3 exhaust centre",
      {
        ports: 5,
        boxes: [boxesOf5[0] as string, "1·4>5·2>3", boxesOf5[1] as string],
        normal: 1,
        left: end("solenoid", "override", "spring"),
        right: end("solenoid", "override", "spring"),
      },
      "pneumatic",
    ),
  ];
}

function cylinders(): Example[] {
  const cylinder = (name: string, spec: Partial<CylinderSpec>, fraction: number, medium: Medium): Example => {
    const form: CylinderForm = { action: "double-acting", cushion: "none", ...spec };
    return { name, symbol: composeCylinder(form, fraction, medium) };
  };
  const single = { action: "single-acting" } as const;
  return [
    cylinder("double-acting, retracted", {}, 0, "hydraulic"),
    cylinder("double-acting, halfway", {}, 0.5, "hydraulic"),
    cylinder("double-acting, extended", {}, 1, "hydraulic"),
    cylinder("cushion fixed", { cushion: "fixed" }, 0, "pneumatic"),
    cylinder("cushion adjustable", { cushion: "adjustable" }, 0, "pneumatic"),
    cylinder("cushion adjustable, extended", { cushion: "adjustable" }, 1, "pneumatic"),
    cylinder("single-acting, by load", { ...single, returnedBy: "load" }, 0, "hydraulic"),
    cylinder("single-acting, spring", { ...single, returnedBy: "spring" }, 0, "pneumatic"),
    cylinder("single-acting, spring, extended", { ...single, returnedBy: "spring" }, 1, "pneumatic"),
    cylinder("single-acting, spring extends", { ...single, returnedBy: "spring-extend" }, 1, "pneumatic"),
  ];
}
