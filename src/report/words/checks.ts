import type { CheckResult, Results } from '../../results/schema.js';
import { paragraph, say } from '../markdown/nodes.js';
import type { SentenceMaker } from './sentence-maker.js';
import { capital, counted } from './values.js';

export const checkLead: SentenceMaker = ({ checks }) => {
  const of = (level: CheckResult['level']): number => checks.filter((check) => check.level === level).length;
  const verdict =
    of('error') > 0
      ? 'Do not trust the numbers before the errors are mended.'
      : of('warning') > 0
        ? 'Read the warnings before quoting a number.'
        : of('note') > 0
          ? 'Nothing speaks against the data; the notes say what to bear in mind.'
          : 'Nothing speaks against the data.';
  const counts = `${capital(counted(of('error'), 'error'))}, ${counted(of('warning'), 'warning')}, ${counted(of('note'), 'note')}; ${counted(of('ok'), 'check')} passed.`;
  return [paragraph(...say`${counts} ${verdict}`)];
};

export function checkState({ checks }: Results): string {
  const errors = checks.filter(({ level }) => level === 'error').length;
  const warnings = checks.filter(({ level }) => level === 'warning').length;
  return errors > 0 ? counted(errors, 'error') : counted(warnings, 'warning');
}
