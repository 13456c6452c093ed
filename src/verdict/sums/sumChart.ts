import { FULL_BASELINE } from '../../charts/baseline.ts';
import { type Alarm, bernoulliCusum } from '../../charts/sums/bernoulliCusum.ts';
import type { Watch } from '../../charts/sums/watchDesign.ts';
import type { Baseline, Chart, ChartPoint, SubgroupCount } from '../../charts/types.ts';

/** Accounts watched one by one after those that set the usual level; places are numbered from 1 at the first of them. */
export interface SumAccounts {
  readonly watch: Watch;
  readonly accounts: number;
  readonly losses: Int32Array;
  readonly subgroupSize: number;
  /** the points that set the usual level */
  readonly baseline: readonly SubgroupCount[];
}

export interface SumChart {
  readonly chart: Chart;
  /** the place after which each point's last account stands; 0 for the points of the baseline */
  readonly ends: readonly number[];
}

/**
 * The account-by-account sums as a chart: a point after every subgroup, at every alarm, where a climb began, and at the newest account.
 * @param more  further places at which a point must end
 * @returns     value: the sum nearer to its limit, in losses beyond what is expected, a fall's below zero; limits are where alarms are
 *              raised; sigma 0, as a sum has none; the points of the baseline stand at 0, where the sums begin
 */
export function sumChart(watched: SumAccounts, alarms: readonly Alarm[], more: readonly number[] = []): SumChart {
  const { watch, accounts, losses, subgroupSize, baseline } = watched;
  const wholes = Array.from({ length: Math.floor(accounts / subgroupSize) }, (_, i) => (i + 1) * subgroupSize);
  const wanted = [...wholes, ...alarms.map(({ at }) => at), ...more, accounts];
  const ends = [...new Set(wanted)].filter((end) => end > 0 && end <= accounts).sort((a, b) => a - b);
  const rise = bernoulliCusum(watch.rise, losses, accounts, ends).values;
  const fall = bernoulliCusum(watch.fall, losses, accounts, ends).values;
  const lower = -watch.fall.limit / watch.fall.gamma.denominator;
  const upper = watch.rise.limit / watch.rise.gamma.denominator;
  const still: ChartPoint[] = baseline.map((point, i) => ({
    ...countOf(point),
    index: i + 1,
    value: 0,
    sigma: 0,
    lower,
    upper,
  }));
  let seen = 0;
  const moving = ends.map((end, i): ChartPoint => {
    const before = seen;
    while (seen < losses.length && losses[seen]! <= end) seen++;
    const up = rise[i]! / watch.rise.limit;
    const down = fall[i]! / watch.fall.limit;
    return {
      index: baseline.length + i + 1,
      accounts: end - (ends[i - 1] ?? 0),
      lost: seen - before,
      value: down > up ? down * lower : up * upper,
      sigma: 0,
      lower,
      upper,
    };
  });
  return {
    chart: {
      kind: 'cusum',
      scale: 'score',
      sigmaZ: 1,
      subgroupSize,
      center: 0,
      baseline: pooled(baseline),
      points: [...still, ...moving],
    },
    ends: [...baseline.map(() => 0), ...ends],
  };
}

const countOf = ({ accounts, lost }: SubgroupCount): SubgroupCount => ({ accounts, lost });

function pooled(points: readonly SubgroupCount[]): Baseline {
  return {
    first: 1,
    last: points.length,
    excluded: [],
    provisional: points.length < FULL_BASELINE,
    accounts: points.reduce((sum, { accounts }) => sum + accounts, 0),
    lost: points.reduce((sum, { lost }) => sum + lost, 0),
  };
}
