import { forecast } from '../../src/forecast/forecast.js';
import type { Results } from '../../src/results/schema.js';
import type { ReportPart } from '../../src/report/report.js';
import { renderReport } from '../../src/report/report.js';
import { readTemplates } from '../../src/report/templates.js';
import { gaussianStudy } from '../fixtures/gaussian-study.js';
import { gainClaim } from '../fixtures/memory-study.js';

const small = makeSmall();

/** Results of a small study with noisy derivatives, two parameters and an added probe that knows little. */
export function smallResults(): Results {
  return structuredClone(small);
}

function makeSmall(): Results {
  const study = gaussianStudy(
    {
      entries: [5, 6],
      parameters: 2,
      fiducials: 120,
      derivatives: 60,
      derivativeNoise: 1,
      response: (entry, parameter) => (entry < 5 ? Math.cos(entry + 2 * parameter) : 0.2 * Math.sin(entry * (parameter + 1))),
      rho: 0.3,
      commonNoise: 0,
      claims: [gainClaim('p0', 'joint', 'base', 1.2), gainClaim('p1', 'joint', 'base', 3)],
    },
    7,
  );
  const results = forecast(study, { name: 'sigmafolio', version: '0.0.0' });
  const inputs = [{ path: 'runs/run/fiducial.npy', sha256: 'ab'.repeat(32), bytes: 12345 }];
  return { ...results, inputs };
}

/** The same with other values; the callback changes a deep copy. */
export function changedResults(change: (results: Results) => void): Results {
  const results = smallResults();
  change(results);
  return results;
}

const everything: ReadonlySet<ReportPart> = new Set(['html', 'markdown', 'figures', 'tables']);

export async function rendered(results: Results, parts = everything): Promise<ReadonlyMap<string, string>> {
  return renderReport(results, parts, readTemplates());
}
