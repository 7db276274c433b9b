import type { Dimension, Quantity } from "./quantity.js";

/** One way to write a unit: `value in the dimension's own unit = written × factor + offset`. */
interface Unit {
  dimension: Dimension;
  /** The spelling used in messages and in `Quantity.unit`. */
  unit: string;
  factor: number;
  offset: number;
}

/** Spellings after the first are other ways to write the same unit. */
type UnitRow = [spellings: string, factor: number, offset?: number];

// Factors: 1 in = 25.4 mm, 1 ft = 304.8 mm, 1 lb = 0.45359237 kg (international yard and pound, exact); 1 US gal = 231 in³ (exact);
// 1 psi = 1 lbf/in² = 0.0689475729… bar and 1 lbf = 4.4482216152605 N, from standard gravity 9.80665 m/s²; 1 hp = 550 ft·lbf/s; 1 inHg = 3386.389 Pa.
const inch3 = 16.387064; // cm³
const gallon = 3.785411784; // l
const cubicFoot = 28.316846592; // l
const unitRows: Record<Dimension, UnitRow[]> = {
  length: [
    ["mm", 1],
    ["cm", 10],
    ["m", 1000],
    ["in inch", 25.4],
    ["ft", 304.8],
  ],
  pressure: [
    ["bar", 1],
    ["mbar", 0.001],
    ["kPa", 0.01],
    ["MPa", 10],
    ["Pa", 1e-5],
    ["hPa", 0.001],
    ["psi PSI psig", 0.0689475729316836],
    ["inHg", 0.03386389],
  ],
  time: [
    ["s sec", 1],
    ["ms", 0.001],
    ["min", 60],
    ["h", 3600],
  ],
  voltage: [
    ["V", 1],
    ["mV", 0.001],
    ["kV", 1000],
  ],
  current: [
    ["A", 1],
    ["mA", 0.001],
    ["kA", 1000],
  ],
  power: [
    ["W", 1],
    ["kW", 1000],
    ["mW", 0.001],
    ["MW", 1e6],
    ["hp HP", 745.6998715822702],
  ],
  "apparent-power": [
    ["VA", 1],
    ["kVA", 1000],
  ],
  frequency: [
    ["Hz", 1],
    ["kHz", 1000],
  ],
  speed: [["rpm 1/min r/min rev/min", 1]],
  displacement: [
    ["cm3/rev cm³/rev cm3/r cc/rev ml/rev", 1],
    ["in3/rev in³/rev cu-in/rev", inch3],
    ["l/rev L/rev dm3/rev dm³/rev", 1000],
  ],
  flow: [
    ["l/min L/min lpm dm3/min dm³/min Nl/min", 1],
    ["gpm gal/min", gallon],
    ["m3/min m³/min", 1000],
    ["m3/h m³/h", 1000 / 60],
    ["l/s L/s", 60],
    ["cm3/min cm³/min ml/min", 0.001],
    ["cfm scfm ft3/min ft³/min", cubicFoot],
    ["in3/min in³/min", inch3 / 1000],
  ],
  volume: [
    ["l L dm3 dm³", 1],
    ["cm3 cm³ ml cc", 0.001],
    ["m3 m³", 1000],
    ["gal", gallon],
    ["in3 in³", inch3 / 1000],
    ["ft3 ft³", cubicFoot],
  ],
  temperature: [
    ["°C degC", 1],
    ["°F degF", 5 / 9, -160 / 9],
    ["K", 1, -273.15],
  ],
  mass: [
    ["kg", 1],
    ["g", 0.001],
    ["lb", 0.45359237],
  ],
  force: [
    ["N", 1],
    ["kN", 1000],
    ["daN", 10],
    ["lbf", 4.4482216152605],
  ],
  angle: [["deg °", 1]],
  resistance: [
    ["ohm Ω \u2126", 1],
    ["kohm kΩ k\u2126", 1000],
    ["Mohm MΩ M\u2126", 1e6],
  ],
  filtration: [["um µm \u03bcm micron", 1]],
  share: [["%", 1]],
};

const units = new Map<string, Unit>();
for (const [dimension, rows] of Object.entries(unitRows) as [Dimension, UnitRow[]][]) {
  for (const [spellings, factor, offset = 0] of rows) {
    const all = spellings.split(" ");
    for (const spelling of all) units.set(spelling, { dimension, unit: all[0] as string, factor, offset });
  }
}

/**
 * The units a value of this dimension may be written in, most usual first, for messages such as “write mm, cm, m, in or ft”.
 * One spelling a unit.
 */
export function unitsOf(dimension: Dimension): string[] {
  return unitRows[dimension].map(([spellings]) => spellings.split(" ")[0] as string);
}

/** Whether exactly this is the spelling of a unit. */
export function isUnit(written: string): boolean {
  return units.has(written);
}

/** Characters in the longest spelling of a unit. */
export const longestUnit: number = Math.max(...[...units.keys()].map((spelling) => spelling.length));

/**
 * Reads a number with its unit: `40 mm`, `1.5s`, `3/8 in`, `1-1/2 in`, `-5 °C`.
 * Gives undefined for anything else. `value` is in the dimension's own unit; `text` keeps the author's writing with single spaces.
 */
export function parseQuantity(written: string): Quantity | undefined {
  const match = /^([+-]?\d+(?:[.,]\d+)?(?:(?:[ \t-]+\d+)?\/\d+(?=[ \t]*[a-zA-Z]))?)[ \t\u00a0]*(\D.*|1\/min)$/.exec(written.trim());
  if (!match) return undefined;
  const [, digits = "", spelling = ""] = match;
  const unit = units.get(spelling);
  const number = parseNumber(digits);
  if (!unit || number === undefined) return undefined;
  return {
    dimension: unit.dimension,
    // Twelve figures are beyond any drawing and keep 2.5 in from becoming 63.49999999999999 mm.
    value: Number((number * unit.factor + unit.offset).toPrecision(12)),
    unit: unit.unit,
    text: written.trim().replace(/[ \t\u00a0]+/g, " "),
  };
}

/** `12`, `1.5`, `-3`, `3/8`, `1-1/2`, `1 1/2`; undefined for anything else or a division by nothing. */
export function parseNumber(digits: string): number | undefined {
  const whole = /^([+-]?\d+(?:\.\d+)?)$/.exec(digits.replace(",", "."));
  if (whole) return Number(whole[1]);
  const fraction = /^([+-]?)(?:(\d+)[ \t-]+)?(\d+)\/(\d+)$/.exec(digits);
  if (!fraction || Number(fraction[4]) === 0) return undefined;
  const size = Number(fraction[2] ?? 0) + Number(fraction[3]) / Number(fraction[4]);
  return fraction[1] === "-" ? -size : size;
}
