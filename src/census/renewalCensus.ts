import { rowsOf } from '../accounts/sql.ts';
import type { AccountTable } from '../accounts/types.ts';
import { addMonths, type Day } from '../days.ts';
import { EbbError } from '../errors.ts';
import { LATER_RENEWALS, type RenewalRange, renewalDaysSql, renewalSql } from './renewalSql.ts';
import { checkRequest, segmentUnknown } from './requestChecks.ts';
import { tenureInWords, tenurePoint } from './tenure.ts';
import type { Census, CensusRequest, CensusSubgroup, SegmentCounts, Tenure } from './types.ts';

const QUARTER_DAYS = 91;
/** A subscription that renews more often than this is paid by use; a million accounts would come up for half a billion renewals. */
const SHORTEST_DAYS = 7;
/** More points than this are no chart, and each of them would have to be sorted. */
const MOST_SUBGROUPS = 20_000;

/**
 * The census, renewal view: renewals in order of their date, ties by the stable key, in subgroups of exactly n.
 *
 * An export has no renewals in it, only starts and ends, so they are taken to come every `tenure` after an account's start: the k-th at
 * start + k tenures. An account comes up for a renewal while it is a customer, so each renewal up to the one at which it is lost is one
 * event, the second and all later ones like the first. It is lost at a renewal when it ended after the one before and on or before this
 * one: whoever leaves in the middle of a period counts at its end. With the first renewals alone this is the start view. A renewal has
 * matured once its date + settleDays <= asOf; one that has not is never counted, renewed or not.
 *
 * In the result `accounts` are renewals; firstStart and lastStart of a subgroup are its first and last renewal date; `immature` are the
 * renewals still to come (one for every account that is still there or whose loss has not matured); `segments` are the numbers of the
 * renewal, first, second, third and later, because renewals of different age are the groups that get mixed here.
 * @throws EbbError OPTION_INVALID, SEGMENT_UNKNOWN
 */
export async function takeRenewals(table: AccountTable, request: CensusRequest): Promise<Census> {
  checkRequest(request);
  const range = renewalRange(table, request);
  const { connection } = table;
  const days = await renewalDays(table, request, range, range.firstStart);
  checkPoints(sum(days.filter(({ due }) => due <= range.until)), request.subgroupSize);
  const subgroups = new Map<number, Building>();
  for (const row of await rowsOf(connection, renewalSql(table.table, request, range))) {
    const at = Number(row.subgroup);
    const subgroup = subgroups.get(at) ?? { first: Number.POSITIVE_INFINITY, last: 0, counts: new Map() };
    subgroups.set(at, subgroup);
    subgroup.first = Math.min(subgroup.first, Number(row.first_due));
    subgroup.last = Math.max(subgroup.last, Number(row.last_due));
    subgroup.counts.set(Number(row.renewal), { accounts: Number(row.accounts), lost: Number(row.lost) });
  }
  const all = [...subgroups.keys()].sort((a, b) => a - b).map((at) => subgroups.get(at)!);
  const matured = all.reduce((sum, { counts }) => sum + total(counts, 'accounts'), 0);
  const coming = days.filter(({ due }) => due > range.until);
  const immature = sum(coming);
  if (matured + immature === 0 && request.segment !== undefined) throw segmentUnknown(table, request.segment);
  const waiting = matured % request.subgroupSize;
  const finished = waiting === 0 ? all : all.slice(0, -1);
  const maturing = coming.map(({ due, accounts }) => ({ day: due + request.settleDays, accounts }));
  return {
    request,
    subgroups: finished.map(
      ({ first, last, counts }, at): CensusSubgroup => ({
        index: at + 1,
        accounts: total(counts, 'accounts'),
        lost: total(counts, 'lost'),
        firstStart: first,
        lastStart: last,
        asOf: last + request.settleDays,
      }),
    ),
    matured,
    waiting,
    immature,
    nextPointOn: dayOf(maturing, request.subgroupSize - waiting),
    maturing,
    inflowPerWeek: pace(days, range, request.tenure),
    segments: byNumber(finished),
  };
}

/** Matured renewals and those lost, all in all: what the subgroup sizes are recommended from. */
export async function countRenewals(
  table: AccountTable,
  request: Omit<CensusRequest, 'subgroupSize' | 'view'>,
): Promise<{ accounts: number; lost: number; perWeek: number }> {
  const whole: CensusRequest = { ...request, subgroupSize: 1, view: 'renewal' };
  const range = renewalRange(table, whole);
  const days = await renewalDays(table, whole, range, range.firstStart);
  const matured = days.filter(({ due }) => due <= range.until);
  return { accounts: sum(matured), lost: sum(matured, 'lost'), perWeek: pace(days, range, request.tenure) };
}

interface Building {
  first: Day;
  last: Day;
  readonly counts: Map<number, { readonly accounts: number; readonly lost: number }>;
}

interface RenewalDay {
  readonly due: Day;
  readonly accounts: number;
  readonly lost: number;
}

function sum(days: readonly RenewalDay[], what: 'accounts' | 'lost' = 'accounts'): number {
  return days.reduce((all, day) => all + day[what], 0);
}

/** Matured renewals a week over the last quarter of a year, or since the first could come up. */
function pace(days: readonly RenewalDay[], { firstStart, until }: RenewalRange, tenure: Tenure): number {
  const from = Math.max(until - QUARTER_DAYS + 1, Math.min(tenurePoint(firstStart, tenure), until));
  return (sum(days.filter(({ due }) => due >= from && due <= until)) * 7) / (until - from + 1);
}

function checkPoints(renewals: number, size: number): void {
  if (renewals <= size * MOST_SUBGROUPS) return;
  throw new EbbError(
    'OPTION_INVALID',
    `${renewals.toLocaleString('en-US')} renewals in points of ${size} are more points than a chart can show`,
    `Ask for at least ${Math.ceil(renewals / MOST_SUBGROUPS).toLocaleString('en-US')} renewals a point, or leave the size out.`,
  );
}

function renewalRange(table: AccountTable, request: CensusRequest): RenewalRange {
  if (renewalDate(0, 1, request.tenure) < SHORTEST_DAYS) {
    throw new EbbError(
      'OPTION_INVALID',
      `renewals every ${tenureInWords(request.tenure)} cannot be counted`,
      'The shortest time between renewals is a week; for example --tenure "1 month".',
    );
  }
  const { firstStart } = table.report;
  const until = request.asOf - request.settleDays;
  return { firstStart, until, most: renewalsBetween(firstStart, until, request.tenure) + 1 };
}

/** Renewals that an account started on `start` has come up for by `until`, if it is still there. */
function renewalsBetween(start: Day, until: Day, tenure: Tenure): number {
  let renewals = 0;
  while (renewalDate(start, renewals + 1, tenure) <= until) renewals++;
  return renewals;
}

function renewalDate(start: Day, renewal: number, { count, unit }: Tenure): Day {
  return unit === 'month' ? addMonths(start, renewal * count) : start + renewal * count * (unit === 'week' ? 7 : 1);
}

async function renewalDays(
  table: AccountTable,
  request: CensusRequest,
  range: RenewalRange,
  from: Day,
): Promise<RenewalDay[]> {
  const rows = await rowsOf(table.connection, renewalDaysSql(table.table, request, range, from));
  return rows.map((row) => ({ due: Number(row.due), accounts: Number(row.accounts), lost: Number(row.lost) }));
}

function total(counts: Building['counts'], what: 'accounts' | 'lost'): number {
  let sum = 0;
  for (const count of counts.values()) sum += count[what];
  return sum;
}

/** Day by which this many more will have come up. */
function dayOf(maturing: Census['maturing'], wanted: number): Day | null {
  let sum = 0;
  for (const { day, accounts } of maturing) {
    sum += accounts;
    if (sum >= wanted) return day;
  }
  return null;
}

const NAMES: Readonly<Record<number, string>> = {
  1: 'first renewals',
  2: 'second renewals',
  3: 'third renewals',
  [LATER_RENEWALS]: 'later renewals',
};

function byNumber(subgroups: readonly Building[]): SegmentCounts[] {
  const numbers = [1, 2, 3, LATER_RENEWALS].filter((number) => subgroups.some(({ counts }) => counts.has(number)));
  if (numbers.length < 2) return [];
  return numbers.map((number) => ({
    segment: NAMES[number]!,
    accounts: subgroups.map(({ counts }) => counts.get(number)?.accounts ?? 0),
    lost: subgroups.map(({ counts }) => counts.get(number)?.lost ?? 0),
  }));
}
