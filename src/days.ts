/**
 * Calendar days as plain numbers: whole days since 1970-01-01, without a time or a zone.
 * Every date in Ebbline is such a day; a day never shifts with the machine's time zone.
 */
export type Day = number;

const DAY_MS = 86_400_000;

/** The ISO 8601 form (YYYY-MM-DD) of a day number. */
export function isoDay(day: Day): string {
  return new Date(day * DAY_MS).toISOString().slice(0, 10);
}

/**
 * The day number of an ISO date.
 * @returns the day, or undefined when the text is not an existing YYYY-MM-DD date
 */
export function dayFromIso(text: string): Day | undefined {
  const match = /^(\d{4})-(\d{2})-(\d{2})$/.exec(text);
  if (!match) return undefined;
  return dayFromParts(Number(match[1]), Number(match[2]), Number(match[3]));
}

/** The day number of year, month (1-12), day of month; undefined when there is no such day. */
export function dayFromParts(year: number, month: number, dayOfMonth: number): Day | undefined {
  const ms = Date.UTC(year, month - 1, dayOfMonth);
  const date = new Date(ms);
  date.setUTCFullYear(year);
  if (date.getUTCMonth() !== month - 1 || date.getUTCDate() !== dayOfMonth) return undefined;
  return Math.round(date.getTime() / DAY_MS);
}

/**
 * The day `months` calendar months later, clamped to the month's last day (31 Jan + 1 month = 28 or 29 Feb),
 * as SQL interval arithmetic does.
 */
export function addMonths(day: Day, months: number): Day {
  const date = new Date(day * DAY_MS);
  const first = new Date(Date.UTC(date.getUTCFullYear(), date.getUTCMonth() + months, 1));
  const last = new Date(Date.UTC(first.getUTCFullYear(), first.getUTCMonth() + 1, 0)).getUTCDate();
  return Math.round(first.getTime() / DAY_MS) + Math.min(date.getUTCDate(), last) - 1;
}

/** Names of the months, January first. */
export const MONTHS = [
  'January',
  'February',
  'March',
  'April',
  'May',
  'June',
  'July',
  'August',
  'September',
  'October',
  'November',
  'December',
] as const;

/** A day in words: "12 March 2025". The month is spelled out so that no reader takes the day for the month. */
export function dayInWords(day: Day): string {
  const date = new Date(day * DAY_MS);
  return `${date.getUTCDate()} ${MONTHS[date.getUTCMonth()]} ${date.getUTCFullYear()}`;
}

/** Day of the week, 0 = Sunday … 6 = Saturday. */
export function weekday(day: Day): number {
  return (((day + 4) % 7) + 7) % 7;
}
