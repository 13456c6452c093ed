import { gammaln } from 'simple-statistics';
import { type CountSampler, certainSampler, tableSampler } from './tableSampler.ts';

/**
 * Sampler for binomial counts.
 * The same uniform number at a higher rate never gives a lower count, so that two rates can be compared on common random numbers.
 * @param size  n >= 1
 * @param rate  chance of a loss, in [0, 1]
 */
export function binomialSampler(size: number, rate: number): CountSampler {
  if (rate <= 0) return certainSampler(0);
  if (rate >= 1) return certainSampler(size);
  const mode = Math.min(size, Math.floor((size + 1) * rate));
  const atMode = Math.exp(
    gammaln(size + 1) -
      gammaln(mode + 1) -
      gammaln(size - mode + 1) +
      mode * Math.log(rate) +
      (size - mode) * Math.log1p(-rate),
  );
  const odds = rate / (1 - rate);
  return tableSampler(size, mode, atMode, (k) => ((size - k) / (k + 1)) * odds);
}
