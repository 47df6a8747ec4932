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
import type { SentenceMaker } from './sentence-maker.js';

export const sentenceMakers: Readonly<Record<string, SentenceMaker>> = {
  byline,
  checks: checkLead,
  claims: verdictList,
  colophon,
  convergence: convergenceLead,
  degeneracies: degeneracyLead,
  errors: errorLead,
  flattery,
  'gains-of': gainsOf,
  glance,
  improvement: improvementLead,
  'methods-data': methodsData,
  'methods-fisher': methodsFisher,
  methods: methodsLead,
  'methods-missing': methodsMissing,
  'methods-precision': methodsPrecision,
  'methods-priors': methodsPriors,
  provenance: provenanceLead,
  responses: responseLead,
  scale: scaleLead,
};
