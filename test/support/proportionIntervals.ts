import binomialCdf from '@stdlib/stats-base-dists-binomial-cdf';
import { wilsonInterval, Z_95 } from '../../src/charts/intervals/wilson.ts';

/** Lost, of how many, to the ends of a 95 % interval. */
export type Method = (lost: number, accounts: number) => readonly [number, number];

/*
 * The 95 % intervals for one proportion that Ebbline does not use. They stand here for two reasons: the published table they come from
 * checks the arithmetic of the ones that are used, and the tests compare their coverage, which is why Ebbline uses those.
 * Source: Newcombe RG, Statistics in Medicine 17:857-872, 1998, whose seven methods these are with Wilson's and the exact one; Jeffreys'
 * is not among them.
 */

const z = Z_95;

/** Where `inside` stops holding between a rate at which it holds and one at which it does not. */
function edge(holdsAt: number, failsAt: number, inside: (p: number) => boolean): number {
  let [good, bad] = [holdsAt, failsAt];
  for (let i = 0; i < 60; i++) {
    const middle = (good + bad) / 2;
    if (inside(middle)) good = middle;
    else bad = middle;
  }
  return (good + bad) / 2;
}

const atMost = (k: number, n: number, p: number): number => (k < 0 ? 0 : k >= n ? 1 : binomialCdf(k, n, p));

/** Estimate -/+ z standard errors, not cut at 0 and 1. */
export const wald: Method = (x, n) => {
  const p = x / n;
  const half = z * Math.sqrt((p * (1 - p)) / n);
  return [p - half, p + half];
};

/** The same, half a case wider at each end. */
export const waldCorrected: Method = (x, n) => {
  const [low, high] = wald(x, n);
  return [low - 1 / (2 * n), high + 1 / (2 * n)];
};

/** Wilson's score interval with continuity correction: where |observed - expected| - 1/2 is z standard errors. */
export const wilsonCorrected: Method = (x, n) => {
  const p = x / n;
  const scale = 2 * (n + z * z);
  const spread = (sign: 1 | -1): number => z * Math.sqrt(z * z - sign * 2 - 1 / n + 4 * p * (n * (1 - p) + sign));
  return [
    x === 0 ? 0 : Math.max(0, (2 * x + z * z - 1 - spread(1)) / scale),
    x === n ? 1 : Math.min(1, (2 * x + z * z + 1 + spread(-1)) / scale),
  ];
};

/** The exact interval, with only half the chance of the count itself in each tail. */
export const midP: Method = (x, n) => {
  const below = (p: number): number => (atMost(x - 1, n, p) + atMost(x, n, p)) / 2;
  return [
    x === 0 ? 0 : edge(x / n, 0, (p) => 1 - below(p) > 0.025),
    x === n ? 1 : edge(x / n, 1, (p) => below(p) > 0.025),
  ];
};

/** The rates whose log likelihood is within z^2 / 2 of the largest. */
export const likelihoodRatio: Method = (x, n) => {
  const term = (count: number, rate: number): number => (count === 0 ? 0 : count * Math.log(rate));
  const log = (p: number): number => term(x, p) + term(n - x, 1 - p);
  const inside = (p: number): boolean => 2 * (log(x / n) - log(p)) < z * z;
  return [x === 0 ? 0 : edge(x / n, 0, inside), x === n ? 1 : edge(x / n, 1, inside)];
};

/**
 * The middle 95 % of the Beta(x + 1/2, n - x + 1/2) distribution. Its distribution function comes from the angle t with p = sin^2 t, in
 * which the density is smooth, by Simpson's rule.
 */
export const jeffreys: Method = (x, n) => {
  const steps = 20_000;
  const width = Math.PI / 2 / steps;
  const top = x === 0 ? 0 : x === n ? Math.PI / 2 : Math.asin(Math.sqrt(x / n));
  const log = (t: number): number =>
    (x === 0 ? 0 : 2 * x * Math.log(Math.sin(t))) + (x === n ? 0 : 2 * (n - x) * Math.log(Math.cos(t)));
  const density = (t: number): number => Math.exp(log(t) - log(top)) || 0;
  const sums = [0];
  for (let i = 0; i < steps; i++) {
    const area = (density(i * width) + 4 * density((i + 0.5) * width) + density((i + 1) * width)) / 6;
    sums.push(sums[i]! + area);
  }
  const quantile = (share: number): number => {
    const wanted = share * sums[steps]!;
    const after = sums.findIndex((sum) => sum >= wanted);
    const part = (wanted - sums[after - 1]!) / (sums[after]! - sums[after - 1]!);
    return Math.sin((after - 1 + part) * width) ** 2;
  };
  return [quantile(0.025), quantile(0.975)];
};

export const wilson: Method = (x, n) => {
  const { low, high } = wilsonInterval(x, n);
  return [low, high];
};

/** Newcombe's hybrid score interval for a difference with continuity correction: method 11, the square-and-add of Wilson's corrected limits. */
export function newcombeCorrected(x1: number, n1: number, x2: number, n2: number): [number, number, number] {
  const [l1, u1] = wilsonCorrected(x1, n1);
  const [l2, u2] = wilsonCorrected(x2, n2);
  const [p1, p2] = [x1 / n1, x2 / n2];
  return [p1 - p2, p1 - p2 - Math.hypot(p1 - l1, u2 - p2), p1 - p2 + Math.hypot(u1 - p1, p2 - l2)];
}

/** Chance that the interval holds the rate, by adding up the chances of all counts whose interval does. */
export function coverage(intervals: readonly (readonly [number, number])[], p: number): number {
  const n = intervals.length - 1;
  let sum = 0;
  for (const [x, [low, high]] of intervals.entries())
    if (low <= p && p <= high) sum += atMost(x, n, p) - atMost(x - 1, n, p);
  return sum;
}

export const intervalsOf = (method: Method, n: number): (readonly [number, number])[] =>
  Array.from({ length: n + 1 }, (_, x) => method(x, n));
