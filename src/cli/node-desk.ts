import { readdirSync, realpathSync } from "node:fs";
import { basename, dirname, join, resolve } from "node:path";
import { buffer } from "node:stream/consumers";
import { nodeWorld } from "../node-world.js";
import type { Desk } from "./desk.js";
import { writeWhole } from "./write-whole.js";

/** The desk of the real program: disk, terminal, environment. */
export const nodeDesk: Desk = {
  ...nodeWorld,
  readInput: () => buffer(process.stdin),
  out: (text) => void process.stdout.write(text),
  err: (text) => void process.stderr.write(text),
  terminal: { out: Boolean(process.stdout.isTTY), err: Boolean(process.stderr.isTTY) },
  columns: process.stdout.columns,
  environment: process.env,
  now: () => performance.now(),
  identify: (path) => {
    // The part that is there is followed through its links; the rest is taken as written.
    const whole = resolve(path);
    try {
      return realpathSync(whole);
    } catch {
      const above = dirname(whole);
      return above === whole ? whole : join(nodeDesk.identify(above), basename(whole));
    }
  },
  list: (folder) => {
    try {
      return readdirSync(folder).sort();
    } catch {
      return [];
    }
  },
  writeWhole,
};
