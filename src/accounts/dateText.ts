import { type Day, dayFromParts } from '../days.ts';
import type { DateOrder } from './types.ts';

/** Ends from this day on mean "never" (9999-12-31, 2999-01-01, …): 2100-01-01. */
export const NEVER_FROM: Day = 47_482;
/** Days up to this one (1970-01-01, 1900-01-01) are placeholders that programs write for "no date". */
export const NO_DATE_UNTIL: Day = 0;

/** How one text can be read as a date. */
export type DateReadings =
  | { readonly kind: 'empty' }
  | { readonly kind: 'unreadable' }
  /**
   * `day` when there is only one way to read it; otherwise what it would be day-first and month-first (undefined: no such day).
   * `yearFirst` marks two-digit years that could also stand in front.
   */
  | { readonly kind: 'date'; readonly day: Day }
  | {
      readonly kind: 'ordered';
      readonly dmy: Day | undefined;
      readonly mdy: Day | undefined;
      readonly yearFirst: boolean;
    };

// prettier-ignore
const EMPTY_WORDS = new Set([
  'null',
  '(null)',
  'none',
  '(none)',
  'nil',
  'nan',
  'na',
  'n/a',
  '#n/a',
  'nat',
  '\\n',
  '(blank)',
  'blank',
  'empty',
  'unknown',
  'tbd',
  'undefined',
  'never',
  'active',
  'open',
  'ongoing',
  'current',
  'present',
  'to date',
  'still active',
  'still open',
  'not cancelled',
  'not canceled',
  'not applicable',
  'no end',
  'no end date',
  'not ended',
  'not churned',
  'false',
  '0',
  '-',
  '--',
  '---',
  '\u2013',
  '\u2014',
  '.',
  '?',
  '00/00/0000',
  '00.00.0000',
  '00-00-0000',
]);

const MONTHS = ['jan', 'feb', 'mar', 'apr', 'may', 'jun', 'jul', 'aug', 'sep', 'oct', 'nov', 'dec'];
const FULL_MONTHS = [
  'january',
  'february',
  'march',
  'april',
  'may',
  'june',
  'july',
  'august',
  'september',
  'october',
  'november',
  'december',
];

function monthNumber(word: string): number | undefined {
  const lower = word.toLowerCase().replace(/\.$/, '');
  if (lower === 'sept') return 9;
  const full = FULL_MONTHS.indexOf(lower);
  if (full >= 0) return full + 1;
  const short = MONTHS.indexOf(lower);
  return short >= 0 ? short + 1 : undefined;
}

/** Two-digit years: 70-99 are 1970-1999, 00-69 are 2000-2069 (common practice, no source). */
function fullYear(text: string): number {
  const year = Number(text);
  if (text.length !== 2) return year;
  return year >= 70 ? 1900 + year : 2000 + year;
}

function certain(year: number, month: number, day: number): DateReadings {
  const number = year >= 1900 ? dayFromParts(year, month, day) : undefined;
  return number === undefined ? { kind: 'unreadable' } : { kind: 'date', day: number };
}

/**
 * All readings of one text as a calendar day. A time of day and a zone after the date are ignored: the day counts as it is written.
 * Read without doubt: 2024-03-01 (also with / or .), 20240301, 3 Mar 2024, Mar 3, 2024, 03-Mar-24, seconds or milliseconds since 1970.
 * Left open: 03/04/2024 and its kin, with - or . as well; a dot alone does not prove day-first.
 */
export function dateReadings(raw: string): DateReadings {
  const text = dropTime(raw.trim());
  if (text === '' || EMPTY_WORDS.has(text.toLowerCase())) return { kind: 'empty' };
  let match = /^(\d{4})([-/.])(\d{1,2})\2(\d{1,2})Z?$/.exec(text);
  if (match) {
    if (match[1] === '0000') return { kind: 'empty' };
    return certain(Number(match[1]), Number(match[3]), Number(match[4]));
  }
  match = /^((?:19|20)\d{2})(\d{2})(\d{2})$/.exec(text);
  if (match) return certain(Number(match[1]), Number(match[2]), Number(match[3]));
  match = /^(\d{10})(\d{3})?(\.0+)?$/.exec(text);
  if (match) return { kind: 'date', day: Math.floor(Number(match[1]) / 86_400) };
  match = /^(\d{1,2})([-/. ])(\d{1,2})\2(\d{4}|\d{2})\.?$/.exec(text);
  if (match) {
    const [first, second, last] = [match[1] ?? '', match[3] ?? '', match[4] ?? ''];
    const year = fullYear(last);
    if (year < 1900) return { kind: 'unreadable' };
    const dmy = dayFromParts(year, Number(second), Number(first));
    const mdy = dayFromParts(year, Number(first), Number(second));
    const yearFirst =
      last.length === 2 && dayFromParts(fullYear(first.padStart(2, '0')), Number(second), Number(last)) !== undefined;
    if (dmy === undefined && mdy === undefined) return { kind: 'unreadable' };
    return { kind: 'ordered', dmy, mdy, yearFirst };
  }
  return namedMonth(text);
}

function namedMonth(text: string): DateReadings {
  const bare = text.replace(/^(mon|tue|wed|thu|fri|sat|sun)[a-z]*\.?,?\s+/i, '');
  let match = /^(\d{1,2})(?:st|nd|rd|th)?[-\s./]*([a-z]{3,9}\.?),?[-\s./]*(\d{4}|\d{2})$/i.exec(bare);
  if (match) {
    const month = monthNumber(match[2] ?? '');
    return month === undefined ? { kind: 'unreadable' } : certain(fullYear(match[3] ?? ''), month, Number(match[1]));
  }
  match = /^([a-z]{3,9}\.?)[-\s./]*(\d{1,2})(?:st|nd|rd|th)?,?[-\s./]+(\d{4})$/i.exec(bare);
  if (match) {
    const month = monthNumber(match[1] ?? '');
    return month === undefined ? { kind: 'unreadable' } : certain(Number(match[3]), month, Number(match[2]));
  }
  match = /^(\d{4})[-\s./]+([a-z]{3,9}\.?)[-\s./]+(\d{1,2})$/i.exec(bare);
  if (match) {
    const month = monthNumber(match[2] ?? '');
    return month === undefined ? { kind: 'unreadable' } : certain(Number(match[1]), month, Number(match[3]));
  }
  return { kind: 'unreadable' };
}

/** The pattern (RE2 and JavaScript alike) of a time of day behind a date. */
export const TIME_PATTERN = '[T ,]+[0-9]{1,2}:[0-9]{2}.*$';
const TIME = new RegExp(`(?<=[0-9])${TIME_PATTERN}`);

function dropTime(text: string): string {
  return text.replace(TIME, '').trim();
}

/** The day under a settled order, or undefined when there is none. */
export function dayInOrder(readings: DateReadings, order: DateOrder): Day | undefined {
  if (readings.kind === 'date') return readings.day;
  if (readings.kind !== 'ordered' || order === 'iso') return undefined;
  return order === 'dmy' ? readings.dmy : readings.mdy;
}
