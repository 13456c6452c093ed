import type { Baseline, SubgroupCount } from './types.ts';

/** Fewest points for a baseline that is not provisional. */
export const FULL_BASELINE = 25;
/** Most points a baseline takes when nothing else is said. */
export const LONGEST_BASELINE = 30;

/**
 * How many of the first points set the usual level when the question does not say.
 * Up to 30 points all of them do (trial limits); beyond that the first 25, or 30 on a chart of at least 60 points.
 * Source: 25 to 30 subgroups are common practice for trial limits; the split between 25 and 30 is ours.
 */
export function recommendedBaseline(pointCount: number): number {
  if (pointCount <= LONGEST_BASELINE) return pointCount;
  return pointCount >= 2 * LONGEST_BASELINE ? LONGEST_BASELINE : FULL_BASELINE;
}

/**
 * Pools the baseline's points.
 * @param counts    subgroups in time order
 * @param last      last point of the baseline, from 1 to counts.length
 * @param excluded  points (numbered from 1) left out by decision
 * @throws RangeError when no point is left
 */
export function poolBaseline(
  counts: readonly SubgroupCount[],
  last: number,
  excluded: readonly number[] = [],
): Baseline {
  let accounts = 0;
  let lost = 0;
  let used = 0;
  for (let i = 0; i < last; i++) {
    if (excluded.includes(i + 1)) continue;
    accounts += counts[i]!.accounts;
    lost += counts[i]!.lost;
    used++;
  }
  if (used === 0) throw new RangeError('a baseline needs at least one point');
  return {
    first: 1,
    last,
    excluded: excluded.filter((point) => point <= last),
    provisional: used < FULL_BASELINE,
    accounts,
    lost,
  };
}
