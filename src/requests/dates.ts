import { createRequire } from 'node:module';
import type { Day } from '../days.ts';
import { dayFromParts, isoDay } from '../days.ts';
import { numberOf } from './numbers.ts';
import type { Token } from './tokens.ts';

export interface DateFound {
  /** null when the words are a date that reads two ways */
  readonly day: Day | null;
  readonly to: number;
}

/** Whether "June" stands for its first day ("since June") or its last ("data through June"). */
export type Edge = 'first' | 'last';

const MONTHS = [
  ['january', 'jan'],
  ['february', 'feb'],
  ['march', 'mar'],
  ['april', 'apr'],
  ['may'],
  ['june', 'jun'],
  ['july', 'jul'],
  ['august', 'aug'],
  ['september', 'sept', 'sep'],
  ['october', 'oct'],
  ['november', 'nov'],
  ['december', 'dec'],
] as const;
const MONTH_OF = new Map<string, number>(MONTHS.flatMap((names, i) => names.map((name) => [name, i + 1] as const)));
const ORDINAL = new Set(['st', 'nd', 'rd', 'th']);

/**
 * Reads a date that begins at token `i`.
 * @param reference dates without a year are the last such date not after this day
 * @param edge      which end of a month, quarter or year is meant
 */
export function dateAt(tokens: readonly Token[], i: number, reference: Day, edge: Edge): DateFound | undefined {
  let at = i;
  let side = edge;
  while (['the', 'on', 'in', 'about', 'around', 'of'].includes(word(tokens, at))) at++;
  if (['start', 'beginning', 'end'].includes(word(tokens, at))) {
    side = word(tokens, at) === 'end' ? 'last' : 'first';
    at++;
    while (['of', 'the'].includes(word(tokens, at))) at++;
  }
  return (
    written(tokens, at) ??
    inWords(tokens, at, reference, side) ??
    relative(tokens, at, reference, side) ??
    byChrono(tokens, at, reference)
  );
}

function word(tokens: readonly Token[], i: number): string {
  const token = tokens[i];
  return token && !token.used && token.segment === undefined ? token.text : '';
}

/** 2025-06-30, 30.06.2025, 6/30/2025 */
function written(tokens: readonly Token[], i: number): DateFound | undefined {
  const text = word(tokens, i);
  const iso = /^(\d{4})-(\d{1,2})-(\d{1,2})$/.exec(text);
  if (iso) return wrap(dayFromParts(Number(iso[1]), Number(iso[2]), Number(iso[3])), i + 1);
  const parts = /^(\d{1,2})[./](\d{1,2})[./](\d{2}|\d{4})$/.exec(text);
  if (!parts) return undefined;
  const [a, b] = [Number(parts[1]), Number(parts[2])];
  const year = Number(parts[3]) + (parts[3]!.length === 2 ? 2000 : 0);
  const dayFirst = dayFromParts(year, b, a);
  const monthFirst = dayFromParts(year, a, b);
  if (dayFirst !== undefined && monthFirst !== undefined && dayFirst !== monthFirst) return { day: null, to: i + 1 };
  return wrap(dayFirst ?? monthFirst, i + 1);
}

/** 30 June 2025, June 30 2025, June 2025, June, Q2 2025, 2025 */
function inWords(tokens: readonly Token[], i: number, reference: Day, edge: Edge): DateFound | undefined {
  const dayOfMonth = dayNumber(tokens, i);
  if (dayOfMonth) {
    let at = dayOfMonth.to;
    if (word(tokens, at) === 'of') at++;
    const month = MONTH_OF.get(word(tokens, at));
    if (month !== undefined) return exact(tokens, at + 1, month, dayOfMonth.value, reference);
  }
  let at = i;
  if (['last', 'this'].includes(word(tokens, at)) && MONTH_OF.has(word(tokens, at + 1))) at++;
  const month = MONTH_OF.get(word(tokens, at));
  if (month !== undefined) {
    const second = dayNumber(tokens, at + 1);
    if (second) return exact(tokens, second.to, month, second.value, reference);
    const year = yearAt(tokens, at + 1);
    const chosen = year ?? latestYear(month, 1, reference);
    return wrap(monthEdge(chosen, month, 1, edge), year === undefined ? at + 1 : at + 2);
  }
  const quarter = word(tokens, i) === 'q' ? numberOf(tokens[i + 1]) : undefined;
  if (quarter !== undefined && quarter >= 1 && quarter <= 4) {
    const first = quarter * 3 - 2;
    const year = yearAt(tokens, i + 2);
    return wrap(monthEdge(year ?? latestYear(first, 1, reference), first, 3, edge), year === undefined ? i + 2 : i + 3);
  }
  const year = yearAt(tokens, i);
  return year === undefined ? undefined : wrap(monthEdge(year, 1, 12, edge), i + 1);
}

/** today, yesterday, last month, this year … */
function relative(tokens: readonly Token[], i: number, reference: Day, edge: Edge): DateFound | undefined {
  const text = word(tokens, i);
  if (text === 'today') return { day: reference, to: i + 1 };
  if (text === 'yesterday') return { day: reference - 1, to: i + 1 };
  if (text !== 'last' && text !== 'this') return undefined;
  const [year, month] = isoDay(reference).split('-').map(Number) as [number, number];
  const back = text === 'last' ? 1 : 0;
  switch (word(tokens, i + 1)) {
    case 'month':
      return wrap(monthEdge(year, month - back, 1, edge), i + 2);
    case 'quarter':
      return wrap(monthEdge(year, (Math.ceil(month / 3) - back) * 3 - 2, 3, edge), i + 2);
    case 'year':
      return wrap(monthEdge(year - back, 1, 12, edge), i + 2);
    default:
      return undefined;
  }
}

type Chrono = typeof import('chrono-node');
let chrono: Chrono | undefined;

/** What is left ("two weeks ago", "last Monday") is given to chrono-node, loaded only here: the import costs 170 ms. */
function byChrono(tokens: readonly Token[], i: number, reference: Day): DateFound | undefined {
  const words: Token[] = [];
  for (let at = i; at < Math.min(tokens.length, i + 5) && word(tokens, at) !== ''; at++) words.push(tokens[at]!);
  const text = words.map((token) => token.text).join(' ');
  if (!/\b(ago|week|monday|tuesday|wednesday|thursday|friday|saturday|sunday)\b/.test(text)) return undefined;
  chrono ??= createRequire(import.meta.url)('chrono-node') as Chrono;
  const [year, month, dayOfMonth] = isoDay(reference).split('-').map(Number) as [number, number, number];
  const [result] = chrono.parse(text, new Date(year, month - 1, dayOfMonth, 12));
  if (result?.index !== 0) return undefined;
  const { start } = result;
  const day = dayFromParts(start.get('year') ?? year, start.get('month') ?? month, start.get('day') ?? 1);
  const count = result.text.split(' ').length;
  return wrap(day, i + count);
}

function exact(
  tokens: readonly Token[],
  at: number,
  month: number,
  dayOfMonth: number,
  reference: Day,
): DateFound | undefined {
  const year = yearAt(tokens, at);
  const chosen = year ?? latestYear(month, dayOfMonth, reference);
  return wrap(dayFromParts(chosen, month, dayOfMonth), year === undefined ? at : at + 1);
}

function dayNumber(tokens: readonly Token[], i: number): { value: number; to: number } | undefined {
  if (!/^\d{1,2}$/.test(word(tokens, i))) return undefined;
  const value = Number(word(tokens, i));
  if (value < 1 || value > 31) return undefined;
  return { value, to: ORDINAL.has(word(tokens, i + 1)) ? i + 2 : i + 1 };
}

function yearAt(tokens: readonly Token[], i: number): number | undefined {
  return /^(19|2\d)\d\d$/.test(word(tokens, i)) ? Number(word(tokens, i)) : undefined;
}

/** The last year in which this day of the year does not lie after the reference. */
function latestYear(month: number, dayOfMonth: number, reference: Day): number {
  const year = Number(isoDay(reference).slice(0, 4));
  const thisYear = dayFromParts(year, month, dayOfMonth);
  return thisYear !== undefined && thisYear <= reference ? year : year - 1;
}

/** First or last day of the `length` months that begin with `month` (which may run below 1). */
function monthEdge(year: number, month: number, length: number, edge: Edge): Day {
  const months = year * 12 + month - 1;
  const first = (count: number): Day => dayFromParts(Math.floor(count / 12), (count % 12) + 1, 1)!;
  return edge === 'first' ? first(months) : first(months + length) - 1;
}

function wrap(day: Day | undefined, to: number): DateFound | undefined {
  return day === undefined ? undefined : { day, to };
}
