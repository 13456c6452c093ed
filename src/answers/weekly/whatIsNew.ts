import type { Seen } from '../../store/types.ts';
import { capitalised, counted, listed } from '../../verdict/words/format.ts';

/** What changed from one weekly post to the next. */
export interface News {
  /** sentences, most important first; empty: nothing new */
  readonly lines: readonly string[];
}

/** A flag that is not passed is still something to look at. */
const open = ({ state }: Seen['flags'][number]): boolean => state !== 'passed';

/**
 * What is new on a chart since it was last posted.
 * @param before null for the first post
 * Points are known by their first start date, flags by their kind, their side and where they began.
 */
export function whatIsNew(before: Seen | null, now: Seen): News {
  if (before === null) return { lines: [] };
  if (before.tenure !== now.tenure || before.subgroupSize !== now.subgroupSize) {
    return {
      lines: [
        `The points are cut anew: ${counted(now.subgroupSize, 'account')} at ${now.tenure} now, ${counted(before.subgroupSize, 'account')} at ${before.tenure} last time, so they cannot be compared one by one.`,
      ],
    };
  }
  const lines: string[] = [];
  const old = new Map(before.points.map((point) => [point.start, point]));
  const fresh = now.points.filter(({ start }) => !old.has(start));
  const restated = now.points.filter((point) => {
    const earlier = old.get(point.start);
    return earlier !== undefined && (earlier.lost !== point.lost || earlier.accounts !== point.accounts);
  });
  if (fresh.length > 0) {
    const counts = fresh.slice(-3).map(({ lost, accounts }) => `${lost} of ${accounts}`);
    lines.push(
      `${capitalised(counted(fresh.length, 'new point'))}${fresh.length > 3 ? ', the newest' : ''}: ${listed(counts)} lost.`,
    );
  }
  const known = new Map(before.flags.map((flag) => [flag.key, flag]));
  const current = new Map(now.flags.map((flag) => [flag.key, flag]));
  for (const flag of now.flags) if (open(flag) && !known.has(flag.key)) lines.push(`New flag: ${flag.words}.`);
  for (const flag of before.flags) {
    const later = current.get(flag.key);
    if (open(flag) && (later === undefined || !open(later))) lines.push(`No longer flagged: ${flag.words}.`);
  }
  if (before.outcome !== now.outcome)
    lines.push(`The answer has changed: last time it was “${before.outcome.replace('-', ' ')}”.`);
  if (restated.length > 0) {
    const change = restated.map((point) => point.lost - old.get(point.start)!.lost);
    const sum = change.reduce((total, one) => total + one, 0);
    lines.push(
      `${capitalised(counted(restated.length, 'point'))} shown before ${restated.length === 1 ? 'is' : 'are'} restated by the newer data: ${sum >= 0 ? '+' : '−'}${counted(Math.abs(sum), 'loss', 'losses')} in all.`,
    );
  }
  return { lines };
}
