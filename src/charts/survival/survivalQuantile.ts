import { Z_95 } from '../intervals/wilson.ts';
import type { SurvivalStep } from './kaplanMeier.ts';
import { type SurvivalScale, survivalInterval } from './survivalInterval.ts';

/** An age by which a share has left; null where the curve does not come down so far: not observed, not "never". */
export interface SurvivalQuantile {
  readonly time: number | null;
  readonly low: number | null;
  readonly high: number | null;
}

/** Rounding in a product of many factors must not move a quantile by a step. */
const TOLERANCE = 1e-12;

/**
 * The first age by which at least a share of the accounts has left: the median for a share of one half.
 * @param share  in (0, 1)
 * Method: the first step at which the curve is at or below 1 - share; its interval holds the ages whose pointwise interval contains 1 - share.
 * Source: Brookmeyer R and Crowley J, Biometrics 38:29-41, 1982 (reference from memory). Example: 6-MP: median 23, lower limit 16 (log), upper not reached.
 */
export function survivalQuantile(
  steps: readonly SurvivalStep[],
  share: number,
  scale: SurvivalScale = 'log-log',
  z = Z_95,
): SurvivalQuantile {
  const wanted = 1 - share + TOLERANCE;
  const first = (height: (step: SurvivalStep) => number | undefined): number | null =>
    steps.find((step) => {
      const at = height(step);
      return at !== undefined && at <= wanted;
    })?.time ?? null;
  return {
    time: first(({ survival }) => survival),
    low: first((step) => survivalInterval(step, scale, z)?.low ?? step.survival),
    high: first((step) => survivalInterval(step, scale, z)?.high),
  };
}
