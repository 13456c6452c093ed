import type { Smoothing } from '../kinds/ewmaChart.ts';
import { maxLogLikelihood } from '../logLikelihood.ts';
import type { ShiftTest } from '../types.ts';

/** The last stretch of points, from its most likely start to the newest, taken as one block. */
export interface LastBlock {
  /** point at which the block starts (numbered from 1) */
  readonly first: number;
  /** binomial log likelihood ratio of the block against the baseline; 0 when no block lies on this side */
  readonly ratio: number;
}

export interface LastBlocks {
  readonly above: LastBlock;
  readonly below: LastBlock;
}

/** How a chart is split into the baseline and what is judged against it; the same for the real counts and every simulated history. */
export interface BlockDesign {
  /** accounts per point */
  readonly accounts: readonly number[];
  readonly baselineLast: number;
  /** baseline points left out by decision */
  readonly excluded: readonly number[];
  /**
   * Given for a p' chart: the points vary more than the binomial allows, by this intra-class correlation of accounts in a subgroup. Then
   * every history, real or simulated, estimates its own sigmaZ and dispersion from its baseline, as the chart does.
   */
  readonly correlation?: number;
  /** given for an EWMA chart: flags are raised by the smoothed share, and no test counts */
  readonly smoothing?: Smoothing;
  /** the tests whose flags count; all that speak about a shift when absent */
  readonly tests?: readonly ShiftTest[];
}

/** Fewest points that must lie before a block when the baseline is every point there is: fewer would be no level to compare with. */
export const LEAST_BEFORE = 8;

/**
 * Prepares the search for the most likely last block, above and below the usual level.
 *
 * With points after the baseline, blocks start after it and the ratio is l(block) - l(block at the baseline's rate). When every point
 * is baseline (trial limits), a block is compared with the points before it, at least LEAST_BEFORE of them, and as those are few their
 * rate is estimated in the ratio too: l(block) + l(before) - l(all).
 * Source: step change in a binomial rate by maximum likelihood, Samuel TR and Pignatiello JJ, Quality Engineering 13(3):357-365, 2001
 * (formula seen in secondary sources).
 */
export function lastBlockFinder(design: BlockDesign): (lost: ArrayLike<number>) => LastBlocks {
  const { accounts, baselineLast } = design;
  const count = accounts.length;
  const trial = baselineLast >= count;
  const earliest = trial ? LEAST_BEFORE : baselineLast;
  const left = new Set(design.excluded);
  const weight = Float64Array.from(accounts, (n, i) => (i < baselineLast && left.has(i + 1) ? 0 : n));
  let baselineAccounts = 0;
  for (let i = 0; i < baselineLast; i++) baselineAccounts += weight[i]!;

  return (lost) => {
    let baselineLost = 0;
    for (let i = 0; i < baselineLast; i++) if (weight[i]! > 0) baselineLost += lost[i]!;
    const p0 = baselineLost / baselineAccounts;
    const logKept = Math.log1p(-p0);
    const logLost = Math.log(p0);
    const whole = trial ? maxLogLikelihood(baselineLost, baselineAccounts) : 0;

    let n = 0;
    let d = 0;
    let aboveRatio = 0;
    let aboveFirst = count;
    let belowRatio = 0;
    let belowFirst = count;
    for (let start = count - 1; start >= earliest; start--) {
      if (weight[start] === 0) continue;
      n += weight[start]!;
      d += lost[start]!;
      let ratio: number;
      let isAbove: boolean;
      if (trial) {
        const n0 = baselineAccounts - n;
        const d0 = baselineLost - d;
        if (n0 <= 0) break;
        ratio = maxLogLikelihood(d, n) + maxLogLikelihood(d0, n0) - whole;
        isAbove = d * n0 > d0 * n;
      } else {
        ratio = maxLogLikelihood(d, n) - (d > 0 ? d * logLost : 0) - (d < n ? (n - d) * logKept : 0);
        isAbove = d > p0 * n;
      }
      if (isAbove && ratio > aboveRatio) {
        aboveRatio = ratio;
        aboveFirst = start + 1;
      } else if (!isAbove && ratio > belowRatio) {
        belowRatio = ratio;
        belowFirst = start + 1;
      }
    }
    return { above: { first: aboveFirst, ratio: aboveRatio }, below: { first: belowFirst, ratio: belowRatio } };
  };
}
