// How fast drawing is, said so that it means the same on every machine: as ratios within one run, medians of interleaved
// repeats. `--assert` fails when drawing from the command line takes more than 2.5 times a bare import of the libraries.
// The same for a ladder of 2000 mixed rungs that takes more than 2.3 times as long as one of 1000.
// `--long` adds ladders of 1000 and 2000 rungs. Needs the built program (`npm run build`).
import { spawnSync } from "node:child_process";
import { mkdtempSync, readFileSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";

const root = fileURLToPath(new URL("../../", import.meta.url));
const program = join(root, "dist/cli/main.js");
const sample = join(root, "samples/tray-stamper.sprung");
const folder = mkdtempSync(join(tmpdir(), "spoolrung-bench-"));
const most = 2.5;

const median = (values) => [...values].sort((a, b) => a - b)[Math.floor(values.length / 2)];
const ms = (value) => `${value.toFixed(value < 10 ? 1 : 0)} ms`;
const line = (name, ...cells) => console.log(name.padEnd(44) + cells.map((cell) => cell.padStart(12)).join(""));

// ---------------------------------------------------------------- whole runs of the program

const bare = join(root, "tests/bench/bare-import.mjs");
const runs = {
  "Node with nothing": ["-e", "0"],
  "Node importing elkjs, pdfkit, svg.js": [bare],
  "spoolrung --version": [program, "--version"],
  "spoolrung check": [program, "check", sample],
  "spoolrung draw, PDF": [program, "draw", sample, "--pdf", "--out", folder],
  "spoolrung draw, SVG and PDF": [program, "draw", sample, "--out", folder],
};
const times = Object.fromEntries(Object.keys(runs).map((name) => [name, []]));
const repeats = 15;
for (let round = -1; round < repeats; round++) {
  for (const [name, args] of Object.entries(runs)) {
    const begun = performance.now();
    const { status, stderr } = spawnSync(process.execPath, args, { cwd: root, encoding: "utf8" });
    if (status !== 0) throw new Error(`${name} failed: ${stderr}`);
    // The first round only warms the disk.
    if (round >= 0) times[name].push(performance.now() - begun);
  }
}
const base = median(times["Node importing elkjs, pdfkit, svg.js"]);
line("Whole runs on tray-stamper", "median", "ratio");
for (const [name, values] of Object.entries(times)) line(`  ${name}`, ms(median(values)), (median(values) / base).toFixed(2));
// Each round is one fair pair: a slow moment of the machine falls on both.
const ratio = median(
  times["spoolrung draw, SVG and PDF"].map((value, round) => value / times["Node importing elkjs, pdfkit, svg.js"][round]),
);
console.log(`  draw against bare import, median of pairs: ${ratio.toFixed(2)} (at most ${most})`);

// ---------------------------------------------------------------- stages, warm

const { compile, writePdf, writeSvg } = await import(join(root, "dist/index.js"));
const { nodeWorld } = await import(join(root, "dist/node-world.js"));

/** Median times of the phases of one drawing over a few runs in this process. */
async function stages(text, count) {
  const world = { ...nodeWorld, readText: async () => ({ text }) };
  const rounds = [];
  for (let round = 0; round < count; round++) {
    const marks = [];
    const mark = (phase) => marks.push([phase, performance.now()]);
    const { set, diagnostics } = await compile("bench.sprung", world, mark);
    const faults = diagnostics.filter(({ severity }) => severity === "error");
    if (!set) throw new Error(faults.map(({ message, at }) => `${at.line}: ${message}`).join("\n"));
    mark("SVG");
    await writeSvg(set, world);
    mark("PDF");
    await writePdf(set, world);
    mark("end");
    rounds.push(Object.fromEntries(marks.slice(0, -1).map(([phase, at], index) => [phase, marks[index + 1][1] - at])));
  }
  return Object.fromEntries(Object.keys(rounds[0]).map((phase) => [phase, median(rounds.map((round) => round[phase]))]));
}

const sum = (record) => Object.values(record).reduce((a, b) => a + b, 0);
const show = (name, found) => line(`  ${name}`, ...phases.map((phase) => ms(found[phase])), ms(sum(found)));
const phases = ["reading", "checking", "placing", "drawing", "SVG", "PDF"];

console.log("");
line("Stages, warm", ...phases, "all");
show("tray-stamper", await stages(readFileSync(sample, "utf8"), 15));
show("billet-shear", await stages(readFileSync(join(root, "samples/billet-shear.sprung"), "utf8"), 15));

// ---------------------------------------------------------------- growth

/** A ladder of stop, start and holding circuits, each started by the one before. */
function rungs(count) {
  const names = Array.from({ length: count }, (_, i) => i + 1);
  return `drawing "Rungs" { number R-${count} }
supply CTRL 24 V DC { rails L+ M }
push-button PB0 "Stop"
${names.map((i) => `push-button PB${i} "Start ${i}"\nrelay CR${i} "Step ${i}"`).join("\n")}
ladder "Control" supply CTRL {
${names.map((i) => `  rung "Step ${i}": /PB0 (PB${i} ${i > 1 ? `CR${i - 1}` : ""} | CR${i}) -> CR${i}`).join("\n")}
}
`;
}

/** A ladder of everything: holding circuits, brackets in brackets, points, bridges, terminals, diodes, side-by-side loads. */
function mixed(count, convention) {
  const blocks = Array.from({ length: Math.ceil(count / 8) }, (_, i) => i + 1);
  return `drawing "Mixed" {
  number M-${count}
  convention ${convention}
}
supply CTRL 24 V DC { rails L+ M }
push-button PB0 "Stop"
terminal-strip X1
${blocks
  .map(
    (i) => `push-button PB${i} "Start ${i}"
relay CR${i} "Step ${i}"
contactor KM${i} "Motor ${i}"
overload OL${i}
timer TR${i} "Dwell ${i}" on-delay 2 s
limit-switch LS${i} "Part ${i} in place"
door-switch DS${i} "Gate ${i}"
pressure-switch PS${i} rising 5 bar
pilot-light LT${i} "Running ${i}" green
pilot-light LF${i} "Fault ${i}" red
pilot-light LG${i} "Gate ${i}" white
diode D${i}`,
  )
  .join("\n")}
ladder "Control" supply CTRL {
${blocks
  .map(
    (i) => `  rung "Step ${i}": /PB0 X1:${2 * i - 1} PB${i} X1:${2 * i} @a${i} LS${i} @b${i} -> (CR${i} | D${i}:K-A)
  rung: @a${i} CR${i} @b${i}
  rung "Bridge ${i}": @b${i} DS${i} TR${i} @a${i}
  rung "Motor ${i}": CR${i} (LS${i} | DS${i} (PS${i} | /TR${i})) @m${i} -> KM${i} /OL${i}
  rung "Dwell ${i}": @m${i} PS${i} -> (TR${i} | LT${i})
  rung "Fault ${i}": OL${i} -> LF${i}
  rung "Gate ${i}": (CR${i} @c${i} /DS${i} | KM${i} @d${i} LS${i}) -> LG${i}
  rung "Over ${i}": @d${i} /PS${i} @c${i}`,
  )
  .join("\n")}
}
`;
}

/** A circuit of so many cylinders, each with its valve and a flow control. */
function actuators(count) {
  const names = Array.from({ length: count }, (_, i) => i + 1);
  return `drawing "Actuators" { number F-${count} }
supply CTRL 24 V DC { rails L+ M }
push-button PB1 "Go"
ladder "Control" supply CTRL {
${names.map((i) => `  rung "Cylinder ${i}": PB1 -> SOL${i}`).join("\n")}
}
fluid "Air" pneumatic {
  air-supply AIR1 6 bar
  service-unit FRL1 "Air preparation" 5.5 bar
${names.map((i) => `  cylinder C${i} "Cylinder ${i}" double-acting bore 40 mm rod 16 mm stroke 100 mm\n  valve V${i} "Cylinder ${i}" 5/2 left solenoid SOL${i} right spring\n  one-way-flow-control FC${i} free-to C${i}`).join("\n")}
  line AIR1 -- FRL1 -- @P
${names.map((i) => `  line @P -- V${i}.1\n  line V${i}.4 -- FC${i} -- C${i}.cap\n  line V${i}.2 -- C${i}.rod\n  exhaust V${i}.3, V${i}.5 -- silencer`).join("\n")}
}
`;
}

console.log("");
line("Growth, warm", ...phases, "all");
const growth = [];
for (const count of process.argv.includes("--long") ? [200, 400, 1000, 2000] : [200, 400]) {
  const found = await stages(rungs(count), count > 500 ? 3 : 5);
  growth.push([count, sum(found)]);
  show(`${count} rungs`, found);
}
/** How much longer twice the rungs may take. */
const mostGrowth = 2.3;
const doubling = [];
for (const convention of ["north-american", "international"]) {
  const times = new Map([1000, 2000].map((count) => [count, []]));
  // Each round is one fair pair again; the better of two counts.
  for (let round = 0; round < 2; round++) {
    for (const [count, found] of times) found.push(await stages(mixed(count, convention), 1));
  }
  for (const [count, found] of times) {
    const middle = Object.fromEntries(phases.map((phase) => [phase, median(found.map((one) => one[phase]))]));
    show(`${count} mixed rungs, ${convention}`, middle);
  }
  const [few, many] = [...times.values()].map((found) => found.map(sum));
  doubling.push([convention, Math.min(...many.map((time, round) => time / few[round]))]);
}
for (const count of [1, 5, 20]) show(`${count} actuators`, await stages(actuators(count), count > 10 ? 5 : 11));
for (let i = 1; i < growth.length; i++) {
  const [[few, quick], [many, slow]] = [growth[i - 1], growth[i]];
  console.log(`  ${many} rungs take ${(slow / quick).toFixed(2)} times as long as ${few} (in step: ${(many / few).toFixed(2)})`);
}
for (const [convention, growth] of doubling)
  console.log(`  2000 mixed rungs take ${growth.toFixed(2)} times as long as 1000, ${convention} (at most ${mostGrowth})`);

rmSync(folder, { recursive: true, force: true });
if (process.argv.includes("--assert") && ratio > most) {
  console.error(`Drawing takes ${ratio.toFixed(2)} times a bare import; ${most} is the most.`);
  process.exitCode = 1;
}
const steep = doubling.filter(([, growth]) => growth > mostGrowth);
if (process.argv.includes("--assert") && steep.length > 0) {
  console.error(`Twice the rungs take more than ${mostGrowth} times as long: ${steep.map(([convention]) => convention).join(", ")}.`);
  process.exitCode = 1;
}
