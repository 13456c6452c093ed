import type { Smoothing } from '../kinds/ewmaChart.ts';
import { betaBinomialSampler } from '../random/betaBinomialSampler.ts';
import { seededUniform } from '../random/uniform.ts';
import { smoothFlags } from '../standing/flagMaker.ts';
import { type SimulationSize, summary } from './simulatedRunLength.ts';
import type { RunLength } from './types.ts';
import type { CountDesign } from './zoneChances.ts';

const LONGEST_RUN = 20_000;
const POINT_BUDGET = 400_000;
const MOST_RUNS = 3_000;

/**
 * Run length of an EWMA chart of lost shares, with its limits known: points from the start, where the limits are narrow, to the first
 * smoothed value beyond them. Simulated, seeded: smoothed shares take too many values for an exact chain.
 * @param sizes  accounts per point; with unequal sizes they are gone through again and again
 * @returns      null when a run went on for 20,000 points without a flag
 */
export function smoothedRunLength(
  sizes: readonly number[],
  design: Omit<CountDesign, 'size'>,
  smoothing: Smoothing,
  { seed = 4, mostRuns = MOST_RUNS, pointBudget = POINT_BUDGET }: SimulationSize = {},
): RunLength | null {
  const { center, rate, sigmaZ, correlation } = design;
  const uniform = seededUniform(seed);
  const spread = Math.sqrt(center * (1 - center)) * sigmaZ;
  const samplers = new Map([...new Set(sizes)].map((n) => [n, betaBinomialSampler(n, rate, correlation)]));
  const flags = smoothFlags(smoothing);
  const lengths: number[] = [];
  for (let points = 0; lengths.length < mostRuns && points < pointBudget; ) {
    flags.begin(center, spread);
    let at = lengths.length % sizes.length;
    let length = 0;
    for (let flagged = false; !flagged; ) {
      if (length >= LONGEST_RUN) return null;
      const n = sizes[at]!;
      at = at + 1 === sizes.length ? 0 : at + 1;
      flagged = flags.push(samplers.get(n)!.draw(uniform) / n, n) !== 0;
      length++;
    }
    points += length;
    lengths.push(length);
  }
  return summary(lengths);
}
