import { EbbError } from '../errors.ts';
import { dateReadings } from './dateText.ts';
import { type SampleRecord, splitRecords } from './records.ts';

/** How the table lies in the file. */
export interface Layout {
  readonly delimiter: string;
  readonly headers: readonly string[];
  /** line of the column names; the records above it are a preamble */
  readonly headerLine: number;
  /** fields in a row: the headers, and unnamed ones when every row carries more */
  readonly width: number;
  /** records above the data (preamble and header) that have `width` fields, and so come back from the engine as rows */
  readonly widthRecordsAbove: number;
  /** records above the data that the engine can't split into `width` fields */
  readonly raggedAbove: number;
  /** rows are shorter than the header throughout: the missing fields are empty */
  readonly padded: boolean;
  readonly sample: readonly SampleRecord[];
}

const DELIMITERS = [',', ';', '\t', '|'] as const;
const SAMPLE_ROWS = 400;

function commonest(numbers: readonly number[]): { value: number; count: number } {
  const counts = new Map<number, number>();
  for (const number of numbers) counts.set(number, (counts.get(number) ?? 0) + 1);
  let best = { value: 1, count: 0 };
  for (const [value, count] of counts)
    if (count > best.count || (count === best.count && value > best.value)) best = { value, count };
  return best;
}

/**
 * Settles delimiter and header from the beginning of the file.
 * The delimiter is the one that gives most records the same number of fields, more than one.
 * The header is the first record that is as wide as the commonest one; what stands above it is a preamble.
 * @throws EbbError COLUMN_SINGLE, HEADER_MISSING, ROWS_MISSING
 */
export function layoutOf(text: string): Layout {
  let best: { delimiter: string; score: number; records: SampleRecord[]; width: number } | undefined;
  for (const delimiter of DELIMITERS) {
    const records = splitRecords(text, delimiter, SAMPLE_ROWS);
    const { value: width, count } = commonest(records.map((record) => record.fields.length));
    if (width < 2) continue;
    const score = (count / records.length) * Math.min(width, 30) ** 0.25;
    if (!best || score > best.score) best = { delimiter, score, records, width };
  }
  if (!best) {
    const first = splitRecords(text, ',', 1)[0]?.fields[0] ?? '';
    throw new EbbError(
      'COLUMN_SINGLE',
      `there is only one column ("${shorten(first)}"): no comma, semicolon, tab or bar separates the values`,
      'Export with one column for the account, one for the start and one for the end of each subscription.',
    );
  }
  const { delimiter, records } = best;
  const headerAt = records.findIndex(
    (record) => record.fields.length >= Math.min(best.width, 2) && Math.abs(record.fields.length - best.width) <= 1,
  );
  const header = records[Math.max(0, headerAt)];
  if (!header)
    throw new EbbError('HEADER_MISSING', 'no line holds column names', 'Put the column names in the first line.');
  const looksLikeData = header.fields.filter(
    (field) => field !== '' && (dateReadings(field).kind === 'date' || /^[-+]?[\d.,]+$/.test(field)),
  );
  if (looksLikeData.length > 0 && header.fields.some((field) => dateReadings(field).kind === 'date')) {
    throw new EbbError(
      'HEADER_MISSING',
      `line ${header.line} should hold the column names, and holds values such as "${shorten(looksLikeData[0] ?? '')}"`,
      'Put a line with column names (for instance: account,start,end) above the rows.',
      { detail: { line: header.line } },
    );
  }
  const below = records.slice(Math.max(0, headerAt) + 1);
  if (below.length === 0) {
    throw new EbbError(
      'ROWS_MISSING',
      `the file has column names in line ${header.line} (${header.fields.slice(0, 6).join(', ')}) and no rows under it`,
      'Export again with the rows: one line per subscription.',
    );
  }
  const belowWidth = commonest(below.map((record) => record.fields.length)).value;
  const named = header.fields.map((field, at) => field || `column ${at + 1}`);
  const padded = belowWidth < named.length;
  // A separator at the end of every row makes one more, unnamed, field; the engine swallows exactly that one itself.
  const spare = belowWidth - named.length;
  const onlyTrailing =
    spare === 1 && below.every((record) => record.fields.length <= named.length || record.fields.at(-1) === '');
  const width = spare > 0 && !onlyTrailing ? belowWidth : named.length;
  const headers = uniqueNames([
    ...named,
    ...Array.from({ length: width - named.length }, (_, at) => `column ${named.length + at + 1}`),
  ]);
  const fits = (record: SampleRecord): boolean =>
    padded
      ? record.fields.length <= width
      : record.fields.length === width || (record.fields.length === width + 1 && record.fields.at(-1) === '');
  const above = records.slice(0, Math.max(0, headerAt) + 1);
  return {
    delimiter,
    headers,
    headerLine: header.line,
    width,
    widthRecordsAbove: above.filter(fits).length,
    raggedAbove: above.filter((record) => !fits(record)).length,
    padded,
    sample: below,
  };
}

function uniqueNames(names: readonly string[]): string[] {
  const seen = new Map<string, number>();
  return names.map((name) => {
    const count = (seen.get(name) ?? 0) + 1;
    seen.set(name, count);
    return count === 1 ? name : `${name} (${count})`;
  });
}

export function shorten(text: string, length = 40): string {
  const flat = text.replace(/\s+/g, ' ').trim();
  return flat.length <= length ? flat : `${flat.slice(0, length - 1)}…`;
}
