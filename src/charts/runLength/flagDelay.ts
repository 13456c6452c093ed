import { exactRunLength } from './exactRunLength.ts';
import type { RunLength } from './types.ts';
import { countZones } from './zoneChances.ts';

/** Shift tests that the exact chain can hold: all but the trend, which would be raised a little sooner. */
const TESTS = [1, 2, 5, 6] as const;

/** No business has points of more accounts than this. */
const MOST_ACCOUNTS = 10_000_000;

/**
 * Points until the first flag of tests 1, 2, 5, 6 on a p chart of known usual rate, when the accounts are lost at another rate: exact.
 * With `rate` for `moved` it is the false-alarm figure.
 * @param size  accounts a point, n >= 1
 * @param rate  usual rate, 0 < rate < 1
 */
export function flagDelay(size: number, rate: number, moved: number): RunLength {
  return exactRunLength(countZones({ size, center: rate, sigmaZ: 1, rate: moved, correlation: 0 }), TESTS);
}

/**
 * The smallest subgroup size, to about 2 %, with which a move from `rate` to `moved` is flagged within so many points with this chance.
 * @param points  >= 1
 * @param least   no smaller size is looked at: with fewer than about five losses a point, flags come without any move
 * @param round   brings a size to one that is offered, never to a smaller one
 * @returns null when none up to ten million accounts does
 */
export function sizeThatSees(
  rate: number,
  moved: number,
  points: number,
  chance: number,
  least: number,
  round: (size: number) => number = Math.ceil,
): number | null {
  const sees = (size: number): boolean => flagDelay(size, rate, moved).within(points) >= chance;
  let high = Math.max(2, round(least));
  if (sees(high)) return high;
  while (!sees(high)) {
    high *= 2;
    if (high > MOST_ACCOUNTS) return null;
  }
  let low = high / 2;
  while (high - low > Math.max(1, 0.02 * low)) {
    const middle = Math.round((low + high) / 2);
    if (sees(middle)) high = middle;
    else low = middle;
  }
  // Counts are whole, so that a slightly larger size can see a little less: go on to one that does.
  let size = round(high);
  for (let tries = 0; tries < 100 && !sees(size); tries++) size = round(size + 1);
  return size;
}
