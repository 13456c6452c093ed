import { type Fraction, likelihoodSteps, movedRateFor, nearFraction } from './bernoulliSteps.ts';
import { type SumWalk, sumRunLength } from './sumRunLength.ts';

export type Direction = 'rise' | 'fall';

/** One sum of an account-by-account watch: what it looks for and where its limit lies. All steps and values are whole numbers. */
export interface WatchSum {
  readonly direction: Direction;
  /** p0: the rate it takes for usual */
  readonly usual: number;
  /** the moved rate that was asked for */
  readonly wanted: number;
  /** p1: the moved rate it is built for, which differs a little from the wanted one, so that its steps are whole */
  readonly moved: number;
  /** the rate between usual and moved at which the sum drifts neither way, as a fraction */
  readonly gamma: Fraction;
  /** what a lost account adds to the sum, and what a kept one does; one of them is negative */
  readonly lostStep: number;
  readonly keptStep: number;
  /** an alarm is raised when the sum reaches this */
  readonly limit: number;
  /** where the sum begins: 0, or a head start below the limit */
  readonly start: number;
}

/** How far gamma may be rounded, as a part of its distance from the usual rate: the move looked for is then rounded by about as much. */
const ROUNDING = 0.1;

/**
 * A Bernoulli CUSUM without its limit: the sum of the steps never falls below zero.
 * @param usual   p0, strictly between 0 and 1
 * @param wanted  p1, strictly between 0 and 1, above p0 for a rise and below it for a fall
 * @throws RangeError when p1 is p0
 * Method: every account adds X - gamma (X = 1 when lost), for a fall gamma - X; gamma is rounded to a fraction so that the Markov chain of
 * the sum is exact.
 * Source: Reynolds MR and Stoumbos ZG, Journal of Quality Technology 31(1):87-108, 1999 (read in secondary sources).
 */
export function watchSteps(usual: number, wanted: number): Omit<WatchSum, 'limit' | 'start'> {
  if (wanted === usual) throw new RangeError('a watch needs a moved rate that differs from the usual one');
  const direction = wanted > usual ? 'rise' : 'fall';
  const exact = likelihoodSteps(usual, wanted).gamma;
  const gamma = nearFraction(exact, ROUNDING * Math.abs(exact - usual));
  const { numerator, denominator } = gamma;
  const side = direction === 'rise' ? 1 : -1;
  return {
    direction,
    usual,
    wanted,
    moved: movedRateFor(usual, numerator / denominator),
    gamma,
    lostStep: side * (denominator - numerator),
    keptStep: -side * numerator,
  };
}

/** Mean number of accounts until this sum raises an alarm when the true rate is `rate`, strictly between 0 and 1; exact. */
export function accountsToAlarm(sum: WatchSum, rate: number): number {
  return sumRunLength(walkOf(sum, rate));
}

function walkOf(sum: Omit<WatchSum, 'limit'> & { readonly limit: number }, rate: number): SumWalk {
  const { lostStep, keptStep, limit, start } = sum;
  return sum.direction === 'rise'
    ? { up: lostStep, down: -keptStep, chanceUp: rate, limit, start }
    : { up: keptStep, down: -lostStep, chanceUp: 1 - rate, limit, start };
}

/** Whole steps a limit may have: beyond it an alarm would take longer than anybody waits. */
const HIGHEST_LIMIT = 4_000_000;

/**
 * The sum with the smallest limit that raises a false alarm no more often than wanted.
 * @param every      accounts between two false alarms of this sum alone, > 0: the mean from a sum of zero, without the head start
 * @param headStart  part of the limit the sum begins at, from 0 to below 1 (fast initial response; Lucas and Crosier 1982 use a half)
 * Method: the run length grows with the limit, nearly exponentially; a bracket, then false position on exact run lengths.
 */
export function designWatch(usual: number, wanted: number, every: number, headStart = 0): WatchSum {
  const steps = { ...watchSteps(usual, wanted), start: 0 };
  const height = (limit: number): number => Math.log(sumRunLength(walkOf({ ...steps, limit }, usual)) / every);
  // Heights are logarithms against the wanted run length: they grow nearly in a straight line with the limit.
  let short = { limit: 0, height: Math.log(1 / every) };
  let enough = { limit: steps.gamma.denominator, height: height(steps.gamma.denominator) };
  while (enough.height < 0 && enough.limit < HIGHEST_LIMIT) {
    short = enough;
    const limit = Math.ceil(1.5 * enough.limit);
    enough = { limit, height: height(limit) };
  }
  for (let probe = 0; enough.limit - short.limit > 1; probe++) {
    const gap = enough.limit - short.limit;
    const guess = short.limit + (gap * -short.height) / (enough.height - short.height);
    // By turns a little over and a little under the straight line, so that both ends close in.
    const limit = Math.min(
      enough.limit - 1,
      Math.max(short.limit + 1, probe % 2 === 0 ? Math.ceil(guess + gap / 64) : Math.floor(guess - gap / 64)),
    );
    const found = { limit, height: height(limit) };
    if (found.height >= 0) enough = found;
    else short = found;
  }
  return { ...steps, limit: enough.limit, start: Math.floor(headStart * enough.limit) };
}
