/** What the program tells whoever started it. */
export const ExitCode = {
  /** Done; there may be warnings. */
  Fine: 0,
  /** The drawing has errors, or is empty, or is no text. */
  Faulty: 1,
  /** The command was wrong, a file could not be read, or the output could not be written. */
  Misuse: 2,
} as const;

export type ExitCode = (typeof ExitCode)[keyof typeof ExitCode];
