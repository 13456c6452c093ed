import { individualsChart } from '../../charts/kinds/individualsChart.ts';
import { judgeSeries, type SeriesJudgement } from '../../charts/series/judgeSeries.ts';
import { normalIndividuals } from '../../charts/series/normal.ts';
import type { Chart, Interval, ShiftTest } from '../../charts/types.ts';
import { LEAST_POINTS } from '../judgement.ts';
import { readSignals } from '../signals.ts';
import { NO_TRUST } from '../trust.ts';
import type { Signal, Trust } from '../types.ts';

export interface ValuesRequest {
  /** one or more finite values in time order, in any unit */
  readonly values: readonly number[];
  readonly baselineLast?: number;
  readonly tests?: readonly ShiftTest[];
}

/** Everything ready values say, before any words. What they are, only their owner knows: directions are those of the values. */
export interface ValuesJudgement {
  readonly finding: 'too-few' | 'no-level' | 'unsteady-baseline' | 'risen' | 'fallen' | 'steady';
  readonly chart: Chart;
  readonly series: Extract<SeriesJudgement, { kind: 'judged' }> | null;
  readonly signals: readonly Signal[];
  readonly trust: Trust;
  /** mean of the points before and since a move, with the 95 % interval that the points' own spread gives it */
  readonly before: Interval | null;
  readonly after: Interval | null;
}

const Z = 1.959964;

/** Charts ready values one by one (individuals chart) and judges them as a series of measured values. */
export function judgeValues({ values, baselineLast, tests }: ValuesRequest): ValuesJudgement {
  const series = judgeSeries({
    family: normalIndividuals('more-churn'),
    values,
    least: LEAST_POINTS,
    ...(baselineLast === undefined ? {} : { baselineLast }),
    ...(tests ? { tests } : {}),
  });
  const last = series.kind === 'no-level' ? baselineLast : series.frame.baselineLast;
  const plain = individualsChart(
    // Ready values stand for no counted accounts.
    values.map((value) => ({ value, accounts: 0, lost: 0 })),
    last === undefined ? {} : { baselineLast: last },
    [Number.NEGATIVE_INFINITY, Number.POSITIVE_INFINITY],
  );
  const chart: Chart = { ...plain, scale: 'score', subgroupSize: null };
  const base = { chart, signals: [], trust: NO_TRUST, before: null, after: null, series: null };
  if (series.kind !== 'judged') return { ...base, finding: values.length < LEAST_POINTS ? 'too-few' : 'no-level' };
  const { finding, start, standing, falseAlarm, threshold, wouldSee } = series;
  const moved = finding === 'above' || finding === 'below' ? finding : null;
  const mean = (from: number, to: number): Interval => {
    const some = values.slice(from - 1, to);
    const estimate = some.reduce((sum, value) => sum + value, 0) / some.length;
    const half = (Z * chart.points[0]!.sigma) / Math.sqrt(some.length);
    return { estimate, low: estimate - half, high: estimate + half };
  };
  return {
    ...base,
    finding: finding === 'above' ? 'risen' : finding === 'below' ? 'fallen' : finding,
    series,
    signals: readSignals(chart, standing, moved, tests ? { tests } : {}),
    trust: {
      falseAlarmEvery: falseAlarm?.mean ?? null,
      method: 'simulated',
      standardError: falseAlarm?.standardError ?? null,
      falseVerdictChance: threshold.falseVerdictChance,
      wouldSee: { rise: wouldSee.above?.mean ?? null, fall: wouldSee.below?.mean ?? null, chance: wouldSee.chance },
    },
    ...(start
      ? {
          before: mean(1, Math.min(chart.baseline.last, start.first - 1)),
          after: mean(start.first, values.length),
        }
      : {}),
  };
}
