import { quoteText, rowsOf } from '../accounts/sql.ts';
import type { AccountTable } from '../accounts/types.ts';
import type { Day } from '../days.ts';
import { lastMaturedStart, tenurePointSql } from './tenure.ts';
import type { Tenure } from './types.ts';

/** The equal-tenure census in one figure: of the accounts that have had this long, those lost by then. */
export interface TenureShare {
  readonly tenure: Tenure;
  readonly accounts: number;
  readonly lost: number;
}

/** Everybody who has matured at each of these tenures, and who of them was lost by then; one pass over the accounts for all of them. */
export async function tenureShares(
  table: AccountTable,
  tenures: readonly Tenure[],
  scope: { readonly asOf: Day; readonly settleDays: number; readonly segment?: string },
): Promise<TenureShare[]> {
  const { asOf, settleDays, segment } = scope;
  const untils = tenures.map((tenure) => lastMaturedStart(asOf, tenure, settleDays));
  const only = segment === undefined ? '' : ` AND a.segment = ${quoteText(segment)}`;
  const points = tenures.map((tenure, i) => `${tenurePointSql('start_day', tenure)} AS point_${i}`);
  const counts = untils.flatMap((until, i) => [
    `CAST(COUNT(CASE WHEN a.start_day <= ${until} THEN 1 END) AS INTEGER) AS accounts_${i}`,
    `CAST(COUNT(CASE WHEN a.start_day <= ${until} AND a.end_day <= p.point_${i} THEN 1 END) AS INTEGER) AS lost_${i}`,
  ]);
  const last = Math.max(...untils);
  const [row = {}] = await rowsOf(
    table.connection,
    `WITH points AS (
       SELECT start_day, ${points.join(', ')}
       FROM (SELECT CAST(day AS INTEGER) AS start_day FROM generate_series(${table.report.firstStart}, ${last}) AS every(day)) AS series
     ) SELECT ${counts.join(', ')} FROM ${table.table} AS a JOIN points AS p ON a.start_day = p.start_day WHERE a.start_day <= ${last}${only}`,
  );
  return tenures.map((tenure, i) => ({
    tenure,
    accounts: Number(row[`accounts_${i}`] ?? 0),
    lost: Number(row[`lost_${i}`] ?? 0),
  }));
}
