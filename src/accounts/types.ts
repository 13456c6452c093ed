import type { DuckDBConnection } from '@duckdb/node-api';
import type { Day } from '../days.ts';

/*
 * The nouns of an export.
 *
 * account   one paying customer; several rows may belong to one
 * spell     an unbroken stretch of being a customer
 * start     first day of the account's first spell
 * end       first day on which it is no longer a customer; empty while it still is one
 * asOf      data-through date: the last day the export is complete for
 * returned  a second spell after a gap longer than bridgeDays; counted lost at the end of its first spell
 */

export type ColumnRole = 'id' | 'start' | 'end' | 'segment' | 'amount' | 'currency';
export type ColumnMap = Partial<Record<ColumnRole, string>>;
export type DateOrder = 'iso' | 'dmy' | 'mdy';

export interface ReadOptions {
  /** columns named by the user; they win over recognition */
  readonly columns?: ColumnMap;
  /** date order named by the user; wins over inference */
  readonly dates?: DateOrder;
  /** data-through date named by the user; wins over inference */
  readonly asOf?: Day;
  /** gap in days that still counts as one spell; default 30 */
  readonly bridgeDays?: number;
  /** key of the keyed hash that makes ids pseudonymous; default: none, plain hash (command line) */
  readonly idKey?: string;
  /** largest file read, in bytes */
  readonly maxBytes?: number;
  readonly onProgress?: (fraction: number) => void;
}

export interface Rejected {
  /** stable code: 'start-missing', 'start-unreadable', 'end-unreadable', 'end-before-start', 'zero-length', 'trial', 'internal', 'duplicate', 'future-start', 'ragged', 'id-missing', … */
  readonly code: string;
  /** in words: 'the end date lies before the start date' */
  readonly reason: string;
  readonly rows: number;
  /** line in the file (the header is line 1) of the first such row */
  readonly firstLine: number;
  /** up to three examples: line and the offending value, shortened */
  readonly examples: readonly { readonly line: number; readonly value: string }[];
}

/** What the amount column holds, over the rows that were kept. Rows are rows of the file, accounts are accounts. */
export interface AmountReport {
  /** rows without an amount: empty, or a word for none */
  readonly missing: number;
  /** rows whose amount cannot be read, with the first of them */
  readonly unreadable: number;
  readonly firstUnreadable: { readonly line: number; readonly value: string } | null;
  readonly negative: number;
  readonly zero: number;
  /** a comma is the decimal sign in this column */
  readonly decimalComma: boolean;
  /** rows in which a comma (or, with a decimal comma, a point) was read as a separator of thousands */
  readonly thousands: number;
  /** accounts with a row that begins, at another amount, while an earlier one still runs */
  readonly severalAtOnce: number;
  /** by sign, code or currency column, most first; null: none stated. Empty when nothing states any. */
  readonly currencies: readonly { readonly currency: string | null; readonly accounts: number }[];
}

/** What was read, for the thread's first reply. */
export interface ReadReport {
  readonly rows: number;
  readonly accounts: number;
  readonly returned: number;
  /** rows merged into another row's spell */
  readonly mergedRows: number;
  readonly asOf: Day;
  /** the data-through date as the file itself suggests it, whatever was given */
  readonly inferredAsOf: Day;
  /** 'given', or where it was inferred from: 'latest-date' (latest start or end in the file), 'file-column' … */
  readonly asOfSource: string;
  /** true when some date lies after asOf (scheduled cancellations, for instance): told to the user */
  readonly futureEnds: number;
  readonly firstStart: Day;
  readonly lastStart: Day;
  readonly columns: ColumnMap;
  /** every header in the file, in order, for the mend selects */
  readonly headers: readonly string[];
  readonly dates: DateOrder;
  /** how the order was settled: 'given', 'iso', 'values' (some value reads only one way) */
  readonly datesSource: 'given' | 'iso' | 'values';
  readonly encoding: string;
  readonly delimiter: string;
  readonly rejected: readonly Rejected[];
  /** distinct values of the segment column with account counts, most first, at most 50 */
  readonly segments: readonly { readonly value: string; readonly accounts: number }[];
  /** absent without an amount column, and in datasets stored before it was kept */
  readonly amounts?: AmountReport;
}

/** How an export differs from the one before it, for accounts known by their ids. Counts of accounts. */
export interface ExportChange {
  /** accounts of the earlier export */
  readonly before: number;
  readonly inBoth: number;
  /** in the earlier export and no longer in this one */
  readonly gone: number;
  /** not in the earlier export, though they started on or before its data-through date */
  readonly backDated: number;
  /** in both, with another start date */
  readonly startMoved: number;
  /** had left by the earlier data-through date according to this export, and not according to the earlier one */
  readonly lateLosses: number;
  /** had left by the earlier data-through date according to the earlier export, and not according to this one */
  readonly takenBack: number;
  /** the earlier export's data-through date */
  readonly asOfBefore: Day;
}

/**
 * Accounts ready to be counted: a table in an engine.
 * Columns: key UBIGINT (stable pseudonymous hash of the id), start_day INTEGER (days since 1970-01-01), end_day INTEGER or NULL,
 * segment VARCHAR or NULL, amount DOUBLE or NULL (of its first row that has one), returned BOOLEAN, currency VARCHAR or NULL (several joined by
 * " and "), later_amounts STRUCT(day INTEGER, amount DOUBLE)[] or NULL: every change of the amount within the first spell, in order of day.
 */
export interface AccountTable {
  readonly connection: DuckDBConnection;
  readonly table: string;
  readonly report: ReadReport;
}
