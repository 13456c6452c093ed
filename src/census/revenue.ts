import { rowsOf } from '../accounts/sql.ts';
import type { AccountTable } from '../accounts/types.ts';
import { checkRequest } from './requestChecks.ts';
import { amountGroupsSql, currenciesSql, revenueSql } from './revenueSql.ts';
import { lastMaturedStart, tenurePoint } from './tenure.ts';
import type { CensusRequest, CensusSubgroup } from './types.ts';

/** A subgroup of the census with the revenue of its accounts, in the unit of the amount column. */
export interface RevenueSubgroup extends CensusSubgroup {
  /** amounts of all its accounts at their start: the revenue at the start of the interval */
  readonly revenue: number;
  /** of that, the amounts of the accounts lost by the tenure point */
  readonly lostRevenue: number;
  /** by how much less the accounts still there pay at the tenure point, those that pay less alone */
  readonly contraction: number;
  /** by how much more, those that pay more alone */
  readonly expansion: number;
  /** accounts without a readable amount: counted as accounts, in no sum */
  readonly withoutAmount: number;
  /** accounts with a negative amount: counted as accounts, in no sum */
  readonly negative: number;
  /** the largest amount of a single account, and of a lost one */
  readonly largest: number;
  readonly largestLost: number;
}

export interface RevenueCensus {
  readonly request: CensusRequest;
  /** full subgroups; the unfinished last one is withheld, as in the census of accounts */
  readonly subgroups: readonly RevenueSubgroup[];
  /** currencies of the matured accounts with an amount, most first; null: none stated */
  readonly currencies: readonly { readonly currency: string | null; readonly accounts: number }[];
  /** how uneven the amounts are: mean amount of each thousandth of the accounts, or of a sample of them */
  readonly amounts: readonly { readonly amount: number; readonly accounts: number }[];
}

/**
 * Revenue at the start of the interval, lost, contracted and expanded by the tenure point, in the very subgroups of takeCensus (start view).
 * @throws EbbError OPTION_INVALID
 */
export async function takeRevenue(table: AccountTable, request: CensusRequest): Promise<RevenueCensus> {
  checkRequest(request);
  const { connection } = table;
  const maturedUntil = lastMaturedStart(request.asOf, request.tenure, request.settleDays);
  const rows = await rowsOf(connection, revenueSql(table.table, request, table.report.firstStart, maturedUntil));
  const currencies = await rowsOf(connection, currenciesSql(table.table, request, maturedUntil));
  const amounts = await rowsOf(connection, amountGroupsSql(table.table, request, maturedUntil, table.report.accounts));
  const subgroups = rows.map((row, at): RevenueSubgroup => {
    const number = (name: string): number => Number(row[name] ?? 0);
    const last = number('last_start');
    return {
      index: at + 1,
      accounts: number('accounts'),
      lost: number('lost'),
      firstStart: number('first_start'),
      lastStart: last,
      asOf: tenurePoint(last, request.tenure) + request.settleDays,
      revenue: number('revenue'),
      lostRevenue: number('lost_revenue'),
      contraction: number('contraction'),
      expansion: number('expansion'),
      withoutAmount: number('without_amount'),
      negative: number('negative'),
      largest: number('largest'),
      largestLost: number('largest_lost'),
    };
  });
  return {
    request,
    subgroups: subgroups.filter(({ accounts }) => accounts === request.subgroupSize),
    currencies: currencies.map((row) => ({
      currency: row.currency === null ? null : String(row.currency),
      accounts: Number(row.accounts),
    })),
    amounts: amounts.map((row) => ({ amount: Number(row.amount), accounts: Number(row.accounts) })),
  };
}
