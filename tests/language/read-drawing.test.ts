import { mkdirSync, mkdtempSync, rmSync, symlinkSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { describe, expect, test } from "vitest";
import { readDrawing } from "../../src/language/read-drawing.js";
import { nodeWorld } from "../../src/node-world.js";
import type { World } from "../../src/world.js";
import { at } from "./view.js";

function worldOf(
  files: Record<string, string | { problem: "missing" | "unreadable" | "not-text" | "folder" }>,
): World & { asked: string[] } {
  const asked: string[] = [];
  return {
    asked,
    async readText(path) {
      asked.push(path);
      const found = Object.hasOwn(files, path) ? files[path] : undefined;
      if (found === undefined) return { problem: "missing" };
      return typeof found === "string" ? { text: found } : found;
    },
    readAsset: () => {
      throw new Error("no assets here");
    },
    listAssets: () => [],
  };
}

async function read(first: string, files: Parameters<typeof worldOf>[0]) {
  const world = worldOf(files);
  const { tree, diagnostics, sources } = await readDrawing(first, world);
  return {
    names: tree.statements.map((it) => (it.kind === "declaration" ? `${it.at.file} ${it.name?.text}` : it.kind)),
    found: diagnostics.map((d) => `${d.at.file} ${d.code} ${at(d.at)}`),
    diagnostics,
    sources: [...sources.keys()],
    asked: world.asked,
    file: tree.file,
  };
}

describe("includes", () => {
  test("stand where they are written, with paths from the file they stand in", async () => {
    const result = await read("a/m.sprung", {
      "a/m.sprung": 'relay CR1\ninclude "parts/valves.sprung"\nrelay CR3\n',
      "a/parts/valves.sprung": 'include "./more/x.sprung"\nrelay CR2\ninclude "../y.sprung"\n',
      "a/parts/more/x.sprung": "relay X\n",
      "a/y.sprung": "relay Y\n",
    });
    expect(result.found).toEqual([]);
    expect(result.names).toEqual([
      "a/m.sprung CR1",
      "a/parts/more/x.sprung X",
      "a/parts/valves.sprung CR2",
      "a/y.sprung Y",
      "a/m.sprung CR3",
    ]);
    expect(result.sources).toEqual(["a/m.sprung", "a/parts/valves.sprung", "a/parts/more/x.sprung", "a/y.sprung"]);
    expect(result.file).toBe("a/m.sprung");
  });

  test("a file included from two others is read once, where it is first asked for", async () => {
    const result = await read("m", { m: 'include "a"\ninclude "b"', a: 'include "c"\nrelay A', b: 'include "c"\nrelay B', c: "relay C" });
    expect(result.found).toEqual([]);
    expect(result.names).toEqual(["c C", "a A", "b B"]);
    expect(result.asked).toEqual(["m", "a", "c", "b"]);
  });

  test("a loop is an error at the include that closes it, and names the way round", async () => {
    const result = await read("m", { m: 'relay M\ninclude "a"', a: 'include "b"\nrelay A', b: 'include "./a"\nrelay B' });
    expect(result.found).toEqual(["b include-loop 1:9-1:14"]);
    expect(result.diagnostics[0]?.seeAlso?.map((it) => `${it.at.file} ${it.message}`)).toEqual(['a "b" is included here.']);
    expect(result.names).toEqual(["m M", "b B", "a A"]);
    expect((await read("m", { m: 'include "m"\nrelay M' })).found).toEqual(["m include-loop 1:9-1:12"]);
  });

  test("a chain without end is stopped", async () => {
    const files = Object.fromEntries(Array.from({ length: 300 }, (_, i) => [`f${i}`, `include "f${i + 1}"\nrelay R${i}`]));
    const result = await read("f0", files);
    expect(result.found).toEqual(["f99 include-loop 1:9-1:15"]);
    expect(result.names).toHaveLength(100);
  });

  test.each([
    "../x.sprung",
    "a/../../x.sprung",
    "/etc/x.sprung",
    "C:/x.sprung",
    "..\\x.sprung",
    "a\\x.sprung",
    "file:///x.sprung",
    "~/x.sprung",
    "",
    ".",
    "a/..",
  ])("%j leads out of the folder, and nothing is read", async (path) => {
    const result = await read("d/m", { "d/m": `include "${path.replaceAll("\\", "\\\\")}"\nrelay M` });
    expect(result.found.map((it) => it.split(" ")[1])).toEqual(["include-outside-folder"]);
    expect(result.asked).toEqual(["d/m"]);
    expect(result.names).toEqual(["d/m M"]);
  });

  test("a link that leads out of the folder is not followed; one that stays within is", async () => {
    const folder = mkdtempSync(join(tmpdir(), "includes-"));
    try {
      mkdirSync(join(folder, "machine/parts"), { recursive: true });
      writeFileSync(join(folder, "secret"), "relay S");
      writeFileSync(join(folder, "machine/parts/own"), "relay R");
      writeFileSync(join(folder, "machine/m"), 'include "a"\ninclude "b"\ninclude "c/secret"');
      symlinkSync("../secret", join(folder, "machine/a"));
      symlinkSync("parts/own", join(folder, "machine/b"));
      symlinkSync("..", join(folder, "machine/c"));
      const { tree, diagnostics } = await readDrawing(join(folder, "machine/m"), nodeWorld);
      expect(diagnostics.map((d) => `${d.code} ${at(d.at)}`)).toEqual([
        "include-outside-folder 1:9-1:12",
        "include-outside-folder 3:9-3:19",
      ]);
      expect(tree.statements.map((it) => (it.kind === "declaration" ? it.name?.text : it.kind))).toEqual(["R"]);
    } finally {
      rmSync(folder, { recursive: true });
    }
  });

  test("one file's includes never leave the first file's folder, though they leave their own", async () => {
    const result = await read("d/m", {
      "d/m": 'include "p/q"',
      "d/p/q": 'include "../r"\ninclude "../../s"',
      "d/r": "relay R",
      s: "relay S",
    });
    expect(result.found).toEqual(["d/p/q include-outside-folder 2:9-2:18"]);
    expect(result.names).toEqual(["d/r R"]);
  });

  test.each([
    ["missing", "include-missing"],
    ["folder", "include-folder"],
    ["unreadable", "include-unreadable"],
    ["not-text", "not-text"],
  ] as const)("one that is %s is an error where it is included", async (problem, code) => {
    const result = await read("m", { m: 'relay A\ninclude "x"\nrelay B', x: { problem } });
    expect(result.found).toEqual([`m ${code} 2:9-2:12`]);
    expect(result.names).toEqual(["m A", "m B"]);
  });

  test("slips of an included file carry its name", async () => {
    const result = await read("m", { m: 'include "x"\nrung A -> M', x: "relay CR1 ;" });
    expect(result.found.sort()).toEqual(
      ["m colon-missing 1:4-1:5", "x unexpected-character 1:11-1:12"].map((it) =>
        it.replace("m colon-missing 1", "m colon-missing 2").replace("2:4-1", "2:4-2"),
      ),
    );
  });
});

describe("the first file", () => {
  test.each([
    ["missing", "file-missing"],
    ["folder", "file-folder"],
    ["unreadable", "file-unreadable"],
    ["not-text", "not-text"],
  ] as const)("%s", async (problem, code) => {
    const result = await read("m", { m: { problem } });
    expect(result.found).toEqual([`m ${code} 1:1-1:1`]);
    expect(result.names).toEqual([]);
  });
});
