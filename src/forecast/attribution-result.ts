import type { Study } from '../study/study.js';
import type { Results } from '../results/schema.js';
import { directions, errorsWithOneFixed, gainShares, pairArea } from './attribution.js';
import type { Assessed } from './assess.js';
import { ratioOf, withoutViews } from './assess.js';
import { withoutBlocks } from './block-information.js';
import { noiseTie } from './canonical.js';
import type { Combined } from './combined.js';
import { combine, quantityOf, whole } from './combined.js';
import { silenced } from './silenced.js';

type Attribution = NonNullable<Results['attribution']>[string];

/** Where the gain of a combination over the baseline comes from. */
export function attributionOf(study: Study, baseline: Assessed, one: Assessed): Attribution {
  const { combined } = one;
  return {
    parameters: Object.fromEntries(
      study.parameters.map(({ name }, a) => [
        name,
        {
          shares: gainShares(baseline.combined, combined, a),
          oneFixed: oneFixed(study, baseline.combined, combined, a),
        },
      ]),
    ),
    throughNoise: throughNoise(study, baseline, one),
    ties: combined.parts.flatMap((part) => {
      const tie = noiseTie(part);
      if (tie === null) return [];
      return [
        {
          suite: part.suite.name,
          correlations: [...tie.correlations],
          chance: tie.chance,
          predicted: tie.predicted.map(({ entry, share }) => {
            const { column } = part.entries[entry]!;
            return { probe: column.probe, block: column.block, at: column.coordinate?.value ?? null, share };
          }),
        },
      ];
    }),
    blocks: blockLosses(study, combined),
    directions: directionsOf(study, baseline.combined, combined),
    areas: areasOf(study, baseline.combined, combined),
  };
}

function oneFixed(study: Study, baseline: Combined, combined: Combined, parameter: number) {
  const before = errorsWithOneFixed(baseline, parameter);
  const after = errorsWithOneFixed(combined, parameter);
  return study.parameters.flatMap(({ name }, other) =>
    other === parameter ? [] : [{ parameter: name, baseline: before.get(other) ?? null, combination: after.get(other) ?? null }],
  );
}

/** The gain with the added responses set to zero: what is left comes from predicting the baseline's noise. */
function throughNoise(study: Study, baseline: Assessed, one: Assessed): Attribution['throughNoise'] {
  const { combined } = one;
  const quiet = withoutViews(combine(study, combined.combination, combined.parts.map(silenced)));
  return Object.fromEntries(
    study.parameters.map(({ name }, a) => {
      const ratio = ratioOf(study, baseline, quiet, a, 'marginalised');
      return [name, { gain: ratio.corrected, relativeStandardError: ratio.relativeStandardError, interval: ratio.interval }];
    }),
  );
}

function blockLosses(study: Study, combined: Combined): Attribution['blocks'] {
  const { corrected } = whole(combined);
  return withoutBlocks(combined).map(({ probe, block, entries, logs }) => ({
    probe,
    block,
    entries,
    errorRatio: Object.fromEntries(
      study.parameters.map(({ name }, a) => {
        const quantity = quantityOf(combined, a, 'marginalised');
        const [without, all] = quantity === null ? [null, null] : [logs[quantity] ?? null, corrected?.logs[quantity] ?? null];
        return [name, without === null || all === null ? null : Math.exp(without - all)];
      }),
    ),
  }));
}

function directionsOf(study: Study, baseline: Combined, combined: Combined): Attribution['directions'] {
  const units = combined.active.map((a) => {
    const quantity = quantityOf(baseline, a, 'marginalised');
    return quantity === null ? null : (whole(baseline).corrected?.logs[quantity] ?? null);
  });
  const known = units.flatMap((log) => (log === null ? [] : [Math.exp(log)]));
  if (known.length < units.length) return null;
  const found = directions(combined, known);
  if (found === null) return null;
  return found.map(({ error, components }) => ({
    error,
    components: Object.fromEntries(combined.active.map((a, i) => [study.parameters[a]!.name, components[i]!])),
  }));
}

function areasOf(study: Study, baseline: Combined, combined: Combined): Attribution['areas'] {
  return study.parameters.flatMap((first, a) =>
    study.parameters.slice(a + 1).map((second, k) => {
      const before = pairArea(baseline, a, a + 1 + k);
      const after = pairArea(combined, a, a + 1 + k);
      return { parameters: [first.name, second.name] as [string, string], gain: before === null || after === null || after === 0 ? null : before / after };
    }),
  );
}
