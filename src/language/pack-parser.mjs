// Packs dist/language/sprung-parser.js with all it imports into one file: reading the parser library's many small files takes
// several times as long as building and running the parser. The licences of what is packed are written beside it.
import { existsSync, readdirSync, readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { build } from "vite";

const folder = process.argv[2] ?? "dist/language";
const entry = "sprung-parser.js";
const { output } = await build({
  configFile: false,
  logLevel: "warn",
  publicDir: false,
  ssr: { noExternal: true, target: "node" },
  build: {
    ssr: join(folder, entry),
    write: false,
    minify: true,
    target: "es2022",
    rolldownOptions: { output: { format: "es", entryFileNames: entry, codeSplitting: false } },
  },
});

const packages = new Set();
for (const chunk of output) {
  for (const id of Object.keys(chunk.modules ?? {})) {
    const match = /^(.*\/node_modules\/((?:@[^/]+\/)?[^/]+))\//.exec(id.replaceAll("\\", "/"));
    if (match) packages.add(match[1]);
  }
}
const licences = [...packages].sort().map((root) => {
  const { name, version, license } = JSON.parse(readFileSync(join(root, "package.json"), "utf8"));
  const file = readdirSync(root).find((it) => /^licen[cs]e/i.test(it));
  const words = file && existsSync(join(root, file)) ? readFileSync(join(root, file), "utf8") : `Licence: ${license}`;
  return `${name} ${version} (${license})\n\n${words.trim()}\n`;
});
writeFileSync(join(folder, "sprung-parser.licences.txt"), licences.join(`\n${"-".repeat(80)}\n\n`));
writeFileSync(join(folder, entry), `// Holds packages under their own licences: see sprung-parser.licences.txt\n${output[0].code}`);
