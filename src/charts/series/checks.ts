import { seededUniform } from '../random/uniform.ts';
import type { SeriesFamily, SeriesLevel } from './family.ts';

export interface SeriesChecks {
  /** the split of the values into two levels that tells them most apart: the last value before it, numbered within the values given */
  readonly splitAfter: number;
  readonly ratio: number;
  /** chance of a ratio at least this large with one level throughout */
  readonly pValue: number;
  /** how much the values scatter around their level (or around the two, when they clearly have two), against what the family has: near 1 */
  readonly spread: number;
  /** chance of at least this much scatter when the family is right; null for a family whose spread is measured and not implied */
  readonly spreadPValue: number | null;
}

const HISTORIES = 999;
const CLEARLY_TWO = 0.01;

/**
 * Is one level behind all these values, and do they scatter as the family says? Both against seeded simulations at the common level.
 * @param overdispersion  factor by which the values scatter more than the family; the ratio shrinks by it (quasi-likelihood)
 * @returns null for fewer than 4 values or values without a level
 */
export function seriesChecks(
  family: SeriesFamily,
  values: readonly number[],
  overdispersion = 1,
  seed = 15,
): SeriesChecks | null {
  const level = family.fit(values);
  if (values.length < 4 || level === null) return null;
  const here = largestSplit(family, values, level);
  const uniform = seededUniform(seed);
  const draw = family.sampler(level);
  const implied = family.openEnded;
  const simulated = new Array<number>(values.length);
  const simulatedSpreads: number[] = [];
  let splits = 0;
  for (let history = 0; history < HISTORIES; history++) {
    for (let i = 0; i < simulated.length; i++) simulated[i] = draw(uniform);
    const there = family.fit(simulated);
    if (there === null) continue;
    if (largestSplit(family, simulated, there).ratio >= here.ratio / overdispersion) splits++;
    if (implied) simulatedSpreads.push(spreadOf(family, [simulated]));
  }
  const pValue = (1 + splits) / (1 + HISTORIES);
  const parts = pValue < CLEARLY_TWO ? [values.slice(0, here.splitAfter), values.slice(here.splitAfter)] : [values];
  const spread = implied ? spreadOf(family, parts) : 1;
  const asWide = simulatedSpreads.filter((one) => one >= spread).length;
  return { ...here, pValue, spread, spreadPValue: implied ? (1 + asWide) / (1 + HISTORIES) : null };
}

function largestSplit(
  family: SeriesFamily,
  values: readonly number[],
  level: SeriesLevel,
): { splitAfter: number; ratio: number } {
  const all = values.reduce((total, value) => total + value, 0);
  const whole = family.maxLogLikelihood(values.length, all, level);
  let sum = 0;
  let ratio = 0;
  let splitAfter = 1;
  for (let n = 1; n < values.length; n++) {
    sum += values[n - 1]!;
    const here =
      family.maxLogLikelihood(n, sum, level) + family.maxLogLikelihood(values.length - n, all - sum, level) - whole;
    if (here > ratio) {
      ratio = here;
      splitAfter = n;
    }
  }
  return { splitAfter, ratio };
}

/** Mean squared distance from the level of each part, over the variance the family has there. */
function spreadOf(family: SeriesFamily, parts: readonly (readonly number[])[]): number {
  let squares = 0;
  let degrees = 0;
  for (const part of parts) {
    const level = family.fit(part);
    if (part.length < 2 || level === null) continue;
    for (const value of part) squares += ((value - level.mean) / level.sigma) ** 2;
    degrees += part.length - 1;
  }
  return degrees > 0 ? squares / degrees : 1;
}
