import type { RiskSet } from './types.ts';

/** The hazard added up to this age, with its standard error. */
export interface CumulativeHazardStep {
  readonly time: number;
  readonly hazard: number;
  readonly standardError: number;
}

/**
 * Nelson-Aalen estimate of the cumulative hazard: the sum of lost/atRisk, with variance the sum of lost/atRisk^2.
 * @param sets  in order of time
 * Source: Aalen O, Annals of Statistics 6:701-726, 1978 (reference from memory). Example: 6-MP, week 23: 0.752114.
 */
export function nelsonAalen(sets: readonly RiskSet[]): CumulativeHazardStep[] {
  let hazard = 0;
  let variance = 0;
  return sets.map(({ time, atRisk, lost }) => {
    hazard += lost / atRisk;
    variance += lost / atRisk ** 2;
    return { time, hazard, standardError: Math.sqrt(variance) };
  });
}
