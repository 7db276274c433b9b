import type { Point } from "../drawing/geometry.js";
import type { Segment } from "../drawing/marks.js";

/**
 * The path of an SVG `d` attribute, absolute, in the file's own units. Takes M L H V C A Z and their relative forms, arcs of
 * circles only. Throws an Error that says what else it met.
 */
export function parsePathData(data: string): Segment[] {
  const tokens = data.match(/[A-Za-z]|[-+]?(?:\d+\.?\d*|\.\d+)(?:[eE][-+]?\d+)?|[^\s,]/g) ?? [];
  const path: Segment[] = [];
  let index = 0;
  let here: Point = { x: 0, y: 0 };
  let start = here;
  let command = "";

  const number = (): number => {
    const token = tokens[index++];
    const value = Number(token);
    if (token === undefined || !Number.isFinite(value)) throw new Error(`path: "${token ?? "the end"}" stands where a number should`);
    return value;
  };
  const flag = (): boolean => {
    // Flags may be written together with what follows them.
    const token = tokens[index] ?? "";
    if (token !== "0" && token !== "1") {
      if (!/^[01]/.test(token)) throw new Error(`path: "${token || "the end"}" stands where a flag should`);
      tokens[index] = token.slice(1);
      return token.startsWith("1");
    }
    index++;
    return token === "1";
  };

  while (index < tokens.length) {
    const token = tokens[index] as string;
    if (/^[A-Za-z]$/.test(token)) {
      command = token;
      index++;
    } else if (command === "" || command.toUpperCase() === "Z") {
      throw new Error(`path: "${token}" stands where a command should`);
    }
    if (path.length === 0 && command.toUpperCase() !== "M") throw new Error("path: it must begin with M");
    const from = command === command.toLowerCase() ? here : { x: 0, y: 0 };
    const point = (): Point => ({ x: from.x + number(), y: from.y + number() });
    switch (command.toUpperCase()) {
      case "M":
        here = start = point();
        path.push({ op: "M", ...here });
        // Further pairs are lines.
        command = command === "m" ? "l" : "L";
        break;
      case "L":
        here = point();
        path.push({ op: "L", ...here });
        break;
      case "H":
        here = { x: from.x + number(), y: here.y };
        path.push({ op: "L", ...here });
        break;
      case "V":
        here = { x: here.x, y: from.y + number() };
        path.push({ op: "L", ...here });
        break;
      case "C": {
        const one = point();
        const two = point();
        here = point();
        path.push({ op: "C", x1: one.x, y1: one.y, x2: two.x, y2: two.y, ...here });
        break;
      }
      case "A": {
        const rx = number();
        const ry = number();
        number();
        if (Math.abs(rx - ry) > 1e-6) throw new Error("path: an arc must be part of a circle");
        const large = flag();
        const sweep = flag();
        here = point();
        path.push({ op: "A", radius: rx, large, sweep, ...here });
        break;
      }
      case "Z":
        path.push({ op: "Z" });
        here = start;
        break;
      default:
        throw new Error(`path: the command "${command}" is not one a symbol may use (M L H V C A Z)`);
    }
  }
  return path;
}
