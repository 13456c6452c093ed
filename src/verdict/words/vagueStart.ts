import type { Day } from '../../days.ts';
import type { PointDates, Since } from '../types.ts';

/** A start that is known no better than to this many days, half a year, is told as a range. Our choice, no source. */
const VAGUE_DAYS = 182;

/** First and last day on which a move can have begun, where that is known so badly that one date would mislead; else null. */
export function vagueStart(since: Since, dates: readonly PointDates[]): readonly [Day, Day] | null {
  const [from, to] = since.candidates;
  const first = dates[from - 1]?.firstStart ?? null;
  const last = dates[to - 1]?.lastStart ?? null;
  return first !== null && last !== null && last - first > VAGUE_DAYS ? [first, last] : null;
}
