import { describe, expect, it } from 'vitest';
import type { Evidence } from '../../src/forecast/status.js';
import { judge, statusRules } from '../../src/forecast/status.js';
import { z95TwoSided } from '../../src/forecast/thresholds.js';
import { statusSchema } from '../../src/results/schema.js';

const allowed = Math.log(1.1);

const good: Evidence = {
  assessable: true,
  logRaw: 0.01,
  logCorrected: 0,
  standardError: 0.02,
  views: [
    { name: 'limit of the fitted curve', log: 0.02 },
    { name: 'split estimate', log: -0.03 },
  ],
  tolerance: 0.1,
  reason: 'The reason.',
};

const statusOf = (changes: Partial<Evidence>) => judge({ ...good, ...changes }).status;

describe('a status', () => {
  it('is settled where the value, the raw value and the views agree', () => {
    expect(judge(good)).toEqual({
      status: 'settled',
      why: 'The 95 % uncertainty is 4.0 % and the raw value is off by 1.0 %: both within the tolerance of 10 %.',
    });
  });

  it('is correctable where the raw value alone is off, to either side', () => {
    expect(judge({ ...good, logRaw: -Math.log(1.25) })).toEqual({
      status: 'correctable',
      why: 'The raw value is off by 25 %; the corrected value is known to 4.0 % at 95 %.',
    });
    expect(statusOf({ logRaw: 0.2 })).toBe('correctable');
  });

  it('is correctable where there is no raw value', () => {
    expect(judge({ ...good, logRaw: null })).toEqual({
      status: 'correctable',
      why: 'The raw value does not exist; the corrected value is known to 4.0 % at 95 %.',
    });
  });

  it('is unsettled where the uncertainty exceeds the tolerance, whatever the rest', () => {
    expect(judge({ ...good, standardError: 0.2 })).toEqual({
      status: 'unsettled',
      why: 'The 95 % uncertainty is 48 %, more than the tolerance of 10 %.',
    });
    expect(statusOf({ standardError: 0.2, logRaw: 1, views: [] })).toBe('unsettled');
  });

  it('is unsettled where a view differs, and names the first of them', () => {
    expect(judge({ ...good, views: [good.views[0]!, { name: 'split estimate', log: -0.3 }] })).toEqual({
      status: 'unsettled',
      why: 'The split estimate differs from the corrected value by 35 %, more than the tolerance of 10 %.',
    });
    expect(judge({ ...good, views: [{ name: 'limit of the fitted curve', log: 0.3 }, { name: 'split estimate', log: null }] }).why).toBe(
      'The limit of the fitted curve differs from the corrected value by 35 %, more than the tolerance of 10 %.',
    );
  });

  it('is unsettled where a view could not be had', () => {
    expect(judge({ ...good, views: [{ name: 'split estimate', log: null }] })).toEqual({
      status: 'unsettled',
      why: 'The split estimate could not be had, so that the views cannot be compared.',
    });
  });

  it('is settled without views where there is nothing to view', () => {
    expect(statusOf({ views: [] })).toBe('settled');
  });

  it('is undetermined without a value or without its uncertainty, for the reason given', () => {
    expect(judge({ ...good, logCorrected: null })).toEqual({ status: 'undetermined', why: 'The reason.' });
    expect(judge({ ...good, standardError: null })).toEqual({ status: 'undetermined', why: 'The reason.' });
  });

  it('is not assessable before all else', () => {
    expect(judge({ ...good, assessable: false, logCorrected: null })).toEqual({
      status: 'not assessable',
      why: 'The derivatives came without realisations: their noise cannot be measured.',
    });
  });

  it('includes the bounds themselves', () => {
    const edge = allowed / z95TwoSided;
    expect(statusOf({ standardError: edge * (1 - 1e-15) })).toBe('settled');
    expect(statusOf({ standardError: edge * (1 + 1e-12) })).toBe('unsettled');
    expect(statusOf({ logRaw: allowed })).toBe('settled');
    expect(statusOf({ logRaw: allowed * (1 + 1e-12) })).toBe('correctable');
    expect(statusOf({ views: [{ name: 'split estimate', log: -allowed }] })).toBe('settled');
    expect(statusOf({ views: [{ name: 'split estimate', log: -allowed * (1 + 1e-12) }] })).toBe('unsettled');
  });

  it('follows the tolerance of the study', () => {
    expect(statusOf({ tolerance: 0.01 })).toBe('unsettled');
    expect(statusOf({ tolerance: 0.5, standardError: 0.2, logRaw: 0.39 })).toBe('settled');
    expect(judge({ ...good, tolerance: 0.5, standardError: 0 }).why).toBe(
      'The 95 % uncertainty is 0.0 % and the raw value is off by 1.0 %: both within the tolerance of 50 %.',
    );
  });

  it('writes percentages that stay short', () => {
    const why = (standardError: number): string => judge({ ...good, standardError }).why;
    expect(why(2)).toContain('is more than 1000 %');
    expect(why(1e-6)).toContain('is less than 0.1 %');
    expect(why(Math.log(1.0994) / z95TwoSided)).toContain('is 9.9 %');
  });

  it('has one rule for each word, in the order of the schema', () => {
    expect(statusRules.map(({ status }) => status)).toEqual(statusSchema.options);
    for (const { rule } of statusRules) expect(rule).toMatch(/^[A-Z].*\.$/);
  });
});
