import type { SegmentCounts } from '../../../census/types.ts';
import { type Decomposition, kitagawa } from '../../../charts/mix/kitagawa.ts';

/** Two stretches of the points of all accounts together, and why these two. */
export interface Stretches {
  /** move: before and since the move of all accounts; level: what set the usual level, and all since; halves: first and second half */
  readonly basis: 'move' | 'level' | 'halves';
  /** points 1 to beforeLast against points first to last */
  readonly beforeLast: number;
  readonly first: number;
  readonly last: number;
}

export interface Change extends Decomposition, Stretches {
  /** names of the groups, in the order of `groups` */
  readonly names: readonly string[];
}

/**
 * Which stretches to compare: those of the move when there is one, else what set the usual level against what came after it, else halves.
 * @param start  first point of the move of all accounts, or null
 * @returns null with fewer than two points
 */
export function stretchesOf(points: number, baselineLast: number, start: number | null): Stretches | null {
  if (points < 2) return null;
  if (start !== null && start > 1)
    return { basis: 'move', beforeLast: Math.min(baselineLast, start - 1), first: start, last: points };
  if (baselineLast >= 1 && baselineLast < points)
    return { basis: 'level', beforeLast: baselineLast, first: baselineLast + 1, last: points };
  const half = Math.floor(points / 2);
  return { basis: 'halves', beforeLast: half, first: half + 1, last: points };
}

/** What of the change between two stretches the groups' own rates made, and what their shares; null when there is nothing to compare. */
export function changeOf(segments: readonly SegmentCounts[], stretches: Stretches | null): Change | null {
  if (stretches === null || segments.length < 2) return null;
  const { beforeLast, first, last } = stretches;
  const pool = ({ accounts, lost }: SegmentCounts, from: number, to: number) => ({
    accounts: accounts.slice(from - 1, to).reduce((sum, n) => sum + n, 0),
    lost: lost.slice(from - 1, to).reduce((sum, n) => sum + n, 0),
  });
  const parts = kitagawa(
    segments.map((segment) => ({ before: pool(segment, 1, beforeLast), after: pool(segment, first, last) })),
  );
  return parts && { ...parts, ...stretches, names: segments.map(({ segment }) => segment) };
}
