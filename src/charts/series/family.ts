import type { Uniform } from '../random/uniform.ts';
import type { ZoneEdges } from '../tests/zoneEdges.ts';

/** The usual level of a series, from the baseline's values. */
export interface SeriesLevel {
  readonly mean: number;
  /** standard deviation of one value at this level */
  readonly sigma: number;
}

/**
 * The distribution behind a series of values, one value a point, so that one judge serves gaps between losses and measured ratios alike.
 *
 * Every family has one number that can move, its mean, and log likelihoods that need only how many values a stretch has and what they add
 * up to. That is what lets the judge look at every possible last stretch of thousands of simulated histories.
 */
export interface SeriesFamily {
  readonly name: 'geometric' | 'exponential' | 'whole-exponential' | 'normal';
  /** what values above the usual level say about churn: a longer gap is less of it */
  readonly above: 'less-churn' | 'more-churn';
  /** true when a last, unfinished value is evidence too: it is at least what it has reached so far */
  readonly openEnded: boolean;
  /** what a value uses up of the history it is part of: accounts, days, or one point */
  exposure(value: number): number;
  /**
   * The usual level of these values, in time order.
   * @param open  what an unfinished last value has reached so far; 0 when there is none
   * @returns     null when they carry no level: no value, or no spread at all
   */
  fit(values: ArrayLike<number>, open?: number): SeriesLevel | null;
  /** centre line and the ends of the zones, at the tail areas of 1, 2 and 3 sigma */
  edges(level: SeriesLevel): ZoneEdges;
  /**
   * Largest log likelihood of a stretch, without terms that depend on its values alone.
   * @param count  finished values in it, >= 0
   * @param sum    what they and an unfinished one add up to
   * @param level  for the spread of a family that has one of its own
   */
  maxLogLikelihood(count: number, sum: number, level: SeriesLevel): number;
  /** the same at a given level's mean */
  logLikelihood(count: number, sum: number, level: SeriesLevel): number;
  /** the level with its mean moved: up for size > 0, down for size < 0, by about `size` sigma of a single value */
  moved(level: SeriesLevel, size: number): SeriesLevel;
  /** the level at which a stretch is most likely */
  levelOf(count: number, sum: number, level: SeriesLevel): SeriesLevel;
  /** draws values at a level; the same uniform numbers at a higher mean never give a lower value */
  sampler(level: SeriesLevel): (uniform: Uniform) => number;
}
