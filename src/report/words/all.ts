import { attributionLead, throughNoise } from './attribution.js';
import { checkLead } from './checks.js';
import { convergenceLead } from './convergence.js';
import { degeneracyLead } from './degeneracies.js';
import { errorLead } from './errors.js';
import { flattery, glance, verdictList } from './glance.js';
import { gainsOf, improvementLead } from './improvements.js';
import { methodsData, methodsFisher, methodsLead, methodsMissing, methodsPrecision, methodsPriors } from './methods.js';
import { byline, colophon, provenanceLead } from './provenance.js';
import { responseLead } from './responses.js';
import { scaleLead } from './scale.js';
import type { CombinationSentenceMaker, SentenceMaker } from './sentence-maker.js';

export const sentenceMakers: Readonly<Record<string, SentenceMaker>> = {
  attribution: attributionLead,
  byline,
  checks: checkLead,
  claims: verdictList,
  colophon,
  convergence: convergenceLead,
  degeneracies: degeneracyLead,
  errors: errorLead,
  flattery,
  glance,
  improvement: improvementLead,
  methods: methodsLead,
  provenance: provenanceLead,
  responses: responseLead,
  scale: scaleLead,
  'through-noise': throughNoise,
};

/** Sentences that stand inside `:::each`. */
export const combinationSentenceMakers: Readonly<Record<string, CombinationSentenceMaker>> = {
  'gains-of': gainsOf,
  'methods-data': methodsData,
  'methods-fisher': methodsFisher,
  'methods-missing': methodsMissing,
  'methods-precision': methodsPrecision,
  'methods-priors': methodsPriors,
};
