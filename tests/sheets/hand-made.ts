import type { Point } from "../../src/drawing/geometry.js";
import type { CircuitSheet, Layout, Place, PlacedText, ReferenceTo } from "../../src/layout/placement.js";
import type {
  ContactUse,
  Device,
  DeviceKind,
  DrawingInfo,
  FluidComponent,
  LadderCircuit,
  LoadUse,
  Machine,
  SeriesPath,
} from "../../src/machine/model.js";
import type { CrossReferenceRow } from "../../src/schedules/rows.js";
import type { Symbol as DrawnSymbol } from "../../src/symbols/symbol.js";

/** A drawing of two ladder sheets and a fluid sheet, placed by hand and only as far as composing it needs. */
export function handMade(change: Partial<DrawingInfo> = {}): { machine: Machine; layout: Layout; rows: CrossReferenceRow[] } {
  const at = {
    file: "hand.sprung",
    start: { offset: 0, line: 1, column: 1 },
    end: { offset: 0, line: 1, column: 1 },
  } as unknown as Device["at"];
  const drawing: DrawingInfo = {
    title: "Crate lifter, lane 4",
    number: "CL-0417",
    owner: "Brookhollow Works",
    creator: "T. Varga",
    approvedBy: "",
    department: "Machines",
    documentType: "Circuit diagram",
    status: "Released",
    date: "2026-04-09",
    language: "en",
    revisions: [
      { index: "A", date: "2026-02-11", text: "First issue" },
      { index: "B", date: "2026-04-09", text: "Lamp added" },
    ],
    notes: [],
    convention: "north-american",
    paper: "A3",
    template: "",
    lineNumbers: "by-sheet",
    wireNumbers: "running",
    units: "metric",
    ...change,
  };
  const devices = new Map<string, Device>();
  const places = new Map<string, Place>();
  const device = (name: string, kind: DeviceKind, text: string, more: Partial<Device> = {}): Device => {
    const made: Device = { name, kind, text, at, values: [], contacts: [], loads: [], throughs: [], mains: [], ...more };
    devices.set(name, made);
    return made;
  };
  const contact = (of: Device, form: "NO" | "NC", terminals: [string, string], sheet: number, line: number, x: number): ContactUse => {
    const use: ContactUse = {
      kind: "contact",
      id: `${of.name}:${terminals.join("-")}`,
      device: of.name,
      form,
      timed: false,
      terminals: { value: terminals, by: "rule" },
      from: 0,
      to: 1,
      rung: `rung ${line}`,
      at,
    };
    of.contacts.push(use);
    places.set(use.id, { sheet, line, zone: "A2", box: { x, y: y(line) - 3, width: 10, height: 6 } });
    return use;
  };
  const load = (of: Device, sheet: number, line: number): LoadUse => {
    const use: LoadUse = {
      kind: "load",
      id: of.name,
      device: of.name,
      terminals: { value: ["A1", "A2"], by: "rule" },
      from: 1,
      to: 2,
      rung: `rung ${line}`,
      at,
    };
    of.loads.push(use);
    places.set(use.id, { sheet, line, zone: "A5", box: { x: 150, y: y(line) - 4, width: 10, height: 8 } });
    return use;
  };
  const y = (line: number) => 40 + (line % 100) * 15;

  const cr1 = device("CR1", "relay", "Cycle running");
  const sol1 = device("SOL1", "solenoid", "Lift", { valve: { name: "V1", side: "left" } });
  const ls1 = device("LS1", "limit-switch", "Lift down", { place: { cylinder: "LIFT", from: 0, to: 0, written: "retracted" } });
  const pb1 = device("PB1", "push-button", 'Start <& "go">');
  contact(pb1, "NO", ["13", "14"], 1, 101, 60);
  contact(cr1, "NO", ["13", "14"], 1, 102, 60);
  contact(ls1, "NC", ["21", "22"], 1, 103, 60);
  load(cr1, 1, 101);
  contact(cr1, "NC", ["21", "22"], 2, 201, 60);
  contact(cr1, "NO", ["33", "34"], 2, 202, 60);
  load(sol1, 2, 201);

  const component = (id: string, kind: FluidComponent["kind"], text: string): FluidComponent => ({
    id,
    name: id,
    kind,
    medium: "pneumatic",
    text,
    values: [],
    ports: [],
    at,
  });
  const components = new Map([
    ["V1", component("V1", "valve", "Lift")],
    ["LIFT", component("LIFT", "cylinder", "Lift")],
  ]);
  places.set("V1", { sheet: 3, zone: "C3", box: { x: 120, y: 120, width: 24, height: 8 } });
  places.set("LIFT", { sheet: 3, zone: "B3", box: { x: 120, y: 70, width: 30, height: 8 } });

  const reference = (to: ReferenceTo, where: Point, room: number, part?: string, anchor: PlacedText["anchor"] = "middle"): PlacedText => ({
    role: to.to === "contacts" ? "margin" : "reference",
    at: where,
    anchor,
    height: 2.5,
    text: { ...to, room },
    ...(part ? { part } : {}),
  });
  const ladder = (number: number, title: string, texts: PlacedText[]): CircuitSheet => ({
    kind: "ladder",
    circuit: "Control",
    number,
    title,
    texts,
    strokes: [
      {
        part: `run ${number}`,
        role: "continuation",
        path: [
          { x: 60, y: 39 },
          { x: 63, y: 39 },
        ],
        width: 0.25,
      },
    ],
    dots: [{ part: `node ${number}`, at: { x: 80, y: 55 }, diameter: 0.75 }],
    symbols: [...devices.values()]
      .flatMap((each) => [...each.contacts, ...each.loads])
      .flatMap((use) => {
        const place = places.get(use.id) as Place;
        const symbol = use.kind === "contact" ? contactSymbol : coilSymbol;
        return place.sheet === number
          ? [
              {
                part: use.id,
                device: use.device,
                symbol,
                at: { x: place.box.x, y: place.box.y + place.box.height / 2 },
                turn: { quarter: 0 as const },
              },
            ]
          : [];
      }),
    wires: [
      {
        part: `rail ${number}`,
        node: 0,
        role: "rail",
        points: [
          { x: 40, y: 45 },
          { x: 40, y: 100 },
        ],
        width: 0.5,
      },
    ],
  });
  const sheets: CircuitSheet[] = [
    ladder(1, "Control", [
      reference({ to: "coil", device: "CR1" }, { x: 65, y: y(102) + 6 }, 12, "CR1:13-14"),
      reference({ to: "switch-place", device: "LS1" }, { x: 65, y: y(103) + 6 }, 22, "LS1:21-22"),
      reference({ to: "contacts", device: "CR1" }, { x: 175, y: y(101) + 1.2 }, 40, "CR1", "start"),
      reference({ to: "point", point: "run", from: "run 1" }, { x: 65, y: 100 }, 30, "run 1", "start"),
      { role: "designation", part: "CR1", at: { x: 155, y: y(101) - 6 }, anchor: "middle", height: 2.5, text: "CR1" },
    ]),
    ladder(2, "Outputs", [
      reference({ to: "coil", device: "CR1" }, { x: 65, y: y(201) + 6 }, 12, "CR1:21-22"),
      reference({ to: "valve", device: "SOL1" }, { x: 175, y: y(201) + 1.2 }, 30, "SOL1", "start"),
      reference({ to: "point", point: "run", from: "run 2" }, { x: 65, y: 40 }, 30, "run 2", "start"),
    ]),
    {
      kind: "fluid",
      circuit: "Pneumatics",
      number: 3,
      title: "Pneumatics",
      wires: [],
      dots: [],
      notes: ["V1 is drawn as it stands at the start."],
      symbols: [
        { part: "V1", device: "V1", symbol: boxSymbol(24, 8), at: { x: 120, y: 120 }, turn: { quarter: 0 } },
        { part: "LIFT", device: "LIFT", symbol: boxSymbol(30, 8), at: { x: 120, y: 70 }, turn: { quarter: 0 } },
      ],
      texts: [
        reference({ to: "ladder-line", device: "SOL1" }, { x: 110, y: 126 }, 14, "V1/left"),
        reference({ to: "ladder-line", device: "LS1" }, { x: 150, y: 64 }, 14, "LIFT/LS1"),
      ],
      strokes: [
        {
          part: "LIFT/LS1",
          role: "cam",
          path: [
            { x: 150, y: 66 },
            { x: 150, y: 70 },
          ],
          width: 0.35,
        },
      ],
    },
  ];
  const rows: CrossReferenceRow[] = [
    {
      coil: "CR1",
      kind: "relay",
      text: "Cycle running",
      sheet: 1,
      line: 101,
      contacts: [
        { type: "NO", terminals: "13-14", sheet: 1, line: 102 },
        { type: "NC", terminals: "21-22", sheet: 2, line: 201 },
        { type: "NO", terminals: "33-34", sheet: 2, line: 202 },
      ],
    },
    { coil: "SOL1", kind: "solenoid", text: "Lift", sheet: 2, line: 201, contacts: [], valve: { name: "V1", sheet: 3, zone: "C3" } },
  ];
  const uses = [...devices.values()].flatMap((each) => [...each.contacts, ...each.loads]);
  const path: SeriesPath = { kind: "series", items: uses, from: 0, to: 2 };
  const rail = { kind: "rail" as const, node: 0 };
  const control: LadderCircuit = {
    kind: "ladder",
    id: "Control",
    title: "Control",
    supply: { name: "CTRL", current: "DC", rails: ["L+", "M"], at },
    rungs: [{ id: "rung", start: rail, end: rail, path, at }],
    sheetBreaks: [],
    at,
  };
  const machine: Machine = { drawing, devices, components, supplies: [], circuits: [control], potentials: [], sequences: [] };
  return { machine, layout: { sheets, places }, rows };
}

const contactSymbol: DrawnSymbol = {
  name: "test/contact",
  title: "contact",
  box: { x: 0, y: -3, width: 10, height: 6 },
  spots: {},
  ports: [],
  shapes: [
    {
      kind: "stroke",
      width: 0.25,
      path: [
        { op: "M", x: 0, y: 0 },
        { op: "L", x: 3.5, y: 0 },
        { op: "M", x: 3.5, y: -3 },
        { op: "L", x: 3.5, y: 3 },
      ],
    },
    {
      kind: "stroke",
      width: 0.25,
      path: [
        { op: "M", x: 6.5, y: -3 },
        { op: "L", x: 6.5, y: 3 },
        { op: "M", x: 6.5, y: 0 },
        { op: "L", x: 10, y: 0 },
      ],
    },
  ],
};

const coilSymbol: DrawnSymbol = {
  name: "test/coil",
  title: "coil",
  box: { x: 0, y: -4, width: 10, height: 8 },
  spots: {},
  ports: [],
  shapes: [
    {
      kind: "stroke",
      width: 0.25,
      path: [
        { op: "M", x: 1, y: 0 },
        { op: "A", radius: 4, large: true, sweep: true, x: 9, y: 0 },
        { op: "A", radius: 4, large: true, sweep: true, x: 1, y: 0 },
        { op: "Z" },
      ],
    },
    { kind: "text", at: { x: 5, y: 0 }, text: "K", height: 2.5, anchor: "middle" },
  ],
};

function boxSymbol(width: number, height: number): DrawnSymbol {
  return {
    name: "test/box",
    title: "box",
    box: { x: 0, y: 0, width, height },
    spots: {},
    ports: [],
    shapes: [
      {
        kind: "stroke",
        width: 0.25,
        path: [
          { op: "M", x: 0, y: 0 },
          { op: "L", x: width, y: 0 },
          { op: "L", x: width, y: height },
          { op: "L", x: 0, y: height },
          { op: "Z" },
        ],
      },
    ],
  };
}
