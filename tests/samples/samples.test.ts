import { SaxesParser } from "saxes";
import { describe, expect, test } from "vitest";
import { startOfCycle } from "../../src/behaviour/start-of-cycle.js";
import { type Compiled, compile, examine } from "../../src/compile.js";
import { textBox } from "../../src/drawing/extent.js";
import type { Box } from "../../src/drawing/geometry.js";
import { layOut } from "../../src/layout/lay-out.js";
import type { CircuitSheet } from "../../src/layout/placement.js";
import type { DeviceUse, Machine } from "../../src/machine/model.js";
import { designationOf, printedName } from "../../src/machine/walk.js";
import { nodeWorld } from "../../src/node-world.js";
import { writePdf } from "../../src/output/pdf.js";
import { writeSvg } from "../../src/output/svg.js";
import { pageArea } from "../../src/sheets/page.js";
import { openSymbols } from "../../src/symbols/library.js";
import * as facts from "../support/facts.js";
import { memoryWorld } from "../support/memory-world.js";
import { readPdf } from "../support/read-pdf.js";
import { filesBelow, readText } from "../support/sources.js";
import { have, pdfToText, qpdfCheck } from "../support/tools.js";

const samples = filesBelow("samples", ".sprung");

test("there are samples of both media", () => {
  expect(samples.length).toBeGreaterThanOrEqual(2);
  const media = samples.flatMap((path) => [...readText(path).matchAll(/^fluid .* (pneumatic|hydraulic) \{/gm)].map((match) => match[1]));
  expect(new Set(media)).toEqual(new Set(["pneumatic", "hydraulic"]));
});

const conventions = ["north-american", "international"] as const;
const drawn = samples.flatMap((path) => conventions.map((convention) => ({ path, convention })));

describe.each(drawn)("$path, $convention", async ({ path, convention }) => {
  const world = memoryWorld({ [path]: readText(path) });
  const compiled = (await compile(path, world, undefined, { convention })) as Required<Compiled>;
  const printed = (name: string) => printedName(name, convention);
  const { machine, layout, rows, set } = compiled;
  if (!set) throw new Error(compiled.diagnostics.map(({ at, message }) => `${path}:${at.line}: ${message}`).join("\n"));
  const svg = await writeSvg(set, world);
  const pdf = await writePdf(set, world);
  const { area } = pageArea(machine.drawing);

  test("has no error and no warning", () => {
    expect(compiled.diagnostics.filter(({ severity }) => severity !== "note")).toEqual([]);
  });

  test("laying out leaves the machine as it was", async () => {
    const fresh = (await examine(path, world)).machine;
    const before = structuredClone(fresh);
    await layOut(fresh, startOfCycle(fresh), openSymbols(world), pageArea);
    expect(fresh).toEqual(before);
  });

  test("every contact, load and component is drawn once and has its place", () => {
    const parts = [...usesOf(machine), ...mainsOf(machine), ...componentsOf(machine)].map(({ id }) => id);
    expect(new Set(parts).size).toBe(parts.length);
    const drawn = layout.sheets.flatMap(({ symbols }) => symbols.map(({ part }) => part));
    expect(parts.filter((part) => !layout.places.has(part))).toEqual([]);
    expect(parts.filter((part) => drawn.filter((other) => other === part).length !== 1)).toEqual([]);
  });

  test("every device stands in the cross-reference or on a fluid sheet, and every coil with all its contacts", () => {
    for (const { name, loads, contacts, mains } of machine.devices.values()) {
      for (const load of loads) {
        const row = rows.find(({ coil }) => coil === coilName(load));
        expect(row?.contacts.length, name).toBe(contacts.length + mains.length);
      }
    }
  });

  test("the cross-reference lists each device, each of several coils and each point of a card once", () => {
    const circuits = new Set(layout.sheets.map(({ number }) => number));
    const used = [
      ...new Set([...machine.devices.values()].flatMap(({ loads, contacts }) => (loads.length > 0 ? loads : contacts).map(coilName))),
    ];
    const names = new Set(used.map(printed));
    const heads = set.sheets
      .filter(({ number }) => !circuits.has(number))
      .flatMap(({ marks }) => marks.flatMap((mark) => (mark.kind === "text" && mark.bold ? [mark.text] : [])))
      .filter((text) => names.has(text));
    expect(heads.sort()).toEqual(used.map(printed).sort());
  });

  test.each(layout.sheets)("sheet $number, $title, holds to the facts of a good sheet", (sheet) => {
    expect(facts.textOverlaps(sheet)).toEqual([]);
    expect(facts.textsOnWires(sheet)).toEqual([]);
    expect(facts.wiresThroughSymbols(sheet)).toEqual([]);
    expect(facts.symbolOverlaps(sheet)).toEqual([]);
    expect(facts.looseEnds(sheet)).toEqual([]);
    expect(facts.slantedWires(sheet)).toEqual([]);
    expect(facts.outside(sheet, area)).toEqual([]);
    if (sheet.kind === "ladder") expect(facts.crossings(sheet)).toEqual([]);
  });

  test.each(layout.sheets)("sheet $number, $title, joins what the text joins and nothing else", (sheet) => {
    const nodeOf = nodesByPin(machine);
    const groups = facts.netlistOf(sheet).map(({ nodes, ports }) => ({ nodes, pins: ports.filter((port) => nodeOf.has(port)) }));
    for (const { nodes, pins } of groups) {
      expect(nodes.length, pins.join(" ")).toBeLessThanOrEqual(1);
      expect(new Set(pins.map((pin) => nodeOf.get(pin))).size, pins.join(" ")).toBeLessThanOrEqual(1);
      for (const pin of pins) if (nodes.length > 0) expect(nodeOf.get(pin), pin).toBe(nodes[0]);
    }
    expect(groups.flatMap(({ pins }) => pins).length).toBeGreaterThan(0);
  });

  test("loads stand in one column, or in one row", () => {
    const loads = new Set(usesOf(machine).flatMap((use) => (use.kind === "load" ? [use.id] : [])));
    for (const sheet of layout.sheets.filter(({ kind }) => kind === "ladder")) {
      const columns = sheet.symbols
        .filter(({ part }) => loads.has(part))
        .map((placed) => middle(facts.portsOf(placed), convention).toFixed(2));
      expect(new Set(columns).size, sheet.title).toBeLessThanOrEqual(1);
    }
  });

  test("no two texts of a finished sheet overlap, and all stand on the paper", () => {
    for (const { number, marks, size } of set.sheets) {
      const texts = marks.flatMap((mark) =>
        mark.kind === "text" && mark.text.trim() !== "" ? [{ text: mark.text, box: textBox(mark) }] : [],
      );
      const found = texts.flatMap((one, index) =>
        texts.slice(index + 1).flatMap((other) => (meet(one.box, other.box) ? [`sheet ${number}: “${one.text}” and “${other.text}”`] : [])),
      );
      expect(found).toEqual([]);
      const off = texts.filter(({ box }) => box.x < 0 || box.y < 0 || box.x + box.width > size.width || box.y + box.height > size.height);
      expect(off).toEqual([]);
    }
  });

  test("the SVG files are well-formed, and their links lead to something", () => {
    expect(svg.length).toBe(set.sheets.length);
    const ids = new Map<string, Set<string>>();
    const links: [file: string, href: string][] = [];
    for (const { name, text } of svg) {
      const own = new Set<string>();
      ids.set(name, own);
      const parser = new SaxesParser();
      parser.on("error", (error) => {
        throw error;
      });
      parser.on("opentag", ({ attributes }) => {
        const { id, href } = attributes as Record<string, string>;
        if (id) own.add(id);
        if (href) links.push([name, href]);
      });
      parser.write(text).close();
    }
    expect(links.length).toBeGreaterThan(10);
    const dead = links.filter(([file, href]) => {
      const [other = "", id = ""] = href.split("#");
      return !ids.get(other === "" ? file : decodeURIComponent(other))?.has(decodeURIComponent(id));
    });
    expect(dead).toEqual([]);
  });

  test("the PDF has a page a sheet, working links, and an outline", async () => {
    const read = await readPdf(pdf);
    expect(read.pages.length).toBe(set.sheets.length);
    expect(read.pages.flatMap(({ links }) => links).length).toBeGreaterThan(10);
    expect(read.outline.length).toBeGreaterThan(0);
    expect(read.title).toContain(machine.drawing.title);
  });

  // General-purpose reference tools: qpdf for the structure, pdftotext for the text.
  test.skipIf(!have("qpdf"))("qpdf finds no fault in the PDF", () => {
    expect(qpdfCheck(pdf)).toMatch(/No syntax or stream encoding errors found/);
  });

  test.skipIf(!have("pdftotext"))("every designation can be searched for in the PDF", () => {
    const words = new Set(pdfToText(pdf).split(/[\s,()]+/));
    const names = [...new Set(usesOf(machine).map(designationOf))];
    const components = [...machine.components.keys()].map((name) => (machine.devices.has(name) ? printed(name) : name));
    expect([...names.map(printed), ...components].filter((name) => !words.has(name))).toEqual([]);
  });

  test("drawn twice it is the same to the byte", async () => {
    const again = await compile(path, memoryWorld({ [path]: readText(path) }), undefined, { convention });
    if (!again.set) throw new Error("not drawn");
    expect(await writeSvg(again.set, nodeWorld)).toEqual(svg);
    expect(Buffer.compare(await writePdf(again.set, nodeWorld), pdf)).toBe(0);
  });

  test("keeps its arrangement", async () => {
    const name = path.replace(/^samples\/|\.sprung$/g, "") + (convention === "international" ? ".international" : "");
    await expect(`${outlineOfSheets(layout.sheets, compiled)}\n`).toMatchFileSnapshot(`expected/${name}.txt`);
  });
});

/** What stands on each sheet and line, for the reader: the ladder line by line, the fluid sheet by zone. */
function outlineOfSheets(sheets: readonly CircuitSheet[], { layout, set }: Required<Compiled>): string {
  const circuits = sheets.map((sheet) => {
    const rows = new Map<string, string[]>();
    for (const { part } of [...sheet.symbols].sort((a, b) => a.at.x - b.at.x || a.at.y - b.at.y)) {
      const place = layout.places.get(part);
      if (!place) continue;
      const row = place.line === undefined ? place.zone : String(place.line);
      rows.set(row, [...(rows.get(row) ?? []), part]);
    }
    const lines = [...rows]
      .sort(([a], [b]) => Number(a) - Number(b) || (a < b ? -1 : 1))
      .map(([row, parts]) => `  ${row}  ${parts.join("  ")}`);
    return [`sheet ${sheet.number}, ${sheet.kind}: ${sheet.title}`, ...lines].join("\n");
  });
  const others = set.sheets.filter(({ number }) => sheets.every((sheet) => sheet.number !== number));
  return [...circuits, ...others.map(({ number, title }) => `sheet ${number}: ${title}`)].join("\n");
}

function usesOf({ devices }: Machine): DeviceUse[] {
  return [...devices.values()].flatMap(({ contacts, loads, throughs }) => [...contacts, ...loads, ...throughs]);
}

/** What a row of the cross-reference is headed with. */
function coilName(use: DeviceUse): string {
  return use.kind === "load" && use.coil !== undefined ? `${use.device}.${use.coil}` : designationOf(use);
}

function componentsOf({ circuits }: Machine) {
  return circuits.flatMap((circuit) => (circuit.kind === "fluid" ? circuit.components : []));
}

function mainsOf({ devices }: Machine) {
  return [...devices.values()].flatMap(({ mains }) => mains);
}

/** The fluid node of each joined port, by `part.port`. */
function nodesByPin(machine: Machine): Map<string, number> {
  const nodes = new Map<string, number>();
  for (const { id, ports } of componentsOf(machine)) {
    for (const { name, node } of ports) if (node !== undefined) nodes.set(`${id}.${name}`, node);
  }
  // The pins of a contact or load: `in` on the live side, `out` on the return side.
  for (const { id, from, to } of usesOf(machine)) nodes.set(`${id}.in`, from).set(`${id}.out`, to);
  for (const { id, ins, outs, second = [] } of mainsOf(machine)) {
    for (const [index, { node }] of ins.entries()) nodes.set(`${id}.in-${index + 1}`, node);
    for (const [index, { node }] of [...outs, ...second].entries()) nodes.set(`${id}.out-${index + 1}`, node);
  }
  return nodes;
}

/** Along the current, the middle between the pins. */
function middle(ports: ReturnType<typeof facts.portsOf>, convention: (typeof conventions)[number]): number {
  const along = ports.map(({ at }) => (convention === "international" ? at.y : at.x));
  return (Math.min(...along) + Math.max(...along)) / 2;
}

function meet(a: Box, b: Box): boolean {
  return a.x < b.x + b.width && b.x < a.x + a.width && a.y < b.y + b.height && b.y < a.y + a.height;
}
