import { expect, it } from 'vitest';
import { toString } from 'mdast-util-to-string';
import { attributionLead, attributionState, throughNoise } from '../../src/report/words/attribution.js';
import { areas, attribution, directions, oneFixed } from '../../src/report/tables/attribution.js';
import type { Results } from '../../src/results/schema.js';
import { changedResults, smallResults } from './report-results.js';

function said(results: Results, make: typeof attributionLead): string {
  return make(results).map((node) => toString(node)).join(' ');
}

/** One gain of 2 that is 1.25 times 1.6, and 1.1 once p1 is known. */
function withGain(): Results {
  return changedResults((results) => {
    const found = results.attribution!.joint!;
    found.parameters.p0 = {
      shares: { total: Math.log(2), response: Math.log(1.25), degeneracy: Math.log(1.6) },
      oneFixed: [{ parameter: 'p1', baseline: 1.1, combination: 1 }],
    };
    found.parameters.p1 = { shares: null, oneFixed: [] };
    found.throughNoise = { p0: { gain: 1.3, relativeStandardError: 0.02, interval: [1.27, 1.33] } };
  });
}

it('says how a gain splits, and which knowledge closes it', () => {
  const text = said(withGain(), attributionLead);
  expect(text).toContain('Of 1 corrected gains above 1.05, 1 come more from degeneracies that break');
  expect(text).toContain('2.00 is 1.25 from a sharper response times 1.60 from broken degeneracies. With p1 known it would be 1.10.');
  expect(attributionState(withGain())).toBe('1 of 1 mostly degeneracies');
});

it('says that noise is predicted only where that is certain', () => {
  expect(said(withGain(), throughNoise)).toContain('up to 1.30 is left');
  const unsure = withGain();
  unsure.attribution!.joint!.throughNoise.p0!.relativeStandardError = 0.2;
  expect(said(unsure, throughNoise)).toContain('next to nothing comes from predicting');
});

it('says so where there is no gain to take apart', () => {
  const none = withGain();
  none.attribution!.joint!.parameters.p0!.shares = null;
  expect(said(none, attributionLead)).toContain('nothing to take apart');
  expect(attribution(none)).toBeNull();
});

it('has tables whose factors multiply to the gain', () => {
  const table = attribution(withGain())!;
  expect(table.rows).toHaveLength(1);
  expect(table.rows[0]!.slice(2)).toEqual(['2.00', '1.25', '1.60', '1.30']);
});

it('has a row for every target and combination, every direction and every pair', () => {
  const results = smallResults();
  expect(oneFixed(results)!.rows).toHaveLength(2);
  expect(directions(results)!.rows).toHaveLength(2);
  expect(areas(results)!.rows).toHaveLength(1);
});
