import { TAIL_AREAS, type ZoneEdges } from '../tests/zoneEdges.ts';
import type { SeriesFamily, SeriesLevel } from './family.ts';

const level = (mean: number): SeriesLevel => ({ mean, sigma: Math.sqrt(mean * (mean + 1)) });

/**
 * Accounts kept from one loss to the next: 0, 1, 2, … The account that is lost ends the gap and does not count in it.
 * With the chance p of a loss at every account the gaps are geometric: P(X >= k) = (1 - p)^k, mean (1 - p)/p.
 * A gap that no loss has ended yet adds its accounts and no loss: P(X >= k) is all that is known of it.
 */
export const geometricGaps: SeriesFamily = {
  name: 'geometric',
  above: 'less-churn',
  openEnded: true,
  exposure: (value) => value + 1,
  fit(values, open = 0) {
    let sum = open;
    for (let i = 0; i < values.length; i++) sum += values[i]!;
    return values.length === 0 || sum === 0 ? null : level(sum / values.length);
  },
  edges: ({ mean }) => geometricEdges(mean),
  maxLogLikelihood: (count, sum) =>
    count > 0 && sum > 0 ? count * Math.log(count / (count + sum)) + sum * Math.log(sum / (count + sum)) : 0,
  logLikelihood: (count, sum, { mean }) => -count * Math.log1p(mean) - sum * Math.log1p(1 / mean),
  moved: ({ mean }, size) => level(mean * Math.exp(size)),
  levelOf: (count, sum, { mean }) => level(count > 0 ? Math.max(sum, 0.5) / count : Math.max(sum, mean)),
  sampler({ mean }) {
    const logKept = -Math.log1p(1 / mean);
    return (uniform) => Math.floor(Math.log(uniform()) / logKept);
  },
};

/**
 * Centre line (median) and zone ends of gaps with this mean: exact quantiles. A gap is beyond an upper edge when the chance of one at
 * least as long is no more than the tail area, below a lower edge when the chance of one at most as long is. Where even a gap of 0 is
 * likelier than that, the lower edge is 0, which nothing can be below.
 * @param mean   > 0
 * @param areas  tail areas, those of 1, 2 and 3 sigma by default
 * Source: Kaminsky FC et al., Journal of Quality Technology 24(2):63-69, 1992; Benneyan JC, Health Care Management Science 4:305-318, 2001
 * (formulas seen in secondary sources). Example: mean 49 has median 34; three sigma are left from 328 on.
 */
export function geometricEdges(mean: number, areas: readonly [number, number, number] = TAIL_AREAS): ZoneEdges {
  const logKept = -Math.log1p(1 / mean);
  const longest = (area: number): number => Math.max(0, Math.ceil(Math.log(area) / logKept) - 1);
  const shortest = (area: number): number => Math.max(0, Math.floor(Math.log1p(-area) / logKept));
  return {
    center: Math.max(0, Math.ceil(Math.log(0.5) / logKept) - 1),
    above: [longest(areas[0]), longest(areas[1]), longest(areas[2])],
    below: [shortest(areas[0]), shortest(areas[1]), shortest(areas[2])],
  };
}
