// The same census, as an analyst would run it by hand on the engine alone: read, keep the matured, order, cut, count.
// Usage: node bareCensus.mjs FILE SUBGROUP_SIZE
import { DuckDBInstance } from '@duckdb/node-api';

const [file, size] = process.argv.slice(2);
const instance = await DuckDBInstance.create(':memory:');
const connection = await instance.connect();
const reader = await connection.runAndReadAll(`
  WITH accounts AS (
    SELECT start_date, end_date, hash(account_id) AS key FROM read_csv('${file}')
  ), bounds AS (
    SELECT greatest(max(start_date), max(end_date)) AS as_of FROM accounts
  ), matured AS (
    SELECT start_date, key, end_date <= start_date + INTERVAL 3 MONTH AS lost
    FROM accounts, bounds WHERE start_date + INTERVAL 3 MONTH <= as_of
  ), ordered AS (
    SELECT start_date, coalesce(lost, false) AS lost, (row_number() OVER (ORDER BY start_date, key) - 1) // ${Number(size)} AS subgroup FROM matured
  )
  SELECT subgroup, count(*), count(*) FILTER (WHERE lost), min(start_date), max(start_date)
  FROM ordered GROUP BY subgroup HAVING count(*) = ${Number(size)} ORDER BY subgroup`);
process.stdout.write(`${reader.getRows().length} subgroups\n`);
