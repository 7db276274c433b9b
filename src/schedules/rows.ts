/** One coil and all its contacts: the row behind the cross-reference sheet, the terminal table, the CSV, the JSON and the coil margin. */
export interface CrossReferenceRow {
  coil: string;
  /** relay, contactor, timer, solenoid, pilot-light, horn, and switch kinds for devices with contacts but no coil. */
  kind: string;
  text: string;
  sheet: number;
  line: number;
  contacts: ContactReference[];
  /** Solenoids. */
  valve?: { name: string; sheet: number; zone: string };
}

export interface ContactReference {
  type: "NO" | "NC";
  timed?: boolean;
  terminals: string;
  sheet: number;
  line: number;
}
