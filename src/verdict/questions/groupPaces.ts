import type { GroupDepartures } from '../../census/departures.ts';
import { kaplanMeier } from '../../charts/survival/kaplanMeier.ts';
import { type LogRank, logRank } from '../../charts/survival/logRank.ts';
import { restrictedMean } from '../../charts/survival/restrictedMean.ts';
import { riskSets } from '../../charts/survival/riskSets.ts';
import { survivalInterval } from '../../charts/survival/survivalInterval.ts';
import type { GroupPace } from './planFindings.ts';

/**
 * How fast each group leaves, and whether they differ by more than chance.
 * @param days  the tenure point in days, its longest length
 */
export function groupPaces(
  groups: readonly GroupDepartures[],
  days: number,
): { readonly groups: readonly GroupPace[]; readonly logRank: LogRank | null; readonly earlyLogRank: LogRank | null } {
  const lists = groups.map(({ departures }) => departures);
  const test = logRank(lists);
  return {
    groups: groups.map(({ segment, accounts, lost, departures }, i) => {
      const steps = kaplanMeier(riskSets(departures));
      const last = steps.filter(({ time }) => time <= days).at(-1);
      const stay = restrictedMean(steps, days);
      const limits = last === undefined ? null : survivalInterval(last);
      return {
        segment,
        accounts,
        lost,
        expected: test?.expected[i] ?? null,
        survival: last?.survival ?? 1,
        low: limits?.low ?? null,
        high: limits?.high ?? null,
        meanDays: stay.mean,
        meanDaysError: stay.standardError,
      };
    }),
    logRank: test,
    earlyLogRank: logRank(lists, 'early'),
  };
}
