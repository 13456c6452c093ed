import { EbbError } from '../errors.ts';
import {
  amountWords,
  currencyWords,
  endWords,
  flagWords,
  idWords,
  segmentWords,
  startWords,
  statusWords,
  type WordScore,
} from './columnWords.ts';
import { type DateReadings, dateReadings } from './dateText.ts';
import { headerWords } from './headerWords.ts';
import type { Layout } from './layout.ts';
import { shorten } from './layout.ts';
import type { ColumnMap, ColumnRole } from './types.ts';

/** Columns by position. `status` and `flag` only serve the rules about trials and internal accounts. */
export interface Columns {
  readonly id: number | undefined;
  readonly start: number;
  readonly end: number;
  readonly segment: number | undefined;
  readonly amount: number | undefined;
  readonly currency: number | undefined;
  readonly status: number | undefined;
  readonly flag: number | undefined;
}

/** What the sample says about the values of one column; shares are fractions of the values that are not empty. */
interface Content {
  readonly filled: number;
  /** values that are there as numbers: "0" is no date, and an amount all the same */
  readonly written: number;
  readonly rows: number;
  readonly dates: number;
  readonly numbers: number;
  readonly distinct: number;
}

const NUMBER = /^\(?[-+]?\s*[^\d\s\w]{0,2}\s?[A-Z]{0,3}\s?[-+]?\d[\d.,' \u00a0]*\s?[^\d\w\s]{0,2}\s?([A-Z]{3})?\)?$/;

function contentOf(layout: Layout, column: number): Content {
  let filled = 0;
  let dates = 0;
  let numbers = 0;
  let zeros = 0;
  const distinct = new Set<string>();
  for (const record of layout.sample) {
    const value = record.fields[column] ?? '';
    const readings: DateReadings = dateReadings(value);
    if (readings.kind === 'empty') {
      if (NUMBER.test(value)) zeros++;
      continue;
    }
    filled++;
    distinct.add(value);
    if (readings.kind !== 'unreadable') dates++;
    if (NUMBER.test(value)) numbers++;
  }
  const rows = layout.sample.length;
  return {
    filled,
    written: filled + zeros,
    rows,
    dates: dates / Math.max(1, filled),
    numbers: (numbers + zeros) / Math.max(1, filled + zeros),
    distinct: distinct.size / Math.max(1, filled),
  };
}

interface Wanted {
  readonly words: WordScore;
  readonly content: (content: Content) => number;
}

const WANTED: Readonly<Record<ColumnRole | 'status' | 'flag', Wanted>> = {
  start: { words: startWords, content: (c) => (c.filled > 0 && c.dates >= 0.5 ? 1 : 0) },
  end: { words: endWords, content: (c) => (c.filled === 0 || c.dates >= 0.5 ? 1 : 0) },
  id: {
    words: idWords,
    content: (c) => (c.filled > 0 && c.dates < 0.9 ? 0.5 + c.distinct / 2 : c.filled > 0 && c.distinct > 0.5 ? 0.6 : 0),
  },
  segment: {
    words: segmentWords,
    content: (c) => (c.filled > 0 && c.dates < 0.5 && c.numbers < 0.9 && (c.distinct <= 0.5 || c.rows < 20) ? 1 : 0),
  },
  amount: { words: amountWords, content: (c) => (c.written > 0 && c.numbers >= 0.8 ? 1 : 0) },
  currency: {
    words: currencyWords,
    content: (c) => (c.filled > 0 && c.dates < 0.5 && c.numbers < 0.2 && (c.distinct <= 0.5 || c.rows < 20) ? 1 : 0),
  },
  status: { words: statusWords, content: (c) => (c.dates < 0.5 && c.distinct <= 0.5 ? 1 : 0) },
  flag: { words: flagWords, content: (c) => (c.dates < 0.5 && c.distinct <= 0.5 ? 1 : 0) },
};

/**
 * Recognises the columns by header words and by content; columns that the user named win.
 * @throws EbbError COLUMN_UNKNOWN, COLUMN_START_MISSING, COLUMN_END_MISSING, DATES_UNREADABLE
 */
export function recogniseColumns(layout: Layout, named: ColumnMap = {}): Columns {
  const chosen = new Map<string, number>();
  for (const role of ['id', 'start', 'end', 'segment', 'amount', 'currency'] as const) {
    const name = named[role];
    if (name !== undefined) chosen.set(role, columnNamed(layout.headers, name, role));
  }
  const words = layout.headers.map(headerWords);
  const contents = layout.headers.map((_, column) => contentOf(layout, column));
  const taken = new Set(chosen.values());
  const pick = (role: keyof typeof WANTED, contentMatters = true): number | undefined => {
    const already = chosen.get(role);
    if (already !== undefined) return already;
    let best: { column: number; score: number } | undefined;
    for (const [column, header] of words.entries()) {
      const content = contents[column];
      if (taken.has(column) || !content) continue;
      const score = WANTED[role].words(header) * (contentMatters ? WANTED[role].content(content) : 1);
      if (score > (best?.score ?? 0)) best = { column, score };
    }
    if (!best) return undefined;
    chosen.set(role, best.column);
    taken.add(best.column);
    return best.column;
  };
  // Dates first: their content tells most, and "created" must not be taken for anything else.
  const start = pick('start');
  if (start === undefined) throw startMissing(layout, pick('start', false));
  const end = pick('end') ?? endWithoutDates(layout, () => pick('end', false));
  const id = pick('id');
  const amount = pick('amount');
  const currency = pick('currency');
  const segment = pick('segment');
  const status = pick('status');
  const flag = pick('flag');
  return { id, start, end, segment, amount, currency, status, flag };
}

function startMissing(layout: Layout, byName: number | undefined): EbbError {
  const list = layout.headers.join(', ');
  if (byName === undefined) {
    return new EbbError(
      'COLUMN_START_MISSING',
      `no column looks like the start of a subscription; the columns are: ${shorten(list, 300)}`,
      'Say which one it is (on the command line: --columns start=NAME), or export with a column such as "start".',
      { detail: { headers: layout.headers } },
    );
  }
  return datesUnreadable(
    layout.headers[byName] ?? '',
    layout.sample.find((record) => record.fields[byName])?.line ?? layout.headerLine + 1,
    layout.sample.find((record) => record.fields[byName])?.fields[byName] ?? '',
  );
}

export function datesUnreadable(column: string, line: number, text: string): EbbError {
  return new EbbError(
    'DATES_UNREADABLE',
    text === ''
      ? `column "${column}" holds no date at all`
      : `no value in column "${column}" can be read as a date; line ${line} says "${shorten(text)}"`,
    'Dates are read as 2025-03-31, 31/03/2025, 03/31/2025 or 31 Mar 2025. If another column holds the dates, name it (on the command line: --columns start=NAME,end=NAME).',
    { detail: { column, line, text } },
  );
}

function endWithoutDates(layout: Layout, byName: () => number | undefined): number {
  const column = byName();
  if (column !== undefined) {
    const record = layout.sample.find(({ fields }) => dateReadings(fields[column] ?? '').kind === 'unreadable');
    throw datesUnreadable(
      layout.headers[column] ?? '',
      record?.line ?? layout.headerLine + 1,
      record?.fields[column] ?? '',
    );
  }
  throw new EbbError(
    'COLUMN_END_MISSING',
    `no column says when a subscription ended, so nobody can be seen leaving; the columns are: ${shorten(layout.headers.join(', '), 300)}`,
    'Say which one it is (on the command line: --columns end=NAME), or export with a column such as "end" that is empty for those who are still customers.',
    { detail: { headers: layout.headers } },
  );
}

function columnNamed(headers: readonly string[], name: string, role: ColumnRole): number {
  const exact = headers.indexOf(name);
  if (exact >= 0) return exact;
  const loose = headerWords(name).join(' ');
  const matches = headers.flatMap((header, at) => (headerWords(header).join(' ') === loose ? [at] : []));
  if (matches.length === 1 && matches[0] !== undefined) return matches[0];
  const nearest = nearestHeader(headers, name);
  throw new EbbError(
    'COLUMN_UNKNOWN',
    `there is no column "${shorten(name)}" for the ${role}; the columns are: ${shorten(headers.join(', '), 300)}`,
    nearest === undefined ? 'Name one of these columns as it is written there.' : `Did you mean "${nearest}"?`,
    { detail: { role, name, nearest, headers } },
  );
}

/** A header that the name was probably meant to be: at most two slips away and mostly the same, or with a word in common. */
function nearestHeader(headers: readonly string[], name: string): string | undefined {
  const away = (header: string): number => distance(header.toLowerCase(), name.toLowerCase());
  const [nearest] = headers.toSorted((a, b) => away(a) - away(b));
  if (nearest !== undefined && away(nearest) <= Math.min(2, name.length / 2)) return nearest;
  const words = new Set(headerWords(name));
  return headers.find((header) => headerWords(header).some((word) => words.has(word)));
}

/** Edits (insert, delete, replace a character) from one text to the other. */
function distance(from: string, to: string): number {
  let row = Array.from({ length: to.length + 1 }, (_, at) => at);
  for (let i = 1; i <= from.length; i++) {
    const next = [i];
    for (let j = 1; j <= to.length; j++) {
      next.push(
        Math.min((row[j] ?? 0) + 1, (next[j - 1] ?? 0) + 1, (row[j - 1] ?? 0) + (from[i - 1] === to[j - 1] ? 0 : 1)),
      );
    }
    row = next;
  }
  return row[to.length] ?? 0;
}
