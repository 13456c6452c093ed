import type { DuckDBConnection, JS } from '@duckdb/node-api';

export const quoteText = (text: string): string => `'${text.replaceAll("'", "''")}'`;
export const quoteName = (name: string): string => `"${name.replaceAll('"', '""')}"`;

export type Row = Record<string, JS>;

/** All rows of a query as plain objects; whole numbers of 64 bits come back as bigint. */
export async function rowsOf(connection: DuckDBConnection, sql: string): Promise<Row[]> {
  const reader = await connection.runAndReadAll(sql);
  return reader.getRowObjectsJS();
}

export async function firstRow(connection: DuckDBConnection, sql: string): Promise<Row> {
  return (await rowsOf(connection, sql))[0] ?? {};
}
