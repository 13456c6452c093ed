import { recommendedBaseline } from '../charts/baseline.ts';
import { ewmaChart } from '../charts/kinds/ewmaChart.ts';
import { pChart } from '../charts/kinds/pChart.ts';
import { pPrimeChart } from '../charts/kinds/pPrimeChart.ts';
import { LEAST_BEFORE } from '../charts/standing/lastBlock.ts';
import type { Chart, ChartKind, SubgroupCount } from '../charts/types.ts';
import { isOverdispersed, type Judgement, type JudgeOptions, judge, LEAST_POINTS } from './judgement.ts';

export interface ChartRequest extends Omit<JudgeOptions, 'stepProven'> {
  readonly counts: readonly SubgroupCount[];
  /** the kind somebody asked for; else the one that fits */
  readonly kind?: SubgroupKind;
  /** last baseline point, when the asker fixed it; else the recommended one, shortened if a move begins inside it */
  readonly baselineLast?: number;
  readonly excluded?: readonly number[];
}

export interface JudgedChart {
  readonly chart: Chart;
  readonly judgement: Judgement;
  /**
   * p value of "moved": the chance, with nothing changed, of a chart that reads as moved on at least such evidence; null when it could not
   * be judged
   */
  readonly movedChance: number | null;
}

const KINDS = { p: pChart, 'p-prime': pPrimeChart, ewma: ewmaChart } as const;

/** The kinds that chart ready counts per subgroup and are judged with the binomial. */
export type SubgroupKind = keyof typeof KINDS;

export function isSubgroupKind(kind: ChartKind | undefined): kind is SubgroupKind {
  return kind !== undefined && kind in KINDS;
}

/**
 * Charts the counts and judges them.
 *
 * The kind, when nobody asked for one: a p chart, or Laney's p' chart when the points of the baseline clearly vary more than the binomial allows.
 *
 * When nobody fixed the baseline and the recommended one turns out not to come from one rate, a move may simply have begun inside it.
 * Then the points before the split, if there are enough, set the level instead; the answer counts only if the points since then really
 * stand out from it. Otherwise the baseline is reported as unsteady.
 * @throws RangeError when there are no counts
 */
export function chartAndJudge(request: ChartRequest): JudgedChart {
  const { counts, excluded = [] } = request;
  const last = request.baselineLast ?? recommendedBaseline(counts.length);
  const kind = request.kind ?? (isOverdispersed(chartOf('p', last)) ? 'p-prime' : 'p');
  const usual = chartWith(last);
  const fixed = request.baselineLast !== undefined;
  const usualWay = { ...usual, movedChance: movedChance(usual.judgement, fixed ? 1 : USUAL_SHARE) };
  if (fixed || usual.judgement.finding !== 'unsteady-baseline') return usualWay;
  const before = usual.judgement.steadiness?.splitAfter ?? 0;
  const trial = usual.chart.baseline.last >= counts.length;
  if (before < (trial ? LEAST_BEFORE : LEAST_POINTS) || before >= usual.chart.baseline.last) return usualWay;
  // On trial limits the second part of the split reaches the newest point: the split's own calibrated test has told the two apart.
  const shortened = chartWith(before, trial);
  const { finding } = shortened.judgement;
  if (finding !== 'risen' && finding !== 'fallen' && finding !== 'mix-change') return usualWay;
  return { ...shortened, movedChance: Math.min(1, usual.judgement.steadiness!.pValue / (1 - USUAL_SHARE)) };

  function chartWith(baselineLast: number, stepProven = false): Pick<JudgedChart, 'chart' | 'judgement'> {
    const chart = chartOf(kind, baselineLast);
    return { chart, judgement: judge(chart, { ...request, stepProven }) };
  }

  function chartOf(of: SubgroupKind, baselineLast: number): Chart {
    const options = { baselineLast: Math.min(baselineLast, counts.length), excluded };
    // Where the points clearly vary more than chance makes them, the smoothed share is held to that spread too.
    return of === 'ewma'
      ? ewmaChart(counts, { ...options, widened: isOverdispersed(pChart(counts, options)) })
      : KINDS[of](counts, options);
  }
}

/**
 * There are two ways for a chart to read as moved: its last stretch stands out, or its baseline splits and the points since stand out from
 * its first part. Their p values share the chance of error between them in these parts (weighted Bonferroni; our choice of weights: the
 * first way finds most moves, and the smallest chance that 999 simulated splits can show still counts among a dozen groups).
 */
const USUAL_SHARE = 0.7;

/** Of a baseline that is no level nothing can be said: it gets no small p value. */
function movedChance({ finding, standingChance }: Judgement, share: number): number | null {
  if (standingChance === null) return null;
  return finding === 'unsteady-baseline' ? 1 : Math.min(1, standingChance / share);
}
