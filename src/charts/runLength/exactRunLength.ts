import { TEST_SPAN } from '../tests/patterns.ts';
import type { RunLength } from './types.ts';
import { type ZoneChain, zoneChain } from './zoneChain.ts';
import { ZONES, type ZoneChances } from './zoneChances.ts';
import type { ZoneRules } from './zoneHistory.ts';

/** The chance of a flag at the next point counts as settled when it has moved by no more than this part of itself … */
const SETTLED = 1e-13;
/** … over as many points as the longest pattern spans. */
const SETTLED_FOR = Math.max(...Object.values(TEST_SPAN)) + 1;
/** Charts without a flag so far that are too few to matter for any figure. */
const NOTHING_LEFT = 1e-18;
/** Never reached in practice: the past of every chain fades within some dozens of points. */
const MOST_POINTS = 100_000;

/**
 * Run length of tests that see zones only, exact: the chances of the states are carried from point to point until the chance of a flag at
 * the next point, given none so far, stays the same; from there on the run length is geometric.
 * @param zones  chance of a point in each zone, independent from point to point
 * @param tests  any of tests 1, 2, 5, 6, 7 and 8, numbered as by Nelson
 * @param run    points in a row on one side that test 2 wants, 2 to 15
 * Source: Champ CW, Woodall WH, Exact results for Shewhart control charts with supplementary runs rules, Technometrics 29:393-399, 1987.
 * Example: tests 1, 2, 5, 6 on normal points with eight in a row for test 2 have a mean of 91.7508.
 */
export function exactRunLength(zones: ZoneChances, tests: ZoneRules['tests'], run = TEST_SPAN[2]): RunLength {
  return runLengthOf(zoneChain({ tests, run }), zones);
}

function runLengthOf(chain: ZoneChain, zones: ZoneChances): RunLength {
  const { from, to, zones: sets } = chain.moves;
  const count = from.length;
  const flagged = chain.states;
  const chanceOf = chanceOfSets(zones);
  const chance = Float64Array.from(sets, (bits) => chanceOf[bits]!);
  let now = new Float64Array(flagged + 1);
  let then = new Float64Array(flagged + 1);
  now[0] = 1;
  /** share of charts without a flag after m points */
  const unflagged = [1];
  let left = 1;
  let hazard = 0;
  let settledFor = 0;
  let sum = 0;
  while (left > NOTHING_LEFT && settledFor < SETTLED_FOR && unflagged.length <= MOST_POINTS) {
    sum += left;
    then.fill(0);
    for (let i = 0; i < count; i++) then[to[i]!]! += now[from[i]!]! * chance[i]!;
    const newHazard = then[flagged]! / left;
    settledFor = Math.abs(newHazard - hazard) <= SETTLED * newHazard ? settledFor + 1 : 0;
    hazard = newHazard;
    left = 0;
    for (let state = 0; state < flagged; state++) left += then[state]!;
    then[flagged] = 0;
    unflagged.push(left);
    [now, then] = [then, now];
  }
  const over = left <= NOTHING_LEFT;
  return distributionOf(unflagged, over ? 1 : hazard, sum + (over ? 0 : left / hazard));
}

/** Chance of each set of zones, by its bits. */
function chanceOfSets(zones: ZoneChances): Float64Array {
  const sums = new Float64Array(1 << ZONES);
  for (let bits = 1; bits < sums.length; bits++) {
    const lowest = 31 - Math.clz32(bits & -bits);
    sums[bits] = sums[bits & (bits - 1)]! + zones[lowest]!;
  }
  return sums;
}

/** @param hazard  chance of a flag at every point after those listed */
function distributionOf(unflagged: readonly number[], hazard: number, mean: number): RunLength {
  const listed = unflagged.length - 1;
  const last = unflagged[listed]!;
  const quantile = (share: number): number => {
    const left = 1 - share;
    if (last <= left) return unflagged.findIndex((chance) => chance <= left);
    return listed + Math.ceil(Math.log(left / last) / Math.log1p(-hazard));
  };
  return {
    mean: hazard > 0 ? mean : null,
    standardError: null,
    median: hazard > 0 ? quantile(0.5) : null,
    p10: hazard > 0 ? quantile(0.1) : null,
    p90: hazard > 0 ? quantile(0.9) : null,
    within: (m) =>
      1 - (m <= listed ? unflagged[Math.max(0, Math.floor(m))]! : last * Math.exp((m - listed) * Math.log1p(-hazard))),
  };
}
