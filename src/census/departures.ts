import { rowsOf } from '../accounts/sql.ts';
import type { AccountTable } from '../accounts/types.ts';
import type { Day } from '../days.ts';

/** How many accounts of one group were lost, and how many last seen, after so many days. */
export interface DeparturesByDay {
  readonly time: number;
  readonly lost: number;
  readonly censored: number;
}

export interface GroupDepartures {
  readonly segment: string;
  readonly accounts: number;
  readonly lost: number;
  readonly departures: readonly DeparturesByDay[];
}

/** Groups told apart; what is left is not compared. As many as the census counts by themselves. */
const GROUPS = 12;

/**
 * Departures by day of tenure in each group, largest groups first: what survival curves and the log-rank test are made of.
 * An account that has not left by asOf - settleDays is last seen on that day. One aggregated query.
 * @returns empty when the export has no groups
 */
export async function departuresByGroup(
  table: AccountTable,
  asOf: Day,
  settleDays: number,
): Promise<GroupDepartures[]> {
  const names = table.report.segments.slice(0, GROUPS).map(({ value }) => value);
  if (names.length === 0) return [];
  const until = asOf - settleDays;
  const rows = await rowsOf(
    table.connection,
    `SELECT segment, LEAST(COALESCE(end_day, ${until}), ${until}) - start_day AS time,
       CAST(COUNT(CASE WHEN end_day <= ${until} THEN 1 END) AS INTEGER) AS lost, CAST(COUNT(*) AS INTEGER) AS accounts
     FROM ${table.table} WHERE start_day <= ${until} AND segment IS NOT NULL GROUP BY 1, 2 ORDER BY 2`,
  );
  const bySegment = new Map<string, DeparturesByDay[]>(names.map((name) => [name, []]));
  for (const row of rows) {
    const lost = Number(row.lost);
    bySegment.get(String(row.segment))?.push({ time: Number(row.time), lost, censored: Number(row.accounts) - lost });
  }
  return [...bySegment].map(([segment, departures]) => ({
    segment,
    accounts: departures.reduce((sum, { lost, censored }) => sum + lost + censored, 0),
    lost: departures.reduce((sum, { lost }) => sum + lost, 0),
    departures,
  }));
}
