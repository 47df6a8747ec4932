import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { parsePythonLiteral } from '../../src/arrays/python-literal.js';

describe('Python literals in NPY headers', () => {
  it('reads each kind that a header may hold', () => {
    expect(parsePythonLiteral(" {'a': (1, 2L, ), \"b\": [True, False, None,], 'c': (), 'd': ((3)), 'e': {} } ")).toEqual(
      new Map<string, unknown>([
        ['a', [1n, 2n]],
        ['b', [true, false, null]],
        ['c', []],
        ['d', 3n],
        ['e', new Map()],
      ]),
    );
  });

  it.each(['', '{', "{'a'}", "{'a': 1", "{'a': 1 'b': 2}", '(1 2)', '(,)', "'a", "'\\x41'", '1 + 1', '-1', '1.5', 'f()', "{1: 2}", "{'a': 1, 'a': 2}", '1 2', '[1)'])(
    'refuses %j',
    (text) => {
      expect(parsePythonLiteral(text)).toBeUndefined();
    },
  );

  it('refuses deep nesting without running out of stack', () => {
    expect(parsePythonLiteral('('.repeat(60_000))).toBeUndefined();
  });

  it('never throws, whatever the text', () => {
    const pieces = fc.array(fc.constantFrom('{', '}', '(', ')', '[', ']', ',', ':', "'a'", '1', 'True', ' ', 'x'), { maxLength: 12 });
    fc.assert(
      fc.property(pieces, (parts) => {
        parsePythonLiteral(parts.join(''));
      }),
      { seed: 1 },
    );
  });
});
