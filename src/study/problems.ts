/** A place in an input file. Lines and columns count from 1; `path` is the chain of keys, as in `derivatives.omega_m.nodes[1]`. */
export interface Place {
  readonly file: string;
  readonly line?: number;
  readonly column?: number;
  readonly path?: string;
}

/** The one shape of everything that is wrong with input. Sentences without a full stop, sizes and indices always given. */
export interface Problem {
  /** What is wrong, in a few words: "a step does not match its files". */
  readonly what: string;
  readonly where: Place;
  readonly found?: string;
  readonly expected?: string;
  /** The cure, naming the likely slip. */
  readonly remedy: string;
}

/** Thrown when the input cannot be used. It carries every problem that was found, worst first. */
export class InputError extends Error {
  override readonly name = 'InputError';
  readonly problems: readonly Problem[];

  constructor(problems: readonly Problem[]) {
    super(problems.map((problem) => problem.what).join('; '));
    this.problems = problems;
  }
}
