import normalCdf from '@stdlib/stats-base-dists-normal-cdf';
import { gammaln } from 'simple-statistics';

/*
 * Constants that turn ranges and standard deviations of small samples into sigma, for independent normal values. They are computed, not
 * copied; the printed tables are tests.
 */

/** Standard deviations beyond which a normal tail no longer counts in double precision. */
const REACH = 9;
const STEP = 0.125;

/** P(range of n standard normal values <= w): n times the integral of f(x) (F(x + w) - F(x))^(n-1). The trapezoid is all but exact here. */
function rangeCdf(w: number, n: number): number {
  let sum = 0;
  for (let x = -REACH; x <= REACH; x += STEP) {
    const density = Math.exp(-0.5 * x * x) / Math.sqrt(2 * Math.PI);
    sum += density * (normalCdf(x + w, 0, 1) - normalCdf(x, 0, 1)) ** (n - 1);
  }
  return n * sum * STEP;
}

const moments = new Map<number, { mean: number; standardDeviation: number }>();

/** Mean and standard deviation of the range: E W and E W^2 are integrals of the upper tail P(W > w) and of 2 w P(W > w) (Simpson's rule). */
function rangeMoments(n: number): { mean: number; standardDeviation: number } {
  const known = moments.get(n);
  if (known) return known;
  if (!Number.isInteger(n) || n < 2)
    throw new RangeError(`a range takes a whole number of at least 2 values, not ${n}`);
  const longest = 2 * REACH;
  const intervals = 2 * Math.round(longest / STEP / 2) * 2;
  const h = longest / intervals;
  let mean = 0;
  let square = 0;
  for (let i = 0; i <= intervals; i++) {
    const w = i * h;
    const weight = i === 0 || i === intervals ? 1 : i % 2 === 1 ? 4 : 2;
    const tail = 1 - rangeCdf(w, n);
    mean += weight * tail;
    square += weight * 2 * w * tail;
  }
  mean *= h / 3;
  square *= h / 3;
  const found = { mean, standardDeviation: Math.sqrt(square - mean * mean) };
  moments.set(n, found);
  return found;
}

/**
 * Mean of the range of n independent values, in sigmas: d2(2) = 2 / sqrt(pi) = 1.128379.
 * @param n  a whole number of at least 2
 * @throws RangeError
 * Source: Tippett LHC, On the extreme individuals and the range of samples taken from a normal population, Biometrika 17, 1925 (cited from
 * memory); computed by numerical integration, to seven digits.
 */
export function d2(n: number): number {
  return rangeMoments(n).mean;
}

/** Standard deviation of the range of n independent values, in sigmas: d3(2) = sqrt(2 - 4 / pi) = 0.852502. Method and errors as for d2. */
export function d3(n: number): number {
  return rangeMoments(n).standardDeviation;
}

/**
 * Mean of the sample standard deviation (divisor n - 1) of n independent normal values, in sigmas: c4(2) = sqrt(2 / pi) = 0.797885.
 * @param n  a whole number of at least 2
 * @throws RangeError
 * Method: closed form, sqrt(2 / (n - 1)) gamma(n / 2) / gamma((n - 1) / 2).
 */
export function c4(n: number): number {
  if (!Number.isInteger(n) || n < 2)
    throw new RangeError(`a standard deviation takes a whole number of at least 2 values, not ${n}`);
  return Math.sqrt(2 / (n - 1)) * Math.exp(gammaln(n / 2) - gammaln((n - 1) / 2));
}
