import { rowsOf } from '../accounts/sql.ts';
import type { AccountTable } from '../accounts/types.ts';
import { type Day, dayFromParts, isoDay } from '../days.ts';
import { calendarSql, type MonthNumber } from './calendarSql.ts';
import { checkRequest, segmentUnknown } from './requestChecks.ts';
import { segmentCounts, segmentNamesOf } from './segmentCounts.ts';
import type { Census, CensusRequest, CensusSubgroup } from './types.ts';

export interface CalendarCensus extends Census {
  /** the month under way when the data ends, which is withheld: its first and last day, its customers; null when there is none */
  readonly withheld: { readonly first: Day; readonly last: Day; readonly customers: number } | null;
  /** accounts that came and went within one of the months shown, and so are in none of them */
  readonly passed: number;
}

/**
 * The census, calendar view: the customers with whom a calendar month began, and how many of them left in it; one point a month.
 *
 * A customer of the month started before its first day and had not ended before it; it is lost in the month that its end lies in. So
 * whoever starts in a month is first at risk in the next, and an account that comes and goes within one month is in none of them: it is
 * counted in `passed`. A month is complete once its last day + settleDays <= asOf; the one under way is withheld. Months before the first
 * that begins with a customer are left out.
 *
 * In the result `accounts` are customers; firstStart and lastStart of a subgroup are the month's first and last day; `matured` are the
 * customers of all months added up; tenure and subgroupSize of the request play no part.
 * @throws EbbError OPTION_INVALID, SEGMENT_UNKNOWN
 */
export async function takeMonths(table: AccountTable, request: CensusRequest): Promise<CalendarCensus> {
  checkRequest(request);
  const first = monthOf(table.report.firstStart);
  const running = monthOf(request.asOf - request.settleDays + 1);
  const last = Math.max(first, running);
  const names = segmentNamesOf(table, request.segment);
  const months = new Map<MonthNumber, Month>();
  for (const row of await rowsOf(table.connection, calendarSql(table.table, request, first, last, names))) {
    const number = Number(row.month);
    const month = months.get(number) ?? { number, customers: 0, lost: 0, passed: 0, segments: new Map() };
    months.set(number, month);
    const [customers, lost] = [Number(row.customers), Number(row.lost)];
    month.customers += customers;
    month.lost += lost;
    month.passed += Number(row.passed);
    if (row.segment !== null) month.segments.set(String(row.segment), { accounts: customers, lost });
  }
  if (months.size === 0 && request.segment !== undefined) throw segmentUnknown(table, request.segment);
  const complete = [...months.values()].filter(({ number }) => number < running);
  const shown = complete.filter(({ customers }) => customers > 0);
  const under = months.get(running);
  const completeOn = firstDay(running + 1) + request.settleDays - 1;
  return {
    request,
    subgroups: shown.map(
      ({ number, customers, lost }, at): CensusSubgroup => ({
        index: at + 1,
        accounts: customers,
        lost,
        firstStart: firstDay(number),
        lastStart: firstDay(number + 1) - 1,
        asOf: firstDay(number + 1) - 1 + request.settleDays,
      }),
    ),
    matured: shown.reduce((sum, { customers }) => sum + customers, 0),
    waiting: under?.customers ?? 0,
    immature: 0,
    nextPointOn: under && under.customers > 0 ? completeOn : null,
    maturing: under && under.customers > 0 ? [{ day: completeOn, accounts: under.customers }] : [],
    inflowPerWeek: 0,
    segments: segmentCounts(names, shown),
    withheld:
      under && under.customers > 0 && request.asOf >= firstDay(running)
        ? { first: firstDay(running), last: firstDay(running + 1) - 1, customers: under.customers }
        : null,
    passed: complete.reduce((sum, { passed }) => sum + passed, 0),
  };
}

interface Month {
  readonly number: MonthNumber;
  customers: number;
  lost: number;
  passed: number;
  readonly segments: Map<string, { readonly accounts: number; readonly lost: number }>;
}

function monthOf(day: Day): MonthNumber {
  const [year, month] = isoDay(day).split('-').map(Number);
  return year! * 12 + month! - 1;
}

function firstDay(month: MonthNumber): Day {
  return dayFromParts(Math.floor(month / 12), (month % 12) + 1, 1)!;
}
