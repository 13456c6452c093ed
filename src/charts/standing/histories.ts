import { betaBinomialSampler } from '../random/betaBinomialSampler.ts';
import type { CountSampler } from '../random/tableSampler.ts';
import { seededUniform } from '../random/uniform.ts';
import type { BlockDesign } from './lastBlock.ts';

/** Points that may be simulated for one figure: keeps any chart, however long, within a fraction of a second. */
const POINT_BUDGET = 200_000;
const MOST_HISTORIES = 4_000;
const LEAST_HISTORIES = 400;

/**
 * How many histories a figure is simulated from: fewer for very long charts, so that an answer never takes minutes.
 * @param most   enough for this figure
 * @param least  fewest that still mean something
 */
export function historyCount(pointCount: number, most = MOST_HISTORIES, least = LEAST_HISTORIES): number {
  return Math.max(least, Math.min(most, Math.floor(POINT_BUDGET / pointCount)));
}

/** A piece of a simulated history: from which point on (numbered from 1) which rate holds. */
export interface RateFrom {
  readonly from: number;
  readonly rate: number;
}

/**
 * Simulates histories of one design and hands each to `visit`.
 * The same seed gives the same uniform numbers whatever the rates, so that two rates are compared on common random numbers.
 * @param rates  first entry from point 1; later entries take over from their point on
 * @param visit  gets the lost counts; the array is used again for the next history
 */
export function simulateHistories(
  design: BlockDesign,
  rates: readonly RateFrom[],
  histories: number,
  seed: number,
  visit: (lost: Int32Array) => void,
): void {
  const uniform = seededUniform(seed);
  const known = new Map<string, CountSampler>();
  const samplers = design.accounts.map((n, i) => {
    const rate = rates.findLast((piece) => piece.from <= i + 1)!.rate;
    const key = `${n}:${rate}`;
    let sampler = known.get(key);
    if (!sampler) {
      sampler = betaBinomialSampler(n, rate, design.correlation ?? 0);
      known.set(key, sampler);
    }
    return sampler;
  });
  const lost = new Int32Array(samplers.length);
  for (let history = 0; history < histories; history++) {
    for (let i = 0; i < samplers.length; i++) lost[i] = samplers[i]!.draw(uniform);
    visit(lost);
  }
}
