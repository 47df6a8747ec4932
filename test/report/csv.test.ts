import { describe, expect, it } from 'vitest';
import { csvFiles } from '../../src/report/csv/all.js';
import { writeCsv } from '../../src/report/csv/csv.js';
import { smallResults } from './report-results.js';

/** RFC 4180, as a reader would have it. */
function read(csv: string): string[][] {
  const rows: string[][] = [[]];
  for (const [, quoted, bare, end] of csv.matchAll(/(?:"((?:[^"]|"")*)"|([^",\n]*))(,|\n|$)/g)) {
    rows.at(-1)!.push(quoted?.replaceAll('""', '"') ?? bare ?? '');
    if (end === '\n') rows.push([]);
  }
  return rows.filter((row) => row.length > 1 || (row[0] ?? '') !== '');
}

describe('a table in CSV', () => {
  it('has a header and ends every line with a line feed', () => {
    expect(writeCsv({ header: ['a', 'b'], rows: [[1, 'x'], [null, 'y']] })).toBe('a,b\n1,x\n,y\n');
  });

  it('writes numbers so that they read back as the same double', () => {
    const numbers = [0.1, 1 / 3, -2.5e-300, 5e-324, 1.7976931348623157e308, 123456789012345680];
    const rows = read(writeCsv({ header: ['x', 'y'], rows: numbers.map((x) => [x, 0]) }));
    expect(rows.slice(1).map(([x]) => Number(x))).toEqual(numbers);
  });

  it.each([['=1+1'], ['+1'], ['-1'], ['@SUM(A1)'], ['|calc'], ['\t=1'], [' =1']])('makes %j inert for a spreadsheet', (word) => {
    const [, row] = read(writeCsv({ header: ['a', 'b'], rows: [[word, 1]] }));
    expect(row).toEqual([`'${word}`, '1']);
  });

  it('leaves a negative number a number', () => {
    expect(writeCsv({ header: ['a'], rows: [[-1]] })).toBe('a\n-1\n');
  });

  it('quotes commas, quotes and line ends', () => {
    const word = 'a, "b"\nc';
    const [, row] = read(writeCsv({ header: ['a', 'b'], rows: [[word, 'd']] }));
    expect(row).toEqual([word, 'd']);
  });
});

describe('the tables of a report', () => {
  const results = smallResults();
  const files = csvFiles(results);

  it('have as many cells in every row as in the header', () => {
    for (const [name, content] of files) {
      const [header, ...rows] = read(content);
      for (const row of rows) expect(row.length, name).toBe(header!.length);
    }
  });

  it('hold the errors in full', () => {
    const [header, ...rows] = read(files.get('errors')!);
    const row = rows.find((cells) => cells[0] === 'p0' && cells[3] === 'joint' && cells[4] === 'marginalised')!;
    const { marginalised } = results.combinations.joint!.errors.p0!;
    expect(Number(row[header!.indexOf('raw')])).toBe(marginalised.raw);
    expect(Number(row[header!.indexOf('corrected')])).toBe(marginalised.corrected);
    expect(Number(row[header!.indexOf('high_95')])).toBe(marginalised.interval95?.[1]);
    expect(row[header!.indexOf('status')]).toBe(marginalised.status);
  });

  it('hold every element of every matrix', () => {
    const [, ...rows] = read(files.get('fisher')!);
    const value = rows.find(([combination, matrix, row, column]) => combination === 'joint' && matrix === 'fisher raw' && row === 'p0' && column === 'p1')![4];
    expect(Number(value)).toBe(results.combinations.joint!.fisher.raw[0]![1]);
  });

  it('hold one line for every entry and parameter', () => {
    const [, ...rows] = read(files.get('responses')!);
    expect(rows).toHaveLength(11 * 2);
  });

  it('hold the claims with both ends of a range', () => {
    const [claim] = results.claims;
    const between = { ...results, claims: [{ ...claim!, test: 'between' as const, threshold: [1, 2] as [number, number] }] };
    const [header, row] = read(csvFiles(between).get('claims')!);
    expect([row![header!.indexOf('threshold_low')], row![header!.indexOf('threshold_high')]]).toEqual(['1', '2']);
    const most = { ...results, claims: [{ ...claim!, test: 'at most' as const, threshold: 3 }] };
    const [, other] = read(csvFiles(most).get('claims')!);
    expect([other![header!.indexOf('threshold_low')], other![header!.indexOf('threshold_high')]]).toEqual(['', '3']);
  });
});
