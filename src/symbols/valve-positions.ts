import type { Medium, ValveSpec } from "../machine/model.js";

/*
 * What a box of a directional valve joins, and how it is drawn (ISO 1219-1 grammar). Ports written together are joined, a
 * middle dot stands between groups, a port alone is blocked, `>` is a flow with one direction and carries the arrowhead.
 * Geometry is in the notation of notation.ts about the middle of the box.
 */

export interface ValvePlace {
  /** The port's letter or number in the codes below. */
  code: string;
  x: number;
  y: number;
}

/** Width of a position box, modules; all are 4 high. */
export function boxWidth(ports: ValveSpec["ports"]): number {
  return ports === 5 ? 6 : 4;
}

/** Where the ports stand on a box, modules from its middle, y up. */
export const valvePlaces: Record<ValveSpec["ports"], readonly ValvePlace[]> = {
  2: [
    { code: "P", x: 0, y: -2 },
    { code: "A", x: 0, y: 2 },
  ],
  3: [
    { code: "P", x: -1, y: -2 },
    { code: "T", x: 1, y: -2 },
    { code: "A", x: -1, y: 2 },
  ],
  4: [
    { code: "P", x: -1, y: -2 },
    { code: "T", x: 1, y: -2 },
    { code: "A", x: -1, y: 2 },
    { code: "B", x: 1, y: 2 },
  ],
  5: [
    { code: "5", x: -2, y: -2 },
    { code: "1", x: 0, y: -2 },
    { code: "3", x: 2, y: -2 },
    { code: "4", x: -1, y: 2 },
    { code: "2", x: 1, y: 2 },
  ],
};

/** The name on the port: letters in hydraulics (ISO 9461), numbers in pneumatics (ISO 11727). */
export function portName(code: string, ports: ValveSpec["ports"], medium: Medium): string {
  if (ports === 5 || medium === "hydraulic") return code;
  const numbers: Record<string, string> = ports === 4 ? { P: "1", T: "3", A: "4", B: "2" } : { P: "1", T: "3", A: "2" };
  return numbers[code] ?? code;
}

/** Every box this program can draw, by number of ports and code. The four-port list has all fifteen ways to join four ports. */
export const valvePositions: Record<ValveSpec["ports"], Readonly<Record<string, string>>> = {
  2: {
    P·A: "BLK(0,-2 U) BLK(0,2 D)",
    "P>A": "A(0,-2 0,2)",
    // A seat valve: free from P to A, tight the other way.
    "P>A!": "C(0,0 .7) L(-1,0 0,-1 1,0) L(0,-2 0,-1) L(0,.7 0,2)",
  },
  3: {
    "P>A·T": "A(-1,-2 -1,2) BLK(1,-2 U)",
    "P·A>T": "A(-1,2 1,-2) BLK(-1,-2 U)",
    P·T·A: "BLK(-1,-2 U) BLK(1,-2 U) BLK(-1,2 D)",
    PT·A: "L(-1,-2 -1,-.5 1,-.5 1,-2) BLK(-1,2 D)",
    PTA: "L(-1,-2 -1,2) L(-1,0 1,0 1,-2)",
  },
  4: {
    P·T·A·B: "BLK(-1,-2 U) BLK(1,-2 U) BLK(-1,2 D) BLK(1,2 D)",
    PTAB: "L(-1,-2 -1,2) L(1,-2 1,2) L(-1,0 1,0)",
    PT·A·B: "L(-1,-2 -1,-.5 1,-.5 1,-2) BLK(-1,2 D) BLK(1,2 D)",
    P·TAB: "BLK(-1,-2 U) L(1,2 1,-2) L(-1,2 -1,.5 1,.5)",
    PAB·T: "L(-1,-2 -1,2) L(1,2 1,.5 -1,.5) BLK(1,-2 U)",
    P·T·AB: "L(-1,2 -1,.5 1,.5 1,2) BLK(-1,-2 U) BLK(1,-2 U)",
    PA·T·B: "A(-1,-2 -1,2) BLK(1,-2 U) BLK(1,2 D)",
    PB·T·A: "A(-1,-2 1,2) BLK(1,-2 U) BLK(-1,2 D)",
    P·TA·B: "A(-1,2 1,-2) BLK(-1,-2 U) BLK(1,2 D)",
    P·TB·A: "A(1,2 1,-2) BLK(-1,-2 U) BLK(-1,2 D)",
    "P>A·B>T": "A(-1,-2 -1,2) A(1,2 1,-2)",
    "P>B·A>T": "A(-1,-2 1,2) A(-1,2 1,-2)",
    PT·AB: "L(-1,-2 -1,-.5 1,-.5 1,-2) L(-1,2 -1,.5 1,.5 1,2)",
    PTA·B: "L(-1,-2 -1,2) L(-1,-.5 1,-.5 1,-2) BLK(1,2 D)",
    PTB·A: "L(1,-2 1,2) L(-1,-2 -1,-.5 1,-.5) BLK(-1,2 D)",
  },
  5: {
    "1>4·2>3·5": "A(0,-2 -1,2) A(1,2 2,-2) BLK(-2,-2 U)",
    "1>2·4>5·3": "A(0,-2 1,2) A(-1,2 -2,-2) BLK(2,-2 U)",
    "1·2·3·4·5": "BLK(-2,-2 U) BLK(0,-2 U) BLK(2,-2 U) BLK(-1,2 D) BLK(1,2 D)",
    "1·4>5·2>3": "BLK(0,-2 U) A(-1,2 -2,-2) A(1,2 2,-2)",
    "124·3·5": "A(0,-2 -1,2) A(0,-2 1,2) BLK(-2,-2 U) BLK(2,-2 U)",
  },
};
