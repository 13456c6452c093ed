import { seededUniform } from '../random/uniform.ts';
import type { SeriesFamily, SeriesLevel } from './family.ts';

/** A stretch of a simulated history at one level: so many values, or as many as an exposure holds. */
export interface Stretch {
  readonly level: SeriesLevel;
  readonly count?: number;
  readonly exposure?: number;
}

/** One history: `values[0..count)` are finished; `open` is what a last unfinished value has reached. */
export interface SeriesHistory {
  readonly values: ArrayLike<number>;
  readonly count: number;
  readonly open: number;
}

/**
 * Simulates histories and hands each to `visit`.
 * A stretch of fixed exposure (accounts, days) has as many gaps as happen to fit: what would by now have been seen of rarer losses is fewer
 * points, not the same number of longer ones. What is left of it is the open gap.
 * The same seed gives the same uniform numbers whatever the levels, so that two levels are compared on common random numbers.
 * @param most   values are cut here: a moved level may otherwise fit any number of them
 * @param visit  gets the history; its array is used again for the next one
 */
export function simulateSeries(
  family: SeriesFamily,
  stretches: readonly Stretch[],
  most: number,
  histories: number,
  seed: number,
  visit: (history: SeriesHistory) => void,
): void {
  const uniform = seededUniform(seed);
  const samplers = stretches.map(({ level }) => family.sampler(level));
  const values = new Float64Array(most);
  for (let history = 0; history < histories; history++) {
    let count = 0;
    let open = 0;
    for (let s = 0; s < stretches.length; s++) {
      const draw = samplers[s]!;
      const { count: wanted, exposure } = stretches[s]!;
      if (exposure === undefined) {
        for (let i = 0; i < wanted! && count < most; i++) values[count++] = draw(uniform);
        continue;
      }
      let left = exposure;
      while (left > 0 && count < most) {
        const value = draw(uniform);
        const used = family.exposure(value);
        if (used > left) {
          open = left;
          break;
        }
        left -= used;
        values[count++] = value;
      }
    }
    visit({ values, count, open });
  }
}
