import { rowsOf } from '../accounts/sql.ts';
import type { AccountTable } from '../accounts/types.ts';
import type { Day } from '../days.ts';
import { takeMonths } from './calendarCensus.ts';
import { censusSql, startsSql } from './censusSql.ts';
import { takeRenewals } from './renewalCensus.ts';
import { checkRequest, segmentUnknown } from './requestChecks.ts';
import { segmentCounts, segmentNamesOf } from './segmentCounts.ts';
import { lastMaturedStart, tenurePoint } from './tenure.ts';
import type { Census, CensusRequest, CensusSubgroup } from './types.ts';

const QUARTER_DAYS = 91;

/**
 * The census in the view asked for; start unless said otherwise.
 *
 * Start view: matured accounts in order of start, ties by the stable key, in subgroups of exactly n.
 * An account counts as lost when it ended on or before its tenure point. The unfinished last subgroup is withheld.
 * @throws EbbError OPTION_INVALID, SEGMENT_UNKNOWN
 */
export async function takeCensus(table: AccountTable, request: CensusRequest): Promise<Census> {
  checkRequest(request);
  if (request.view === 'renewal') return takeRenewals(table, request);
  if (request.view === 'calendar') return takeMonths(table, request);
  const { connection } = table;
  const maturedUntil = lastMaturedStart(request.asOf, request.tenure, request.settleDays);
  const segmentNames = segmentNamesOf(table, request.segment);
  const rows = await rowsOf(
    connection,
    censusSql(table.table, request, table.report.firstStart, maturedUntil, segmentNames),
  );
  const starts = await startsFrom(table, maturedUntil - 2 * QUARTER_DAYS, request.segment);

  const all: {
    accounts: number;
    lost: number;
    first: Day;
    last: Day;
    segments: Map<string, { accounts: number; lost: number }>;
  }[] = [];
  for (const row of rows) {
    const [accounts, lost, first, last] = [
      Number(row.accounts),
      Number(row.lost),
      Number(row.first_start),
      Number(row.last_start),
    ];
    const at = Number(row.subgroup);
    const subgroup = all[at] ?? { accounts: 0, lost: 0, first, last, segments: new Map() };
    all[at] = subgroup;
    subgroup.accounts += accounts;
    subgroup.lost += lost;
    subgroup.first = Math.min(subgroup.first, first);
    subgroup.last = Math.max(subgroup.last, last);
    if (row.segment !== null) subgroup.segments.set(String(row.segment), { accounts, lost });
  }
  const matured = all.reduce((sum, { accounts }) => sum + accounts, 0);
  const young = starts.filter(({ day }) => day > maturedUntil);
  const immature = young.reduce((sum, { accounts }) => sum + accounts, 0);
  if (matured + immature === 0 && request.segment !== undefined) throw segmentUnknown(table, request.segment);
  const waiting = matured % request.subgroupSize;
  const finished = waiting === 0 ? all : all.slice(0, -1);
  const subgroups: CensusSubgroup[] = finished.map(({ accounts, lost, first, last }, at) => ({
    index: at + 1,
    accounts,
    lost,
    firstStart: first,
    lastStart: last,
    asOf: tenurePoint(last, request.tenure) + request.settleDays,
  }));
  const completing = startOf(young, request.subgroupSize - waiting);
  return {
    request,
    subgroups,
    matured,
    waiting,
    immature,
    nextPointOn: completing === undefined ? null : tenurePoint(completing, request.tenure) + request.settleDays,
    maturing: young.map(({ day, accounts }) => ({
      day: tenurePoint(day, request.tenure) + request.settleDays,
      accounts,
    })),
    inflowPerWeek: await inflow(table, request.segment, maturedUntil, all.at(-1)?.last, starts),
    segments: segmentCounts(segmentNames, finished),
  };
}

interface Starts {
  readonly day: Day;
  readonly accounts: number;
}

async function startsFrom(table: AccountTable, from: Day, segment: string | undefined): Promise<Starts[]> {
  const rows = await rowsOf(table.connection, startsSql(table.table, from, segment));
  return rows.map((row) => ({ day: Number(row.start_day), accounts: Number(row.accounts) }));
}

/** Start day of the k-th account. */
function startOf(starts: readonly Starts[], k: number): Day | undefined {
  let sum = 0;
  for (const { day, accounts } of starts) {
    sum += accounts;
    if (sum >= k) return day;
  }
  return undefined;
}

/** Matured accounts a week over the last quarter of a year in which accounts started and have matured. */
async function inflow(
  table: AccountTable,
  segment: string | undefined,
  maturedUntil: Day,
  lastStart: Day | undefined,
  known: readonly Starts[],
): Promise<number> {
  if (lastStart === undefined) return 0;
  const to = Math.min(maturedUntil, lastStart);
  const from = Math.max(to - QUARTER_DAYS + 1, Math.min(table.report.firstStart, to));
  const starts = from >= maturedUntil - 2 * QUARTER_DAYS ? known : await startsFrom(table, from, segment);
  const count = starts.filter(({ day }) => day >= from && day <= to).reduce((sum, { accounts }) => sum + accounts, 0);
  return (count * 7) / (to - from + 1);
}
