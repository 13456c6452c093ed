import type { AmountReport, ReadReport } from '../../accounts/types.ts';
import { dayInWords } from '../../days.ts';
import { counted, listed } from './format.ts';

const ORDER_WORDS = {
  iso: 'year first',
  dmy: 'day first',
  mdy: 'month first',
} as const;

/** What was read, line by line: nothing that decides the answer is left unsaid. */
export function readText(report: ReadReport, name: string): string[] {
  const roles = (['id', 'start', 'end', 'segment', 'amount', 'currency'] as const)
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
  if (report.amounts) lines.push(...amountLines(report.amounts));
  for (const entry of report.rejected) {
    lines.push(
      `Not used, ${counted(entry.rows, 'row')}: ${entry.reason} (${entry.rows === 1 ? '' : 'first on '}line ${entry.firstLine}).`,
    );
  }
  return lines;
}

/** What in the amounts decides a sum: how they were read, and what could not be. */
function amountLines({ decimalComma, thousands, currencies, ...amounts }: AmountReport): string[] {
  const lines: string[] = [];
  if (decimalComma) lines.push('Amounts: a comma is the decimal sign, as some of them can only be read so.');
  if (thousands > 0)
    lines.push(`Amounts: ${counted(thousands, 'row')} with a ${decimalComma ? 'point' : 'comma'} between thousands.`);
  const named = currencies.map(
    ({ currency, accounts }) => `${currency ?? 'none stated'} (${counted(accounts, 'account')})`,
  );
  if (named.length > 0)
    lines.push(`${named.length === 1 ? 'Currency' : 'Currencies'} of the amounts: ${listed(named)}.`);
  const { unreadable, firstUnreadable, missing, negative } = amounts;
  if (unreadable > 0 && firstUnreadable)
    lines.push(
      `Amounts that cannot be read, ${counted(unreadable, 'row')}: line ${firstUnreadable.line} says “${firstUnreadable.value}”. The accounts count; no sum of revenue holds them.`,
    );
  if (missing > 0) lines.push(`${counted(missing, 'row')} without an amount.`);
  if (negative > 0) lines.push(`${counted(negative, 'row')} with a negative amount, which no sum of revenue holds.`);
  return lines;
}

/** Where the data-through date comes from. */
function asOfWhy({ asOf, asOfSource, lastStart }: ReadReport): string {
  if (asOfSource === 'given') return ' (as you said)';
  return ` (worked out from the file: its last start${asOf > lastStart ? ' or end' : ''})`;
}
