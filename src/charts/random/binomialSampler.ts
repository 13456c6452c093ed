import { binomialChances } from './binomialChances.ts';
import { type CountSampler, NEVER_DRAWN, tableSampler } from './tableSampler.ts';

/**
 * Sampler for binomial counts.
 * The same uniform number at a higher rate never gives a lower count, so that two rates can be compared on common random numbers.
 * @param size  n >= 1
 * @param rate  chance of a loss, in [0, 1]
 */
export function binomialSampler(size: number, rate: number): CountSampler {
  return tableSampler(binomialChances(size, rate, NEVER_DRAWN));
}
