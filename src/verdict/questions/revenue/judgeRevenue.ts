import { type IndividualsChart, individualsChart } from '../../../charts/kinds/individualsChart.ts';
import { judgeSeries, type SeriesJudgement } from '../../../charts/series/judgeSeries.ts';
import { type AmountGroup, lostRatioShape } from '../../../charts/series/lostRatioShape.ts';
import { lostRatios } from '../../../charts/series/lostRatios.ts';
import { LEAST_POINTS } from '../../judgement.ts';
import { readSignals } from '../../signals.ts';
import type { Signal, Trust } from '../../types.ts';

/** One point: a subgroup with what was there, what was lost and what changed, in the unit of the amount column. */
export interface RevenuePoint {
  readonly accounts: number;
  readonly lost: number;
  readonly revenue: number;
  readonly lostRevenue: number;
  readonly contraction: number;
  readonly expansion: number;
  readonly largest: number;
  readonly largestLost: number;
}

export type RevenueFinding = 'risen' | 'fallen' | 'steady' | 'unsteady-baseline' | 'no-level' | 'too-few-points';

export interface RevenueJudgement {
  readonly finding: RevenueFinding;
  /** null without a point */
  readonly chart: IndividualsChart | null;
  readonly series: Extract<SeriesJudgement, { kind: 'judged' }> | null;
  readonly signals: readonly Signal[];
  readonly trust: Trust;
}

const NO_TRUST: Trust = {
  falseAlarmEvery: null,
  method: 'simulated',
  standardError: null,
  falseVerdictChance: null,
  wouldSee: null,
};

/**
 * Charts the lost share of revenue of each subgroup and judges it as a series of measured ratios.
 * @param points        subgroups in time order, each with revenue > 0
 * @param amounts       of all accounts: how uneven they are decides how the shares scatter by chance
 * @param baselineLast  last baseline point, when the asker fixed it
 */
export function judgeRevenue(
  points: readonly RevenuePoint[],
  amounts: readonly AmountGroup[],
  baselineLast?: number,
): RevenueJudgement {
  if (points.length === 0)
    return { finding: 'too-few-points', chart: null, series: null, signals: [], trust: NO_TRUST };
  const values = points.map(({ lostRevenue, revenue, accounts, lost }) => ({
    value: lostRevenue / revenue,
    accounts,
    lost,
  }));
  const fixed = baselineLast === undefined ? {} : { baselineLast };
  const series = judgeSeries({
    family: lostRatios(shapeOf(points, amounts)),
    values: values.map(({ value }) => value),
    least: LEAST_POINTS,
    ...fixed,
  });
  const frame = series.kind === 'no-level' ? fixed : { baselineLast: series.frame.baselineLast };
  const chart = individualsChart(values, frame, [0, 1]);
  if (series.kind !== 'judged') {
    const finding = points.length < LEAST_POINTS ? 'too-few-points' : 'no-level';
    return { finding, chart, series: null, signals: [], trust: NO_TRUST };
  }
  const moved = series.finding === 'above' || series.finding === 'below' ? series.finding : null;
  const { above, below, chance } = series.wouldSee;
  return {
    finding: series.finding === 'above' ? 'risen' : series.finding === 'below' ? 'fallen' : series.finding,
    chart,
    series,
    signals: readSignals(chart, series.standing, moved),
    trust: {
      falseAlarmEvery: series.falseAlarm?.mean ?? null,
      method: 'simulated',
      standardError: series.falseAlarm?.standardError ?? null,
      falseVerdictChance: series.threshold.falseVerdictChance,
      wouldSee: {
        rise: above === null || above.mean > 1 ? null : above.mean,
        fall: below === null || below.mean <= 0 ? null : below.mean,
        chance,
      },
    },
  };
}

/** Null when nobody or everybody was lost, where there is nothing to simulate. */
function shapeOf(points: readonly RevenuePoint[], amounts: readonly AmountGroup[]): Float64Array | null {
  const accounts = points.reduce((sum, point) => sum + point.accounts, 0);
  const lost = points.reduce((sum, point) => sum + point.lost, 0);
  return lostRatioShape({ amounts, size: points[0]?.accounts ?? 1, rate: lost / accounts });
}
