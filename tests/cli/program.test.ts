import { spawn, spawnSync } from "node:child_process";
import { chmodSync, existsSync, mkdirSync, mkdtempSync, readdirSync, readFileSync, rmSync, symlinkSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, describe, expect, test } from "vitest";
import { writeWhole } from "../../src/cli/write-whole.js";
import { root } from "../support/sources.js";

const program = join(root, "dist/cli/main.js");
const sample = join(root, "samples/tray-stamper.sprung");
const folder = mkdtempSync(join(tmpdir(), "spoolrung-"));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

const spoolrung = (args: string[], input = "", env: Record<string, string> = {}) =>
  spawnSync(process.execPath, [program, ...args], { cwd: folder, input, encoding: "utf8", env: { ...process.env, NO_COLOR: "", ...env } });

describe("the built program", () => {
  test("is there: run `npm run build` first", () => expect(existsSync(program)).toBe(true));

  test("draws a sample to disk", () => {
    const { status, stdout, stderr } = spoolrung(["draw", sample]);
    expect(stderr).toBe("");
    expect(status).toBe(0);
    const written = readdirSync(join(folder, "drawings")).sort();
    expect(stdout.trim().split("\n").sort()).toEqual(written.map((name) => `drawings/${name}`));
    expect(readFileSync(join(folder, "drawings/TS-2040.pdf")).subarray(0, 5).toString()).toBe("%PDF-");
  });

  test("takes standard input and gives its exit codes", () => {
    expect(spoolrung(["check", "-"], readFileSync(sample, "utf8")).status).toBe(0);
    expect(spoolrung(["check", "-"], "relay").status).toBe(1);
    expect(spoolrung(["check", "nowhere.sprung"]).status).toBe(2);
    expect(spoolrung(["draw", "--sgv", sample]).status).toBe(2);
  });

  test("knows the package when called through a link, as npm does", () => {
    const link = join(folder, "spoolrung");
    symlinkSync(program, link);
    expect(spawnSync(process.execPath, [link, "--version"], { encoding: "utf8" }).stdout).toMatch(/^\d+\.\d+\.\d+\n$/);
  });

  test("refuses to overwrite its input through a link", () => {
    mkdirSync(join(folder, "real"));
    symlinkSync(join(folder, "real"), join(folder, "other-name"));
    writeFileSync(join(folder, "real/TS-2040.pdf"), readFileSync(sample));
    const { status, stderr } = spoolrung(["draw", "other-name/TS-2040.pdf", "--pdf", "--out", "real"]);
    expect(stderr).toMatch(/is not overwritten/);
    expect(status).toBe(2);
    expect(readdirSync(join(folder, "real"))).toEqual(["TS-2040.pdf"]);
  });

  test("leaves nothing when interrupted", async () => {
    const out = join(folder, "interrupted");
    const child = spawn(process.execPath, [program, "draw", sample, "--out", out], { stdio: "ignore" });
    const ended = new Promise<void>((resolve) => child.once("exit", () => resolve()));
    setTimeout(() => child.kill("SIGINT"), 150);
    await ended;
    // Either it was through already, and all is there, or nothing is.
    const names = existsSync(out) ? readdirSync(out) : [];
    expect(names.filter((name) => name.endsWith(".part"))).toEqual([]);
    expect(names.length === 0 || names.includes("TS-2040.pdf")).toBe(true);
  });

  test("ends quietly when nobody reads on", () => {
    const result = spawnSync("sh", ["-c", `"${process.execPath}" "${program}" xref "${sample}" --json 2>err | head -c 10; cat err`], {
      cwd: folder,
      encoding: "utf8",
    });
    expect(result.stdout).toHaveLength(10);
    const closed = spawnSync(
      "sh",
      ["-c", `{ "${process.execPath}" "${program}" xref "${sample}" --json; echo $? >code; } 2>err | true; cat err`],
      { cwd: folder, encoding: "utf8" },
    );
    expect(closed.stdout).toBe("");
  });
});

describe("writing whole", () => {
  const files = [
    { name: "a.svg", content: "a" },
    { name: "b.svg", content: "b" },
  ];

  test("makes folders and replaces what was there", () => {
    const out = join(folder, "deep/er");
    expect(writeWhole(out, files)).toBeUndefined();
    expect(writeWhole(out, [{ name: "a.svg", content: "new" }])).toBeUndefined();
    expect(readdirSync(out).sort()).toEqual(["a.svg", "b.svg"]);
    expect(readFileSync(join(out, "a.svg"), "utf8")).toBe("new");
  });

  test("changes nothing when one file cannot be placed", () => {
    const out = join(folder, "blocked");
    mkdirSync(join(out, "b.svg"), { recursive: true });
    expect(writeWhole(out, files)).toMatch(/b\.svg: a folder stands in its place/);
    expect(readdirSync(out)).toEqual(["b.svg"]);
    const tooLong = `${"x".repeat(300)}.svg`;
    expect(writeWhole(join(folder, "fresh/one"), [...files, { name: tooLong, content: "" }])).toMatch(/too long/);
    expect(existsSync(join(folder, "fresh"))).toBe(false);
  });

  test("says what is in the way of the folder", () => {
    writeFileSync(join(folder, "file"), "");
    expect(writeWhole(join(folder, "file"), files)).toMatch(/a file stands where a folder is needed/);
    expect(writeWhole(join(folder, "file/below"), files)).toMatch(/a file stands where a folder is needed/);
    expect(readFileSync(join(folder, "file"), "utf8")).toBe("");
  });

  test.skipIf(process.getuid?.() === 0)("says that it may not write", () => {
    const out = join(folder, "locked");
    mkdirSync(out);
    chmodSync(out, 0o500);
    expect(writeWhole(out, files)).toMatch(/no permission/);
  });

  test.skipIf(!existsSync("/proc/version"))("says so where nothing can be written at all", () => {
    expect(writeWhole("/proc/spoolrung", files)).toMatch(/^Cannot write to \/proc\/spoolrung: /);
  });

  test("leaves nothing when a file cannot be written to its end", () => {
    // A limit on file sizes stands in for a full disk: the write begins and then fails.
    const out = join(folder, "full");
    const limited = `ulimit -f 8; exec "${process.execPath}" "${program}" draw "${sample}" --out "${out}"`;
    const { status, stderr } = spawnSync("bash", ["-c", limited], { cwd: folder, encoding: "utf8" });
    expect(stderr).toMatch(/^Cannot write to .*full: .*\nNothing was written\.\n$/);
    expect(status).toBe(2);
    expect(existsSync(out)).toBe(false);
  });
});
