import type { Columns } from './columns.ts';
import { NEVER_FROM, NO_DATE_UNTIL } from './dateText.ts';
import { quoteText } from './sql.ts';

/** Every reason for which a row is left out, in the words that the channel shows. The order is the order of precedence. */
export const REASONS = {
  ragged: 'the row has more or fewer fields than there are columns, or a quote that is never closed',
  'total-line': 'the line is a total, not an account',
  'id-missing': 'the row names no account',
  internal: 'the account is marked as a test or internal one',
  trial: 'the account is a trial that never paid',
  'start-missing': 'there is no start date',
  'start-unreadable': 'the start date cannot be read',
  'end-unreadable': 'the end date cannot be read',
  'end-missing': 'the status says that the account ended, but there is no end date',
  'end-before-start': 'the end date lies before the start date',
  'zero-length': 'the account ended on the day it started',
  'future-start': 'the account starts after the data-through date',
  duplicate: 'the row repeats another row exactly',
} as const;

export type ReasonCode = keyof typeof REASONS;

const TEST_WORDS = ['test', 'internal', 'demo', 'staff', 'employee', 'sandbox', 'dummy', 'qa'];
const YES_WORDS = ['true', 'yes', '1', 't', 'y', 'x', ...TEST_WORDS];
const ENDED_WORDS = [
  'cancelled',
  'canceled',
  'churned',
  'terminated',
  'expired',
  'closed',
  'ended',
  'lapsed',
  'inactive',
  'deactivated',
];

/** What an id looks like, as `id_kind`: a test account, the label of a total, or (0) an account. */
export const ID_KIND = { account: 0, test: 1, total: 2 } as const;

/**
 * SQL of the id's kind.
 * A test account: the id begins with test, internal, demo or dummy as a word of its own, or is an address at a name that RFC 2606 reserves
 * for tests and examples (example.com/.net/.org, .test, .example, .invalid, .localhost). A total: "Total", "Grand total", "Sum", ….
 * A cheap look at the first letter comes before the patterns: patterns over a million ids are slow. No IN list of more than a few values:
 * the engine would turn it into a join, and a join does not keep the rows in file order.
 */
export function idKindSql(id: string): string {
  const test =
    '^(test|internal|demo|dummy)([^a-z]|$)|@([a-z0-9.-]+\\.)?(example\\.(com|net|org)|test|example|invalid|localhost)$';
  return (
    `CASE WHEN contains('tTiIdDgGsS', left(${id}, 1)) OR contains(${id}, '@') THEN ` +
    `CASE WHEN regexp_matches(lower(${id}), '${test}') THEN ${ID_KIND.test} ` +
    `WHEN regexp_matches(lower(${id}), '^(grand |sub ?)?(total|sum)s? *(:|$)') THEN ${ID_KIND.total} ELSE ${ID_KIND.account} END ` +
    `ELSE ${ID_KIND.account} END::UTINYINT`
  );
}

/** The values of segment, status and flag columns that a rule speaks about, as they stand in the file. */
export interface TellingValues {
  readonly testSegments: readonly string[];
  readonly trialSegments: readonly string[];
  readonly trialStatuses: readonly string[];
  readonly endedStatuses: readonly string[];
  readonly testFlags: readonly string[];
}

/**
 * Picks the telling ones among the distinct values. A segment marks a test account only when it is nothing but such a word: a plan
 * called "Test Prep" is a plan. "trial" counts anywhere as a word of its own.
 */
export function tellingValues(distinct: {
  readonly segments: readonly string[];
  readonly statuses: readonly string[];
  readonly flags: readonly string[];
}): TellingValues {
  const word = (value: string): string => value.trim().toLowerCase();
  const trial = (value: string): boolean => /(^|[^a-z])(trial|trialing|trialling)([^a-z]|$)/.test(word(value));
  return {
    testSegments: distinct.segments.filter((value) => TEST_WORDS.includes(word(value))),
    trialSegments: distinct.segments.filter(trial),
    trialStatuses: distinct.statuses.filter(trial),
    endedStatuses: distinct.statuses.filter((value) => ENDED_WORDS.includes(word(value))),
    testFlags: distinct.flags.filter((value) => YES_WORDS.includes(word(value))),
  };
}

function oneOf(column: string, values: readonly string[]): string[] {
  return values.length === 0 ? [] : [`${column} IN (${values.map(quoteText).join(', ')})`];
}

/**
 * SQL of the reason a row is left out, NULL when it is kept; over columns key, id_kind, start_day, start_text, end_day, end_text, segment,
 * amount, status, flag. A trial is left out only while no amount above zero stands beside it: whoever paid is a customer, whatever the plan
 * is called.
 */
export function reasonSql(
  columns: Columns,
  telling: TellingValues,
  use: { readonly testIds: boolean; readonly texts: boolean },
): string {
  const internal = [
    ...(use.testIds ? [`id_kind = ${ID_KIND.test}`] : []),
    ...oneOf('segment', telling.testSegments),
    ...oneOf('flag', telling.testFlags),
  ];
  const trial = [...oneOf('segment', telling.trialSegments), ...oneOf('status', telling.trialStatuses)];
  const when = (conditions: readonly string[], code: ReasonCode, and = ''): string[] =>
    conditions.length === 0 ? [] : [`WHEN (${conditions.join(' OR ')})${and} THEN '${code}'`];
  const cases = [
    ...(columns.id === undefined
      ? []
      : [
          `WHEN id_kind = ${ID_KIND.total} AND start_day IS NULL THEN 'total-line'`,
          "WHEN key IS NULL THEN 'id-missing'",
        ]),
    ...when(internal, 'internal'),
    ...when(trial, 'trial', ' AND coalesce(amount, 0) <= 0'),
    `WHEN start_day IS NULL${use.texts ? ' AND start_text IS NULL' : ''} THEN 'start-missing'`,
    `WHEN start_day IS NULL OR start_day <= ${NO_DATE_UNTIL} OR start_day >= ${NEVER_FROM} THEN 'start-unreadable'`,
    ...(use.texts ? ["WHEN end_day IS NULL AND end_text IS NOT NULL THEN 'end-unreadable'"] : []),
    ...when(
      oneOf('status', telling.endedStatuses),
      'end-missing',
      ` AND (end_day IS NULL OR end_day <= ${NO_DATE_UNTIL} OR end_day >= ${NEVER_FROM})`,
    ),
    `WHEN end_day > ${NO_DATE_UNTIL} AND end_day < start_day THEN 'end-before-start'`,
    "WHEN end_day = start_day THEN 'zero-length'",
  ];
  return `CASE ${cases.join(' ')} END`;
}

/** SQL of the end with placeholders ("9999-12-31", "1900-01-01") taken for what they mean: still a customer. */
export const TRUE_END_SQL = `CASE WHEN end_day > ${NO_DATE_UNTIL} AND end_day < ${NEVER_FROM} THEN end_day END`;
