import { type Day, dayInWords } from '../days.ts';

/** A rate as people read it: "6.2 %", one decimal, two below 1 %. The space does not break. */
export function percent(rate: number): string {
  return `${percentDigits(rate)}\u00a0%`;
}

/** "5.5–7.1 %" */
export function percentRange(low: number, high: number): string {
  return `${percentDigits(low)}–${percent(high)}`;
}

function percentDigits(rate: number): string {
  const value = rate * 100;
  if (value === 0 || value === 100) return String(value);
  return value.toFixed(Math.abs(value) < 0.995 ? 2 : 1);
}

/** A whole number with thin groups: "12 480". Four digits stay together. */
export function grouped(value: number): string {
  const digits = String(Math.round(value));
  return digits.length < 5 ? digits : digits.replace(/\B(?=(\d{3})+$)/g, '\u00a0');
}

/** A date that holds together on one line: "12 March 2025". */
export function heldDate(day: Day): string {
  return dayInWords(day).replaceAll(' ', '\u00a0');
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

/** Months since year 0, for telling a new month or year apart. */
export function monthNumber(day: Day): number {
  return yearOf(day) * 12 + (new Date(day * 86_400_000).getUTCMonth() as number);
}

/** "1 account", "37 accounts" */
export function countOf(count: number, one: string, many = `${one}s`): string {
  return `${grouped(count)}\u00a0${count === 1 ? one : many}`;
}

export function capitalised(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1);
}
