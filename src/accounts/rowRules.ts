import type { Columns } from './columns.ts';
import { NEVER_FROM, NO_DATE_UNTIL } from './dateText.ts';
import { quoteName } from './sql.ts';

/** Every reason for which a row is left out, in the words that the channel shows. The order is the order of precedence. */
export const REASONS = {
  ragged: 'the row has more or fewer fields than there are columns, or a quote that is never closed',
  'total-line': 'the line is a total, not an account',
  'id-missing': 'the row names no account',
  internal: 'the account is marked as a test or internal one',
  trial: 'a trial that never paid',
  'start-missing': 'there is no start date',
  'start-unreadable': 'the start date cannot be read',
  'end-unreadable': 'the end date cannot be read',
  'end-missing': 'the status says that it ended, but there is no end date',
  'end-before-start': 'the end date lies before the start date',
  'zero-length': 'it ended on the day it started',
  'future-start': 'it starts after the data-through date',
  duplicate: 'the row repeats another row exactly',
} as const;

export type ReasonCode = keyof typeof REASONS;

const TEST_WORDS = "'test', 'internal', 'demo', 'staff', 'employee', 'sandbox', 'dummy', 'qa'";

/**
 * Rules that look at text, one bit each, computed while the file is read:
 * 1  the id is a test account: it begins with test, internal, demo or dummy as a word of its own, or is an address at a domain that is
 *    reserved for examples (RFC 2606: example.com/.net/.org, .test, .example, .invalid, .localhost)
 * 2  the segment is exactly "test", "internal", "demo", "staff", … or a column such as is_test says yes
 * 4  segment or status contains the word trial
 * 8  the status says that the subscription ended
 * 16 the id is the label of a total ("Total", "Grand total", "Sum")
 */
export const MARK = { testId: 1, testFlag: 2, trial: 4, ended: 8, total: 16 } as const;

/** SQL of the marks. A cheap look at the first letters comes before every pattern: patterns over a million ids are slow. */
export function marksSql(columns: Columns): string {
  const column = (at: number): string => quoteName(`c${at}`);
  const parts: string[] = [];
  if (columns.id !== undefined) {
    const id = column(columns.id);
    parts.push(
      `CASE WHEN lower(left(${id}, 4)) IN ('test', 'inte', 'demo', 'dumm') OR contains(${id}, '@') THEN ` +
        `CASE WHEN regexp_matches(lower(${id}), '^(test|internal|demo|dummy)([^a-z]|$)|@([a-z0-9.-]+\\.)?(example\\.(com|net|org)|test|example|invalid|localhost)$') THEN ${MARK.testId} ELSE 0 END ELSE 0 END`,
      `CASE WHEN lower(left(${id}, 3)) IN ('tot', 'gra', 'sum', 'sub') AND regexp_matches(lower(${id}), '^(grand |sub ?)?(total|sum)s?\\b *(:|$)') THEN ${MARK.total} ELSE 0 END`,
    );
  }
  if (columns.segment !== undefined)
    parts.push(`CASE WHEN lower(trim(${column(columns.segment)})) IN (${TEST_WORDS}) THEN ${MARK.testFlag} ELSE 0 END`);
  if (columns.flag !== undefined) {
    parts.push(
      `CASE WHEN lower(trim(${column(columns.flag)})) IN ('true', 'yes', '1', 't', 'y', 'x', ${TEST_WORDS}) THEN ${MARK.testFlag} ELSE 0 END`,
    );
  }
  for (const at of [columns.segment, columns.status]) {
    if (at === undefined) continue;
    parts.push(
      `CASE WHEN contains(lower(${column(at)}), 'trial') AND regexp_matches(lower(${column(at)}), '(^|[^a-z])(trial|trialing|trialling)([^a-z]|$)') THEN ${MARK.trial} ELSE 0 END`,
    );
  }
  if (columns.status !== undefined) {
    parts.push(
      `CASE WHEN lower(trim(${column(columns.status)})) IN ('cancelled', 'canceled', 'churned', 'terminated', 'expired', 'closed', 'ended', 'lapsed', 'inactive', 'deactivated') THEN ${MARK.ended} ELSE 0 END`,
    );
  }
  return parts.length === 0 ? '0::UTINYINT' : `(${parts.map((part) => `(${part})::UTINYINT`).join(' | ')})`;
}

/**
 * SQL of the reason a row is left out, NULL when it is kept; over columns n, key, start_day, start_text, end_day, end_text, amount, marks.
 * A trial is left out only while no amount above zero stands beside it: whoever paid is a customer, whatever the plan is called.
 */
export function reasonSql(columns: Columns, use: { readonly testIds: boolean }): string {
  const test = MARK.testFlag | (use.testIds ? MARK.testId : 0);
  const cases = [
    ...(columns.id === undefined
      ? []
      : [
          `WHEN (marks & ${MARK.total}) > 0 AND start_day IS NULL THEN 'total-line'`,
          "WHEN key IS NULL THEN 'id-missing'",
        ]),
    `WHEN (marks & ${test}) > 0 THEN 'internal'`,
    `WHEN (marks & ${MARK.trial}) > 0 AND coalesce(amount, 0) <= 0 THEN 'trial'`,
    "WHEN start_day IS NULL AND start_text IS NULL THEN 'start-missing'",
    `WHEN start_day IS NULL OR start_day <= ${NO_DATE_UNTIL} OR start_day >= ${NEVER_FROM} THEN 'start-unreadable'`,
    "WHEN end_day IS NULL AND end_text IS NOT NULL THEN 'end-unreadable'",
    `WHEN (marks & ${MARK.ended}) > 0 AND (end_day IS NULL OR end_day <= ${NO_DATE_UNTIL} OR end_day >= ${NEVER_FROM}) THEN 'end-missing'`,
    `WHEN end_day > ${NO_DATE_UNTIL} AND end_day < start_day THEN 'end-before-start'`,
    "WHEN end_day = start_day THEN 'zero-length'",
  ];
  return `CASE ${cases.join(' ')} END`;
}

/** SQL of the end with placeholders ("9999-12-31", "1900-01-01") taken for what they mean: still a customer. */
export const TRUE_END_SQL = `CASE WHEN end_day > ${NO_DATE_UNTIL} AND end_day < ${NEVER_FROM} THEN end_day END`;
