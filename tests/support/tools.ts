import { execFileSync } from "node:child_process";
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { PNG } from "pngjs";

/** The names under which systems carry the browser. */
const browsers = ["chromium", "chromium-browser", "google-chrome"];

/** Whether the browser is on this machine. */
export function haveBrowser(): boolean {
  return browsers.some((name) => isHere(name)) || have("chromium");
}

function isHere(program: string): boolean {
  try {
    execFileSync("/bin/sh", ["-c", 'command -v "$1"', "sh", program], { stdio: "pipe" });
    return true;
  } catch {
    return false;
  }
}

/** Whether a general-purpose program is on this machine. Tests that need one that is not are shown as skipped, by name. */
export function have(program: string): boolean {
  const here = isHere(program);
  if (!here) console.warn(`${program} is not installed: the checks against it are skipped.`);
  return here;
}

/** Runs something in a folder of its own that is gone afterwards. */
export function inFolder<Result>(use: (folder: string) => Result): Result {
  const folder = mkdtempSync(join(tmpdir(), "sheets-"));
  try {
    return use(folder);
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

/** What `qpdf --check` says; throws if it finds a fault. */
export function qpdfCheck(pdf: Uint8Array): string {
  return inFolder((folder) => {
    const file = join(folder, "it.pdf");
    writeFileSync(file, pdf);
    return execFileSync("qpdf", ["--check", file], { encoding: "utf8", stdio: "pipe" });
  });
}

/** All text of a PDF in reading order. */
export function pdfToText(pdf: Uint8Array): string {
  return inFolder((folder) => {
    const file = join(folder, "it.pdf");
    writeFileSync(file, pdf);
    return execFileSync("pdftotext", [file, "-"], { encoding: "utf8", stdio: "pipe" });
  });
}

/** One page of a PDF as a picture `width` pixels wide. */
export function pdfToPicture(pdf: Uint8Array, page: number, width: number, height: number): PNG {
  return inFolder((folder) => {
    const file = join(folder, "it.pdf");
    writeFileSync(file, pdf);
    const size = ["-scale-to-x", `${width}`, "-scale-to-y", `${height}`];
    execFileSync("pdftoppm", ["-png", "-singlefile", "-f", `${page}`, "-l", `${page}`, ...size, file, join(folder, "page")], {
      stdio: "pipe",
    });
    return PNG.sync.read(readFileSync(join(folder, "page.png")));
  });
}

/** An SVG file as Chromium shows it, `width` pixels wide. */
export function chromiumPicture(svg: string, width: number, height: number): PNG {
  return inFolder((folder) => {
    writeFileSync(join(folder, "it.svg"), svg);
    const page = `<!doctype html><style>*{margin:0}img{display:block;width:${width}px;height:${height}px}</style><img src="it.svg">`;
    writeFileSync(join(folder, "it.html"), page);
    const quiet = ["--disable-quic", "--no-first-run", "--disable-background-networking", "--disable-component-update", "--disable-sync"];
    execFileSync(
      browsers.find(isHere) ?? "chromium",
      [
        "--headless",
        "--no-sandbox",
        "--disable-gpu",
        ...quiet,
        "--hide-scrollbars",
        `--user-data-dir=${join(folder, "profile")}`,
        `--window-size=${width},${height}`,
        `--screenshot=${join(folder, "it.png")}`,
        `file://${join(folder, "it.html")}`,
      ],
      { stdio: "pipe", timeout: 60_000 },
    );
    return PNG.sync.read(readFileSync(join(folder, "it.png")));
  });
}
