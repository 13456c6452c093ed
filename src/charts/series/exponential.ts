import { TAIL_AREAS, type ZoneEdges } from '../tests/zoneEdges.ts';
import type { SeriesFamily, SeriesLevel } from './family.ts';

const level = (mean: number): SeriesLevel => ({ mean, sigma: mean });

/** Several losses on one day: taken as this long a stretch in all, so that a likelihood never becomes infinite. */
const LEAST_SUM = 0.5;

const likelihoods: Pick<SeriesFamily, 'fit' | 'maxLogLikelihood' | 'logLikelihood' | 'moved' | 'levelOf'> = {
  fit(values, open = 0) {
    let sum = open;
    for (let i = 0; i < values.length; i++) sum += values[i]!;
    return values.length === 0 || sum <= 0 ? null : level(sum / values.length);
  },
  maxLogLikelihood: (count, sum) => (count > 0 ? count * Math.log(count / Math.max(sum, LEAST_SUM)) - count : 0),
  logLikelihood: (count, sum, { mean }) => -count * Math.log(mean) - Math.max(sum, LEAST_SUM) / mean,
  moved: ({ mean }, size) => level(mean * Math.exp(size)),
  levelOf: (count, sum, { mean }) => level(count > 0 ? Math.max(sum, LEAST_SUM) / count : Math.max(sum, mean)),
};

/** Times from one loss to the next, measured as finely as one likes, when losses come independently at a steady pace: exponential. */
export const exponentialGaps: SeriesFamily = {
  name: 'exponential',
  above: 'less-churn',
  openEnded: true,
  exposure: (value) => value,
  ...likelihoods,
  edges: ({ mean }) => exponentialEdges(mean),
  sampler:
    ({ mean }) =>
    (uniform) =>
      -mean * Math.log(uniform()),
};

/**
 * Whole days from one loss to the next. Two losses on one day are 0 days apart, which happens by chance alone: with exponential times and
 * any hour of the day, P(D >= k) = exp(-k/m) m (exp(1/m) - 1) for k >= 1, and the mean is still m. So a zero needs no rule of its own.
 * (Neighbouring differences share an hour of the day; that tie is ignored, and is nothing when losses are several days apart.)
 */
export const wholeDayGaps: SeriesFamily = {
  name: 'whole-exponential',
  above: 'less-churn',
  openEnded: true,
  exposure: (value) => value,
  ...likelihoods,
  edges: ({ mean }) => wholeDayEdges(mean),
  sampler:
    ({ mean }) =>
    (uniform) => {
      const hour = uniform();
      return Math.floor(hour - mean * Math.log(uniform()));
    },
};

/**
 * Centre line (median) and zone ends of exponential times.
 * Example: mean 710.05 has its three sigma limits at 0.959 and 4691.8, the median at 492.2 (closed form).
 */
export function exponentialEdges(mean: number, areas: readonly [number, number, number] = TAIL_AREAS): ZoneEdges {
  const longest = (area: number): number => -mean * Math.log(area);
  const shortest = (area: number): number => -mean * Math.log1p(-area);
  return {
    center: mean * Math.LN2,
    above: [longest(areas[0]), longest(areas[1]), longest(areas[2])],
    below: [shortest(areas[0]), shortest(areas[1]), shortest(areas[2])],
  };
}

/** The same for whole days: the first days that lie beyond have tails of at most the area, as for geometric gaps. */
export function wholeDayEdges(mean: number, areas: readonly [number, number, number] = TAIL_AREAS): ZoneEdges {
  if (mean <= 0) return exponentialEdges(0, areas);
  const pace = 1 / mean;
  // log of m (exp(1/m) - 1), which is 0 for long gaps; written so that very short ones do not overflow
  const hours = pace < 30 ? Math.log(Math.expm1(pace) / pace) : pace - Math.log(pace);
  const longest = (area: number): number => Math.max(0, Math.ceil(mean * (hours - Math.log(area))) - 1);
  const shortest = (area: number): number => Math.max(0, Math.floor(mean * (hours - Math.log1p(-area))));
  return {
    center: longest(0.5),
    above: [longest(areas[0]), longest(areas[1]), longest(areas[2])],
    below: [shortest(areas[0]), shortest(areas[1]), shortest(areas[2])],
  };
}
