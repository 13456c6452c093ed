import { Z_95 } from '../intervals/wilson.ts';
import type { SubgroupCount } from '../types.ts';

/** One group's counts before and after; a group may be missing on one side (no accounts). */
export interface GroupCounts {
  readonly before: SubgroupCount;
  readonly after: SubgroupCount;
}

/** All parts are fractions, after minus before; they add up to the change of the overall rate. */
export interface GroupParts {
  /** share of all accounts */
  readonly shareBefore: number;
  readonly shareAfter: number;
  /** lost / accounts; null without accounts on that side */
  readonly rateBefore: number | null;
  readonly rateAfter: number | null;
  /** change of the group's own rate, weighted with its mean share; 0 when it has no accounts on one side */
  readonly ratePart: number;
  /** change of its share, times how far its mean rate lies from the mean overall rate */
  readonly mixPart: number;
}

export interface Decomposition {
  readonly before: number;
  readonly after: number;
  /** after - before = ratePart + mixPart */
  readonly difference: number;
  /** what the groups' own rates changed, at the mean of both mixes */
  readonly ratePart: number;
  /** 95 % limits of ratePart given the shares, by the normal approximation with each group's binomial variance */
  readonly ratePartLow: number;
  readonly ratePartHigh: number;
  /** what the shares of the groups changed, at the mean of both rates */
  readonly mixPart: number;
  readonly groups: readonly GroupParts[];
}

/**
 * Splits the change of an overall rate into what the groups' own rates changed and what their shares changed, without a rest.
 *
 * With shares s and rates r of the groups, S and R their means of before and after:
 *   after - before = sum S_i (r_i' - r_i) + sum (s_i' - s_i) R_i.
 * Each group's mix part is counted from the mean overall rate, (s_i' - s_i)(R_i - mean), so that a growing group with little churn shows as
 * a fall; as the shares sum to 1 on both sides, the total stays the same. A group without accounts on one side has no rate there: all it
 * changes is the mix.
 * @returns null when there are no accounts before or none after
 * Source: Kitagawa EM, Components of a difference between two rates, Journal of the American Statistical Association 50:1168-1194, 1955
 * (reference from memory); the form with mean weights, which has no interaction term.
 */
export function kitagawa(groups: readonly GroupCounts[]): Decomposition | null {
  const all = (side: keyof GroupCounts, what: keyof SubgroupCount): number =>
    groups.reduce((sum, group) => sum + group[side][what], 0);
  const [n0, n1] = [all('before', 'accounts'), all('after', 'accounts')];
  if (n0 === 0 || n1 === 0) return null;
  const before = all('before', 'lost') / n0;
  const after = all('after', 'lost') / n1;
  const middle = (before + after) / 2;
  let variance = 0;
  const parts = groups.map(({ before: b, after: a }): GroupParts => {
    const [shareBefore, shareAfter] = [b.accounts / n0, a.accounts / n1];
    const [rateBefore, rateAfter] = [rateOf(b), rateOf(a)];
    const share = (shareBefore + shareAfter) / 2;
    const r0 = rateBefore ?? rateAfter ?? middle;
    const r1 = rateAfter ?? rateBefore ?? middle;
    if (rateBefore !== null && rateAfter !== null)
      variance += share ** 2 * ((r0 * (1 - r0)) / b.accounts + (r1 * (1 - r1)) / a.accounts);
    return {
      shareBefore,
      shareAfter,
      rateBefore,
      rateAfter,
      ratePart: share * (r1 - r0),
      mixPart: (shareAfter - shareBefore) * ((r0 + r1) / 2 - middle),
    };
  });
  const ratePart = parts.reduce((sum, part) => sum + part.ratePart, 0);
  const reach = Z_95 * Math.sqrt(variance);
  return {
    before,
    after,
    difference: after - before,
    ratePart,
    ratePartLow: ratePart - reach,
    ratePartHigh: ratePart + reach,
    mixPart: parts.reduce((sum, part) => sum + part.mixPart, 0),
    groups: parts,
  };
}

function rateOf({ accounts, lost }: SubgroupCount): number | null {
  return accounts === 0 ? null : lost / accounts;
}
