import { gammaln } from 'simple-statistics';
import type { Uniform } from './uniform.ts';

/** Turns uniform numbers into binomial counts for one size and rate. */
export interface BinomialSampler {
  /** the count at which the cumulative chance first reaches u */
  quantile(u: number): number;
  draw(uniform: Uniform): number;
}

/** Counts less likely than this are never drawn: far below anything a simulation of ten thousand histories can see. */
const NEGLIGIBLE = 1e-13;
const GUIDE_CELLS = 512;

/**
 * Inverse-transform sampler for the binomial distribution with a guide table.
 * The same uniform number at a higher rate never gives a lower count, so that two rates can be compared on common random numbers.
 * @param size  n >= 1
 * @param rate  chance of a loss, in [0, 1]
 * Source: Devroye 1986, Non-Uniform Random Variate Generation, section III.2.4, method of guide tables (section from memory).
 */
export function binomialSampler(size: number, rate: number): BinomialSampler {
  const { first, cumulative } = cumulativeTable(size, rate);
  const guide = new Int32Array(GUIDE_CELLS);
  let at = 0;
  for (let cell = 0; cell < GUIDE_CELLS; cell++) {
    while (at < cumulative.length - 1 && cumulative[at]! < cell / GUIDE_CELLS) at++;
    guide[cell] = at;
  }
  const last = cumulative.length - 1;
  const quantile = (u: number): number => {
    let i = guide[Math.floor(u * GUIDE_CELLS)]!;
    while (i < last && cumulative[i]! < u) i++;
    return first + i;
  };
  return { quantile, draw: (uniform) => quantile(uniform()) };
}

function cumulativeTable(size: number, rate: number): { first: number; cumulative: Float64Array } {
  if (rate <= 0) return { first: 0, cumulative: Float64Array.of(1) };
  if (rate >= 1) return { first: size, cumulative: Float64Array.of(1) };
  const mode = Math.min(size, Math.floor((size + 1) * rate));
  const atMode = Math.exp(
    gammaln(size + 1) -
      gammaln(mode + 1) -
      gammaln(size - mode + 1) +
      mode * Math.log(rate) +
      (size - mode) * Math.log1p(-rate),
  );
  const odds = rate / (1 - rate);
  const below: number[] = [];
  for (let k = mode, mass = atMode; k > 0; k--) {
    mass *= k / ((size - k + 1) * odds);
    if (mass < NEGLIGIBLE) break;
    below.push(mass);
  }
  const above: number[] = [];
  for (let k = mode, mass = atMode; k < size; k++) {
    mass *= ((size - k) / (k + 1)) * odds;
    if (mass < NEGLIGIBLE) break;
    above.push(mass);
  }
  const masses = [...below.reverse(), atMode, ...above];
  const total = masses.reduce((sum, mass) => sum + mass, 0);
  const cumulative = new Float64Array(masses.length);
  let sum = 0;
  masses.forEach((mass, i) => {
    sum += mass / total;
    cumulative[i] = sum;
  });
  return { first: mode - below.length, cumulative };
}
