import { betaBinomialSampler } from '../random/betaBinomialSampler.ts';
import { seededUniform, type Uniform } from '../random/uniform.ts';
import { type Detectable, expectedMove, smallestMove } from '../standing/detectable.ts';
import { AIMED_FALSE_VERDICTS } from '../standing/threshold.ts';
import { likelihoodSteps } from './bernoulliSteps.ts';
import { scatter } from './scatter.ts';
import type { Watch } from './watchDesign.ts';
import type { WatchSum } from './watchSum.ts';

/** How a history is split into the accounts that set the usual level and those that are watched. */
export interface SumHistory {
  /** accounts that set the usual level */
  readonly baselineAccounts: number;
  /** accounts watched since */
  readonly watched: number;
  /** given when subgroups vary more than the binomial allows: their size, and what accounts of one have in common */
  readonly clusters?: { readonly size: number; readonly correlation: number };
}

export interface SumThreshold {
  /** how far, in parts of its limit, a sum must stand at the newest account to be believed; at least 1 */
  readonly ratio: number;
  /** simulated chance that a history reads as moved, in either direction, with nothing changed */
  readonly falseVerdictChance: number;
  readonly histories: number;
}

const HISTORIES = 2_000;
const DETECT_HISTORIES = 200;

/**
 * How high a sum must stand after the newest account so that, with nothing changed, at most about 4 in 100 histories like this one read as
 * moved. In every simulated history the usual level is estimated from as many accounts as it really was, and the sums are built on that.
 * @param rate  the estimated usual rate, taken as the truth of the simulated histories
 */
export function sumThreshold(watch: Watch, history: SumHistory, rate: number, seed = 7): SumThreshold {
  const uniform = seededUniform(seed);
  const simulate = simulator(watch, history, rate, uniform);
  const scores: number[] = [];
  for (let i = 0; i < HISTORIES; i++) {
    const { rise, fall } = simulate(rate, Number.POSITIVE_INFINITY);
    scores.push(Math.max(rise, fall));
  }
  scores.sort((a, b) => a - b);
  const ratio = Math.max(1, scores[Math.ceil(HISTORIES * (1 - AIMED_FALSE_VERDICTS)) - 1]!);
  return {
    ratio,
    falseVerdictChance: scores.filter((score) => score > ratio).length / HISTORIES,
    histories: HISTORIES,
  };
}

/** The smallest rise and fall, begun with the first watched account, that would by now have been believed with the wanted chance. */
export function detectableBySums(
  watch: Watch,
  history: SumHistory,
  rate: number,
  threshold: number,
  chance: number,
  seed = 8,
): Detectable {
  const seen = (moved: number, direction: 'rise' | 'fall'): boolean => {
    const simulate = simulator(watch, history, rate, seededUniform(seed));
    let hits = 0;
    for (let i = 0; i < DETECT_HISTORIES; i++) if (simulate(moved, threshold)[direction] > threshold) hits++;
    return hits / DETECT_HISTORIES >= chance;
  };
  if (history.watched === 0) return { rise: null, fall: null, chance };
  // About the information at which a sum's likelihood ratio reaches its limit; only a place to start looking.
  const wanted = (threshold * evidence(watch.rise)) / history.watched;
  return {
    rise: smallestMove(rate, 1, expectedMove(rate, 1, wanted), (moved) => seen(moved, 'rise')),
    fall: smallestMove(rate, 0, expectedMove(rate, 0, wanted), (moved) => seen(moved, 'fall')),
    chance,
  };
}

/** Log likelihood ratio of the last accounts for the moved rate against the usual one when the sum reaches its limit. */
export function evidence(sum: WatchSum): number {
  return (sum.limit / sum.gamma.denominator) * Math.abs(likelihoodSteps(sum.usual, sum.moved).r2);
}

/** A sum this far, in log likelihood, below its highest value will hardly pass it any more: one chance in 10,000. */
const HOPELESS = Math.log(10_000);

/**
 * Makes histories and says where their sums stand at the newest account, in parts of their limits.
 *
 * A sum at the newest account is the largest total of its steps over any last stretch of accounts, so it is enough to go backwards from
 * the newest until the total has sunk so far that it will not come back: a few hundred losses, however long the history.
 * On another estimated level the limits are not designed anew: their evidence grows with the logarithm of the level, as the interval
 * between false alarms counts accounts and not losses.
 */
function simulator(watch: Watch, history: SumHistory, rate: number, uniform: Uniform) {
  const { baselineAccounts, watched, clusters } = history;
  const estimate = estimator(history, rate, uniform);
  const factors = {
    rise: oddsOf(watch.rise.moved) / oddsOf(watch.usual),
    fall: oddsOf(watch.fall.moved) / oddsOf(watch.usual),
  };
  const limits = { rise: evidence(watch.rise), fall: evidence(watch.fall) };

  return (moved: number, enough: number): { rise: number; fall: number } => {
    // At the ends there is no level; the nearest that could have been counted stands for it.
    const level = Math.min(Math.max(estimate(), 0.5 / baselineAccounts), 1 - 0.5 / baselineAccounts);
    const up = likelihoodSteps(level, rateOf(oddsOf(level) * factors.rise));
    const down = likelihoodSteps(level, rateOf(oddsOf(level) * factors.fall));
    const drift = Math.log((level * (1 - level)) / (watch.usual * (1 - watch.usual)));
    const riseLimit = Math.max(1, limits.rise + drift);
    const fallLimit = Math.max(1, limits.fall + drift);
    let rise = 0;
    let fall = 0;
    let riseBest = 0;
    let fallBest = 0;
    const next = losses(moved, watched, clusters, uniform);
    for (let done = 0; done < watched; ) {
      const at = next();
      const kept = Math.min(at, watched + 1) - 1 - done;
      rise -= kept * up.r1;
      fall -= kept * down.r1;
      if (fall > fallBest) fallBest = fall;
      if (at > watched) break;
      rise += up.r2 - up.r1;
      fall += down.r2 - down.r1;
      if (rise > riseBest) riseBest = rise;
      done = at;
      if (rise < riseBest - HOPELESS && fall < fallBest - HOPELESS) break;
      if (riseBest > enough * riseLimit || fallBest > enough * fallLimit) break;
    }
    return { rise: riseBest / riseLimit, fall: fallBest / fallLimit };
  };
}

const oddsOf = (rate: number): number => rate / (1 - rate);
const rateOf = (odds: number): number => odds / (1 + odds);

/** Draws the level as it is estimated. */
function estimator({ baselineAccounts, clusters }: SumHistory, rate: number, uniform: Uniform): () => number {
  if (!clusters) {
    const sampler = betaBinomialSampler(baselineAccounts, rate, 0);
    return () => sampler.draw(uniform) / baselineAccounts;
  }
  const sampler = betaBinomialSampler(clusters.size, rate, clusters.correlation);
  const groups = Math.max(1, Math.round(baselineAccounts / clusters.size));
  return () => {
    let lost = 0;
    for (let group = 0; group < groups; group++) lost += sampler.draw(uniform);
    return lost / (groups * clusters.size);
  };
}

/** Numbers of the lost accounts, ascending, one at each call; beyond the watched ones at last. */
function losses(rate: number, watched: number, clusters: SumHistory['clusters'], uniform: Uniform): () => number {
  if (!clusters || rate <= 0 || rate >= 1) {
    if (rate <= 0) return () => watched + 1;
    const logKept = Math.log1p(-rate);
    let at = 0;
    return () => {
      at += rate >= 1 ? 1 : 1 + Math.floor(Math.log(uniform()) / logKept);
      return at;
    };
  }
  const sampler = betaBinomialSampler(clusters.size, rate, clusters.correlation);
  let before = -clusters.size;
  let group: Int32Array = new Int32Array(0);
  let i = 0;
  return () => {
    while (i >= group.length) {
      before += clusters.size;
      if (before >= watched) return watched + 1;
      group = scatter(sampler.draw(uniform), clusters.size, uniform);
      i = 0;
    }
    return before + group[i++]!;
  };
}
