import { isoDay } from '../days.ts';
import { EbbError } from '../errors.ts';
import { type DateReadings, dateReadings } from './dateText.ts';
import type { DateOrder, ReadReport } from './types.ts';

/** One distinct way a date is written in a column, with the number of rows and the first row (ordinal) that holds it. */
export interface DateText {
  readonly text: string;
  readonly column: 'start' | 'end';
  readonly firstRow: number;
}

export interface SettledOrder {
  readonly order: DateOrder;
  readonly source: ReadReport['datesSource'];
}

export interface OrderPlaces {
  /** header of a column */
  readonly header: (column: 'start' | 'end') => string;
  /** line in the file of a row */
  readonly line: (row: number) => number;
}

/**
 * Settles how dates are written from all values of both date columns, never from one and never by likelihood.
 * @param given  the order a user named; it wins
 * @throws EbbError DATES_MIXED when some values read only day-first and others only month-first; DATES_AMBIGUOUS when no value decides.
 *   `detail` of both: {line, column, text, dmy, mdy} of an example, days in ISO form.
 */
export function settleOrder(
  texts: Iterable<DateText>,
  given: DateOrder | undefined,
  places: OrderPlaces,
): SettledOrder {
  if (given) return { order: given, source: 'given' };
  let onlyDmy: DateText | undefined;
  let onlyMdy: DateText | undefined;
  let open: DateText | undefined;
  let same = false;
  let yearMayLead: DateText | undefined;
  let yearTrails = false;
  for (const text of texts) {
    const readings = dateReadings(text.text);
    if (readings.kind !== 'ordered') continue;
    if (readings.yearFirst) yearMayLead ??= text;
    else yearTrails = true;
    if (readings.mdy === undefined) onlyDmy ??= text;
    else if (readings.dmy === undefined) onlyMdy ??= text;
    else if (readings.dmy !== readings.mdy) open ??= text;
    else same = true;
  }
  if (onlyDmy && onlyMdy) throw mixed(onlyDmy, onlyMdy, places);
  // "14/03/24": unless some value shows that the year can't stand in front, it could be 2014.
  if (yearMayLead && !yearTrails) throw ambiguous(yearMayLead, places, true);
  if (onlyDmy) return { order: 'dmy', source: 'values' };
  if (onlyMdy) return { order: 'mdy', source: 'values' };
  if (open) throw ambiguous(open, places, false);
  // 05/05/2025 and the like read the same both ways.
  return same ? { order: 'dmy', source: 'values' } : { order: 'iso', source: 'iso' };
}

function ambiguous(text: DateText, places: OrderPlaces, twoDigitYears: boolean): EbbError {
  const detail = readingsOf(text, places);
  const column = places.header(text.column);
  const both = `could be ${detail.dmy ?? 'no date'} (day first) or ${detail.mdy ?? 'no date'} (month first)`;
  return new EbbError(
    'DATES_AMBIGUOUS',
    twoDigitYears
      ? `line ${detail.line}, column "${column}": "${text.text}" has a two-digit year, and no date in the file shows which part is the year`
      : `line ${detail.line}, column "${column}": "${text.text}" ${both}, and no date in the file settles it`,
    'Say which it is: --dates dmy (day first) or --dates mdy (month first), or export dates as YYYY-MM-DD.',
    { detail },
  );
}

function mixed(dmy: DateText, mdy: DateText, places: OrderPlaces): EbbError {
  const [a, b] = [readingsOf(dmy, places), readingsOf(mdy, places)];
  return new EbbError(
    'DATES_MIXED',
    `dates are written both ways: line ${a.line}, column "${a.column}", "${dmy.text}" reads only day-first, line ${b.line}, column "${b.column}", "${mdy.text}" only month-first`,
    'Export dates as YYYY-MM-DD; or say --dates dmy (or mdy), and the rows written the other way are listed and left out.',
    { detail: { ...a, other: b } },
  );
}

function readingsOf(text: DateText, places: OrderPlaces) {
  const readings: DateReadings = dateReadings(text.text);
  const iso = (day: number | undefined): string | null => (day === undefined ? null : isoDay(day));
  return {
    line: places.line(text.firstRow),
    column: places.header(text.column),
    text: text.text,
    dmy: readings.kind === 'ordered' ? iso(readings.dmy) : null,
    mdy: readings.kind === 'ordered' ? iso(readings.mdy) : null,
  };
}
