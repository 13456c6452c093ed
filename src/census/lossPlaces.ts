import { quoteText } from '../accounts/sql.ts';
import type { AccountTable } from '../accounts/types.ts';
import type { Day } from '../days.ts';
import { checkTenure, lastMaturedStart, tenurePointSql } from './tenure.ts';
import type { CensusRequest } from './types.ts';

/** Matured accounts in order of start, ties by the stable key, as the start view counts them: how many, and which of them were lost. */
export interface LossPlaces {
  /** matured accounts in all */
  readonly accounts: number;
  /** places of the lost accounts after `from`, ascending, numbered from 1 in the order of all matured accounts */
  readonly places: Int32Array;
  /** day on which the account at this place started; place from 1 to accounts */
  readonly startOf: (place: number) => Day;
}

export type LossRequest = Pick<CensusRequest, 'tenure' | 'settleDays' | 'asOf' | 'segment'>;

/**
 * Where in the order of start the lost accounts stand. An account that is not matured has no place, also when it is lost already: counting
 * the early leavers of a young group and not those who will stay is the classic bias.
 * @param from  places up to this one are not wanted
 * Only the days after it are sorted by key, and only lost accounts come back: a million accounts take about as long as the census.
 */
export async function lossPlaces(table: AccountTable, request: LossRequest, from: number): Promise<LossPlaces> {
  checkTenure(request.tenure);
  const { connection } = table;
  const until = lastMaturedStart(request.asOf, request.tenure, request.settleDays);
  const only = request.segment === undefined ? '' : ` AND segment = ${quoteText(request.segment)}`;
  const days = await connection.runAndReadAll(
    `SELECT CAST(start_day AS INTEGER) AS start_day, CAST(COUNT(*) AS INTEGER) AS accounts
     FROM ${table.table} WHERE start_day <= ${until}${only} GROUP BY 1 ORDER BY 1`,
  );
  const [starts = [], counts = []] = days.getColumnsJS() as number[][];
  /** places taken by the end of each day */
  const ends = new Int32Array(starts.length);
  let accounts = 0;
  for (let i = 0; i < starts.length; i++) {
    accounts += counts[i]!;
    ends[i] = accounts;
  }
  const dayAt = (place: number): number => {
    let [low, high] = [0, ends.length - 1];
    while (low < high) {
      const middle = (low + high) >> 1;
      if (ends[middle]! < place) low = middle + 1;
      else high = middle;
    }
    return low;
  };
  const startOf = (place: number): Day => starts[dayAt(place)]!;
  if (from >= accounts) return { accounts, places: new Int32Array(0), startOf };

  const firstDay = dayAt(from + 1);
  const earlier = firstDay === 0 ? 0 : ends[firstDay - 1]!;
  const found = await connection.runAndReadAll(
    lossPlacesSql(table.table, request, startOf(from + 1), until, earlier, from),
  );
  const [places = []] = found.getColumnsJS() as number[][];
  return { accounts, places: Int32Array.from(places), startOf };
}

/** Places of lost accounts, one row each; keeps to what DuckDB and Postgres have in common. */
function lossPlacesSql(
  table: string,
  request: LossRequest,
  firstDay: Day,
  until: Day,
  earlier: number,
  from: number,
): string {
  const only = request.segment === undefined ? '' : ` AND segment = ${quoteText(request.segment)}`;
  return `
WITH points AS (
  SELECT start_day, ${tenurePointSql('start_day', request.tenure)} AS tenure_point
  FROM (SELECT CAST(day AS INTEGER) AS start_day FROM generate_series(${firstDay}, ${until}) AS every(day)) AS series
), ordered AS (
  SELECT start_day, end_day, ${earlier} + ROW_NUMBER() OVER (ORDER BY start_day, key) AS place
  FROM ${table} WHERE start_day BETWEEN ${firstDay} AND ${until}${only}
)
SELECT CAST(o.place AS INTEGER) AS place
FROM ordered AS o JOIN points AS p ON o.start_day = p.start_day
WHERE o.end_day <= p.tenure_point AND o.place > ${from} ORDER BY 1`;
}
