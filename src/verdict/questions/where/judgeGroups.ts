import type { GroupCensus } from '../../../census/groupsCensus.ts';
import { newcombeInterval } from '../../../charts/intervals/newcombe.ts';
import { rateInterval } from '../../../charts/intervals/rateInterval.ts';
import { benjaminiHochberg } from '../../../charts/multiple/stepUp.ts';
import type { Chart, ShiftTest, SubgroupCount } from '../../../charts/types.ts';
import type { Day } from '../../../days.ts';
import { chartAndJudge, type SubgroupKind } from '../../chartAndJudge.ts';
import { type Judgement, LEAST_POINTS } from '../../judgement.ts';
import type { PooledRate } from '../../types.ts';
import { count } from '../../words/format.ts';
import type { GroupFinding, GroupReading } from './types.ts';

/** The part of the groups called moved that may be false alarms, on average. */
export const FALSE_PART = 0.05;

export interface HowToJudge {
  readonly kind?: SubgroupKind;
  /** shift tests that decide; all of them when absent */
  readonly tests?: readonly ShiftTest[];
  /** points that set the usual level of every group */
  readonly baseline?: number;
  /** else what started before this day sets it, where that makes enough points */
  readonly since?: Day;
}

/**
 * Charts every group apart, judges each by its own calibrated threshold, and then all of them together: a group has moved when its own chart
 * reads so and its p value still counts among those of all groups that were judged, with at most 5 % of such findings expected to be false.
 * @param column  name of the column that groups the accounts
 * @returns groups with the clearest evidence first, those that could not be judged last
 * Source: Benjamini Y and Hochberg Y, JRSS B 57:289-300, 1995.
 */
export function judgeGroups(groups: readonly GroupCensus[], column: string, how: HowToJudge = {}): GroupReading[] {
  const alone = groups.map((group) => ({ group, ...judgedAlone(group, how) }));
  const family = alone.flatMap(({ movedChance }) => (movedChance === null ? [] : [movedChance]));
  const { adjusted, rejected } = benjaminiHochberg(family, FALSE_PART);
  let at = 0;
  const readings = alone.map(({ group, chart, judgement, movedChance }): GroupReading => {
    const place = movedChance === null ? null : at++;
    const finding = judgement?.finding;
    const direction = finding === 'risen' || finding === 'fallen' ? finding : null;
    return {
      name: nameOf(group, column),
      pooled: group.pooled,
      accounts: group.accounts,
      matured: group.matured,
      lost: group.lost,
      subgroupSize: group.subgroupSize,
      subgroups: group.subgroups,
      chart,
      judgement,
      finding: findingOf(judgement, direction, place !== null && rejected[place] === true),
      direction,
      chance: movedChance,
      adjusted: place === null ? null : (adjusted[place] ?? null),
      ...sidesOf(group, chart, direction === null ? null : (judgement?.start?.first ?? null)),
    };
  });
  return readings.sort(byEvidence);
}

/** Longer values are cut where they are told. */
const LONGEST_NAME = 48;

/** The pooled rest goes by what it holds. */
function nameOf({ value, pooled }: GroupCensus, column: string): string {
  if (value !== null) return value.length > LONGEST_NAME ? `${value.slice(0, LONGEST_NAME - 1).trimEnd()}…` : value;
  return pooled !== null && pooled.values > 0
    ? `the rest (${count(pooled.values)} values)`
    : `the group without “${column}”`;
}

function judgedAlone(group: GroupCensus, how: HowToJudge) {
  const { subgroups } = group;
  if (subgroups.length === 0) return { chart: null, judgement: null, movedChance: null };
  const baselineLast = how.baseline ?? pointsBefore(subgroups, how.since);
  return chartAndJudge({
    counts: subgroups,
    runLength: false,
    ...(baselineLast === undefined ? {} : { baselineLast }),
    ...(how.kind ? { kind: how.kind } : {}),
    ...(how.tests ? { tests: how.tests } : {}),
  });
}

function pointsBefore(subgroups: GroupCensus['subgroups'], since: Day | undefined): number | undefined {
  if (since === undefined) return undefined;
  const before = subgroups.filter(({ lastStart }) => lastStart < since).length;
  return before >= LEAST_POINTS && before < subgroups.length ? before : undefined;
}

function findingOf(judgement: Judgement | null, direction: 'risen' | 'fallen' | null, counts: boolean): GroupFinding {
  if (direction !== null) return counts ? direction : 'alone';
  switch (judgement?.finding) {
    case undefined:
    case 'too-few-points':
      return 'too-few';
    case 'no-level':
      return 'no-level';
    case 'steady':
      return 'steady';
    default:
      return 'unsteady';
  }
}

/** What was lost before the move, as far as it set the level, and since. */
function sidesOf(
  { subgroups }: GroupCensus,
  chart: Chart | null,
  first: number | null,
): Pick<GroupReading, 'before' | 'after' | 'difference' | 'since'> {
  if (chart === null || first === null) return { before: null, after: null, difference: null, since: null };
  const pool = (from: number, to: number): SubgroupCount => ({
    accounts: subgroups.slice(from - 1, to).reduce((sum, one) => sum + one.accounts, 0),
    lost: subgroups.slice(from - 1, to).reduce((sum, one) => sum + one.lost, 0),
  });
  const before = pool(1, Math.min(chart.baseline.last, first - 1));
  const after = pool(first, subgroups.length);
  return {
    before: pooledRate(before),
    after: pooledRate(after),
    difference: newcombeInterval(after, before),
    since: { point: first, start: subgroups[first - 1]!.firstStart },
  };
}

function pooledRate({ lost, accounts }: SubgroupCount): PooledRate {
  const { estimate, low, high } = rateInterval(lost, accounts);
  return { rate: estimate, low, high, lost, accounts };
}

const RANK: Readonly<Record<GroupFinding, number>> = {
  risen: 0,
  fallen: 0,
  alone: 1,
  steady: 2,
  unsteady: 3,
  'no-level': 4,
  'too-few': 5,
};

function byEvidence(a: GroupReading, b: GroupReading): number {
  return RANK[a.finding] - RANK[b.finding] || (a.chance ?? 1) - (b.chance ?? 1) || b.accounts - a.accounts;
}
