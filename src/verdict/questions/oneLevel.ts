import type { Chart, SubgroupCount } from '../../charts/types.ts';
import type { Judgement } from '../judgement.ts';

/**
 * Why a stretch was taken: 'all' no move was found; 'moved' it begins or ends at a move; 'split' at the place where the points that should
 * set the usual level fall apart.
 */
export type StretchReason = 'all' | 'moved' | 'split';

/** A stretch of points taken to hold one level. */
export interface OneLevel {
  /** first and last point, both counted */
  readonly from: number;
  readonly to: number;
  readonly reason: StretchReason;
  /** its points but for those left out by decision */
  readonly counts: readonly (SubgroupCount & { readonly index: number })[];
  readonly pooled: SubgroupCount;
}

/** The newest stretch: from the last move on, or every point when none was found. */
export function newestLevel(chart: Chart, judgement: Judgement): OneLevel {
  const newest = chart.points.length;
  if (judgement.start) return stretchOf(chart, judgement.start.first, newest, 'moved');
  if (judgement.finding === 'unsteady-baseline' && judgement.steadiness)
    return stretchOf(chart, judgement.steadiness.splitAfter + 1, newest, 'split');
  return stretchOf(chart, 1, newest, 'all');
}

/** The stretch that holds the usual level: every point before a move, or the baseline where it falls apart. */
export function usualLevel(chart: Chart, judgement: Judgement): OneLevel {
  if (judgement.start) return stretchOf(chart, 1, judgement.start.first - 1, 'moved');
  if (judgement.finding === 'unsteady-baseline') return stretchOf(chart, 1, chart.baseline.last, 'split');
  return stretchOf(chart, 1, chart.points.length, 'all');
}

function stretchOf(chart: Chart, from: number, to: number, reason: StretchReason): OneLevel {
  const counts = chart.points
    .filter(({ index }) => index >= from && index <= to && !chart.baseline.excluded.includes(index))
    .map(({ index, accounts, lost }) => ({ index, accounts, lost }));
  return {
    from,
    to,
    reason,
    counts,
    pooled: {
      accounts: counts.reduce((sum, { accounts }) => sum + accounts, 0),
      lost: counts.reduce((sum, { lost }) => sum + lost, 0),
    },
  };
}
