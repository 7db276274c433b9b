import type { ValveSpec } from "./model.js";

/*
 * What each box of a directional valve joins. Ports written together are joined, `·` stands between groups, `>` shows a
 * flow with one direction, a port alone is blocked. Two-, three- and four-port valves use the letters P T A B whatever
 * the medium; five-port valves the numbers 1 to 5. The working boxes are the trade's usual ones: the left box, driven
 * from the left end, sends supply to A (4); the right one to B (2).
 */

export type Normally = "open" | "closed";

export const centreWords = ["closed", "open", "tandem", "float", "regenerative"] as const;
export const fivePortCentreWords = ["closed", "open", "exhaust", "pressure"] as const;
export type Centre = (typeof centreWords)[number] | (typeof fivePortCentreWords)[number];

const fourPortCentres: Partial<Record<Centre, string>> = {
  closed: "P·T·A·B",
  open: "PTAB",
  tandem: "PT·A·B",
  float: "P·TAB",
  regenerative: "PAB·T",
};

const fivePortCentres: Partial<Record<Centre, string>> = {
  closed: "1·2·3·4·5",
  open: "1·4>5·2>3",
  exhaust: "1·4>5·2>3",
  pressure: "124·3·5",
};

const passing = { 2: "P>A", 3: "P>A·T" } as const;
const shut = { 2: "P·A", 3: "P·A>T" } as const;

/** The boxes of a valve, left to right. `springAt` is the end with the only spring, beside which the normal box stands. */
export function boxesOf(
  ports: ValveSpec["ports"],
  positions: ValveSpec["positions"],
  given: { centre?: Centre; normally?: Normally; springAt?: "left" | "right" },
): string[] {
  if (ports === 2 || ports === 3) {
    const [normal, operated] = given.normally === "open" ? [passing[ports], shut[ports]] : [shut[ports], passing[ports]];
    return given.springAt === "left" ? [normal, operated] : [operated, normal];
  }
  const [left, right] = ports === 4 ? ["P>A·B>T", "P>B·A>T"] : ["1>4·2>3·5", "1>2·4>5·3"];
  if (positions === 2) return [left, right];
  const centres = ports === 4 ? fourPortCentres : fivePortCentres;
  return [left, centres[given.centre ?? "closed"] ?? (centres.closed as string), right];
}

/** The working ports a box feeds from the supply: `P>A·B>T` feeds A; `124·3·5` feeds 2 and 4. */
export function fedBy(box: string): Set<string> {
  const supply = /[0-9]/.test(box) ? "1" : "P";
  const fed = new Set<string>();
  for (const group of box.split("·")) {
    const [first = "", second] = group.split(">");
    if (!first.includes(supply)) continue;
    for (const port of second ?? first) if (port !== supply) fed.add(port);
  }
  return fed;
}

/** The letter or number a box code uses for a port of the valve: pneumatic 2/2, 3/2 and 4-port valves are written in letters. */
export function portInBox(port: string, ports: ValveSpec["ports"]): string {
  if (ports === 5 || !/^[0-9]$/.test(port)) return port;
  const letters: Record<string, string> = ports === 4 ? { 1: "P", 3: "T", 4: "A", 2: "B" } : { 1: "P", 2: "A", 3: "T" };
  return letters[port] ?? port;
}
