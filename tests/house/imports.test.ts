import { posix } from "node:path";
import { describe, expect, test } from "vitest";
import { filesBelow, readText } from "../support/sources.js";

/** What each folder may import, besides itself. `types` names folders of which only types may be used. */
const allowed: Record<string, { values?: string[]; types?: string[] }> = {
  language: {},
  machine: { values: ["language"] },
  behaviour: { values: ["machine", "language"] },
  checks: { values: ["behaviour", "machine", "language"] },
  drawing: {},
  symbols: { values: ["drawing"], types: ["machine", "behaviour"] },
  layout: { values: ["behaviour", "machine", "symbols", "drawing"], types: ["language"] },
  schedules: { values: ["machine"], types: ["layout", "drawing", "language"] },
  sheets: { values: ["schedules", "layout", "machine", "symbols", "drawing"], types: ["behaviour", "language"] },
  output: { values: ["drawing"] },
};

/** Folders that stand outside and may call everything. */
const outside = new Set(["cli"]);

interface Import {
  from: string;
  to: string;
  typesOnly: boolean;
}

function importsOf(file: string): Import[] {
  const text = readText(file).replace(/\/\*[\s\S]*?\*\/|^\s*\/\/.*$/gm, "");
  const found = text.matchAll(
    /(?:^|\n)\s*(import|export)\s+(type\s+)?([^;'"]*?from\s*)?["']([^"']+)["']|(\bimport)\(\s*["']([^"']+)["']\s*\)/g,
  );
  return [...found].map((match) => {
    const names = /\{([^}]*)\}/.exec(match[3] ?? "")?.[1];
    const listedTypes = names?.split(",").every((name) => name.trim() === "" || name.trim().startsWith("type "));
    const typesOnly = match[2] !== undefined || listedTypes || (match[5] !== undefined && /typeof\s*$/.test(text.slice(0, match.index)));
    return { from: file, to: match[4] ?? match[6] ?? "", typesOnly };
  });
}

const sources = filesBelow("src", ".ts", ".mts").filter((file) => !file.includes("/generated/"));
const imports = sources.flatMap(importsOf);
const folderOf = (path: string) => (path.split("/").length > 2 ? (path.split("/")[1] as string) : "");

describe("the house", () => {
  test("has no folder this test does not know", () => {
    const folders = new Set(sources.map(folderOf));
    expect([...folders].filter((folder) => folder !== "" && !(folder in allowed) && !outside.has(folder))).toEqual([]);
    expect(folders.size).toBeGreaterThan(8);
  });

  test("imports only in its one direction", () => {
    expect(imports.length).toBeGreaterThan(100);
    const wrong = imports.filter(({ from, to, typesOnly }) => {
      const rules = allowed[folderOf(from)];
      if (!rules || !to.startsWith(".")) return false;
      const target = posix.join(posix.dirname(from), to);
      const folder = folderOf(target);
      if (folder === folderOf(from) || target === "src/world.js") return false;
      return !(rules.values?.includes(folder) || (typesOnly && rules.types?.includes(folder)));
    });
    expect(wrong).toEqual([]);
  });

  test("goes to disk and network nowhere but at its outer shell", () => {
    const outer = (file: string) => file.startsWith("src/cli/") || file === "src/node-world.ts";
    const core = imports.filter(({ from }) => !outer(from));
    expect(core.filter(({ to }) => to.startsWith("node:")).map(({ from, to }) => `${from} imports ${to}`)).toEqual([]);
  });

  test("asks no clock, no chance, no locale", () => {
    const banned =
      /\bMath\.random\b|\bDate\.now\b|\bnew Date\(\)|\bperformance\.now\b|\.localeCompare\(|\.toLocale\w+\(|\bIntl\.|\bprocess\.(?!exit\b)/;
    const core = sources.filter((file) => !file.startsWith("src/cli/") && file !== "src/node-world.ts");
    expect(core.filter((file) => banned.test(readText(file)))).toEqual([]);
  });

  test("ends the process in one file only", () => {
    expect(sources.filter((file) => /process\.exit/.test(readText(file)))).toEqual(["src/cli/main.ts"]);
  });

  test("loads heavy libraries only where they are needed", () => {
    const heavy = /^(elkjs|pdfkit|svgdom|@svgdotjs\/svg\.js)(\/|$)/;
    const eager = imports.filter(({ from, to, typesOnly }) => {
      if (!heavy.test(to) || typesOnly) return false;
      const dynamic = new RegExp(`import\\(\\s*["']${to.replace(/[.*+?^${}()|[\]\\]/g, "\\$&")}["']`);
      return !dynamic.test(readText(from));
    });
    expect(eager.map(({ from, to }) => `${from} imports ${to}`)).toEqual([]);
  });
});
