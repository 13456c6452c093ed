import { addMonths, type Day } from '../days.ts';
import { EbbError } from '../errors.ts';
import type { Tenure } from './types.ts';

/** "3 months", "1 year" as "12 months", "10 days". */
export function tenureInWords(tenure: Tenure): string {
  return `${tenure.count} ${tenure.unit}${tenure.count === 1 ? '' : 's'}`;
}

/** The day on which an account that started on `start` reaches the tenure point. */
export function tenurePoint(start: Day, tenure: Tenure): Day {
  if (tenure.unit === 'month') return addMonths(start, tenure.count);
  return start + tenure.count * (tenure.unit === 'week' ? 7 : 1);
}

/** The same as SQL over a column of day numbers; DuckDB and Postgres read it alike, and both clamp 31 January + 1 month to February. */
export function tenurePointSql(start: string, tenure: Tenure): string {
  if (tenure.unit === 'month') {
    return `(CAST(DATE '1970-01-01' + ${start} + INTERVAL '${tenure.count} months' AS DATE) - DATE '1970-01-01')`;
  }
  return `(${start} + ${tenure.count * (tenure.unit === 'week' ? 7 : 1)})`;
}

/**
 * The last start day whose accounts have matured: start + T + settleDays <= asOf. Later starts reach T later or on the same day, so one
 * day separates the matured from the young.
 */
export function lastMaturedStart(asOf: Day, tenure: Tenure, settleDays: number): Day {
  const until = asOf - settleDays;
  if (tenure.unit !== 'month') return until - tenure.count * (tenure.unit === 'week' ? 7 : 1);
  // Clamping maps up to four starts to one day: look a few days past the plain answer.
  let start = addMonths(until, -tenure.count) + 4;
  while (tenurePoint(start, tenure) > until) start--;
  return start;
}

/** @throws EbbError OPTION_INVALID */
export function checkTenure(tenure: Tenure): void {
  if (!Number.isInteger(tenure.count) || tenure.count < 1 || tenurePoint(0, tenure) > 36_600) {
    throw new EbbError(
      'OPTION_INVALID',
      `a tenure of ${tenureInWords(tenure)} cannot be used`,
      'Give a whole number of days, weeks or months, such as "3 months".',
    );
  }
}

/** The most days a tenure can take: 92 for three months, which may be 90. */
export function longestDays(tenure: Tenure): number {
  if (tenure.unit !== 'month') return tenurePoint(0, tenure);
  // Four years hold every length there is, but for centuries without a leap day, which are shorter.
  let longest = 0;
  for (let start = 0; start < 1461; start++) longest = Math.max(longest, addMonths(start, tenure.count) - start);
  return longest;
}

/** A tenure in months, calendar months as they are and days by the mean length of a month. */
export function tenureMonthsOf(tenure: Tenure): number {
  return tenure.unit === 'month' ? tenure.count : tenurePoint(0, tenure) / MEAN_MONTH_DAYS;
}

/** 365.25 / 12. */
const MEAN_MONTH_DAYS = 30.4375;
