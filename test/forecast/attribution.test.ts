import { inverse, Matrix as Dense } from 'ml-matrix';
import { describe, expect, it } from 'vitest';
import { directions, errorsWithOneFixed, gainShares, pairArea } from '../../src/forecast/attribution.js';
import { withoutBlocks } from '../../src/forecast/block-information.js';
import { noiseTie } from '../../src/forecast/canonical.js';
import { whole } from '../../src/forecast/combined.js';
import { covarianceCurve } from '../../src/forecast/covariance-curve.js';
import { smallestDirections } from '../../src/forecast/smallest-directions.js';
import type { Study } from '../../src/study/study.js';
import type { GaussianModel } from '../fixtures/gaussian-study.js';
import { gaussianStudy, trueFisher } from '../fixtures/gaussian-study.js';
import { columnsOf, combination, momentsRun, parameter } from '../fixtures/memory-study.js';
import { changedStudy, combinedOf, cosine, forecastOf, partsOf, picked, range } from './seeded-study.js';

const model: GaussianModel = {
  entries: [5, 4],
  parameters: 3,
  fiducials: 200,
  derivatives: 60,
  derivativeNoise: 0.3,
  response: cosine,
  rho: 0.5,
  commonNoise: 0.3,
};
const study = gaussianStudy(model, 1);
const base = combinedOf(study, 'base');
const joint = combinedOf(study, 'joint');
const errorOf = (of: typeof joint, q: number): number => Math.exp(whole(of).corrected!.logs[q]!);

describe('the shares of a gain', () => {
  it('add up to it, and the response is the fixed gain', () => {
    range(3).forEach((a) => {
      const { total, response, degeneracy } = gainShares(base, joint, a)!;
      expect(total).toBeCloseTo(Math.log(errorOf(base, 2 * a) / errorOf(joint, 2 * a)), 12);
      expect(response).toBeCloseTo(Math.log(errorOf(base, 2 * a + 1) / errorOf(joint, 2 * a + 1)), 12);
      expect(response + degeneracy).toBeCloseTo(total, 14);
    });
  });

  it('have no degeneracy with one parameter, and nothing for a combination with itself', () => {
    const single = { ...study, parameters: [parameter('p0')] };
    expect(gainShares(combinedOf(single, 'base'), combinedOf(single, 'joint'), 0)!.degeneracy).toBeCloseTo(0, 12);
    expect(gainShares(joint, joint, 1)).toEqual({ total: 0, response: 0, degeneracy: 0 });
  });

  it('are none where an error does not exist', () => {
    const short = { ...study, combinations: [combination('base', ['base'], { keep: [{ probe: 'base', ranges: [{ coordinate: 'x', min: null, max: 2 }], blocks: null }] }), combination('joint', ['base', 'added'])] };
    expect(gainShares(combinedOf(short, 'base'), combinedOf(short, 'joint'), 0)).toBeNull();
  });
});

describe('errors with one other parameter fixed', () => {
  it('are those of a study without the other parameter', () => {
    const fixed = errorsWithOneFixed(joint, 0);
    expect([...fixed.keys()]).toEqual([1, 2]);
    const without = { ...study, parameters: [parameter('p0'), parameter('p2')] };
    expect(fixed.get(1)).toBeCloseTo(errorOf(combinedOf(without, 'joint'), 0), 12);
  });

  it('lie between the fixed and the marginalised error', () => {
    range(3).forEach((a) => {
      for (const error of errorsWithOneFixed(joint, a).values()) {
        expect(error!).toBeLessThanOrEqual(errorOf(joint, 2 * a) * (1 + 1e-12));
        expect(error!).toBeGreaterThanOrEqual(errorOf(joint, 2 * a + 1) * (1 - 1e-12));
      }
    });
  });
});

describe('directions and areas', () => {
  const units = range(3).map((a) => errorOf(base, 2 * a));

  it('have squares that add up to the trace of the covariance in those units, from best to worst', () => {
    const found = directions(joint, units)!;
    const trace = range(3).reduce((sum, a) => sum + (errorOf(joint, 2 * a) / units[a]!) ** 2, 0);
    expect(found.reduce((sum, { error }) => sum + error ** 2, 0)).toBeCloseTo(trace, 12);
    expect([...found].sort((a, b) => a.error - b.error)).toEqual(found);
    for (const { components } of found) {
      expect(components.reduce((sum, value) => sum + value ** 2, 0)).toBeCloseTo(1, 12);
      expect(components.reduce((best, value) => (Math.abs(value) > Math.abs(best) ? value : best), 0)).toBeGreaterThan(0);
    }
  });

  it('of a pair have the root of the determinant', () => {
    const { inversion } = whole(joint).corrected!;
    if (inversion.kind !== 'inverse') throw new Error('the study is determined');
    const { data } = inversion.inverse;
    expect(pairArea(joint, 0, 2)).toBeCloseTo(Math.sqrt(data[0]! * data[8]! - data[2]! ** 2), 12);
    expect(pairArea(joint, 2, 0)).toBeCloseTo(pairArea(joint, 0, 2)!, 14);
  });

  it('are none for a parameter that is not there', () => {
    const more = { ...study, parameters: [...study.parameters, parameter('p3')] };
    const run = more.runs[0]!;
    const silent: Study = { ...more, runs: [{ ...run, data: { ...run.data, derivatives: { ...run.data.derivatives, p3: { kind: 'insensitive' } } } }] };
    expect(pairArea(combinedOf(silent, 'joint'), 0, 3)).toBeNull();
  });
});

/** The same columns in three blocks that lie across each other. */
const blocks = ['a', 'b', 'a', 'c', 'b'];
const blocked: Study = {
  ...study,
  runs: study.runs.map((run) => ({ ...run, columns: run.columns.map((column, i) => (i < 5 ? { ...column, block: blocks[i]! } : column)) })),
};

describe('a block left out', () => {
  it('leaves the errors of a study without it', () => {
    const found = withoutBlocks(combinedOf(blocked, 'joint'));
    expect(found.map(({ probe, block, entries }) => [probe, block, entries])).toEqual(
      expect.arrayContaining([['base', 'a', 2], ['base', 'b', 2], ['base', 'c', 1], ['added', 'only', 4]]) as unknown[],
    );
    for (const { probe, block, logs } of found) {
      const others = ['a', 'b', 'c'].filter((one) => one !== block);
      const chosen = probe === 'added' ? combination('joint', ['base']) : combination('joint', ['base', 'added'], { keep: [{ probe: 'base', ranges: [], blocks: others }] });
      const alone = combinedOf({ ...blocked, combinations: [blocked.combinations[0]!, chosen] }, 'joint');
      logs.forEach((log, q) => {
        const expected = whole(alone).corrected!.logs[q]!;
        if (log === null) expect(expected).toBeNull();
        else expect(log).toBeCloseTo(expected, 9);
      });
    }
  });

  it('that is all there is leaves the priors', () => {
    const single = { ...study, combinations: [combination('base', ['base'])], parameters: study.parameters.map((one) => ({ ...one, prior: 0.5 })) };
    const [only] = withoutBlocks(combinedOf(single, 'base'));
    only!.logs.forEach((log) => {
      expect(log).toBeCloseTo(Math.log(0.5), 12);
    });
  });
});

describe('ties of noise', () => {
  it('are 1 and 0 by hand: an added entry that copies a baseline entry up to noise', () => {
    // Entries 0 and 1 of the baseline, 2 added: correlation 0.6 with the first.
    const covariance = { data: Float64Array.from([4, 0, 1.2, 0, 1, 0, 1.2, 0, 1]), rows: 3, columns: 3 };
    const run = momentsRun('run', [...columnsOf('base', 2), ...columnsOf('added', 1)], {
      covariance,
      realisations: 101,
      derivatives: { p0: { kind: 'exact', values: Float64Array.from([1, 1, 1]) } },
    });
    const hand = { ...study, parameters: [parameter('p0')], runs: [run] };
    const tie = noiseTie(partsOf(hand, 'joint')[0]!)!;
    expect(tie.correlations).toEqual([expect.closeTo(0.6, 12)]);
    expect(tie.predicted.map(({ share }) => share).sort()).toEqual([0, expect.closeTo(0.36, 12)]);
    expect(tie.chance).toBe(0.01);
  });

  it('have the squares of canonical correlations as eigenvalues of S_bb^-1 S_ba S_aa^-1 S_ab', () => {
    const part = partsOf(study, 'joint')[0]!;
    const own = part.entries.flatMap((entry, i) => (entry.added ? [] : [i]));
    const added = part.entries.flatMap((entry, i) => (entry.added ? [i] : []));
    const { covariance } = part.covariance;
    const block = (rows: readonly number[], columns: readonly number[]): Dense =>
      new Dense(rows.map((i) => columns.map((j) => covariance.data[part.picks[i]! * covariance.columns + part.picks[j]!]!)));
    const product = inverse(block(added, added)).mmul(block(added, own)).mmul(inverse(block(own, own))).mmul(block(own, added));
    const tie = noiseTie(part)!;
    expect(tie.correlations).toHaveLength(4);
    expect(tie.correlations.reduce((sum, value) => sum + value ** 2, 0)).toBeCloseTo(product.trace(), 12);
    expect([...tie.correlations].sort((a, b) => b - a)).toEqual(tie.correlations);
  });

  it('are by chance D_a/(N - 1) for independent data', () => {
    const silent = gaussianStudy({ ...model, rho: 0, fiducials: 60 }, 3);
    const shares = range(40).flatMap((k) => noiseTie(partsOf(gaussianStudy({ ...model, rho: 0, fiducials: 60 }, 200 + k), 'joint')[0]!)!.predicted.map(({ share }) => share));
    const { chance } = noiseTie(partsOf(silent, 'joint')[0]!)!;
    expect(chance).toBeCloseTo(4 / 59, 14);
    // 200 shares of a Beta law with mean 0.068 and deviation 0.046: four standard errors are 0.013.
    expect(Math.abs(shares.reduce((sum, value) => sum + value, 0) / shares.length - chance!)).toBeLessThan(0.013);
  });

  it('are none without added or without own entries', () => {
    expect(noiseTie(partsOf(study, 'base')[0]!)).toBeNull();
  });
});

describe('the gain through correlated noise alone', () => {
  it.each([0, 0.4, 0.8])('is that of the known covariance, with exact responses: correlation %d', (rho) => {
    const known: GaussianModel = { ...model, parameters: 1, rho, fiducials: 4000, response: (i, a) => (i < 5 ? 1 + cosine(i, a) : 0.4) };
    const made = gaussianStudy(known, 5);
    // Entries stand along x in the factor, but in the order of the columns in the AR(1) noise.
    const values = Float64Array.from(range(9), (i) => known.response(i, 0));
    const run = made.runs[0]!;
    const exact: Study = { ...made, runs: [{ ...run, data: { ...run.data, derivatives: { p0: { kind: 'exact', values } } } }] };
    const found = forecastOf(exact).attribution!.joint!.throughNoise.p0!;
    const silent = trueFisher({ ...known, response: (i, a) => (i < 5 ? known.response(i, a) : 0) }, 9)[0]![0]!;
    const truth = Math.sqrt(silent / trueFisher(known, 5)[0]![0]!);
    expect(truth >= 1 && (truth > 1) === rho > 0).toBe(true);
    // Four standard errors; chance correlations with four entries help by D_a/(2 N_s) = 0.0005.
    expect(Math.abs(Math.log(found.gain! / truth))).toBeLessThan(0.001 + 4 * found.relativeStandardError!);
    if (rho === 0.8) expect(Math.log(found.gain!)).toBeGreaterThan(4 * found.relativeStandardError!);
  });
});

describe('the curve of the covariance', () => {
  it('has the raw errors of studies with every eighth, fourth and second realisation', () => {
    const curve = covarianceCurve(joint)!;
    expect(curve.realisations).toEqual([25, 50, 100, 200]);
    [8, 4, 2, 1].forEach((division, k) => {
      const fewer = changedStudy(study, { fiducial: (rows) => picked(rows, range(200 / division).map((row) => row * division)) });
      curve.logs[k]!.forEach((log, q) => {
        expect(log).toBeCloseTo(whole(combinedOf(fewer, 'joint')).raw.logs[q]!, 11);
      });
    });
  });

  it('leaves out sizes that cannot be inverted, and is none for moments', () => {
    expect(covarianceCurve(combinedOf(gaussianStudy({ ...model, fiducials: 50 }, 6), 'joint'))!.realisations).toEqual([12, 25, 50]);
    expect(covarianceCurve(combinedOf(gaussianStudy({ ...model, fiducials: 40 }, 6), 'joint'))!.realisations).toEqual([20, 40]);
  });
});

describe('errors without the smallest directions', () => {
  it('start with the errors themselves, and grow for exact responses but for the precision factor', () => {
    const found = smallestDirections(joint)!;
    expect(found.removed).toEqual([0, 1, 2, 5]);
    expect(found.condition).toBeGreaterThan(1);
    found.logs[0]!.forEach((log, q) => {
      expect(log).toBeCloseTo(whole(joint).corrected!.logs[q]!, 10);
    });
  });

  it('are those of the projected data: by a dense eigenbasis, for two entries', () => {
    // Correlation 0.6 of two entries: the smaller direction is (1, -1), and what is left is the sum of the standardised entries.
    const covariance = { data: Float64Array.from([4, 1.2, 1.2, 1]), rows: 2, columns: 2 };
    const run = momentsRun('run', columnsOf('base', 2), { covariance, realisations: null, derivatives: { p0: { kind: 'exact', values: Float64Array.from([2, 3]) } } });
    const hand = { ...study, parameters: [parameter('p0')], combinations: [combination('base', ['base'])], runs: [run], prior: null };
    expect(smallestDirections(combinedOf(hand, 'base'))!.removed).toEqual([0]);
    const three = { data: Float64Array.from([4, 1.2, 0, 1.2, 1, 0, 0, 0, 1]), rows: 3, columns: 3 };
    const longer = momentsRun('run', columnsOf('base', 3), { covariance: three, realisations: null, derivatives: { p0: { kind: 'exact', values: Float64Array.from([2, 1, 0.5]) } } });
    const found = smallestDirections(combinedOf({ ...hand, runs: [longer] }, 'base'))!;
    expect(found.removed).toEqual([0, 1]);
    expect(found.condition).toBeCloseTo(1.6 / 0.4, 12);
    // (1 + 1)^2/(2 * 1.6) from the sum of 2/2 and 1/1, and 0.5^2 from the third entry.
    expect(found.logs[1]![0]).toBeCloseTo(-Math.log(4 / 3.2 + 0.25) / 2, 12);
  });
});
