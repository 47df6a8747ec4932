/** What is wrong with an array, without the place that names it: whoever asked for the array knows that. */
export class ArrayFault extends Error {
  override readonly name = 'ArrayFault';
  readonly found: string;
  readonly expected: string;
  readonly remedy: string;

  constructor(what: string, details: { readonly found: string; readonly expected: string; readonly remedy: string }) {
    super(what);
    this.found = details.found;
    this.expected = details.expected;
    this.remedy = details.remedy;
  }
}
