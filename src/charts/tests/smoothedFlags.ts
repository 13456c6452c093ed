import type { ChartPoint, TestEpisode } from '../types.ts';
import { sameByArithmetic } from './zone.ts';

/** Where a smoothed value lies against its limits: 1 above, -1 below, 0 within. "Beyond" is strict, up to rounding. */
export function beyondLimits(value: number, center: number, halfWidth: number): -1 | 0 | 1 {
  if (value > center + halfWidth && !sameByArithmetic(value, center + halfWidth)) return 1;
  if (value < center - halfWidth && !sameByArithmetic(value, center - halfWidth)) return -1;
  return 0;
}

/**
 * Flags of an EWMA chart: the smoothed value beyond its limits, one entry for each stretch. They are numbered as test 1, one point beyond
 * the limits, which is what they are.
 * @param width  limits in sigmas of the smoothed value
 */
export function smoothedFlags(
  points: readonly Pick<ChartPoint, 'value' | 'sigma'>[],
  center: number,
  width: number,
): TestEpisode[] {
  const episodes: TestEpisode[] = [];
  const sides = points.map(({ value, sigma }) => beyondLimits(value, center, width * sigma));
  sides.forEach((side, i) => {
    if (side === 0) return;
    const before = episodes.at(-1);
    if (i > 0 && sides[i - 1] === side && before) episodes[episodes.length - 1] = { ...before, until: i + 1 };
    else
      episodes.push({
        test: 1,
        side: side > 0 ? 'above' : 'below',
        point: i + 1,
        members: [i + 1, i + 1],
        until: i + 1,
        speaks: 'shift',
      });
  });
  return episodes;
}
