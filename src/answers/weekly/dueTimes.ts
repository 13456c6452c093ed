import { DateTime, IANAZone } from 'luxon';
import type { WeeklyTime } from '../../requests/types.ts';

/** Whether this is a time zone the program knows, such as "Europe/Vienna". */
export function isZone(zone: string): boolean {
  return IANAZone.isValidZone(zone);
}

/**
 * The first due moment after another: once in every local calendar week, at the wall clock's time.
 * @param after milliseconds since 1970; the result is strictly later
 * A time that the clock jumps over in spring is taken as much later as the clock jumps; one that comes twice in autumn is taken the first time.
 */
export function dueAfter({ weekday, hour, minute, zone }: WeeklyTime, after: number): number {
  const from = DateTime.fromMillis(after, { zone });
  if (!from.isValid) throw new RangeError(`not a time zone: ${zone}`);
  const monday = from.startOf('week');
  for (let week = -1; week <= 1; week++) {
    const day = monday.plus({ weeks: week, days: weekday - 1 });
    // From its parts, not by adding to an earlier due: an hour lost to a jump must not be carried on to later weeks.
    const due = earliest(
      DateTime.fromObject({ year: day.year, month: day.month, day: day.day, hour, minute }, { zone }),
    );
    if (due > after) return due;
  }
  throw new RangeError('no due time within two weeks');
}

/** Where the clock shows the same time twice, the first of the two moments. */
function earliest(local: DateTime): number {
  return Math.min(...local.getPossibleOffsets().map((one) => one.toMillis()));
}

/** A moment as people of a zone read it: "Monday 3 August 2026, 09:00". */
export function momentInWords(at: number, zone: string): string {
  return DateTime.fromMillis(at, { zone }).setLocale('en-GB').toFormat('cccc d LLLL yyyy, HH:mm');
}
