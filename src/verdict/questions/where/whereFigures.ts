import { isoDay } from '../../../days.ts';
import type { PooledRate } from '../../types.ts';
import type { Change } from './change.ts';
import { FALSE_PART } from './judgeGroups.ts';
import type { GroupReading } from './types.ts';
import type { WhereContext } from './whereWords.ts';

/** The question's own part of the JSON. Groups in the order of the words: clearest evidence first. */
export function whereFigures(
  readings: readonly GroupReading[],
  { column, tenure, change, stretches, needed }: WhereContext,
  overall: { readonly outcome: string; readonly headline: string },
): Record<string, unknown> {
  return {
    column,
    tenure,
    lookedAt: readings.length,
    judged: readings.filter(({ chance }) => chance !== null).length,
    moved: readings.filter(({ finding }) => finding === 'risen' || finding === 'fallen').map(({ name }) => name),
    procedure: { name: 'benjamini-hochberg', falsePart: FALSE_PART },
    accountsNeeded: needed,
    groups: readings.map(groupFigures),
    overall,
    change:
      change && stretches
        ? {
            ...changeFigures(change),
            before: { rate: change.before, from: isoDay(stretches.from), to: isoDay(stretches.to) },
            after: { rate: change.after, from: isoDay(stretches.since) },
          }
        : null,
  };
}

const rate = (one: PooledRate | null): object | null =>
  one && { rate: one.rate, low: one.low, high: one.high, lost: one.lost, accounts: one.accounts };

function groupFigures(one: GroupReading): object {
  const { chart, judgement } = one;
  return {
    group: one.name,
    pooled: one.pooled,
    finding: one.finding,
    direction: one.direction,
    chance: one.chance,
    adjustedChance: one.adjusted,
    accounts: one.accounts,
    matured: one.matured,
    lost: one.lost,
    subgroupSize: one.subgroupSize,
    kind: chart?.kind ?? null,
    center: chart?.center ?? null,
    baseline: chart && { last: chart.baseline.last, provisional: chart.baseline.provisional },
    since: one.since && { point: one.since.point, start: isoDay(one.since.start) },
    before: rate(one.before),
    after: rate(one.after),
    difference: one.difference,
    wouldSee: judgement?.trust.wouldSee ?? null,
    points: one.subgroups.map((subgroup, i) => ({
      index: subgroup.index,
      accounts: subgroup.accounts,
      lost: subgroup.lost,
      value: chart?.points[i]?.value ?? null,
      lower: chart?.points[i]?.lower ?? null,
      upper: chart?.points[i]?.upper ?? null,
      firstStart: isoDay(subgroup.firstStart),
      lastStart: isoDay(subgroup.lastStart),
    })),
  };
}

function changeFigures(change: Change): object {
  return {
    basis: change.basis,
    points: { beforeLast: change.beforeLast, first: change.first, last: change.last },
    difference: change.difference,
    ratePart: change.ratePart,
    ratePartLow: change.ratePartLow,
    ratePartHigh: change.ratePartHigh,
    mixPart: change.mixPart,
    groups: change.groups.map((group, i) => ({ group: change.names[i], ...group })),
  };
}
