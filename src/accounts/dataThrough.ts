import type { Day } from '../days.ts';

/** Number of starts or ends on one day; sorted by day. */
export interface DayCount {
  readonly day: Day;
  readonly count: number;
}

/** How far back before the latest start ends are looked at, to know how thickly they come: 13 weeks. */
export const ENDS_LOOKED_AT_DAYS = 91;

/**
 * The data-through date, from the file alone: never today's date.
 *
 * 1. The latest start, where a handful of starts (at most 1 in 200 rows) that lie apart from all the others, after a gap of more than
 *    ten days and ten times the usual one, are typing errors or bookings ahead, not the present.
 * 2. Ends later than that extend it only while they come as thickly as before: in windows of a week (longer when ends are rare: a
 *    window in which five are expected), at least 4 in 10 of the number in a window of the 13 weeks before. Ends that are sparse or that
 *    dry up within five weeks are cancellations already booked for later, which say nothing about how far the file reaches.
 * 3. Nor do ends of up to five weeks extend it past a silence of more than five usual gaps between start days: where accounts start every
 *    day, four weeks without any show where the file stops, however many cancellations are booked for them.
 *
 * An early date costs a few young accounts; a late one counts accounts as mature that are not. In doubt this is early.
 * The rule is ours: common practice, no source.
 * @param latestStart  from latestSteadyStart
 * @param ends         at least those later than ENDS_LOOKED_AT_DAYS before it
 * @param starts       all of them
 */
export function dataThrough(latestStart: Day, ends: readonly DayCount[], starts: readonly DayCount[]): Day {
  const before = ends.filter(({ day }) => day <= latestStart);
  const after = ends.filter(({ day }) => day > latestStart);
  const last = after.at(-1);
  if (!last) return latestStart;
  const firstEnd = before[0]?.day ?? latestStart;
  const span = Math.max(1, Math.min(ENDS_LOOKED_AT_DAYS, latestStart - firstEnd + 1));
  const perDay = total(before.filter(({ day }) => day > latestStart - span)) / span;
  // Nothing ended before the last start (a single wave of starts, say): the ends themselves are the only witness.
  if (perDay === 0) return last.day;
  const window = Math.max(7, Math.ceil(5 / perDay));
  const counts: number[] = [];
  let reached = latestStart;
  for (let from = latestStart; from < last.day; from += window) {
    const inside = after.filter(({ day }) => day > from && day <= from + window);
    const count = total(inside);
    const whole = Math.min(window, last.day - from);
    if (count < 0.4 * perDay * whole) break;
    counts.push(count / whole);
    reached = inside.at(-1)?.day ?? reached;
  }
  const half = Math.floor(counts.length / 2);
  const driesUp = half > 0 && mean(counts.slice(-half)) < 0.7 * mean(counts.slice(0, half));
  const short = reached - latestStart <= 35;
  const silent = reached - latestStart > 5 * usualStartGap(starts, latestStart);
  return short && (driesUp || silent) ? latestStart : reached;
}

/** Mean days between two days with a start, over the last quarter of a year of starts; unknown (endless) for a single one. */
function usualStartGap(starts: readonly DayCount[], latestStart: Day): number {
  const recent = starts.filter(({ day }) => day <= latestStart && day > latestStart - ENDS_LOOKED_AT_DAYS);
  const first = recent[0]?.day ?? latestStart;
  return recent.length > 1 ? (latestStart - first) / (recent.length - 1) : Number.POSITIVE_INFINITY;
}

/** The latest start that is no outlier; see dataThrough. */
export function latestSteadyStart(starts: readonly DayCount[]): Day | undefined {
  const last = starts.at(-1);
  if (!last) return undefined;
  const rows = total(starts);
  const year = starts.filter(({ day }) => day > (quantileDay(starts, rows, 0.99) ?? last.day) - 365);
  const typicalGap =
    year.length > 1 ? ((quantileDay(starts, rows, 0.99) ?? last.day) - (year[0]?.day ?? last.day)) / year.length : 0;
  const limit = Math.max(10, 10 * typicalGap);
  let latest = last.day;
  let tail = 0;
  for (let at = starts.length - 1; at > 0; at--) {
    tail += starts[at]?.count ?? 0;
    if (tail > rows / 200) break;
    const gap = (starts[at]?.day ?? 0) - (starts[at - 1]?.day ?? 0);
    if (gap > limit) latest = starts[at - 1]?.day ?? latest;
  }
  return latest;
}

function quantileDay(counts: readonly DayCount[], rows: number, share: number): Day | undefined {
  let sum = 0;
  for (const { day, count } of counts) {
    sum += count;
    if (sum >= rows * share) return day;
  }
  return counts.at(-1)?.day;
}

function total(counts: readonly DayCount[]): number {
  return counts.reduce((sum, { count }) => sum + count, 0);
}

function mean(numbers: readonly number[]): number {
  return numbers.reduce((sum, number) => sum + number, 0) / numbers.length;
}
