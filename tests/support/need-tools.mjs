// Makes sure the programs that tests hold our output against are here: a browser, a PDF reader, a PDF checker.
// As root on a Debian-like system it installs what is missing; anywhere else it says what to install. `--quiet` only asks.
import { spawnSync } from "node:child_process";
import { existsSync } from "node:fs";
import { delimiter, join } from "node:path";

const tools = [
  { names: ["chromium", "chromium-browser", "google-chrome"], pack: "chromium", use: "draws the SVG sheets" },
  { names: ["pdftoppm"], pack: "poppler-utils", use: "draws the PDF pages" },
  { names: ["pdftotext"], pack: "poppler-utils", use: "searches the PDF for text" },
  { names: ["qpdf"], pack: "qpdf", use: "checks the PDF" },
];

const isHere = (name) => (process.env.PATH ?? "").split(delimiter).some((folder) => folder !== "" && existsSync(join(folder, name)));
const findMissing = () => tools.filter((tool) => !tool.names.some(isHere));

let missing = findMissing();
if (missing.length > 0 && process.argv.includes("--quiet")) process.exit(1);

if (missing.length > 0 && process.getuid?.() === 0 && isHere("apt-get")) {
  const packs = [...new Set(missing.map((tool) => tool.pack))];
  console.log(`Installing what the tests need: ${packs.join(", ")}.`);
  const env = { ...process.env, DEBIAN_FRONTEND: "noninteractive" };
  spawnSync("apt-get", ["update", "-qq"], { stdio: "inherit", env });
  spawnSync("apt-get", ["install", "-y", "-qq", "--no-install-recommends", ...packs], { stdio: "inherit", env });
  missing = findMissing();
}

if (missing.length > 0) {
  console.error("The tests need these programs:");
  for (const tool of missing) console.error(`  ${tool.names[0]} (${tool.use}), in the Debian package ${tool.pack}`);
  console.error(`On Debian or Ubuntu: sudo apt-get install ${[...new Set(missing.map((tool) => tool.pack))].join(" ")}`);
  process.exit(1);
}
