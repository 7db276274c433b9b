import type { Desk } from "./desk.js";

/** Work shorter than this is not worth a word, ms. */
const patience = 400;

/** One line on the terminal that says what is going on, once it takes long; nothing where messages go to a file. */
export function openProgress(desk: Pick<Desk, "err" | "terminal" | "now">, quiet: boolean): { tell(text: string): void; clear(): void } {
  if (quiet || !desk.terminal.err) return { tell() {}, clear() {} };
  const begun = desk.now();
  let shown = false;
  return {
    tell(text) {
      if (!shown && desk.now() - begun < patience) return;
      shown = true;
      desk.err(`\r\x1b[K${text} …`);
    },
    clear() {
      if (shown) desk.err("\r\x1b[K");
      shown = false;
    },
  };
}
