import { rowsOf } from '../accounts/sql.ts';
import type { AccountTable } from '../accounts/types.ts';
import type { Day } from '../days.ts';

export interface AmountScope {
  readonly segment?: string;
  readonly startedFrom?: Day;
  readonly startedBefore?: Day;
}

/** What accounts pay: those with an amount of zero or more, and how many had to be left out. */
export interface MeanAmounts {
  readonly accounts: number;
  /** amounts that are averaged */
  readonly averaged: number;
  readonly negative: number;
  readonly missing: number;
  /** accounts whose amount changed later; the one they began with is taken */
  readonly changed: number;
  /** in the unit and for the period of the column; null when nothing is averaged */
  readonly mean: number | null;
  readonly standardError: number;
  readonly currencies: readonly { readonly currency: string | null; readonly accounts: number }[];
}

/** Larger amounts are no amounts; the sums of their squares would not fit an exact decimal. */
const LARGEST = 1e10;

/**
 * Mean amount per account, over accounts started by a day. Sums are exact decimals, so that the order in which the engine adds does not
 * show. One row per currency comes back.
 */
export async function meanAmounts(table: AccountTable, until: Day, scope: AmountScope): Promise<MeanAmounts> {
  const { segment, startedFrom, startedBefore } = scope;
  const only = [
    segment === undefined ? '' : ` AND segment = '${segment.replaceAll("'", "''")}'`,
    startedFrom === undefined ? '' : ` AND start_day >= ${startedFrom}`,
    startedBefore === undefined ? '' : ` AND start_day < ${startedBefore}`,
  ].join('');
  const paid = `CASE WHEN amount >= 0 AND amount < ${LARGEST} THEN CAST(amount AS DECIMAL(14, 4)) END`;
  const rows = await rowsOf(
    table.connection,
    `SELECT currency, CAST(COUNT(*) AS INTEGER) AS accounts, CAST(COUNT(paid) AS INTEGER) AS averaged,
       CAST(COUNT(CASE WHEN amount < 0 THEN 1 END) AS INTEGER) AS negative, CAST(COUNT(later_amounts) AS INTEGER) AS changed,
       CAST(SUM(paid) AS DOUBLE) AS total, CAST(SUM(CAST(paid AS DECIMAL(19, 4)) * CAST(paid AS DECIMAL(19, 4))) AS DOUBLE) AS squares
     FROM (SELECT currency, amount, later_amounts, ${paid} AS paid FROM ${table.table} WHERE start_day <= ${until}${only})
     GROUP BY 1 ORDER BY 2 DESC, 1`,
  );
  const sum = (name: string): number => rows.reduce((total, row) => total + Number(row[name] ?? 0), 0);
  const averaged = sum('averaged');
  const mean = averaged === 0 ? null : sum('total') / averaged;
  // Rounding must not make a variance negative when all pay the same.
  const variance =
    mean === null || averaged < 2 ? 0 : Math.max(0, (sum('squares') - averaged * mean * mean) / (averaged - 1));
  return {
    accounts: sum('accounts'),
    averaged,
    negative: sum('negative'),
    missing: sum('accounts') - averaged - sum('negative'),
    changed: sum('changed'),
    mean,
    standardError: averaged === 0 ? 0 : Math.sqrt(variance / averaged),
    currencies: rows
      .filter((row) => Number(row.averaged) > 0)
      .map((row) => ({
        currency: row.currency === null || row.currency === undefined ? null : String(row.currency),
        accounts: Number(row.averaged),
      })),
  };
}
