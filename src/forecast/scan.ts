import type { ScanResult, Status } from '../results/schema.js';
import type { Scan, Study } from '../study/study.js';
import type { Assessed, ErrorKind } from './assess.js';
import { difference, errorKinds, valueOf, variances } from './assess.js';
import type { AtCut } from './combined.js';
import { quantityOf } from './combined.js';
import type { Measured } from './estimate.js';
import { estimateOf } from './estimate.js';

type Values = ScanResult['errors'][string]['marginalised'];

/**
 * Errors of a combination, and its gain over the baseline at the same cut, against the cut. null where no entry lies
 * along the scan's coordinate. The statuses here rest on uncertainty and raw value alone: the other two views are made
 * for the whole data vector only.
 */
export function scanResult(study: Study, scan: Scan, assessed: Assessed, baseline: Assessed): ScanResult | null {
  const along = assessed.combined.parts
    .flatMap((part) => part.entries)
    .find((entry) => entry.column.coordinate?.name === scan.coordinate);
  if (along === undefined) return null;
  const order = scan.at.map((_, k) => (scan.keep === 'below' ? k : scan.at.length - 1 - k));
  const isBaseline = assessed.combined.combination.name === study.baseline;
  const values = (parameter: number, kind: ErrorKind, against: Assessed | null): Values =>
    collect(order.map((cut) => valueAt(study, assessed, against, cut, parameter, kind)));
  return {
    coordinate: scan.coordinate,
    unit: along.column.coordinate?.unit ?? '',
    keep: scan.keep,
    at: [...scan.at],
    entries: order.map((cut) => assessed.combined.cuts[cut]!.entries),
    errors: forParameters(study, (parameter, kind) => values(parameter, kind, null)),
    improvements: isBaseline ? null : forParameters(study, (parameter, kind) => values(parameter, kind, baseline)),
  };
}

function forParameters(study: Study, make: (parameter: number, kind: ErrorKind) => Values): ScanResult['errors'] {
  const [marginalised, fixed] = errorKinds as [ErrorKind, ErrorKind];
  return Object.fromEntries(
    study.parameters.map(({ name }, a) => [name, { marginalised: make(a, marginalised), fixed: make(a, fixed) }]),
  );
}

interface ScanValue {
  readonly raw: number | null;
  readonly corrected: number | null;
  readonly relativeStandardError: number | null;
  readonly status: Status;
}

function collect(values: readonly ScanValue[]): Values {
  return {
    raw: values.map(({ raw }) => raw),
    corrected: values.map(({ corrected }) => corrected),
    relativeStandardError: values.map(({ relativeStandardError }) => relativeStandardError),
    status: values.map(({ status }) => status),
  };
}

function valueAt(
  study: Study,
  assessed: Assessed,
  against: Assessed | null,
  cut: number,
  parameter: number,
  kind: ErrorKind,
): ScanValue {
  const own = { at: assessed.combined.cuts[cut]!, q: quantityOf(assessed.combined, parameter, kind) };
  const base = against === null ? null : { at: against.combined.cuts[cut]!, q: quantityOf(against.combined, parameter, kind) };
  const logs = (side: { at: AtCut; q: number | null }, which: 'raw' | 'corrected'): number | null =>
    valueOf(side.at[which], side.q);
  const value = (which: 'raw' | 'corrected'): number | null =>
    base === null ? logs(own, which) : difference(logs(base, which), logs(own, which));
  const measured: Measured = {
    assessable: assessed.combined.assessable && (against?.combined.assessable ?? true),
    logRaw: value('raw'),
    logCorrected: value('corrected'),
    ...variances(
      own.q === null ? null : { at: own.at, q: own.q },
      base?.q === null || base === null ? null : { at: base.at, q: base.q },
    ),
    noisy: false,
    logLimit: null,
    logSplit: null,
    reason: '',
    derivativeRealisationsNeeded: null,
  };
  const { raw, corrected, relativeStandardError, status } = estimateOf(measured, study.tolerance);
  return { raw, corrected, relativeStandardError, status };
}
