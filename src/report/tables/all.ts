import { areas, attribution, directions, oneFixed } from './attribution.js';
import { budget } from './budget.js';
import { checks } from './checks.js';
import { claims } from './claims.js';
import { combinations } from './combinations.js';
import { globalCorrelations } from './degeneracies.js';
import { errors, nuisanceErrors, parameters } from './errors.js';
import { fixedImprovements, improvements, nuisanceImprovements } from './improvements.js';
import { derivatives, factors } from './methods.js';
import { inputs, runs } from './provenance.js';
import { responses } from './responses.js';
import { fixedScan, scan } from './scan.js';
import type { CombinationTableMaker, TableMaker } from './table.js';
import { gainViews, statuses, verdicts, views } from './views.js';

export const tableMakers: Readonly<Record<string, TableMaker>> = {
  areas,
  attribution,
  budget,
  checks,
  claims,
  combinations,
  directions,
  errors,
  'errors-nuisance': nuisanceErrors,
  'global-correlations': globalCorrelations,
  improvements,
  'improvements-fixed': fixedImprovements,
  'improvements-nuisance': nuisanceImprovements,
  inputs,
  'one-fixed': oneFixed,
  parameters,
  responses,
  runs,
  scan,
  'scan-fixed': fixedScan,
  statuses,
  verdicts,
  views,
  'views-gains': gainViews,
};

/** Tables that stand inside `:::each`. */
export const combinationTableMakers: Readonly<Record<string, CombinationTableMaker>> = { derivatives, factors };
