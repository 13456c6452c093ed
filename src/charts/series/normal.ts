import normalQuantile from '@stdlib/stats-base-dists-normal-quantile';
import { symmetricEdges } from '../tests/zoneEdges.ts';
import type { SeriesFamily, SeriesLevel } from './family.ts';

/** Mean range of two standard normal values, d2(2) = 2 / sqrt(pi), as the tables print it. */
const D2_OF_2 = 1.128;

/**
 * Measured ratios, one a point, that scatter about normally around a level; sigma is the average moving range of neighbours over 1.128,
 * so that a single step inside the baseline hardly widens it.
 * @param above  what higher values say about churn: `more-churn` for a lost share of revenue
 * Source: NIST/SEMATECH e-Handbook of Statistical Methods, section 6.3.2.2, Individuals Control Charts.
 */
export function normalIndividuals(above: SeriesFamily['above']): SeriesFamily {
  return {
    name: 'normal',
    above,
    openEnded: false,
    exposure: () => 1,
    fit: (values) => movingRangeLevel(values),
    edges: ({ mean, sigma }) => symmetricEdges(mean, sigma),
    maxLogLikelihood: (count, sum, { sigma }) => (count > 0 ? (sum * sum) / (2 * count * sigma * sigma) : 0),
    logLikelihood: (count, sum, { mean, sigma }) => (mean * sum - (count * mean * mean) / 2) / (sigma * sigma),
    moved: ({ mean, sigma }, size) => ({ mean: mean + size * sigma, sigma }),
    levelOf: (count, sum, { mean, sigma }) => ({ mean: count > 0 ? sum / count : mean, sigma }),
    sampler:
      ({ mean, sigma }) =>
      (uniform) =>
        mean + sigma * normalQuantile(uniform(), 0, 1),
  };
}

/** Mean, and sigma from the average moving range; null for fewer than two values or values that are all equal. */
export function movingRangeLevel(values: ArrayLike<number>): SeriesLevel | null {
  const count = values.length;
  if (count < 2) return null;
  let sum = values[0]!;
  let ranges = 0;
  for (let i = 1; i < count; i++) {
    sum += values[i]!;
    ranges += Math.abs(values[i]! - values[i - 1]!);
  }
  return ranges > 0 ? { mean: sum / count, sigma: ranges / (count - 1) / D2_OF_2 } : null;
}
