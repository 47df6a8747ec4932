import type { Results, Status } from '../../results/schema.js';
import { attributionState } from './attribution.js';
import { checkState } from './checks.js';
import { degeneracyState } from './degeneracies.js';
import { claimState } from './glance.js';
import { quotable, targetErrors, targetGains } from './tally.js';
import { counted } from './values.js';

/** The state of each section in a few words, for the contents. By the name of the section's template. */
export const sectionStates: Readonly<Record<string, (results: Results) => string>> = {
  'at-a-glance': claimState,
  'forecast-errors': (results) => quotableState(targetErrors(results)),
  improvement: (results) => quotableState(targetGains(results)),
  attribution: attributionState,
  responses: (results) => counted(Object.values(results.vectors).reduce((sum, blocks) => sum + Object.keys(blocks).length, 0), 'block'),
  convergence: (results) => openState([...targetErrors(results), ...targetGains(results)].map(({ estimate }) => estimate.status)),
  scale: (results) => counted(Math.max(0, ...Object.values(results.scan).map(({ at }) => at.length)), 'cut'),
  degeneracies: degeneracyState,
  'data-checks': checkState,
  methods: (results) => counted(Object.keys(results.combinations).length, 'combination'),
  provenance: (results) => counted(results.inputs.length, 'file'),
};

function quotableState(all: readonly { readonly estimate: Parameters<typeof quotable>[0] }[]): string {
  if (all.length === 0) return 'nothing to compare';
  return `${String(all.filter(({ estimate }) => quotable(estimate)).length)} of ${String(all.length)} can be quoted`;
}

function openState(statuses: readonly Status[]): string {
  const open = statuses.filter((status) => status !== 'settled' && status !== 'correctable').length;
  return open === 0 ? 'yes' : `not for ${String(open)} of ${String(statuses.length)}`;
}
