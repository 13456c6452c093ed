import { type Day, isoDay } from '../days.ts';
import { EbbError } from '../errors.ts';
import { type Columns, datesUnreadable } from './columns.ts';
import type { Layout } from './layout.ts';
import type { Rejected } from './types.ts';

/** The error for a file of which no row can be counted: it speaks about the commonest reason. */
export function nothingLeft(rejected: readonly Rejected[], rows: number, layout: Layout, columns: Columns): EbbError {
  if (rows === 0 && rejected.length === 0) {
    return new EbbError(
      'ROWS_MISSING',
      'there are column names and no rows under them',
      'Export again with one line per subscription.',
    );
  }
  const main = rejected[0];
  if (main?.code === 'start-unreadable' || main?.code === 'end-unreadable') {
    const column = layout.headers[main.code === 'start-unreadable' ? columns.start : columns.end] ?? '';
    return datesUnreadable(column, main.firstLine, main.examples[0]?.value ?? '');
  }
  if (main?.code === 'start-missing') return datesUnreadable(layout.headers[columns.start] ?? '', main.firstLine, '');
  const hint =
    main?.code === 'end-before-start'
      ? `Are the columns the wrong way round? Start was read from "${layout.headers[columns.start]}", end from "${layout.headers[columns.end]}" (on the command line: --columns start=NAME,end=NAME).`
      : 'Check that the right columns were taken (on the command line: --columns id=NAME,start=NAME,end=NAME).';
  return new EbbError(
    'ACCOUNTS_NONE',
    `no row is left to count: ${rejected.map((one) => `${one.rows} ${one.rows === 1 ? 'row' : 'rows'}: ${one.reason} (${one.rows === 1 ? '' : 'first on '}line ${one.firstLine})`).join('; ')}`,
    hint,
    { detail: { rejected } },
  );
}

export function allInFuture(asOf: Day, first: Day | undefined): EbbError {
  return new EbbError(
    'ACCOUNTS_NONE',
    `every account starts after the data-through date ${isoDay(asOf)}; the first starts on ${first === undefined ? '?' : isoDay(first)}`,
    'Give the last day the export is complete for (on the command line: --as-of YYYY-MM-DD).',
  );
}
