/**
 * The candidate a misspelt name most likely meant, or undefined when none is close: at most one slip in three letters
 * (a letter wrong, missing, extra, or two swapped). A difference of case alone counts as no slip. First candidate wins a tie.
 */
export function nearest(name: string, candidates: Iterable<string>): string | undefined {
  const wanted = name.toLowerCase();
  if (wanted.length > 100) return undefined;
  let best: string | undefined;
  let fewest = Math.max(1, Math.floor(name.length / 3)) + 1;
  for (const candidate of candidates) {
    if (candidate === name || Math.abs(candidate.length - name.length) >= fewest) continue;
    const slips = countSlips(wanted, candidate.toLowerCase());
    // A one- or two-letter name shares too little with another to be a slip of it, save for its case.
    if (name.length < 3 && slips > 0) continue;
    if (slips < fewest) {
      fewest = slips;
      best = candidate;
    }
  }
  return best;
}

/** Edits between two words, a swap of neighbours counting as one. */
function countSlips(a: string, b: string): number {
  let before: number[] = [];
  let row = Array.from({ length: b.length + 1 }, (_, j) => j);
  for (let i = 1; i <= a.length; i++) {
    const next = [i];
    for (let j = 1; j <= b.length; j++) {
      const same = a[i - 1] === b[j - 1];
      let slips = Math.min((row[j] as number) + 1, (next[j - 1] as number) + 1, (row[j - 1] as number) + (same ? 0 : 1));
      if (i > 1 && j > 1 && a[i - 1] === b[j - 2] && a[i - 2] === b[j - 1]) slips = Math.min(slips, (before[j - 2] as number) + 1);
      next.push(slips);
    }
    before = row;
    row = next;
  }
  return row[b.length] as number;
}
