import normalCdf from '@stdlib/stats-base-dists-normal-cdf';
import { betaBinomialChances } from '../random/binomialChances.ts';
import { zoneOf } from '../tests/zone.ts';

/** Chance of a point in each signed zone (see zoneOf), at index zone + 4: from beyond the lower limit to beyond the upper; sums to 1. */
export type ZoneChances = Float64Array;

export const ZONES = 9;
export const zoneIndex = (zone: number): number => zone + 4;

/** Zones of normal points whose mean lies `shift` sigmas above the centre line; no point lies exactly on it. */
export function normalZones(shift = 0): ZoneChances {
  const zones = new Float64Array(ZONES);
  for (let k = 1; k <= 4; k++) {
    // Both tails from their own side, so that a small chance is no difference of large ones.
    const outer = k === 4 ? 0 : normalCdf(-k - shift, 0, 1);
    const outerAbove = k === 4 ? 0 : normalCdf(-k + shift, 0, 1);
    zones[zoneIndex(-k)] = normalCdf(-(k - 1) - shift, 0, 1) - outer;
    zones[zoneIndex(k)] = normalCdf(-(k - 1) + shift, 0, 1) - outerAbove;
  }
  return zones;
}

/** What a p or p' chart is drawn from, and what happens on it. */
export interface CountDesign {
  /** accounts per point, n >= 1 */
  readonly size: number;
  /** rate the limits are computed from, strictly between 0 and 1 */
  readonly center: number;
  /** for a p' chart: factor on the binomial sigma; else 1 */
  readonly sigmaZ: number;
  /** true rate of the accounts, in [0, 1]; equal to center for the false-alarm figure */
  readonly rate: number;
  /** for a p' chart: intra-class correlation of the accounts of a subgroup; else 0 */
  readonly correlation: number;
}

/** Zones of a p or p' chart, exact: the chance of every count, put into the zone where the chart's own rule puts it. */
export function countZones({ size, center, sigmaZ, rate, correlation }: CountDesign): ZoneChances {
  const { first, chances } = betaBinomialChances(size, rate, correlation);
  const sigma = Math.sqrt((center * (1 - center)) / size) * sigmaZ;
  const zones = new Float64Array(ZONES);
  chances.forEach((chance, i) => {
    zones[zoneIndex(zoneOf((first + i) / size, center, sigma))]! += chance;
  });
  return zones;
}
