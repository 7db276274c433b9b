import type { Mark, PartId } from "../drawing/marks.js";

/** The marks of one part, or of one role where there is no part, in the order drawn. */
export interface Bucket {
  part?: PartId;
  role?: string;
  marks: Exclude<Mark, { kind: "link" }>[];
}

/** Gathers the marks of each part in one place, at its first appearance; marks without part are gathered by role. Links are left out. */
export function gather(marks: readonly Mark[]): Bucket[] {
  const buckets = new Map<string, Bucket>();
  for (const mark of marks) {
    if (mark.kind === "link") continue;
    const key = mark.part === undefined ? `role ${mark.role ?? ""}` : `part ${mark.part}`;
    let bucket = buckets.get(key);
    if (!bucket) {
      bucket = mark.part === undefined ? { role: mark.role, marks: [] } : { part: mark.part, marks: [] };
      buckets.set(key, bucket);
    }
    bucket.marks.push(mark);
  }
  return [...buckets.values()];
}

/** Joins strokes that look alike, and fills that look alike, into one path each, so that a sheet stays small; the order of what is left is kept. */
export function mergeAlike(marks: Bucket["marks"]): Bucket["marks"] {
  const merged: Bucket["marks"] = [];
  const byLook = new Map<string, Bucket["marks"][number] & { kind: "stroke" | "fill" }>();
  for (const mark of marks) {
    if (mark.kind === "text") {
      merged.push(mark);
      continue;
    }
    const look = [mark.kind, mark.role, mark.ink, ...(mark.kind === "stroke" ? [mark.width, mark.dash?.join(" ")] : [])].join("|");
    const alike = byLook.get(look);
    if (alike) alike.path.push(...mark.path);
    else {
      const copy = { ...mark, path: [...mark.path] };
      byLook.set(look, copy);
      merged.push(copy);
    }
  }
  return merged;
}
