import type { SegmentCounts } from '../census/types.ts';
import { type StratifiedDifference, stratifiedDifference } from '../charts/checks/stratifiedDifference.ts';
import type { SubgroupCount } from '../charts/types.ts';

export interface MixReading {
  /** difference of the pooled rates, after minus before */
  readonly pooledDifference: number;
  /** what is left of it when every group is compared with itself */
  readonly within: StratifiedDifference;
  /** 'none': the move stands within groups; 'all': the groups are steady and only their shares moved; 'unclear': neither */
  readonly explains: 'none' | 'all' | 'unclear';
  /** group whose share of the accounts changed most, with its shares before and after */
  readonly largest: {
    readonly segment: string;
    readonly before: number;
    readonly after: number;
  };
}

/** With less than this part of the pooled difference left within groups, the mix is the story. Our choice, no source. */
const STORY = 0.5;

/**
 * Is a move of the pooled rate a move within the groups, or only of their shares?
 * The part within groups is held to the same threshold as the pooled move: half of the stratified chi-square is on the scale of a log
 * likelihood ratio.
 * @param first, last   points of the moved stretch
 * @param beforeLast    points 1 to beforeLast are the stretch it is compared with
 * @returns null when there are not at least two groups to compare
 */
export function readMix(
  segments: readonly SegmentCounts[],
  first: number,
  last: number,
  beforeLast: number,
  threshold: number,
): MixReading | null {
  const strata = segments.map(({ segment, accounts, lost }) => ({
    segment,
    before: sumOf(accounts, lost, 1, beforeLast),
    after: sumOf(accounts, lost, first, last),
  }));
  if (strata.filter(({ before, after }) => before.accounts > 0 && after.accounts > 0).length < 2) return null;
  const within = stratifiedDifference(strata);
  if (!within) return null;
  const before = pool(strata.map((stratum) => stratum.before));
  const after = pool(strata.map((stratum) => stratum.after));
  const pooledDifference = after.lost / after.accounts - before.lost / before.accounts;
  const sameWay = Math.sign(within.difference) === Math.sign(pooledDifference);
  const shares = strata.map((stratum) => ({
    segment: stratum.segment,
    before: stratum.before.accounts / before.accounts,
    after: stratum.after.accounts / after.accounts,
  }));
  const largest = shares.reduce((a, b) => (Math.abs(b.after - b.before) > Math.abs(a.after - a.before) ? b : a));
  let explains: MixReading['explains'] = 'unclear';
  if (sameWay && within.chiSquare / 2 > threshold) explains = 'none';
  else if (!sameWay || Math.abs(within.difference) < STORY * Math.abs(pooledDifference)) explains = 'all';
  else if (Math.abs(within.difference) > 0.8 * Math.abs(pooledDifference)) explains = 'none';
  return { pooledDifference, within, explains, largest };
}

function sumOf(accounts: readonly number[], lost: readonly number[], first: number, last: number): SubgroupCount {
  let n = 0;
  let d = 0;
  for (let i = first - 1; i < last; i++) {
    n += accounts[i]!;
    d += lost[i]!;
  }
  return { accounts: n, lost: d };
}

function pool(counts: readonly SubgroupCount[]): SubgroupCount {
  return counts.reduce(
    (sum, { accounts, lost }) => ({
      accounts: sum.accounts + accounts,
      lost: sum.lost + lost,
    }),
    {
      accounts: 0,
      lost: 0,
    },
  );
}
