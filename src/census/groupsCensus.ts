import { rowsOf } from '../accounts/sql.ts';
import type { AccountTable } from '../accounts/types.ts';
import type { Day } from '../days.ts';
import { groupsCensusSql, groupTotalsSql } from './groupsSql.ts';
import { assumedRate, recommendSize } from './plan.ts';
import { subgroupSizes } from './sizes.ts';
import { checkTenure, lastMaturedStart, tenurePoint } from './tenure.ts';
import type { CensusSubgroup, Tenure } from './types.ts';

export interface GroupsRequest {
  /** the same for all groups, so that their rates can be compared */
  readonly tenure: Tenure;
  readonly settleDays: number;
  readonly asOf: Day;
  /** accounts in a subgroup of every group; else each gets what fits it */
  readonly subgroupSize?: number;
}

/** One group of accounts and its own census. */
export interface GroupCensus {
  /** the segment value; null for those that are pooled */
  readonly value: string | null;
  /** for the pooled: how many values, and how many accounts without any */
  readonly pooled: { readonly values: number; readonly without: number } | null;
  readonly accounts: number;
  /** accounts that have reached the tenure point, and those of them lost by then */
  readonly matured: number;
  readonly lost: number;
  readonly subgroupSize: number;
  /** full subgroups only */
  readonly subgroups: readonly CensusSubgroup[];
}

/** Groups looked at by themselves; the rest is pooled, as in the census of all accounts. */
export const GROUPS = 12;

/**
 * The census of every group by itself: its own accounts in order of start, in subgroups of a size that fits it.
 * Groups with most accounts first, the pooled rest last; a rest of a single value is no rest and goes by its name.
 * @throws EbbError OPTION_INVALID for a tenure that cannot be used
 */
export async function takeGroupsCensus(table: AccountTable, request: GroupsRequest): Promise<GroupCensus[]> {
  const { tenure, settleDays, asOf } = request;
  checkTenure(tenure);
  const { report, connection } = table;
  const maturedUntil = lastMaturedStart(asOf, tenure, settleDays);
  const known = report.segments.map(({ value }) => value);
  const values = known.slice(0, known.length === GROUPS + 1 ? known.length : GROUPS);
  const totals = await rowsOf(connection, groupTotalsSql(table.table, values, tenure, report.firstStart, maturedUntil));

  const all = { matured: 0, lost: 0 };
  for (const row of totals) {
    all.matured += Number(row.matured);
    all.lost += Number(row.lost);
  }
  const sizes = new Map<number, number>();
  for (const row of totals) {
    const own = { matured: Number(row.matured), lost: Number(row.lost) };
    if (own.matured > 0) sizes.set(Number(row.place), request.subgroupSize ?? sizeFor(own, all));
  }
  const rows =
    sizes.size === 0
      ? []
      : await rowsOf(connection, groupsCensusSql(table.table, values, sizes, tenure, report.firstStart, maturedUntil));
  return totals.map((row): GroupCensus => {
    const place = Number(row.place);
    const subgroupSize = sizes.get(place) ?? sizeFor(all, all);
    return {
      value: values[place] ?? null,
      pooled: place < values.length ? null : { values: Number(row.values_held), without: Number(row.without) },
      accounts: Number(row.accounts),
      matured: Number(row.matured),
      lost: Number(row.lost),
      subgroupSize,
      subgroups: rows
        .filter((one) => Number(one.place) === place && Number(one.accounts) === subgroupSize)
        .map((one) => ({
          index: Number(one.subgroup) + 1,
          accounts: Number(one.accounts),
          lost: Number(one.lost),
          firstStart: Number(one.first_start),
          lastStart: Number(one.last_start),
          asOf: tenurePoint(Number(one.last_start), tenure) + settleDays,
        })),
    };
  });
}

interface Counts {
  readonly matured: number;
  readonly lost: number;
}

/** The size that fits a group. One that lost nobody, or everybody, says nothing about its rate: then the rate of all accounts is taken. */
export function sizeFor(group: Counts, all: Counts): number {
  const telling = group.lost > 0 && group.lost < group.matured ? group : all;
  const rate = assumedRate(telling.matured === 0 ? 0 : telling.lost / telling.matured, telling.matured);
  return recommendSize(group.matured, subgroupSizes(rate)).subgroupSize;
}
