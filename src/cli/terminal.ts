/** Where a command writes: results to stdout, everything else to stderr. */
export interface Terminal {
  readonly result: (text: string) => void;
  readonly message: (text: string) => void;
  /** Colours only for a person: a terminal, and NO_COLOR not set. */
  readonly colour: boolean;
}

/** The process's own terminal. */
export function processTerminal(): Terminal {
  const { NO_COLOR } = process.env;
  return {
    result: (text) => process.stdout.write(`${text}\n`),
    message: (text) => process.stderr.write(`${text}\n`),
    colour: process.stderr.isTTY && (NO_COLOR === undefined || NO_COLOR === ''),
  };
}

/** The first word of a message in its colour: red for an error, yellow for a warning. */
export function highlighted(text: string, terminal: Terminal): string {
  if (!terminal.colour) return text;
  return text.replace(/^error/, '\u001b[31merror\u001b[0m').replace(/^warning/, '\u001b[33mwarning\u001b[0m');
}
