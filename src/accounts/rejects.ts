import type { DuckDBConnection } from '@duckdb/node-api';
import type { Columns } from './columns.ts';
import { shorten } from './layout.ts';
import { findLines, type RowPlace } from './lines.ts';
import { splitRecords } from './records.ts';
import { REASONS, type ReasonCode } from './rowRules.ts';
import { rowsOf } from './sql.ts';
import type { Rejected } from './types.ts';

/** Rows left out for one reason: how many, and the ordinals of the first three. */
export interface LeftOut {
  readonly code: ReasonCode;
  readonly rows: number;
  readonly first: readonly number[];
}

/** Counts the rows that `condition` picks from `source`, by the code that `code` (SQL) gives. */
export async function countLeftOut(connection: DuckDBConnection, source: string, code: string): Promise<LeftOut[]> {
  const found = await rowsOf(
    connection,
    `SELECT code, count(*)::INTEGER AS rows, min(n, 3)::INTEGER[] AS first FROM (SELECT n, ${code} AS code FROM ${source}) WHERE code IS NOT NULL GROUP BY code`,
  );
  return found.map((row) => ({
    code: String(row.code) as ReasonCode,
    rows: Number(row.rows),
    first: (row.first as number[]).map(Number),
  }));
}

/** Which field shows what is wrong. */
function offendingField(code: ReasonCode, columns: Columns, fields: readonly string[]): string {
  const at = (column: number | undefined): string => (column === undefined ? '' : (fields[column] ?? ''));
  switch (code) {
    case 'start-unreadable':
    case 'future-start':
      return at(columns.start);
    case 'end-unreadable':
      return at(columns.end);
    case 'end-before-start':
    case 'zero-length':
      return `${at(columns.start)} to ${at(columns.end)}`;
    case 'trial':
      return [at(columns.segment), at(columns.status)].find((value) => /trial/i.test(value)) ?? '';
    case 'end-missing':
      return at(columns.status);
    case 'internal':
    case 'duplicate':
    case 'start-missing':
      // Ids of customers stay out of the channel: the line is enough to find them.
      return '';
    default:
      return fields.filter((field) => field !== '').join(' ');
  }
}

/** Adds line numbers and examples; one walk through the file for all of them. */
export function listRejected(
  leftOut: readonly LeftOut[],
  file: {
    readonly path: string;
    readonly delimiter: string;
    readonly columns: Columns;
    readonly ragged: readonly number[];
  },
): Rejected[] {
  const all = leftOut.filter(({ rows }) => rows > 0);
  if (all.length === 0 && file.ragged.length === 0) return [];
  const skipped = new Set(file.ragged);
  const found = findLines(file.path, file.delimiter, skipped, new Set(all.flatMap(({ first }) => first)));
  const list: Rejected[] = [];
  if (file.ragged.length > 0) {
    const places = file.ragged
      .slice(0, 3)
      .map((offset) => found.skipped.get(offset))
      .filter((place): place is RowPlace => place !== undefined);
    list.push({
      code: 'ragged',
      reason: REASONS.ragged,
      rows: file.ragged.length,
      firstLine: places[0]?.line ?? 0,
      examples: places.map((place) => ({
        line: place.line,
        value: `${splitRecords(place.text, file.delimiter, 1)[0]?.fields.length ?? 0} fields`,
      })),
    });
  }
  for (const one of all) {
    const places = one.first
      .map((row) => found.rows.get(row))
      .filter((place): place is RowPlace => place !== undefined)
      .sort((a, b) => a.line - b.line);
    list.push({
      code: one.code,
      reason: REASONS[one.code],
      rows: one.rows,
      firstLine: places[0]?.line ?? 0,
      examples: places.map((place) => ({
        line: place.line,
        value: shorten(
          offendingField(one.code, file.columns, splitRecords(place.text, file.delimiter, 1)[0]?.fields ?? []),
        ),
      })),
    });
  }
  return list.sort((a, b) => b.rows - a.rows || a.firstLine - b.firstLine);
}
