import { type Day, dayInWords } from '../days.ts';
import type { PictureInput } from '../verdict/types.ts';
import * as spoken from '../verdict/words/format.ts';
import { viewWords } from '../verdict/words/viewWords.ts';

export { capitalised, count } from '../verdict/words/format.ts';

/** A rate as people read it, "6.2 %", as in the message but for the space, which does not break. */
export function percent(rate: number): string {
  return rate === 1 ? '100\u00a0%' : spoken.percent(rate).replace(' ', '\u00a0');
}

/** "5.5–7.1 %" */
export function percentRange(low: number, high: number): string {
  return `${percent(low).replace('\u00a0%', '')}–${percent(high)}`;
}

/** A limit beside another one: one decimal when the other has one, unless nothing would be left of it. */
export function limitPercent(rate: number, beside: number): string {
  const short = (rate * 100).toFixed(1);
  return rate > 0 && beside >= 0.00995 && Number(short) > 0 && rate < 1 ? `${short}\u00a0%` : percent(rate);
}

/** A date that holds together on one line: "12 March 2025". */
export function heldDate(day: Day): string {
  return dayInWords(day).replaceAll(' ', '\u00a0');
}

/** A point by its day: the date, or the month where points are months. */
export function heldPoint({ view }: Pick<PictureInput, 'view'>, day: Day): string {
  return viewWords(view).day(day).replaceAll(' ', '\u00a0');
}

/** "Mar" */
export function monthShort(day: Day): string {
  return dayInWords(day).split(' ')[1]?.slice(0, 3) ?? '';
}

export function yearOf(day: Day): number {
  return Number(dayInWords(day).split(' ')[2]);
}

/** "12 Mar 2025" */
export function dateShort(day: Day): string {
  return `${dayInWords(day).split(' ')[0]}\u00a0${monthShort(day)}\u00a0${yearOf(day)}`;
}

/** A point by its day, short: "12 Mar 2025", or "Mar 2025" where points are months. */
export function shortPoint({ view }: Pick<PictureInput, 'view'>, day: Day): string {
  return view === 'calendar' ? `${monthShort(day)}\u00a0${yearOf(day)}` : dateShort(day);
}

/** Months since year 0, for telling a new month or year apart. */
export function monthNumber(day: Day): number {
  return yearOf(day) * 12 + (new Date(day * 86_400_000).getUTCMonth() as number);
}

/** "1 account", "37 accounts" */
export function countOf(n: number, one: string, many = `${one}s`): string {
  return spoken.counted(n, one, many).replace(' ', '\u00a0');
}
