import type { ReadReport } from '../../accounts/types.ts';
import { dayInWords } from '../../days.ts';
import { counted } from './format.ts';

const ORDER_WORDS = {
  iso: 'year first',
  dmy: 'day first',
  mdy: 'month first',
} as const;

/** What was read, line by line: nothing that decides the answer is left unsaid. */
export function readText(report: ReadReport, name: string): string[] {
  const roles = (['id', 'start', 'end', 'segment', 'amount'] as const)
    .flatMap((role) => (report.columns[role] === undefined ? [] : [`${role} = ${report.columns[role]}`]))
    .join(', ');
  const lines = [
    `Read ${name}: ${counted(report.rows, 'row')}, ${counted(report.accounts, 'account')}, started ${dayInWords(report.firstStart)} to ${dayInWords(report.lastStart)}.`,
    `Columns: ${roles}. Dates read ${ORDER_WORDS[report.dates]}.`,
    `Data complete through ${dayInWords(report.asOf)}${asOfWhy(report)}.`,
  ];
  if (report.mergedRows > 0)
    lines.push(`${counted(report.mergedRows, 'row')} joined to another row of the same account.`);
  if (report.returned > 0)
    lines.push(`${counted(report.returned, 'account')} left and came back; each counts as lost where it first left.`);
  if (report.futureEnds > 0)
    lines.push(`${counted(report.futureEnds, 'end')} dated after that day: still customers until then.`);
  for (const entry of report.rejected) {
    lines.push(
      `Not used, ${counted(entry.rows, 'row')}: ${entry.reason} (${entry.rows === 1 ? '' : 'first on '}line ${entry.firstLine}).`,
    );
  }
  return lines;
}

/** Where the data-through date comes from. */
function asOfWhy({ asOf, asOfSource, lastStart }: ReadReport): string {
  if (asOfSource === 'given') return ' (as you said)';
  return ` (worked out from the file: its last start${asOf > lastStart ? ' or end' : ''})`;
}
