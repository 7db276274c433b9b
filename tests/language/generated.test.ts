import { execFileSync } from "node:child_process";
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join, resolve } from "node:path";
import { expect, test } from "vitest";

test("the generated parser tables are those of the grammar (npm run generate)", () => {
  const folder = mkdtempSync(join(tmpdir(), "sprung-"));
  try {
    const config = JSON.parse(readFileSync("langium-config.json", "utf8"));
    config.out = join(folder, "generated");
    config.languages[0].grammar = resolve(config.languages[0].grammar);
    writeFileSync(join(folder, "langium-config.json"), JSON.stringify(config));
    execFileSync(
      process.execPath,
      ["node_modules/langium-cli/bin/langium.js", "generate", "--mode=production", "--file", join(folder, "langium-config.json")],
      {
        stdio: "pipe",
      },
    );
    for (const file of ["ast.ts", "grammar.ts", "module.ts"]) {
      expect(readFileSync(join("src/language/generated", file), "utf8"), file).toBe(readFileSync(join(config.out, file), "utf8"));
    }
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
});
