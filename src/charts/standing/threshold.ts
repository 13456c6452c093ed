import { historyCount, simulateHistories } from './histories.ts';
import type { BlockDesign } from './lastBlock.ts';
import { standingJudge } from './standing.ts';

/**
 * Chance of reading "moved" with nothing changed that the threshold aims at. The promise is at most 5 in 100; the aim is a little lower,
 * so that the simulation's own error does not break the promise.
 */
export const AIMED_FALSE_VERDICTS = 0.04;

export interface Threshold {
  /** log likelihood ratio a last block must exceed */
  readonly ratio: number;
  /** simulated chance that a history of this design reads as moved, in either direction, with nothing changed */
  readonly falseVerdictChance: number;
  readonly standardError: number;
  readonly histories: number;
  /** the simulated scores, ascending */
  readonly scores: readonly number[];
}

/** A ratio below this is no evidence whatever the design (a factor of e in likelihood): the threshold never sinks under it. */
export const LEAST_RATIO = 1;

/**
 * Calibrates, by seeded simulation, the ratio at which a flag stands, for this design and rate, with the baseline estimated in every
 * history as it is on the real chart.
 * @param rate  the baseline's pooled rate, taken as the truth of the simulated histories; strictly between 0 and 1
 */
export function standingThreshold(design: BlockDesign, rate: number, seed = 1): Threshold {
  const histories = historyCount(design.accounts.length);
  const judge = standingJudge(design);
  const scores: number[] = [];
  simulateHistories(design, [{ from: 1, rate }], histories, seed, (lost) => {
    const { above, below } = judge(lost);
    scores.push(Math.max(above.score, below.score));
  });
  return calibrated(scores);
}

/** The ratio that the aimed share of these scores exceeds, each the higher of the two sides of one history in which nothing changed. */
export function calibrated(scores: number[]): Threshold {
  const histories = scores.length;
  scores.sort((a, b) => a - b);
  const ratio = Math.max(LEAST_RATIO, scores[Math.ceil(histories * (1 - AIMED_FALSE_VERDICTS)) - 1]!);
  const moved = scores.filter((score) => score > ratio).length / histories;
  return {
    ratio,
    falseVerdictChance: moved,
    standardError: Math.sqrt((moved * (1 - moved)) / histories),
    histories,
    scores,
  };
}

/**
 * Chance of a score at least this large with nothing changed: a p value, counting the real history with the simulated ones, so that it is
 * never 0.
 * Source: the add-one rule of Monte Carlo tests, Davison AC and Hinkley DV, Bootstrap Methods and their Application, 1997, section 4.2
 * (section from memory).
 */
export function chanceOfScore({ scores }: Pick<Threshold, 'scores'>, score: number): number {
  let [low, high] = [0, scores.length];
  while (low < high) {
    const middle = (low + high) >> 1;
    if (scores[middle]! < score) low = middle + 1;
    else high = middle;
  }
  return (1 + scores.length - low) / (1 + scores.length);
}
