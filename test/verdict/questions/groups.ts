import type { GroupCensus } from '../../../src/census/groupsCensus.ts';
import { drawn } from '../counts.ts';

const DAY_ONE = 19_400;
/** Days between the first accounts of one point and of the next. */
const APART = 9;

export interface GroupOf {
  readonly value: string | null;
  readonly seed: number;
  readonly points: number;
  readonly size: number;
  readonly rate: number;
  /** from point `at` on another rate */
  readonly moved?: { readonly at: number; readonly rate: number };
  readonly pooled?: GroupCensus['pooled'];
}

/** A group whose points are drawn by seed. */
export function group({ value, seed, points, size, rate, moved, pooled = null }: GroupOf): GroupCensus {
  const before = Math.min(points, (moved?.at ?? points + 1) - 1);
  const lost = [...drawn(seed, before, size, rate), ...drawn(seed + 7_000, points - before, size, moved?.rate ?? rate)];
  return {
    value,
    pooled,
    accounts: points * size + 40,
    matured: points * size + 3,
    lost: lost.reduce((sum, d) => sum + d, 0),
    subgroupSize: size,
    subgroups: lost.map((d, i) => ({
      index: i + 1,
      accounts: size,
      lost: d,
      firstStart: DAY_ONE + i * APART,
      lastStart: DAY_ONE + (i + 1) * APART - 1,
      asOf: DAY_ONE + (i + 1) * APART + 90,
    })),
  };
}
