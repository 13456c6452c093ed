import { poissonInterval } from '../../charts/intervals/poisson.ts';
import { wilsonInterval } from '../../charts/intervals/wilson.ts';
import type { GapChartOptions } from '../../charts/kinds/gapChart.ts';
import { backToGaps, NELSON_POWER, toPower } from '../../charts/kinds/gapsByPower.ts';
import { gChart } from '../../charts/kinds/gChart.ts';
import { tChart, timeFamily } from '../../charts/kinds/tChart.ts';
import { geometricGaps } from '../../charts/series/geometric.ts';
import { judgeSeries, type SeriesJudgement, type SeriesRequest } from '../../charts/series/judgeSeries.ts';
import { normalIndividuals } from '../../charts/series/normal.ts';
import type { Chart, ShiftTest } from '../../charts/types.ts';
import { LEAST_POINTS } from '../judgement.ts';
import { readSignals } from '../signals.ts';
import { NO_TRUST } from '../trust.ts';
import type { PooledRate, Trust } from '../types.ts';
import type { GapFinding, GapJudgement } from './types.ts';

export interface GapRequest {
  /** g: accounts kept from one loss to the next; t: days from one loss to the next */
  readonly kind: 'g' | 't';
  readonly gaps: readonly number[];
  /** accounts, or days, since the last loss */
  readonly open: number;
  readonly baselineLast?: number;
  /** tests whose flags count; all that speak about a shift when absent */
  readonly tests?: readonly ShiftTest[];
}

type Judged = Extract<SeriesJudgement, { kind: 'judged' }>;

/** Scatter this unlikely under the geometric or exponential distribution is taken as real. */
const OVERDISPERSED = 0.01;

/**
 * Judges gaps between losses: have losses become rarer or more frequent? Longer gaps are less churn.
 *
 * Limits are exact geometric or exponential quantiles. When the gaps clearly scatter more than that, they are judged on Nelson's power
 * scale by the spread they really have; what came since the last loss is then told but not judged.
 */
export function judgeGaps(request: GapRequest): GapJudgement {
  const { kind, gaps, open, tests } = request;
  if (gaps.length === 0)
    return {
      finding: 'too-few',
      chart: null,
      series: null,
      signals: [],
      trust: NO_TRUST,
      usual: null,
      before: null,
      after: null,
      byPower: false,
    };
  const family = kind === 'g' ? geometricGaps : timeFamily(gaps);
  const common: Omit<SeriesRequest, 'family' | 'values'> = {
    least: LEAST_POINTS,
    ...(request.baselineLast === undefined ? {} : { baselineLast: request.baselineLast }),
    ...(tests ? { tests } : {}),
  };
  const exact = judgeSeries({ ...common, family, values: gaps, open });
  const scattered = exact.kind === 'judged' && (exact.checks?.spreadPValue ?? 1) < OVERDISPERSED;
  const powered = scattered
    ? judgeSeries({ ...common, family: normalIndividuals('less-churn'), values: toPower(gaps) })
    : null;
  const byPower = powered?.kind === 'judged';
  const series = byPower ? powered : exact;
  const chart = chartOf(kind, gaps, {
    open: byPower ? 0 : open,
    ...(series.kind === 'no-level' ? {} : { baselineLast: series.frame.baselineLast }),
    ...(byPower ? { edges: backToGaps(powered.frame.edges) } : {}),
  });
  const pool = pooler(kind, gaps, open);
  const usual = pool(1, chart.baseline.last);
  const base = { chart, series, usual, byPower, trust: NO_TRUST, before: null, after: null };
  if (series.kind !== 'judged')
    return { ...base, finding: series.kind === 'no-level' ? 'no-level' : 'too-few', signals: [] };
  const { start, finding, standing } = series;
  const moved = finding === 'above' || finding === 'below' ? finding : null;
  return {
    ...base,
    finding: FINDING[finding],
    signals: readSignals(chart, standing, moved, tests ? { tests } : {}),
    trust: trustOf(kind, series, byPower, chart.mean ?? 0),
    ...(start && moved
      ? {
          before: pool(1, Math.min(chart.baseline.last, start.first - 1)),
          after: pool(start.first, Number.POSITIVE_INFINITY),
        }
      : {}),
  };
}

const FINDING: Readonly<Record<Judged['finding'], GapFinding>> = {
  above: 'fallen',
  below: 'risen',
  steady: 'steady',
  'unsteady-baseline': 'unsteady-baseline',
};

function chartOf(kind: 'g' | 't', gaps: readonly number[], options: GapChartOptions): Chart {
  return kind === 'g' ? gChart(gaps, options) : tChart(gaps, options);
}

/** Losses from one gap to another, over what those gaps took; up to the end includes what came since the last loss. */
export function pooler(kind: 'g' | 't', gaps: readonly number[], open: number) {
  return (first: number, last: number): PooledRate => {
    const inside = gaps.slice(first - 1, Math.min(last, gaps.length));
    const rest = last >= gaps.length ? open : 0;
    const lost = inside.length;
    const span = inside.reduce((sum, gap) => sum + gap, 0) + rest;
    if (kind === 'g') {
      const accounts = span + lost;
      const { estimate, low, high } = wilsonInterval(lost, accounts);
      return { rate: estimate, low, high, lost, accounts };
    }
    // Several losses on one day and none on any other: taken as half a day, so that the pace is a number.
    const days = Math.max(span, 0.5);
    const { estimate, low, high } = poissonInterval(lost, days);
    return { rate: estimate, low, high, lost, accounts: lost, days };
  };
}

/** Share lost, or losses a day, at a mean gap. */
export function rateOfGap(kind: 'g' | 't', mean: number): number {
  return kind === 'g' ? 1 / (1 + mean) : 1 / mean;
}

function trustOf(kind: 'g' | 't', series: Judged, byPower: boolean, meanGap: number): Trust {
  const { falseAlarm, threshold, wouldSee, frame } = series;
  const rateAt = (mean: number | undefined): number | null => {
    if (mean === undefined) return null;
    if (!byPower) return rateOfGap(kind, mean);
    // A level on the power scale stands for gaps longer or shorter by a factor; below zero there is none.
    return mean <= 0 ? null : rateOfGap(kind, meanGap * (mean / frame.level.mean) ** (1 / NELSON_POWER));
  };
  return {
    falseAlarmEvery: falseAlarm?.mean ?? null,
    method: 'simulated',
    standardError: falseAlarm?.standardError ?? null,
    falseVerdictChance: threshold.falseVerdictChance,
    wouldSee: { rise: rateAt(wouldSee.below?.mean), fall: rateAt(wouldSee.above?.mean), chance: wouldSee.chance },
  };
}
