import type { SegmentCounts } from '../../census/types.ts';
import { startCandidates } from '../../charts/standing/startCandidates.ts';
import { type Alarm, bernoulliCusum, type SumTrace } from '../../charts/sums/bernoulliCusum.ts';
import { detectableBySums, evidence, type SumHistory, sumThreshold } from '../../charts/sums/standingSums.ts';
import type { WatchSum } from '../../charts/sums/watchSum.ts';
import type { Chart } from '../../charts/types.ts';
import type { Finding, Judgement } from '../judgement.ts';
import { readMix } from '../mix.ts';
import type { Delay, Signal, SignalState } from '../types.ts';
import { type SumAccounts, type SumChart, sumChart } from './sumChart.ts';

const WOULD_SEE_CHANCE = 0.8;

export interface JudgedSums extends SumChart {
  readonly judgement: Judgement;
}

export interface SumQuestion {
  readonly watched: SumAccounts;
  /** the points themselves, judged as shares: their checks hold for the sums too */
  readonly ofShares: Judgement;
  /** counts per segment value and subgroup, those of the baseline included */
  readonly segments: readonly SegmentCounts[];
  /** how accounts of a subgroup go together, where they vary more than the binomial allows */
  readonly correlation: number | null;
  readonly inflowPerWeek: number;
}

/**
 * Judges the account-by-account sums: churn has moved when, after the newest account, a sum stands beyond its limit and so far that with
 * nothing changed at most about 4 in 100 histories of this length would, the usual level being estimated in each as it is here. It began
 * when the sum was last at zero.
 */
export function judgeSums(question: SumQuestion): JudgedSums {
  const { watched, ofShares, segments, correlation, inflowPerWeek } = question;
  const { watch, accounts, losses, subgroupSize, baseline } = watched;
  const history: SumHistory = {
    baselineAccounts: baseline.reduce((sum, count) => sum + count.accounts, 0),
    watched: accounts,
    ...(correlation === null ? {} : { clusters: { size: subgroupSize, correlation } }),
  };
  const threshold = sumThreshold(watch, history, watch.usual);
  const traces = {
    rise: bernoulliCusum(watch.rise, losses, accounts),
    fall: bernoulliCusum(watch.fall, losses, accounts),
  };
  const heights = { rise: traces.rise.value / watch.rise.limit, fall: traces.fall.value / watch.fall.limit };
  const leading = heights.rise >= heights.fall ? 'rise' : 'fall';
  const believed =
    heights[leading] > threshold.ratio || (heights[leading] >= 1 && threshold.ratio <= 1) ? leading : null;
  const zero = believed === null ? null : traces[believed].zeroAfter;
  const made = sumChart(watched, [...traces.rise.alarms, ...traces.fall.alarms], zero === null ? [] : [zero]);
  const { chart, ends } = made;

  const first = zero === null ? 0 : ends.findIndex((end, i) => i >= baseline.length && end > zero) + 1;
  const start = believed === null ? null : { ...candidatesOf(chart, believed), first };
  const mix =
    start === null
      ? null
      : readMix(
          segments,
          baseline.length + Math.floor(zero! / subgroupSize) + 1,
          baseline.length + Math.floor(accounts / subgroupSize),
          baseline.length,
          threshold.ratio * evidence(watch[believed!]),
        );
  const finding = findingOf(believed, mix?.explains ?? 'none');
  const delay = (sum: WatchSum, toAlarm: number): Delay => ({
    rate: sum.wanted,
    points: toAlarm / subgroupSize,
    accounts: toAlarm,
    weeks: inflowPerWeek > 0 ? toAlarm / inflowPerWeek : null,
  });
  const told = finding === 'risen' || finding === 'fallen' ? believed : null;
  const { accounts: every, method, standardError } = watch.falseAlarmEvery;
  return {
    ...made,
    judgement: {
      ...ofShares,
      finding,
      signals: [
        ...signalsOf('rise', traces.rise, watch.rise, told, made),
        ...signalsOf('fall', traces.fall, watch.fall, told, made),
      ].sort((a, b) => a.point - b.point),
      trust: {
        falseAlarmEvery: every / subgroupSize,
        method,
        standardError: standardError === null ? null : standardError / subgroupSize,
        falseVerdictChance: threshold.falseVerdictChance,
        wouldSee: detectableBySums(watch, history, watch.usual, threshold.ratio, WOULD_SEE_CHANCE),
        delay: { rise: delay(watch.rise, watch.toRise), fall: delay(watch.fall, watch.toFall) },
      },
      start,
      wouldSeeFrom: baseline.length + 1,
      mix,
      standingChance: null,
      lastBlock: null,
    },
  };
}

function findingOf(believed: 'rise' | 'fall' | null, mix: 'none' | 'all' | 'unclear'): Finding {
  if (believed === null) return 'steady';
  if (mix === 'all') return 'mix-change';
  if (mix === 'unclear') return 'mix-unclear';
  return believed === 'rise' ? 'risen' : 'fallen';
}

/** Points that the likelihood does not rule out as the first of the move; the sum's own zero is among them. */
function candidatesOf(chart: Chart, believed: 'rise' | 'fall') {
  const { points, baseline } = chart;
  const design = { accounts: points.map(({ accounts }) => accounts), baselineLast: baseline.last, excluded: [] };
  return startCandidates(
    design,
    points.map(({ lost }) => lost),
    believed === 'rise' ? 'above' : 'below',
  );
}

function signalsOf(
  direction: 'rise' | 'fall',
  trace: SumTrace,
  sum: WatchSum,
  told: 'rise' | 'fall' | null,
  { ends }: SumChart,
): Signal[] {
  const pointAfter = (place: number): number => ends.findIndex((end) => end >= place && end > 0) + 1;
  return trace.alarms.map((alarm: Alarm): Signal => {
    const stands = trace.value >= sum.limit && alarm === trace.alarms.at(-1);
    const state: SignalState = !stands
      ? 'passed'
      : told === direction
        ? 'standing'
        : told === null
          ? 'watching'
          : 'passed';
    const point = pointAfter(alarm.at);
    return {
      test: 1,
      side: direction === 'rise' ? 'above' : 'below',
      point,
      members: [Math.min(point, pointAfter(alarm.zeroAfter + 1)), point],
      until: Math.max(point, pointAfter(alarm.until)),
      speaks: 'shift',
      state,
      words: `the account-by-account sum for a ${direction} beyond its limit`,
    };
  });
}
