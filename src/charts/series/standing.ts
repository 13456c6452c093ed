import { type LastBlock, LEAST_BEFORE } from '../standing/lastBlock.ts';
import type { Standing } from '../standing/standing.ts';
import { SHIFT_TESTS } from '../tests/nelsonTests.ts';
import { PatternMachine, patternMask } from '../tests/patterns.ts';
import { moveOf } from '../tests/zone.ts';
import { zoneBetween } from '../tests/zoneEdges.ts';
import type { TestNumber } from '../types.ts';
import type { SeriesFamily, SeriesLevel } from './family.ts';
import type { SeriesHistory } from './histories.ts';

/** How a series is split into the baseline and what is judged against it; the same for the real values and every simulated history. */
export interface SeriesDesign {
  readonly family: SeriesFamily;
  /** last value of the baseline; Infinity when every value there is sets the level (trial limits) */
  readonly baselineLast: number;
  /** values of the baseline left out by decision, numbered from 1 */
  readonly excluded: readonly number[];
  /** the tests whose flags count; all that speak about a shift when absent */
  readonly tests?: readonly TestNumber[];
}

/**
 * An unfinished gap is a point once it is longer than the centre line: then it can only lie above. Until then it could end on either
 * side, and is no point; but its length so far always counts in the likelihoods.
 */
export function isOpenPoint(open: number, center: number): boolean {
  return open > center;
}

/** Values of the baseline that are used, in time order, and the open gap when all of them are baseline; `into` is used again each time. */
export function baselineLevel(
  { family, baselineLast, excluded }: SeriesDesign,
  { values, count, open }: SeriesHistory,
  into: Float64Array,
): SeriesLevel | null {
  const last = Math.min(baselineLast, count);
  let used = 0;
  for (let i = 0; i < last; i++) if (!excluded.includes(i + 1)) into[used++] = values[i]!;
  return family.fit(into.subarray(0, used), baselineLast >= count ? open : 0);
}

/**
 * Prepares the judge of one design: the same function looks at the real values and at every simulated history, so that the threshold is
 * calibrated for exactly what is done. It is the judge of standing/standing.ts for series of values: a flag stands when a shift test on one
 * side holds inside the last block on that side, and the block's log likelihood ratio against the baseline exceeds the threshold.
 * @param most  longest history that will be looked at
 * @returns     both sides of the line (not of churn); scores are 0 when the baseline carries no level
 */
export function seriesJudge(design: SeriesDesign, most: number): (history: SeriesHistory) => Standing {
  const { family, baselineLast } = design;
  const machine = new PatternMachine();
  const flagsAbove = patternMask(design.tests ?? SHIFT_TESTS, 'above');
  const flagsBelow = patternMask(design.tests ?? SHIFT_TESTS, 'below');
  const scratch = new Float64Array(most);

  return (history) => {
    const { values, count, open } = history;
    const level = baselineLevel(design, history, scratch);
    if (level === null) return quiet(count);
    const edges = family.edges(level);
    const hasOpenPoint = family.openEnded && isOpenPoint(open, edges.center);
    const points = hasOpenPoint ? count + 1 : count;
    const judgedFrom = baselineLast >= count ? 0 : baselineLast;
    machine.reset();
    let lastAbove = 0;
    let lastBelow = 0;
    let previous = Number.NaN;
    for (let i = 0; i < points; i++) {
      const value = i < count ? values[i]! : open;
      const holds = machine.push(zoneBetween(value, edges), i === 0 ? 0 : moveOf(previous, value));
      previous = value;
      if (i < judgedFrom) continue;
      if ((holds & flagsAbove) !== 0) lastAbove = i + 1;
      if ((holds & flagsBelow) !== 0) lastBelow = i + 1;
    }
    const { above, below } = lastBlocks(design, history, level, hasOpenPoint);
    return {
      above: { block: above, score: lastAbove >= above.first ? above.ratio : 0 },
      below: { block: below, score: lastBelow >= below.first ? below.ratio : 0 },
    };
  };
}

function quiet(count: number): Standing {
  const side = { block: { first: Math.max(1, count), ratio: 0 }, score: 0 };
  return { above: side, below: side };
}

/**
 * The most likely last block above and below the level. With values after the baseline a block is compared with the baseline's level; on
 * trial limits with the values before it, at least LEAST_BEFORE of them, whose level is then estimated in the ratio too.
 */
function lastBlocks(
  { family, baselineLast, excluded }: SeriesDesign,
  { values, count, open }: SeriesHistory,
  level: SeriesLevel,
  hasOpenPoint: boolean,
): { above: LastBlock; below: LastBlock } {
  const trial = baselineLast >= count;
  const earliest = trial ? LEAST_BEFORE : baselineLast;
  const isUsed = (i: number): boolean => i >= baselineLast || !excluded.includes(i + 1);
  let allCount = 0;
  let allSum = open;
  if (trial) {
    for (let i = 0; i < count; i++) {
      if (!isUsed(i)) continue;
      allCount++;
      allSum += values[i]!;
    }
  }
  const whole = trial ? family.maxLogLikelihood(allCount, allSum, level) : 0;
  let n = 0;
  let sum = open;
  let aboveRatio = 0;
  let aboveFirst = Math.max(1, count);
  let belowRatio = 0;
  let belowFirst = aboveFirst;
  // A block may be the open gap alone, when that is a point.
  for (let start = hasOpenPoint ? count : count - 1; start >= earliest; start--) {
    if (start < count) {
      if (!isUsed(start)) continue;
      n++;
      sum += values[start]!;
    }
    let ratio: number;
    let isAbove: boolean;
    if (trial) {
      const n0 = allCount - n;
      const sum0 = allSum - sum;
      if (n0 <= 0) break;
      ratio = family.maxLogLikelihood(n, sum, level) + family.maxLogLikelihood(n0, sum0, level) - whole;
      isAbove = sum * n0 > sum0 * n;
    } else {
      ratio = family.maxLogLikelihood(n, sum, level) - family.logLikelihood(n, sum, level);
      isAbove = sum > level.mean * n;
    }
    if (isAbove && ratio > aboveRatio) {
      aboveRatio = ratio;
      aboveFirst = start + 1;
    } else if (!isAbove && ratio > belowRatio) {
      belowRatio = ratio;
      belowFirst = start + 1;
    }
  }
  return { above: { first: aboveFirst, ratio: aboveRatio }, below: { first: belowFirst, ratio: belowRatio } };
}
