import type { Departures, RiskSet } from './types.ts';

/**
 * Risk sets from counts by age, in any order; several entries of one age are added up. Ages at which nobody was lost are left out.
 * An account lost at an age counts as at risk together with those last seen at that age (losses come before censoring, as is usual).
 * @param departures  time >= 0; lost and censored >= 0
 * @returns in order of time, with lost >= 1; empty when nobody was lost
 */
export function riskSets(departures: readonly Departures[]): RiskSet[] {
  const byTime = new Map<number, { lost: number; gone: number }>();
  for (const { time, lost, censored } of departures) {
    const at = byTime.get(time) ?? { lost: 0, gone: 0 };
    byTime.set(time, { lost: at.lost + lost, gone: at.gone + lost + censored });
  }
  const sets: RiskSet[] = [];
  let atRisk = 0;
  for (const [time, { lost, gone }] of [...byTime].sort((a, b) => b[0] - a[0])) {
    atRisk += gone;
    if (lost > 0) sets.push({ time, atRisk, lost });
  }
  return sets.reverse();
}
