/** Both sums after one value, in sigmas, and for how many values in a row each has been above zero. */
export interface CusumStep {
  readonly up: number;
  readonly upFor: number;
  readonly down: number;
  readonly downFor: number;
}

export interface CusumLevel {
  /** the value at which a sum first lay beyond the limit, numbered from 1 */
  readonly point: number;
  readonly side: 'above' | 'below';
  /** where the mean has probably gone, in the unit of the values */
  readonly estimate: number;
}

export interface TabularCusum {
  readonly steps: readonly CusumStep[];
  /** null when no sum went beyond the limit */
  readonly first: CusumLevel | null;
}

/**
 * Two-sided tabular CUSUM of measured values, the plain way: checked on the published series, and what the account-by-account sums are
 * compared with.
 * @param values     finite values in time order
 * @param center     the level they are judged against, in their unit
 * @param sigma      standard deviation of one value, in their unit, > 0
 * @param reference  k, in sigmas, >= 0: half of the move it looks for
 * @param limit      h, in sigmas, > 0; "beyond" is strict
 * Method: up = max(0, up + (x - center) / sigma - k), down likewise. The new mean is estimated from the sum and its length:
 * center + sigma (k + up / upFor).
 * Source: Page ES, Biometrika 41:100-115, 1954 (reference from memory); Montgomery DC, Introduction to Statistical Quality Control.
 */
export function tabularCusum(
  values: readonly number[],
  center: number,
  sigma: number,
  reference: number,
  limit: number,
): TabularCusum {
  let step: CusumStep = { up: 0, upFor: 0, down: 0, downFor: 0 };
  let first: CusumLevel | null = null;
  const steps = values.map((value, i) => {
    const z = (value - center) / sigma;
    const up = Math.max(0, step.up + z - reference);
    const down = Math.max(0, step.down - z - reference);
    step = { up, upFor: up > 0 ? step.upFor + 1 : 0, down, downFor: down > 0 ? step.downFor + 1 : 0 };
    if (first === null && up > limit) {
      first = { point: i + 1, side: 'above', estimate: center + sigma * (reference + up / step.upFor) };
    } else if (first === null && down > limit) {
      first = { point: i + 1, side: 'below', estimate: center - sigma * (reference + down / step.downFor) };
    }
    return step;
  });
  return { steps, first };
}
