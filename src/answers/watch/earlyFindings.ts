import { tenurePoint } from '../../census/tenure.ts';
import type { Census } from '../../census/types.ts';
import { FULL_BASELINE } from '../../charts/baseline.ts';
import { wilsonInterval } from '../../charts/intervals/wilson.ts';
import type { SumTrace } from '../../charts/sums/bernoulliCusum.ts';
import { jointRunLength } from '../../charts/sums/jointRunLength.ts';
import { accountsToAlarm, type WatchSum } from '../../charts/sums/watchSum.ts';
import type { EarlyFindings, WatchState } from '../../verdict/questions/earlyFindings.ts';
import type { PooledRate } from '../../verdict/types.ts';
import type { Watched } from './watchAccounts.ts';

export type AboutWatch = Pick<EarlyFindings, 'tenure' | 'segment' | 'overdispersed' | 'mixMoved' | 'verdict'>;

/** Where the watch stands, from the sums over its accounts. */
export function earlyFindings(watched: Watched, census: Census, about: AboutWatch): EarlyFindings {
  const { watch, baseline, accounts, startOf } = watched;
  const usual = pooledRate(baseline.lost, baseline.accounts);
  const inside = (rate: number): number => Math.min(Math.max(rate, 0.01 * watch.usual), 1 - 0.01 * (1 - watch.usual));
  const { tenure, settleDays } = census.request;

  const stateOf = (sum: WatchSum, trace: SumTrace, toAlarm: number): WatchState => {
    const standing = trace.value >= sum.limit ? trace.alarms.at(-1) : undefined;
    const passed = standing ? trace.alarms.slice(0, -1) : trace.alarms;
    const last = passed.at(-1);
    const read = (place: number) => ({
      start: startOf(place),
      readOn: tenurePoint(startOf(place), tenure) + settleDays,
    });
    return {
      direction: sum.direction,
      to: sum.wanted,
      share: trace.value / sum.limit,
      since:
        trace.value === 0
          ? null
          : {
              start: startOf(trace.zeroAfter + 1),
              rate: pooledRate(watched.lostAfter(trace.zeroAfter), accounts - trace.zeroAfter),
            },
      alarm: standing ? read(standing.at) : null,
      passed: last ? { count: passed.length, first: startOf(last.at), last: startOf(last.until) } : null,
      likeThisEvery:
        standing || trace.value === 0 ? null : accountsToAlarm({ ...sum, limit: trace.value, start: 0 }, watch.usual),
      toAlarm,
    };
  };

  const falseAlarms = (rate: number): number => jointRunLength(watch.rise, watch.fall, inside(rate)).accounts;
  return {
    ...about,
    usual,
    baselinePoints: watched.baselinePoints,
    provisional: watched.baselinePoints < FULL_BASELINE,
    watched: { accounts, lost: watched.losses.length, first: startOf(1), last: startOf(accounts) },
    unfinished: census.waiting,
    rise: stateOf(watch.rise, watched.rise, watch.toRise),
    fall: stateOf(watch.fall, watched.fall, watch.toFall),
    falseAlarmEvery: watch.falseAlarmEvery,
    falseAlarmBetween: [falseAlarms(usual.low), falseAlarms(usual.high)],
    inflowPerWeek: census.inflowPerWeek,
  };
}

function pooledRate(lost: number, accounts: number): PooledRate {
  const { estimate, low, high } = wilsonInterval(lost, accounts);
  return { rate: estimate, low, high, lost, accounts };
}
