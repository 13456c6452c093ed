import { historyCount } from '../standing/histories.ts';
import { LEAST_BEFORE } from '../standing/lastBlock.ts';
import { CALIBRATED_AT, CANDIDATE_COVERAGE, type StartCandidates } from '../standing/startCandidates.ts';
import type { SeriesLevel } from './family.ts';
import { type SeriesHistory, simulateSeries } from './histories.ts';
import { isOpenPoint, type SeriesDesign } from './standing.ts';
import { longestLike, stretchesLike } from './stretches.ts';

export interface SeriesStart extends StartCandidates {
  readonly before: SeriesLevel;
  readonly after: SeriesLevel;
}

const MOST_HISTORIES = 600;
const LEAST_HISTORIES = 200;

/**
 * When a step in a series began: as standing/startCandidates.ts does for counts, with the family's own likelihood.
 * @param level  for the spread of a family that has one of its own
 * @param side   side of the line the newest stretch lies on
 */
export function seriesStart(
  design: SeriesDesign,
  history: SeriesHistory,
  level: SeriesLevel,
  side: 'above' | 'below',
  seed = 13,
): SeriesStart {
  const here = profile(design, history, level, side);
  const histories = historyCount(history.count, MOST_HISTORIES, LEAST_HISTORIES);
  const drops: number[] = [];
  const stretches = stretchesLike(design, history, here.first, here.before, here.after);
  simulateSeries(design.family, stretches, longestLike(history), histories, seed, (simulated) => {
    const there = profile(design, simulated, level, side);
    const atTruth = there.ratios[here.first - 1] ?? Number.NEGATIVE_INFINITY;
    drops.push(atTruth === Number.NEGATIVE_INFINITY ? Number.POSITIVE_INFINITY : there.best - atTruth);
  });
  drops.sort((a, b) => a - b);
  const allowed = drops[Math.ceil(histories * CALIBRATED_AT) - 1]!;
  const inside = here.ratios.flatMap((ratio, i) =>
    ratio > Number.NEGATIVE_INFINITY && here.best - ratio <= allowed ? [i + 1] : [],
  );
  return {
    first: here.first,
    candidates: [Math.min(here.first, ...inside), Math.max(here.first, ...inside)],
    coverage: CANDIDATE_COVERAGE,
    before: here.before,
    after: here.after,
  };
}

/** Log likelihood ratio of a step at every start against none, both levels estimated; the open gap alone may be the moved stretch where it is a point. */
function profile(
  { family, baselineLast, excluded }: SeriesDesign,
  { values, count, open }: SeriesHistory,
  level: SeriesLevel,
  side: 'above' | 'below',
) {
  const earliest = Math.min(LEAST_BEFORE, baselineLast);
  const isUsed = (i: number): boolean => i >= baselineLast || !excluded.includes(i + 1);
  let allCount = 0;
  let allSum = open;
  for (let i = 0; i < count; i++) {
    if (!isUsed(i)) continue;
    allCount++;
    allSum += values[i]!;
  }
  const whole = family.maxLogLikelihood(allCount, allSum, level);
  const { center } = family.edges(level);
  const ratios = new Array<number>(count + 1).fill(Number.NEGATIVE_INFINITY);
  let best = Number.NEGATIVE_INFINITY;
  let first = Math.max(1, count);
  let before = level;
  let after = level;
  let n = 0;
  let sum = open;
  for (let start = isOpenPoint(open, center) ? count : count - 1; start >= earliest; start--) {
    if (start < count) {
      if (!isUsed(start)) continue;
      n++;
      sum += values[start]!;
    }
    const n0 = allCount - n;
    const sum0 = allSum - sum;
    if (n0 <= 0) break;
    if (side === 'above' ? sum * n0 <= sum0 * n : sum * n0 >= sum0 * n) continue;
    const ratio = family.maxLogLikelihood(n, sum, level) + family.maxLogLikelihood(n0, sum0, level) - whole;
    ratios[start] = ratio;
    if (ratio > best) {
      best = ratio;
      first = start + 1;
      before = family.levelOf(n0, sum0, level);
      after = family.levelOf(n, sum, level);
    }
  }
  return { ratios, best, first, before, after };
}
