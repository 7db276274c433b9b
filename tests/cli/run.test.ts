import { readFileSync } from "node:fs";
import { describe, expect, test } from "vitest";
import { run } from "../../src/cli/run.js";
import { type MemoryOptions, memoryWorld } from "../support/memory-world.js";

const sample = readFileSync(new URL("../../samples/tray-stamper.sprung", import.meta.url), "utf8");
const version = (JSON.parse(readFileSync(new URL("../../package.json", import.meta.url), "utf8")) as { version: string }).version;

/** Runs a command line over files in memory. */
async function cli(args: string[], files: Record<string, string | Uint8Array> = {}, options: MemoryOptions = {}) {
  const desk = memoryWorld({ "tray.sprung": sample, ...files }, options);
  const code = await run(args, desk);
  return { code, out: desk.stdout, err: desk.stderr, written: [...desk.written.keys()], desk };
}

/** A small sound drawing. */
const small = (number: string, extra = "") => `drawing "Light ${number}" { number ${number} }
supply CTRL 24 V DC { rails L+ M }
push-button PB1 "On"
pilot-light LT1 "Lit" white
ladder "Control" supply CTRL {
  rung "Light": PB1 -> LT1
${extra}}
`;

describe("help and misuse", () => {
  test("--help tells the commands, the exit codes and examples", async () => {
    const { code, out, err } = await cli(["--help"]);
    expect(code).toBe(0);
    expect(err).toBe("");
    for (const word of ["draw", "check", "xref", "list", "symbols", "Exit codes", "NO_COLOR", "Examples"]) expect(out).toContain(word);
  });

  test.each(["draw", "check", "xref", "list", "symbols"])("%s --help tells its options with examples", async (command) => {
    const { code, out } = await cli([command, "--help"]);
    expect(code).toBe(0);
    expect(out).toContain(`$ spoolrung ${command}`);
    expect(out).toContain("--no-color");
    expect((await cli(["help", command])).out).toBe(out);
  });

  test("--version prints the version of the package", async () => {
    expect(await cli(["--version"])).toMatchObject({ code: 0, out: `${version}\n` });
  });

  test.each([
    [[], /Usage: spoolrung/],
    [["drwa", "tray.sprung"], /unknown command 'drwa'[\s\S]*draw/],
    [["draw"], /missing required argument 'file'/],
    [["draw", "tray.sprung", "--svgg"], /unknown option '--svgg'[\s\S]*--svg/],
    [["draw", "tray.sprung", "--out"], /argument missing/],
    [["draw", "tray.sprung", "--out", ""], /folder/],
    [["xref", "tray.sprung", "tray.sprung"], /too many arguments/],
    [["xref", "tray.sprung", "--csv", "--json"], /choose one/],
    [["list", "tray.sprung", "wires", "--csv", "--json"], /choose one/],
    [["list", "tray.sprung"], /missing required argument 'list'/],
    [["list", "tray.sprung", "hoses"], /Allowed choices are devices, wires, terminals, contacts/],
  ])("%j is misuse", async (args, message) => {
    const { code, out, err, written } = await cli(args);
    expect(code).toBe(2);
    expect(err).toMatch(message);
    expect(out).toBe("");
    expect(written).toEqual([]);
  });
});

describe("draw", () => {
  test("writes every sheet as SVG and the set as PDF, named after the drawing number", async () => {
    const { code, out, err, written, desk } = await cli(["draw", "tray.sprung"]);
    expect(err).toBe("");
    expect(code).toBe(0);
    expect(written).toContain("drawings/TS-2040.pdf");
    expect(written.filter((path) => /^drawings\/TS-2040_sheet-\d\.svg$/.test(path)).length).toBeGreaterThanOrEqual(3);
    expect(out.trim().split("\n")).toEqual(written);
    expect(new TextDecoder("latin1").decode(desk.written.get("drawings/TS-2040.pdf") as Uint8Array)).toMatch(/^%PDF-1\.7/);
    expect(desk.written.get("drawings/TS-2040_sheet-1.svg")).toMatch(/^<\?xml[\s\S]*<svg/);
  });

  test("--svg and --pdf choose, --out names the folder, --quiet says nothing", async () => {
    expect((await cli(["draw", "tray.sprung", "--pdf", "-o", "prints"])).written).toEqual(["prints/TS-2040.pdf"]);
    expect((await cli(["draw", "tray.sprung", "--svg"])).written.every((path) => path.endsWith(".svg"))).toBe(true);
    expect((await cli(["draw", "tray.sprung", "--svg", "--pdf"])).written).toEqual((await cli(["draw", "tray.sprung"])).written);
    expect(await cli(["draw", "tray.sprung", "--quiet"])).toMatchObject({ code: 0, out: "", err: "" });
  });

  test("reads standard input as -", async () => {
    const { code, written } = await cli(["draw", "-", "--pdf"], {}, { input: small("A-1") });
    expect(code).toBe(0);
    expect(written).toEqual(["drawings/A-1.pdf"]);
    expect((await cli(["check", "-"], {}, { input: "relay" })).out).toMatch(/^-:1:/);
  });

  test("draws several files, or none if one has an error", async () => {
    const files = { "a.sprung": small("A-1"), "b.sprung": small("B-2"), "bad.sprung": small("C-3", "  rung: PB9 -> LT1\n") };
    expect((await cli(["draw", "a.sprung", "b.sprung", "--pdf"], files)).written).toEqual(["drawings/A-1.pdf", "drawings/B-2.pdf"]);
    const { code, err, out, written } = await cli(["draw", "a.sprung", "bad.sprung", "--pdf"], files);
    expect(code).toBe(1);
    expect(written).toEqual([]);
    expect(out).toBe("");
    expect(err).toMatch(/bad\.sprung:7:\d+:[\s\S]*PB9[\s\S]*\d errors?[\s\S]*Nothing was drawn/);
  });

  test("refuses two drawings of one number, whatever the case", async () => {
    const { code, err, written } = await cli(["draw", "a.sprung", "b.sprung"], { "a.sprung": small("AB-1"), "b.sprung": small("ab-1") });
    expect(code).toBe(2);
    expect(err).toMatch(/a\.sprung and b\.sprung would both be written as ab-1/);
    expect(written).toEqual([]);
  });

  test("refuses to overwrite what it reads", async () => {
    const { code, err, written } = await cli(["draw", "drawings/A-1.pdf"], { "drawings/A-1.pdf": small("A-1") });
    expect(code).toBe(2);
    expect(err).toMatch(/drawings\/A-1\.pdf is one of the files the drawing is read from/);
    expect(written).toEqual([]);
  });

  test("names sheets left from an earlier, longer drawing", async () => {
    const old = {
      "a.sprung": small("A-1"),
      "drawings/A-1_sheet-9.svg": "",
      "drawings/A-1_sheet-x.svg": "",
      "drawings/A-10_sheet-9.svg": "",
    };
    const { err } = await cli(["draw", "a.sprung"], old);
    expect(err).toBe("drawings/A-1_sheet-9.svg is left from an earlier drawing with more sheets.\n");
    expect((await cli(["draw", "a.sprung", "--pdf"], old)).err).toBe("");
  });

  test("says why when the folder takes nothing", async () => {
    const { code, err, written } = await cli(["draw", "tray.sprung", "--out", "locked"], {}, { readOnly: ["locked"] });
    expect(code).toBe(2);
    expect(err).toMatch(/locked.*no permission[\s\S]*Nothing was written/);
    expect(written).toEqual([]);
  });

  test("tells of long work on a terminal only", async () => {
    const slow = { pace: 1000 };
    expect((await cli(["draw", "tray.sprung"], {}, { ...slow, terminal: { out: false, err: true } })).err).toMatch(/\r.*tray\.sprung: \w+/);
    expect((await cli(["draw", "tray.sprung"], {}, { terminal: { out: true, err: true } })).err).toBe("");
    expect((await cli(["draw", "tray.sprung"], {}, slow)).err).toBe("");
    expect((await cli(["draw", "tray.sprung", "-q"], {}, { ...slow, terminal: { out: true, err: true } })).err).toBe("");
  });

  test("writes the same bytes each time", async () => {
    const [one, two] = [await cli(["draw", "tray.sprung"]), await cli(["draw", "tray.sprung"])];
    expect(one.desk.written).toEqual(two.desk.written);
  });
});

describe("check", () => {
  test("a sound drawing has one note, that its cycle is not run yet", async () => {
    const { code, out } = await cli(["check", "tray.sprung"]);
    expect(code).toBe(0);
    expect(out).toMatch(/note\[[\w-]+\]: [\s\S]*\n1 note\nThese checks do not certify the machine\. .*\n$/);
  });

  test("a drawing without anything to say", async () => {
    expect(await cli(["check", "a.sprung"], { "a.sprung": small("A-1") })).toMatchObject({
      code: 0,
      out: expect.stringMatching(/^No errors, no warnings\.\nThese checks do not certify the machine\. .*verify before work\.\n$/),
      err: "",
    });
  });

  test("--json gives the findings as data, of all files in one array", async () => {
    const bad = small("A-1", "  rung: PB9 -> LT2\n");
    const { code, out, err } = await cli(["check", "--json", "a.sprung", "b.sprung"], { "a.sprung": bad, "b.sprung": bad });
    expect(code).toBe(1);
    expect(err).toBe("");
    const found = JSON.parse(out) as Record<string, unknown>[];
    expect(found.filter(({ severity }) => severity === "error").length).toBe(4);
    for (const finding of found) {
      const { hint, ...must } = finding;
      expect(must).toEqual({
        code: expect.stringMatching(/^[a-z]+(-[a-z]+)*$/),
        severity: expect.stringMatching(/^(error|warning|note)$/),
        message: expect.stringMatching(/\.$/),
        file: expect.stringMatching(/^[ab]\.sprung$/),
        line: expect.any(Number),
        column: expect.any(Number),
        endLine: expect.any(Number),
        endColumn: expect.any(Number),
      });
      if ("hint" in finding) expect(hint).toEqual(expect.any(String));
    }
    expect(found[0]).toMatchObject({ file: "a.sprung", line: 7, column: 9, endLine: 7, endColumn: 12 });
    expect(JSON.parse((await cli(["check", "--json", "a.sprung"], { "a.sprung": small("A-1") })).out)).toEqual([]);
  });
});

describe("xref", () => {
  test("--json gives one entry a coil in drawing order", async () => {
    const { code, out } = await cli(["xref", "tray.sprung", "--json"]);
    expect(code).toBe(0);
    const rows = JSON.parse(out) as Record<string, unknown>[];
    expect(rows[0]).toEqual({
      coil: "CR1",
      kind: "relay",
      text: "Cycle running",
      sheet: 2,
      line: 201,
      contacts: [{ type: "NO", terminals: "13-14", sheet: 2, line: 202 }],
    });
    expect(rows.find(({ coil }) => coil === "SOL1")).toMatchObject({
      kind: "solenoid",
      contacts: [],
      valve: { name: "V1", sheet: 1, zone: expect.stringMatching(/^[A-HJ-NP-Z]\d+$/) },
    });
    for (const row of rows)
      expect(Object.keys(row).filter((key) => key !== "valve")).toEqual(["coil", "kind", "text", "sheet", "line", "contacts"]);
  });

  test("prints a table for people, aligned", async () => {
    const { out } = await cli(["xref", "tray.sprung"]);
    const [head = "", ...lines] = out.trimEnd().split("\n");
    expect(head).toMatch(/^Coil +Kind +Function +Sheet +Line +Contact +Terminals +Sheet +Line +Valve$/);
    expect(lines[0]).toMatch(/^CR1 +relay +Cycle running +2 +201 +NO +13-14 +2 +202$/);
    const column = head.indexOf("Function");
    expect(lines.find((line) => line.startsWith("SOL1"))?.slice(column)).toMatch(/^\S/);
  });

  test("--csv gives one line a contact", async () => {
    const { out } = await cli(["xref", "tray.sprung", "--csv"]);
    const lines = out.split("\r\n");
    expect(lines[0]).toMatch(/^coil,kind,text,sheet,line,/);
    expect(lines[1]).toMatch(/^CR1,relay,Cycle running,2,201,NO,/);
    expect(lines.at(-1)).toBe("");
  });

  test("prints nothing but errors for a faulty drawing", async () => {
    const { code, out, err } = await cli(["xref", "a.sprung", "--json"], { "a.sprung": small("A-1", "  rung: PB9 -> LT1\n") });
    expect(code).toBe(1);
    expect(out).toBe("");
    expect(err).toMatch(/PB9/);
  });
});

describe("list", () => {
  test("prints a table in which what repeats is left out", async () => {
    const { code, out } = await cli(["list", "tray.sprung", "wires"]);
    expect(code).toBe(0);
    const [head = "", ...lines] = out.trimEnd().split("\n");
    expect(head).toMatch(/^Wire +Colour +Name +From +To$/);
    expect(lines[0]).toMatch(/^L\+ +blue +L\+ +FU1:2 +PB2:11$/);
    expect(lines.slice(1, 3).join("\n")).toMatch(/^M +blue +M +CR1:A2 +LT1:X2\n +LT1:X2 +CR2:A2$/);
  });

  test("--csv repeats it, one line a connection", async () => {
    const { out } = await cli(["list", "tray.sprung", "wires", "--csv"]);
    const lines = out.split("\r\n");
    expect(lines[0]).toBe("wire,colour,name,from,to");
    expect(lines[3]).toBe("M,blue,M,LT1:X2,CR2:A2");
    expect(lines.at(-1)).toBe("");
  });

  test.each([
    ["devices", ["designation", "kind", "text", "orderCode", "location", "ratings", "drawn"]],
    ["wires", ["number", "colour", "name", "pins", "connections"]],
    ["contacts", ["device", "kind", "text", "used", "spare"]],
  ])("--json gives the %s with the same keys in the same order", async (name, keys) => {
    const { code, out } = await cli(["list", "tray.sprung", name, "--json"]);
    expect(code).toBe(0);
    const rows = JSON.parse(out) as object[];
    expect(rows.length).toBeGreaterThan(3);
    for (const row of rows) expect(Object.keys(row)).toEqual(keys);
  });

  test("a drawing without strips has no terminals, and says so with the heads alone", async () => {
    const { code, out } = await cli(["list", "tray.sprung", "terminals"]);
    expect(code).toBe(0);
    expect(out).toMatch(/^Strip +Terminal +Wire +Before +After +Drawn\n$/);
    expect((await cli(["list", "tray.sprung", "terminals", "--json"])).out).toBe("[]\n");
  });

  test("speaks of places as the convention does", async () => {
    const { out } = await cli(["list", "tray.sprung", "devices", "--csv", "--convention", "international"]);
    expect(out).toMatch(/^CR1,relay,.*,"\/2\.\d+, \/2\.\d+/m);
    expect((await cli(["list", "tray.sprung", "contacts", "--convention", "international"])).out).toMatch(/^Device .* Sheet +Path\n/);
  });

  test("prints nothing but errors for a faulty drawing", async () => {
    const { code, out, err } = await cli(["list", "a.sprung", "devices"], { "a.sprung": small("A-1", "  rung: PB9 -> LT1\n") });
    expect(code).toBe(1);
    expect(out).toBe("");
    expect(err).toMatch(/PB9/);
  });
});

describe("symbols", () => {
  test("draws the chart", async () => {
    const { code, written } = await cli(["symbols", "--out", "chart"]);
    expect(code).toBe(0);
    expect(written.filter((path) => path.endsWith(".pdf"))).toHaveLength(1);
    expect(written.filter((path) => path.endsWith(".svg")).length).toBeGreaterThan(0);
    expect(written.every((path) => path.startsWith("chart/"))).toBe(true);
  });
});

describe("colour", () => {
  const bad = { "bad.sprung": "relay" };
  const colourCode = "\u001b[";

  test.each([
    ["a pipe", [], {}, false],
    ["a terminal", [], { terminal: { out: true, err: true } }, true],
    ["NO_COLOR", [], { terminal: { out: true, err: true }, environment: { NO_COLOR: "1" } }, false],
    ["an empty NO_COLOR", [], { terminal: { out: true, err: true }, environment: { NO_COLOR: "" } }, true],
    ["a dumb terminal", [], { terminal: { out: true, err: true }, environment: { TERM: "dumb" } }, false],
    ["--color in a pipe", ["--color"], { environment: { NO_COLOR: "1" } }, true],
    ["--no-color on a terminal", ["--no-color"], { terminal: { out: true, err: true } }, false],
  ] satisfies [string, string[], MemoryOptions, boolean][])("%s", async (_, args, options, coloured) => {
    expect((await cli(["check", "bad.sprung", ...args], bad, options)).out.includes(colourCode)).toBe(coloured);
    expect((await cli([...args, "check", "bad.sprung"], bad, options)).out.includes(colourCode)).toBe(coloured);
    expect((await cli(["draw", "bad.sprung", ...args], bad, options)).err.includes(colourCode)).toBe(coloured);
  });
});
