import type { CheckResult } from '../../results/schema.js';
import type { Realisations } from '../../study/study.js';
import type { Check } from './check.js';

/** Rows that occur twice: each is counted as independent, so that repeats make every uncertainty look smaller. */
export const repeatedRealisations: Check = ({ suites }) =>
  suites.flatMap((suite) =>
    suite.runs.flatMap((run) =>
      run.data.kind === 'moments' ? [] : [describe(`repeats-${run.name}-fiducial`, `run ${run.name}, fiducial`, run.data.fiducial)],
    ),
  );

/** How many repeats are named. */
const named = 3;

function describe(id: string, where: string, realisations: Realisations): CheckResult {
  const pairs = repeatsIn(realisations);
  const { rows } = realisations.rows;
  if (pairs.length === 0) {
    return { id, level: 'ok', message: `No two of the ${String(rows)} fiducial realisations are the same.`, where };
  }
  const some = pairs.slice(0, named).map(([a, b]) => `rows ${String(a)} and ${String(b)}`);
  const more = pairs.length > named ? ` and ${String(pairs.length - named)} more` : '';
  return {
    id,
    level: 'warning',
    message: `${String(pairs.length)} of ${String(rows)} fiducial realisations repeat an earlier one (${some.join(', ')}${more}): they count as independent, so uncertainties come out too small.`,
    where,
  };
}

/** Pairs of equal rows, counted from 0: candidates by hash, then compared. */
function repeatsIn({ rows }: Realisations): readonly (readonly [number, number])[] {
  const seen = new Map<string, number>();
  const candidates: [number, number][] = [];
  for (let start = 0; start < rows.rows; start += 256) {
    const count = Math.min(256, rows.rows - start);
    const block = rows.read(start, count);
    for (let k = 0; k < count; k += 1) {
      const key = hash(block, k * rows.columns, rows.columns);
      const earlier = seen.get(key);
      if (earlier === undefined) seen.set(key, start + k);
      else candidates.push([earlier, start + k]);
    }
  }
  return candidates.filter(([a, b]) => {
    const first = Float64Array.from(rows.read(a, 1));
    const second = rows.read(b, 1);
    return first.every((value, i) => value === second[i]);
  });
}

function hash(block: Float64Array, start: number, length: number): string {
  const words = new Uint32Array(block.slice(start, start + length).buffer);
  let low = 0x811c9dc5;
  let high = 0x1000193;
  for (const word of words) {
    low = Math.imul(low ^ word, 0x01000193);
    high = Math.imul(high ^ (word >>> 7) ^ (word << 11), 0x5bd1e995);
  }
  return `${String(low)}:${String(high)}`;
}
