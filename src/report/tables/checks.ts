import type { CheckResult } from '../../results/schema.js';
import { marked, say } from '../markdown/nodes.js';
import { prose } from '../words/prose.js';
import type { TableMaker } from './table.js';
import { words } from './table.js';

const order: readonly CheckResult['level'][] = ['error', 'warning', 'note', 'ok'];

/** Every check, the worst first. */
export const checks: TableMaker = (results) => ({
  id: 'checks',
  caption: say`What was checked, the worst first.`,
  columns: [words('Level'), words('Finding'), words('Where')],
  rows: order.flatMap((level) =>
    results.checks.filter((check) => check.level === level).map((check) => [marked(check.level, 'level', check.level), prose(check.message), check.where]),
  ),
});
