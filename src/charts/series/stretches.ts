import type { SeriesLevel } from './family.ts';
import type { SeriesHistory, Stretch } from './histories.ts';
import type { SeriesDesign } from './standing.ts';

/** What the values from `first` on (numbered from 1), and the open gap, used up of the history. */
export function exposureFrom({ family }: SeriesDesign, { values, count, open }: SeriesHistory, first: number): number {
  let exposure = open;
  for (let i = first - 1; i < count; i++) exposure += family.exposure(values[i]!);
  return exposure;
}

/**
 * The shape of a history, for simulating others like it: the values before `from` by number, those from there on by what they used up.
 * @param after  level from `from` on; the same as `level` when nothing is to change
 */
export function stretchesLike(
  design: SeriesDesign,
  history: SeriesHistory,
  from: number,
  level: SeriesLevel,
  after: SeriesLevel = level,
): Stretch[] {
  const rest: Stretch = { level: after, exposure: exposureFrom(design, history, from) };
  return from > 1 ? [{ level, count: from - 1 }, rest] : [rest];
}

/** From which value on a history with nothing changed is simulated by what it used up: after the baseline, or all of it. */
export function judgedFrom(design: SeriesDesign, history: SeriesHistory): number {
  return design.baselineLast >= history.count ? 1 : design.baselineLast + 1;
}

/** Longest history worth simulating in place of this one: a moved level may fit more gaps, and so many settle the matter. */
export function longestLike({ count }: SeriesHistory): number {
  return 3 * count + 50;
}
