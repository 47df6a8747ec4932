import { describe, expect, it } from 'vitest';
import { formatProblem } from '../../src/study/message.js';
import { parseYaml } from '../../src/study/yaml-positions.js';

const problems = (text: string): string => parseYaml(text, 'f.yaml').problems.map(formatProblem).join('\n');

describe('YAML with positions', () => {
  const text = 'a: 1\nb:\n  - x\n  - {c: 0x10, d: 2031-05-02}\ne: &anchor [1, 2]\nf: *anchor\n<<: {g: yes}\n';

  it('gives the data of YAML 1.2: dates are text, yes is text, << is a key', () => {
    expect(parseYaml(text, 'f.yaml').value).toEqual({ a: 1, b: ['x', { c: 16, d: '2031-05-02' }], e: [1, 2], f: [1, 2], '<<': { g: 'yes' } });
  });

  it('knows where each chain of keys stands', () => {
    const { place } = parseYaml(text, 'f.yaml');
    expect(place(['b', 1, 'd'])).toEqual({ file: 'f.yaml', line: 4, column: 15, path: 'b[1].d' });
    expect(place(['b', 0])).toEqual({ file: 'f.yaml', line: 3, column: 5, path: 'b[0]' });
    expect(place(['f', 1])).toEqual({ file: 'f.yaml', line: 5, column: 16, path: 'f[1]' });
  });

  it('gives the place of the nearest part for keys that are not there', () => {
    const { place } = parseYaml(text, 'f.yaml');
    expect(place(['b', 1, 'missing', 3])).toEqual({ file: 'f.yaml', line: 4, column: 5, path: 'b[1].missing[3]' });
    expect(place(['missing'])).toEqual({ file: 'f.yaml', line: 1, column: 1, path: 'missing' });
  });

  it('counts columns in a file with a byte order mark and Windows line ends', () => {
    expect(parseYaml('\ufeffa: 1\r\nb: {c: 2}\r\n', 'f.yaml').place(['b', 'c'])).toEqual({ file: 'f.yaml', line: 2, column: 5, path: 'b.c' });
  });

  it('reads an empty file as nothing', () => {
    expect(parseYaml('# a comment\n', 'f.yaml')).toMatchObject({ value: null, problems: [] });
  });
});

describe('YAML that is refused', () => {
  it('says where brackets do not close', () => {
    expect(problems('a: [1, 2\nb: 3\n')).toMatchInlineSnapshot(`
      "error: a file is not valid YAML
        where     f.yaml:2:1
        found     Flow sequence in block collection must be sufficiently indented and end with a ]
        expected  YAML 1.2
        do        check this line and the one before it: indentation, brackets, and quotes around text that holds { } [ ] , : or #"
    `);
  });

  it('names the first slip only, not all that it entails', () => {
    expect(problems('p: {label: \\Omega_\\mathrm{m}, x: 1}\nq: 2\n')).toMatchInlineSnapshot(`
      "error: a file is not valid YAML
        where     f.yaml:1:26
        found     Unexpected flow-map-start at node end
        expected  YAML 1.2
        do        check this line and the one before it: indentation, brackets, and quotes around text that holds { } [ ] , : or #"
    `);
  });

  it('refuses a key that stands twice, at its second place', () => {
    expect(problems('a: {b: 1,\n  "b": 2}')).toMatchInlineSnapshot(`
      "error: a key stands twice
        where     f.yaml:2:3  a.b
        found     b
        expected  each key once
        do        remove one of the two"
    `);
  });

  it('takes 1 and "1" for the same key', () => {
    expect(problems('1: x\n"1": y')).toMatchInlineSnapshot(`
      "error: a key stands twice
        where     f.yaml:2:1  1
        found     1
        expected  each key once
        do        remove one of the two"
    `);
  });

  it('refuses keys that reach into objects of JavaScript', () => {
    const file = parseYaml('a: {__proto__: {x: 1}}\nconstructor: 1\nprototype: 2\n', 'f.yaml');
    expect(file.value).toEqual({ a: {} });
    expect(Object.getPrototypeOf((file.value as { a: object }).a)).toBe(Object.prototype);
    expect(file.problems.map(formatProblem).join('\n')).toMatchInlineSnapshot(`
      "error: a key is not allowed
        where     f.yaml:1:5  a.__proto__
        found     __proto__
        expected  a name of the study
        do        choose another name: this one has a meaning of its own in JavaScript
      error: a key is not allowed
        where     f.yaml:2:1  constructor
        found     constructor
        expected  a name of the study
        do        choose another name: this one has a meaning of its own in JavaScript
      error: a key is not allowed
        where     f.yaml:3:1  prototype
        found     prototype
        expected  a name of the study
        do        choose another name: this one has a meaning of its own in JavaScript"
    `);
  });

  it('stops at an alias bomb before it takes time or memory', () => {
    const levels = Array.from({ length: 30 }, (_, i) => `a${String(i + 1)}: &a${String(i + 1)} [${Array(10).fill(`*a${String(i)}`).join(', ')}]`);
    expect(problems(['a0: &a0 [x, x, x, x, x, x, x, x, x, x]', ...levels].join('\n'))).toMatchInlineSnapshot(`
      "error: a file repeats too much through aliases
        where     f.yaml:4:45  a3[7]
        found     more than 10000 repeated values
        expected  at most 10000
        do        write the values out, or put them into an array file"
    `);
  });

  it('refuses an alias to itself, and to nothing', () => {
    expect(problems('a: &x [1, *x]')).toMatchInlineSnapshot(`
      "error: an alias leads nowhere
        where     f.yaml:1:11  a[1]
        found     *x
        expected  an anchor outside of the value that it repeats
        do        write the value out"
    `);
    expect(problems('a: *y')).toMatchInlineSnapshot(`
      "error: an alias leads nowhere
        where     f.yaml:1:4  a
        found     *y
        expected  an anchor &y before it
        do        write the value out"
    `);
  });

  it.each(['['.repeat(1_000_000), '- '.repeat(500_000), Array.from({ length: 1000 }, (_, i) => `${' '.repeat(i)}a:`).join('\n'), `a: ${'['.repeat(80)}${']'.repeat(80)}`])(
    'refuses to follow nesting without end',
    (text) => {
      expect(problems(text).replace(/f\.yaml.*/, 'PLACE')).toBe(
        'error: a file is nested too deeply\n  where     PLACE\n  found     more levels, or more indentation, than can be read\n  expected  the few levels that a study has, at most 64\n  do        check the brackets and the indentation',
      );
    },
  );

  it('refuses tags, a second document and another version of YAML', () => {
    expect(problems('a: !!js/function "x"')).toMatchInlineSnapshot(`
      "error: a file is not valid YAML
        where     f.yaml:1:4
        found     Unresolved tag: tag:yaml.org,2002:js/function
        expected  YAML without tags
        do        remove the tag: the word that starts with !"
    `);
    expect(problems('a: 1\n---\nb: 2\n')).toMatchInlineSnapshot(`
      "error: a file is not valid YAML
        where     f.yaml:2:1
        found     a second document
        expected  one document in a file
        do        remove the line --- and what follows it"
    `);
    expect(problems('%YAML 1.1\n---\na: yes\n')).toMatchInlineSnapshot(`
      "error: a file asks for another version of YAML
        where     f.yaml:1:1
        found     1.1
        expected  1.2
        do        remove the line that starts with %YAML"
    `);
  });

  it('refuses keys that are no words', () => {
    expect(problems('{a: 1}: 2')).toMatchInlineSnapshot(`
      "error: a key is not a word
        where     f.yaml:1:1  ?
        found     no text, or a list or map as a key
        expected  a word before the colon
        do        check the line for a stray ? or : or brackets"
    `);
  });

  it('refuses whole numbers that would be rounded in silence', () => {
    expect(problems('seeds: [1, 9007199254740993]')).toMatchInlineSnapshot(`
      "error: a whole number is too large to be exact
        where     f.yaml:1:12  seeds[1]
        found     9007199254740993
        expected  at most 2^53 in size
        do        use smaller numbers: seeds only need to differ"
    `);
  });
});
