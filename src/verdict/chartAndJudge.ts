import type { SegmentCounts } from '../census/types.ts';
import { recommendedBaseline } from '../charts/baseline.ts';
import { pChart } from '../charts/kinds/pChart.ts';
import type { Chart, SubgroupCount } from '../charts/types.ts';
import { type Judgement, judge, LEAST_POINTS } from './judgement.ts';

export interface ChartRequest {
  readonly counts: readonly SubgroupCount[];
  /** last baseline point, when the asker fixed it; else the recommended one, shortened if a move begins inside it */
  readonly baselineLast?: number;
  readonly excluded?: readonly number[];
  readonly segments?: readonly SegmentCounts[];
}

export interface JudgedChart {
  readonly chart: Chart;
  readonly judgement: Judgement;
}

/**
 * Charts the counts and judges them.
 *
 * When nobody fixed the baseline and the recommended one turns out not to come from one rate, a move may simply have begun inside it.
 * Then the points before the split, if there are enough, set the level instead; the answer counts only if the points since then really
 * stand out from it. Otherwise the baseline is reported as unsteady.
 * @throws RangeError when there are no counts
 */
export function chartAndJudge(request: ChartRequest): JudgedChart {
  const { counts, excluded = [], segments = [] } = request;
  const usual = chartWith(request.baselineLast ?? recommendedBaseline(counts.length));
  if (request.baselineLast !== undefined || usual.judgement.finding !== 'unsteady-baseline') return usual;
  const before = usual.judgement.steadiness?.splitAfter ?? 0;
  if (before < LEAST_POINTS || before >= usual.chart.baseline.last) return usual;
  const shortened = chartWith(before);
  const { finding } = shortened.judgement;
  return finding === 'risen' || finding === 'fallen' || finding === 'mix-change' ? shortened : usual;

  function chartWith(baselineLast: number): JudgedChart {
    const chart = pChart(counts, { baselineLast: Math.min(baselineLast, counts.length), excluded });
    return { chart, judgement: judge(chart, segments) };
  }
}
