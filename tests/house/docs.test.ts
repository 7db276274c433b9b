import { existsSync } from "node:fs";
import { join } from "node:path";
import { describe, expect, test } from "vitest";
import { rules } from "../../src/checks/rules.js";
import { run } from "../../src/cli/run.js";
import { examine } from "../../src/compile.js";
import { parse } from "../../src/language/parse.js";
import { memoryWorld } from "../support/memory-world.js";
import { filesBelow, readText, root } from "../support/sources.js";

const pages = ["README.md", "DEVELOPERS.md", "CHANGELOG.md"];

interface Block {
  page: string;
  line: number;
  kind: string;
  text: string;
}

const blocks: Block[] = pages.flatMap((page) => {
  const text = readText(page);
  return [...text.matchAll(/^```(.*)\n([\s\S]*?)^```$/gm)].map((match) => ({
    page,
    line: text.slice(0, match.index).split("\n").length,
    kind: match[1] ?? "",
    text: match[2] ?? "",
  }));
});
const ofKind = (kind: string) =>
  blocks.filter((block) => block.kind === kind).map((block) => ({ ...block, name: `${block.page}:${block.line}` }));

test("every code block is of a kind that is tested or plain", () => {
  const kinds = new Set(blocks.map(({ kind }) => kind));
  const known = ["sprung", "sprung part", "sprung rungs", "sprung fluid", "console", "text", "ts"];
  expect([...kinds].filter((kind) => !known.includes(kind))).toEqual([]);
});

describe("examples of the language", () => {
  test.each(ofKind("sprung"))("$name is a drawing without fault", async ({ text }) => {
    const { diagnostics } = await examine("doc.sprung", memoryWorld({ "doc.sprung": text }));
    expect(diagnostics).toEqual([]);
  });

  const wrapped: [kind: string, wrap: (text: string) => string][] = [
    ["sprung part", (text) => text],
    ["sprung rungs", (text) => `ladder "Control" {\n${text}}\n`],
    ["sprung fluid", (text) => `fluid "Air" pneumatic {\n${text}}\n`],
  ];
  for (const [kind, wrap] of wrapped) {
    test.each(ofKind(kind))(`$name reads as ${kind}`, ({ text }) => {
      const { tree, diagnostics } = parse(wrap(text), "doc.sprung");
      expect(diagnostics).toEqual([]);
      expect(tree.statements.length).toBeGreaterThan(0);
    });
  }
});

test("the example of a finding is what check prints", async () => {
  const drawing = ofKind("sprung")[0]?.text ?? "";
  const faulty = drawing.replace('rung "Clamp":   CR1 ->', 'rung "Clamp":   CR11 ->');
  expect(faulty).not.toBe(drawing);
  const desk = memoryWorld({ "machine.sprung": faulty });
  await run(["check", "machine.sprung"], desk);
  const shown = blocks.find(({ page, text }) => page === "README.md" && text.startsWith("machine.sprung:"))?.text.trim();
  expect(desk.stdout).toContain(shown);
});

test("commands in console blocks are understood", async () => {
  const lines = ofKind("console").flatMap(({ text }) => text.split("\n").filter((line) => line.startsWith("$ ")));
  expect(lines.length).toBeGreaterThan(3);
  const { scripts } = JSON.parse(readText("package.json")) as { scripts: Record<string, string> };
  for (const line of lines) {
    const [, tool, verb = "", script = ""] = /^\$ (\S+) ?(\S*) ?(\S*)/.exec(line) ?? [];
    if (tool === "npm" && verb === "run") expect(Object.keys(scripts)).toContain(script);
    if (tool === "npx" && verb === "spoolrung") {
      expect(await run([script, "--help"], memoryWorld()), line).toBe(0);
    }
  }
});

test("every design rule stands in the README once", () => {
  const rows = [...readText("README.md").matchAll(/^\| `([a-z-]+)` \| /gm)].map((match) => match[1]).filter((code) => code?.includes("-"));
  for (const { code } of rules)
    expect(
      rows.filter((row) => row === code),
      code,
    ).toHaveLength(1);
});

test("every command stands in the README with all its options", async () => {
  const desk = memoryWorld();
  await run(["--help"], desk);
  const commands = [...desk.stdout.matchAll(/^ {2}(\w+) (?:\[options\])/gm)].map((match) => match[1] as string);
  expect(commands.length).toBeGreaterThanOrEqual(4);
  const readme = readText("README.md");
  for (const command of commands) {
    const row = new RegExp(`^\\| \`spoolrung ${command}\\b.*$`, "m").exec(readme)?.[0] ?? "";
    const help = memoryWorld();
    await run([command, "--help"], help);
    const options = [...help.stdout.matchAll(/(--[a-z-]+)/g)].map((match) => match[1] as string);
    const shared = ["--help", "--color", "--no-color"];
    for (const option of new Set(options)) if (!shared.includes(option)) expect(row, `${command} ${option}`).toContain(option);
  }
});

test.each(pages)("files that %s names are there", (page) => {
  const text = readText(page).replace(/^```[\s\S]*?^```$/gm, "");
  const linked = [...text.matchAll(/\]\(([^)#]+)/g)].map((match) => match[1] as string).filter((path) => !/^[a-z]+:/.test(path));
  const quoted = [...text.matchAll(/`((?:src|tests|samples|symbols|templates|\.ci)\/[\w./-]*|[A-Z]+\.md|LICENSE|[\w.-]+\.json)`/g)].map(
    (match) => match[1] as string,
  );
  expect([...linked, ...quoted].filter((path) => !existsSync(join(root, path)))).toEqual([]);
});

test.each(pages.slice(0, 2))("names that %s imports are exported", (page) => {
  const index = readText("src/index.ts");
  for (const { text } of blocks.filter((block) => block.page === page && block.kind === "ts")) {
    for (const [, names = ""] of text.matchAll(/import \{([^}]*)\} from "spoolrung"/g)) {
      for (const name of names.split(",")) expect(index).toMatch(new RegExp(`\\b${name.trim()}\\b`));
    }
  }
});

test("every sample is named in the README", () => {
  const readme = readText("README.md");
  expect(filesBelow("samples", ".sprung").filter((path) => !readme.includes(path))).toEqual([]);
});

test("the changelog begins with the version of the package", () => {
  const { version } = JSON.parse(readText("package.json")) as { version: string };
  // What is not yet released stands before it.
  expect(/^## (?!Unreleased)(\S+)/m.exec(readText("CHANGELOG.md"))?.[1]).toBe(version);
});
