export interface GeometricLifetime {
  /** periods begun, the one in which the account leaves included: 1/p; payments, when each period is paid for at its start */
  readonly mean: number;
  /** periods completed before the one in which the account leaves: (1 - p)/p */
  readonly meanCompleted: number;
  readonly standardDeviation: number;
  /** the first period by which at least half have left */
  readonly median: number;
}

/** Rounding must not move a median by a period. */
const TOLERANCE = 1e-12;

/**
 * Lifetime when the chance of leaving is the same in every period, whatever the age: geometric, closed forms.
 * @param hazard  p per period, 0 < p <= 1
 * Example: p = 0.03 gives a mean of 33.3 periods, a standard deviation of 32.8 and a median of 23.
 */
export function geometricLifetime(hazard: number): GeometricLifetime {
  return {
    mean: 1 / hazard,
    meanCompleted: (1 - hazard) / hazard,
    standardDeviation: Math.sqrt(1 - hazard) / hazard,
    median: hazard === 1 ? 1 : Math.max(1, Math.ceil(Math.log(0.5) / Math.log1p(-hazard) - TOLERANCE)),
  };
}

/** Share still there after k periods: (1 - p)^k. */
export function geometricSurvival(hazard: number, periods: number): number {
  return (1 - hazard) ** periods;
}

/** Mean number of the first m periods that are begun: (1 - (1 - p)^m)/p; m when p is 0. */
export function geometricRestrictedMean(hazard: number, periods: number): number {
  return hazard === 0 ? periods : -Math.expm1(periods * Math.log1p(-hazard)) / hazard;
}
