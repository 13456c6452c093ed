import { type CountChances, certainCount, countChances } from './countChances.ts';

/** Far below what any figure told to people depends on, and still no needless work. */
const NEGLIGIBLE = 1e-22;

/**
 * Chances of the counts of a binomial distribution.
 * @param size  n >= 1
 * @param rate  chance of a loss, in [0, 1]
 * Method: ratios of neighbouring chances from the mode outwards, then scaled to sum to 1.
 */
export function binomialChances(size: number, rate: number, negligible = NEGLIGIBLE): CountChances {
  if (rate <= 0) return certainCount(0);
  if (rate >= 1) return certainCount(size);
  const odds = rate / (1 - rate);
  const mode = Math.min(size, Math.floor((size + 1) * rate));
  return countChances(size, mode, 1, (k) => ((size - k) / (k + 1)) * odds, negligible);
}

/**
 * Chances of counts that vary more than the binomial: every subgroup has a rate of its own, drawn from a beta distribution around `rate`.
 * @param correlation  intra-class correlation of accounts in a subgroup, in [0, 1): the variance is the binomial's times 1 + (n - 1) correlation
 * Source: beta-binomial distribution, Skellam JG, JRSS B 10:257-261, 1948 (reference from memory).
 */
export function betaBinomialChances(
  size: number,
  rate: number,
  correlation: number,
  negligible = NEGLIGIBLE,
): CountChances {
  if (correlation <= 0 || rate <= 0 || rate >= 1) return binomialChances(size, rate, negligible);
  const scale = (1 - correlation) / correlation;
  const a = rate * scale;
  const b = (1 - rate) * scale;
  return countChances(
    size,
    Math.floor(size * rate),
    1,
    (k) => ((size - k) / (k + 1)) * ((k + a) / (size - k - 1 + b)),
    negligible,
  );
}
