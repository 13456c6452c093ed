import binomialCdf from '@stdlib/stats-base-dists-binomial-cdf';
import type { Interval } from '../types.ts';

const TAIL_95 = 0.025;
/** Halvings of [0, 1]: beyond what a double can tell apart near the answer. */
const HALVINGS = 60;

/**
 * Exact interval for one proportion: the rates under which neither so few nor so many would be a surprise.
 * @param lost      successes, 0 <= lost <= accounts
 * @param accounts  trials, >= 1
 * @param tail      largest chance of each side, 2.5 % for a 95 % interval
 * @returns         low solves P(X >= lost) = tail, high solves P(X <= lost) = tail; 0 and 1 at the ends
 * Covers at least 1 - 2 tail whatever the rate, which Wilson's interval does not do where few are lost; the price is width.
 * Source: Clopper and Pearson, Biometrika 26:404-413, 1934 (cited from memory); method 5 in Newcombe RG, Statistics in Medicine 17:857-872,
 * 1998 (number of the method from memory). Example: 1 of 29 gives 0.0009 to 0.1776.
 */
export function clopperPearsonInterval(lost: number, accounts: number, tail = TAIL_95): Interval {
  return {
    estimate: lost / accounts,
    low: lost === 0 ? 0 : rateAt((p) => 1 - binomialCdf(lost - 1, accounts, p) < tail),
    high: lost === accounts ? 1 : rateAt((p) => binomialCdf(lost, accounts, p) > tail),
  };
}

/** The rate up to which `holds` is true. */
function rateAt(holds: (p: number) => boolean): number {
  let [low, high] = [0, 1];
  for (let i = 0; i < HALVINGS; i++) {
    const middle = (low + high) / 2;
    if (holds(middle)) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}
