#!/usr/bin/env node
import { nodeDesk } from "./node-desk.js";
import { run } from "./run.js";

// Whoever reads our output may stop early (`spoolrung xref … | head`): that is no fault.
for (const stream of [process.stdout, process.stderr]) {
  stream.on("error", (error: NodeJS.ErrnoException) => {
    if (error.code === "EPIPE") process.exit();
    throw error;
  });
}

try {
  process.exitCode = await run(process.argv.slice(2), nodeDesk);
} catch (error) {
  process.stderr.write(`spoolrung: a fault in the program itself, not in your drawing:\n${(error as Error)?.stack ?? error}\n`);
  process.exitCode = 70;
}
