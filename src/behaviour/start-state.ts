/** The machine at rest: power off, pressure off, no cycle begun. All drawings show this state. */
export interface StartState {
  /** Each cylinder's rod, mm from retracted. */
  cylinders: ReadonlyMap<string, number>;
  /** Switches the machine holds operated. */
  held: ReadonlySet<string>;
  /** The box each valve's lines are drawn to, 0 leftmost. */
  valveBoxes: ReadonlyMap<string, number>;
  /** Valves with no normal position whose box was taken from their cylinder or from `start`: they get a note on the sheet. */
  restingByStart: ReadonlySet<string>;
}
