import { betaBinomialChances } from './binomialChances.ts';
import { type CountSampler, NEVER_DRAWN, tableSampler } from './tableSampler.ts';

/**
 * Sampler for counts that vary more than the binomial: every subgroup has a rate of its own, drawn from a beta distribution around `rate`.
 * @param size         n >= 1
 * @param rate         mean rate, in [0, 1]
 * @param correlation  intra-class correlation of accounts in a subgroup, in [0, 1)
 */
export function betaBinomialSampler(size: number, rate: number, correlation: number): CountSampler {
  return tableSampler(betaBinomialChances(size, rate, correlation, NEVER_DRAWN));
}
