/** What the shell is told. Part of the contract: scripts rely on it. */
export const exitCodes = {
  done: 0,
  /** Done, and a gate failed. */
  gate: 1,
  /** The input or the call is wrong. */
  input: 2,
  /** The program is wrong: a bug. */
  bug: 3,
} as const;

export type ExitCode = (typeof exitCodes)[keyof typeof exitCodes];
