import { logFactorial } from '../logFactorial.ts';

export interface FisherExact {
  /** chance of a first cell at most as large as the one seen, given all totals */
  readonly less: number;
  /** chance of a first cell at least as large */
  readonly greater: number;
  /** chance of any table at most as likely as the one seen */
  readonly twoSided: number;
}

/** Tables count as equally likely when their chances agree to this relative difference: the sums are not exact to the last digit. */
export const EQUALLY_LIKELY = 1e-7;

/**
 * Fisher's exact test of a table of two rows and two columns: are rows and columns unrelated?
 * @param table  whole numbers >= 0, at least one of them above 0
 * Method: hypergeometric chances of all tables with the same totals.
 * Source: Fisher RA, Statistical Methods for Research Workers; Agresti A, Categorical Data Analysis. Example: [[3, 1], [1, 3]] has
 * greater = 17/70 and twoSided = 34/70.
 */
export function fisherExact(table: readonly [readonly [number, number], readonly [number, number]]): FisherExact {
  const [[a, b], [c, d]] = table;
  const lowest = Math.max(0, a - d);
  const highest = Math.min(a + b, a + c);
  const logChance = (x: number): number =>
    -(logFactorial(x) + logFactorial(a + b - x) + logFactorial(a + c - x) + logFactorial(d - a + x));
  const seen = logChance(a);
  // Chances are summed relative to the most likely table, so that no total is too large for them.
  const mode = Math.floor(((a + b + 1) * (a + c + 1)) / (a + b + c + d + 2));
  const most = logChance(Math.min(highest, Math.max(lowest, mode)));
  const sums = { less: 0, greater: 0, likely: 0, all: 0 };
  for (let x = lowest; x <= highest; x++) {
    const here = logChance(x);
    const chance = Math.exp(here - most);
    sums.all += chance;
    if (x <= a) sums.less += chance;
    if (x >= a) sums.greater += chance;
    if (here - seen <= EQUALLY_LIKELY) sums.likely += chance;
  }
  return {
    less: Math.min(1, sums.less / sums.all),
    greater: Math.min(1, sums.greater / sums.all),
    twoSided: Math.min(1, sums.likely / sums.all),
  };
}
