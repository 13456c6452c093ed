import { maxLogLikelihood } from '../logLikelihood.ts';
import { historyCount, simulateHistories } from './histories.ts';
import { type BlockDesign, LEAST_BEFORE } from './lastBlock.ts';

export interface StartCandidates {
  /** most likely first point of the moved stretch */
  readonly first: number;
  /** first and last point that the likelihood does not rule out as the first of the stretch */
  readonly candidates: readonly [number, number];
  /** chance, over repeated histories like this one, that the true start lies between the two */
  readonly coverage: number;
}

/** The coverage the set claims. */
export const CANDIDATE_COVERAGE = 0.9;
/**
 * The set is cut at this point of the simulated drops, not at the claimed one: a start is only looked for once the chart reads as moved,
 * and moves that read so look larger and better dated than they are. Simulated over moves that were read (2,000 to 5,000 accounts, rises by
 * 30 % to falls by 60 %, begun 7 to 32 points ago): cut at 90 %, 84 to 93 % of the sets hold the true start; cut at 95 %, 92 to 96 %.
 */
export const CALIBRATED_AT = 0.95;
const MOST_HISTORIES = 600;
const LEAST_HISTORIES = 200;

/**
 * When a step began: the maximum likelihood start of the last block, and the set of starts whose log likelihood is not too far below it.
 * How far is "too far" has no table that fits every design, so it is calibrated: histories with a step of the estimated size at the
 * estimated start are simulated, and the drop from the maximum to the true start's likelihood is read at its 95 % point (see CALIBRATED_AT).
 * @param lost   counts per point
 * @param side   direction of the move
 * Source: Samuel and Pignatiello 2001 for the estimate; the calibrated likelihood set is a parametric bootstrap (Efron and Tibshirani 1993).
 */
export function startCandidates(
  design: BlockDesign,
  lost: ArrayLike<number>,
  side: 'above' | 'below',
  seed = 3,
): StartCandidates {
  const profile = profiler(design);
  const here = profile(lost, side);
  const histories = historyCount(design.accounts.length, MOST_HISTORIES, LEAST_HISTORIES);
  const drops: number[] = [];
  simulateHistories(
    design,
    [
      { from: 1, rate: here.before },
      { from: here.first, rate: here.after },
    ],
    histories,
    seed,
    (simulated) => {
      const there = profile(simulated, side);
      const atTruth = there.ratios[here.first - 1];
      drops.push(
        atTruth === undefined || atTruth === Number.NEGATIVE_INFINITY ? Number.POSITIVE_INFINITY : there.best - atTruth,
      );
    },
  );
  drops.sort((a, b) => a - b);
  const allowed = drops[Math.ceil(histories * CALIBRATED_AT) - 1]!;
  // A start on the other side is no start of this move, however wide the set.
  const inside = here.ratios.flatMap((ratio, i) =>
    ratio > Number.NEGATIVE_INFINITY && here.best - ratio <= allowed ? [i + 1] : [],
  );
  return {
    first: here.first,
    candidates: [Math.min(here.first, ...inside), Math.max(here.first, ...inside)],
    coverage: CANDIDATE_COVERAGE,
  };
}

/**
 * Log likelihood ratio of a step at every start against no step, both rates estimated from all points before and after it. Unlike the
 * judge it uses every point before the start, not the baseline alone: for dating a change all the evidence counts.
 */
function profiler(design: BlockDesign) {
  const { accounts, baselineLast, excluded } = design;
  const count = accounts.length;
  // A move may have begun before the points that are judged: dating it looks at the baseline's own points too.
  const earliest = Math.min(LEAST_BEFORE, baselineLast);
  const left = new Set(excluded);
  const weight = Float64Array.from(accounts, (n, i) => (i < baselineLast && left.has(i + 1) ? 0 : n));
  const all = weight.reduce((sum, n) => sum + n, 0);

  return (lost: ArrayLike<number>, side: 'above' | 'below') => {
    let allLost = 0;
    for (let i = 0; i < count; i++) if (weight[i]! > 0) allLost += lost[i]!;
    const whole = maxLogLikelihood(allLost, all);
    const ratios = new Array<number>(count).fill(Number.NEGATIVE_INFINITY);
    let best = Number.NEGATIVE_INFINITY;
    let first = count;
    let before = allLost / all;
    let after = before;
    let n = 0;
    let d = 0;
    for (let start = count - 1; start >= earliest; start--) {
      if (weight[start] === 0) continue;
      n += weight[start]!;
      d += lost[start]!;
      const n0 = all - n;
      const d0 = allLost - d;
      if (n0 <= 0) break;
      if (side === 'above' ? d * n0 <= d0 * n : d * n0 >= d0 * n) continue;
      const ratio = maxLogLikelihood(d, n) + maxLogLikelihood(d0, n0) - whole;
      ratios[start] = ratio;
      if (ratio > best) {
        best = ratio;
        first = start + 1;
        before = d0 / n0;
        after = d / n;
      }
    }
    return { ratios, best, first, before, after };
  };
}
