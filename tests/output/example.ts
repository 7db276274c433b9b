import type { DrawingSet, Mark } from "../../src/drawing/marks.js";
import { circle, polyline, rectangle } from "../../src/drawing/path.js";

/** A set of two sheets that uses every kind of mark, with texts that try the writers. */
export function exampleSet(): DrawingSet {
  const first: Mark[] = [
    { kind: "stroke", role: "frame", path: rectangle({ x: 10, y: 10, width: 130, height: 85 }), width: 0.7 },
    {
      kind: "stroke",
      part: "w1",
      role: "wire",
      path: polyline([
        { x: 20, y: 30 },
        { x: 60, y: 30 },
        { x: 60, y: 50 },
      ]),
      width: 0.25,
    },
    {
      kind: "stroke",
      part: "w1",
      role: "pilot",
      path: polyline([
        { x: 20, y: 34 },
        { x: 60, y: 34 },
      ]),
      width: 0.25,
      dash: [2, 1],
    },
    { kind: "fill", part: "w1", role: "dot", path: circle({ x: 60, y: 30 }, 0.375) },
    { kind: "stroke", part: "CR1", role: "symbol", path: circle({ x: 80, y: 30 }, 4), width: 0.25 },
    {
      kind: "stroke",
      part: "CR1",
      role: "symbol",
      path: [
        { op: "M", x: 74, y: 40 },
        { op: "C", x1: 76, y1: 36, x2: 84, y2: 44, x: 86, y: 40 },
      ],
      width: 0.35,
    },
    { kind: "text", part: "CR1", role: "designation", at: { x: 80, y: 24 }, text: "CR1", height: 2.5, anchor: "middle" },
    { kind: "text", part: "CR1", role: "function", at: { x: 95, y: 31 }, text: "Start <& \"go\"> 'AV' fi", height: 3.5, anchor: "start" },
    { kind: "text", role: "margin", at: { x: 135, y: 50 }, text: "207", height: 2.5, anchor: "end", underline: true },
    { kind: "text", role: "value", at: { x: 30, y: 75 }, text: "6 bar upward", height: 2.5, anchor: "start", rotated: true },
    { kind: "text", role: "heading", at: { x: 40, y: 70 }, text: "Clamp, größer Ωµ", height: 5, anchor: "start", bold: true },
    { kind: "link", box: { x: 130, y: 46, width: 6, height: 5 }, to: "CR1:13-14" },
    { kind: "link", box: { x: 74, y: 20, width: 12, height: 5 }, to: "CR1" },
    { kind: "link", box: { x: 1, y: 1, width: 2, height: 2 }, to: "drawn nowhere" },
  ];
  const second: Mark[] = [
    {
      kind: "stroke",
      part: "CR1:13-14",
      role: "symbol",
      path: polyline([
        { x: 20, y: 20 },
        { x: 20, y: 26 },
      ]),
      width: 0.25,
    },
    { kind: "text", part: "CR1:13-14", role: "reference", at: { x: 20, y: 32 }, text: "(101)", height: 2.5, anchor: "middle", ink: "#333" },
    { kind: "link", box: { x: 15, y: 28, width: 10, height: 5 }, to: "CR1" },
  ];
  return {
    info: {
      title: "Crate lifter",
      number: "CL-1",
      author: "T. Varga",
      subject: "Circuit diagram",
      revision: "B",
      language: "en",
      date: "2026-04-09",
    },
    sheets: [
      { number: 1, title: "Control", size: { width: 150, height: 105 }, marks: first },
      { number: 2, title: "Outputs", size: { width: 105, height: 150 }, marks: second },
    ],
    anchors: new Map([
      ["CR1", { sheet: 1, box: { x: 76, y: 26, width: 8, height: 8 } }],
      ["CR1:13-14", { sheet: 2, box: { x: 18, y: 20, width: 4, height: 6 } }],
    ]),
    parts: new Map([
      ["CR1", { device: "CR1", title: 'CR1 – "running"' }],
      ["CR1:13-14", { device: "CR1", title: "CR1 13-14" }],
    ]),
    outline: [{ device: "CR1", title: "Running", home: "CR1", uses: [{ title: "NO 13-14, sheet 2, line 201", part: "CR1:13-14" }] }],
  };
}

/** The same set with this text in every place that an author's text can reach. */
export function setSaying(text: string): DrawingSet {
  const set = exampleSet();
  const marks: Mark[] = [{ kind: "text", part: text, role: "function", at: { x: 20, y: 30 }, text, height: 2.5, anchor: "start" }];
  return {
    info: { title: text, number: text, author: text, subject: text, revision: text, language: "en", date: text },
    sheets: [
      {
        ...(set.sheets[0] as DrawingSet["sheets"][number]),
        title: text,
        marks: [...marks, { kind: "link", box: { x: 0, y: 0, width: 1, height: 1 }, to: text }],
      },
    ],
    anchors: new Map([[text, { sheet: 1, box: { x: 20, y: 30, width: 1, height: 1 } }]]),
    parts: new Map([[text, { device: text, title: text }]]),
    outline: [{ device: text, title: text, home: text, uses: [{ title: text, part: text }] }],
  };
}

/** Texts that have broken drawings elsewhere. */
export const oddTexts = [
  "<&>\"'",
  "]]>",
  "-->",
  "&amp;",
  "😀👩‍🔧",
  "שלום",
  "مرحبا",
  "e\u0301\u0301\u0301",
  "a\u0000b\u0007\u001b[31m",
  "\ufffe\uffff",
  "\ud83d",
  "a\nb\tc",
  "  two  spaces  ",
  "\\(paren) %25 #x",
  "x".repeat(300),
  "javascript:alert(1)",
];
