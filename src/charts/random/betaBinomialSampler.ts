import { binomialSampler } from './binomialSampler.ts';
import { type CountSampler, certainSampler, tableSampler } from './tableSampler.ts';

/**
 * Sampler for counts that vary more than the binomial: every subgroup has a rate of its own, drawn from a beta distribution around `rate`.
 * @param size         n >= 1
 * @param rate         mean rate, in [0, 1]
 * @param correlation  intra-class correlation of accounts in a subgroup, in [0, 1): the variance is the binomial's times 1 + (n - 1) correlation
 * Source: beta-binomial distribution, Skellam JG, JRSS B 10:257-261, 1948 (reference from memory).
 */
export function betaBinomialSampler(size: number, rate: number, correlation: number): CountSampler {
  if (correlation <= 0) return binomialSampler(size, rate);
  if (rate <= 0) return certainSampler(0);
  if (rate >= 1) return certainSampler(size);
  const scale = (1 - correlation) / correlation;
  const a = rate * scale;
  const b = (1 - rate) * scale;
  return tableSampler(size, Math.floor(size * rate), 1, (k) => ((size - k) / (k + 1)) * ((k + a) / (size - k - 1 + b)));
}
