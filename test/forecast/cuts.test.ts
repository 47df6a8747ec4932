import { describe, expect, it } from 'vitest';
import { keeps, ordered, prefixesOf, scanOf } from '../../src/forecast/cuts.js';
import type { Column, Keep, Scan, Study } from '../../src/study/study.js';
import { combination, ensembleRun, memoryStudy, parameter, realisations } from '../fixtures/memory-study.js';
import { range } from './seeded-study.js';

function column(probe: string, block: string, at: number | null, coordinate = 'k'): Column {
  return { probe, block, label: block, coordinate: at === null ? null : { name: coordinate, unit: '', value: at } };
}

const keep = (changes: Partial<Keep>): Keep => ({ probe: 'power', ranges: [], blocks: null, ...changes });
const keptBy = (keeps_: readonly Keep[], one: Column): boolean => keeps(combination('c', ['power', 'peaks'], { keep: keeps_ }), one);

describe('a combination keeps a column', () => {
  it('of its probes alone', () => {
    expect(keptBy([], column('power', 'a', 0.1))).toBe(true);
    expect(keptBy([], column('other', 'a', 0.1))).toBe(false);
  });

  it('within bounds that are inclusive, and open where they are null', () => {
    const cut = [keep({ ranges: [{ coordinate: 'k', min: 0.1, max: 0.3 }] })];
    expect([0.0999, 0.1, 0.2, 0.3, 0.3001].map((at) => keptBy(cut, column('power', 'a', at)))).toEqual([false, true, true, true, false]);
    const below = [keep({ ranges: [{ coordinate: 'k', min: null, max: 0.3 }] })];
    expect([-5, 0.3, 0.4].map((at) => keptBy(below, column('power', 'a', at)))).toEqual([true, true, false]);
  });

  it('that has no such coordinate, or belongs to another probe', () => {
    const cut = [keep({ ranges: [{ coordinate: 'k', min: 1, max: 2 }] })];
    expect(keptBy(cut, column('power', 'a', null))).toBe(true);
    expect(keptBy(cut, column('power', 'a', 7, 'nu'))).toBe(true);
    expect(keptBy(cut, column('peaks', 'a', 7))).toBe(true);
  });

  it('only if blocks and every range allow it', () => {
    const both = [keep({ blocks: ['a'], ranges: [{ coordinate: 'k', min: null, max: 2 }] }), keep({ ranges: [{ coordinate: 'k', min: 1, max: null }] })];
    expect([0.5, 1.5, 2.5].map((at) => keptBy(both, column('power', 'a', at)))).toEqual([false, true, false]);
    expect(keptBy(both, column('power', 'b', 1.5))).toBe(false);
  });
});

function studyOf(columns: readonly Column[], parameters = 1, scan: Scan | null = null): Study {
  const fiducial = realisations(new Float64Array(columns.length), columns.length);
  return memoryStudy({
    parameters: range(parameters).map((a) => parameter(`p${String(a)}`)),
    combinations: [combination('base', ['power'])],
    runs: [ensembleRun('run', columns, fiducial, {})],
    scan,
  });
}

describe('the scan of a study', () => {
  it('is its own where it has one', () => {
    const own: Scan = { coordinate: 'k', keep: 'above', at: [1] };
    expect(scanOf(studyOf([column('power', 'a', 3)], 1, own))).toBe(own);
  });

  it('cuts at each place of a short vector', () => {
    expect(scanOf(studyOf([3, 1, 2].map((at) => column('power', 'a', at))))).toEqual({ coordinate: 'k', keep: 'below', at: [1, 2, 3] });
  });

  it('has at most 12 cuts, even, the last at the end', () => {
    const scan = scanOf(studyOf(range(36, 1).map((at) => column('power', 'a', at))))!;
    expect(scan.at).toEqual(range(12, 1).map((k) => 3 * k));
    const odd = scanOf(studyOf(range(13, 1).map((at) => column('power', 'a', at))))!;
    expect(odd.at).toHaveLength(12);
    expect(new Set(odd.at).size).toBe(12);
    expect(odd.at.at(-1)).toBe(13);
  });

  it('starts where there are as many entries as parameters', () => {
    expect(scanOf(studyOf(range(5, 1).map((at) => column('power', 'a', at)), 3))!.at).toEqual([3, 4, 5]);
    const withFree = [column('power', 'free', null), ...range(4, 1).map((at) => column('power', 'a', at))];
    expect(scanOf(studyOf(withFree, 3))!.at).toEqual([2, 3, 4]);
    const twoBlocks = [1, 2, 3].flatMap((at) => [column('power', 'a', at), column('power', 'b', at)]);
    expect(scanOf(studyOf(twoBlocks, 3))!.at).toEqual([2, 3]);
  });

  it('goes along the first coordinate of the baseline and no other', () => {
    const mixed = [column('peaks', 'a', 9, 'nu'), column('power', 'free', null), column('power', 'a', 2), column('power', 'b', 5, 'ell')];
    expect(scanOf(studyOf(mixed))!).toEqual({ coordinate: 'k', keep: 'below', at: [2] });
  });

  it('is none without a coordinate, and none where no cut leaves enough entries', () => {
    expect(scanOf(studyOf([column('power', 'a', null)]))).toBeNull();
    expect(scanOf(studyOf([column('power', 'a', 1)], 4))).toBeNull();
  });
});

describe('the order of the factor', () => {
  const columns = [column('power', 'a', 3), column('power', 'b', 1), column('power', 'c', null), column('power', 'd', 3), column('power', 'e', 2, 'nu')];
  const { runs } = studyOf(columns);
  const entries = columns.map((one, index) => ({ run: runs[0]!, index, column: one, added: false }));
  const below: Scan = { coordinate: 'k', keep: 'below', at: [0, 1, 2, 3] };
  const above: Scan = { ...below, keep: 'above', at: [1, 2, 3, 4] };

  it('puts what is never cut first, then goes along the scan, ties as they were', () => {
    expect(ordered(entries, below).map(({ index }) => index)).toEqual([2, 4, 1, 0, 3]);
    expect(ordered(entries, above).map(({ index }) => index)).toEqual([2, 4, 0, 3, 1]);
    expect(ordered(entries, null)).toBe(entries);
  });

  it('makes every cut a leading block, bounds inclusive', () => {
    expect(prefixesOf(ordered(entries, below), below)).toEqual([2, 3, 3, 5, 5]);
    // From the last cut of `at` to the first: what is above 4, 3, 2 and 1.
    expect(prefixesOf(ordered(entries, above), above)).toEqual([2, 4, 4, 5, 5]);
    expect(prefixesOf(entries, null)).toEqual([5]);
  });
});
