import { seededUniform } from '../random/uniform.ts';
import { SHIFT_TESTS } from '../tests/nelsonTests.ts';
import { PatternMachine, patternMask } from '../tests/patterns.ts';
import { moveOf } from '../tests/zone.ts';
import { zoneBetween } from '../tests/zoneEdges.ts';
import type { TestNumber } from '../types.ts';
import type { SeriesFamily, SeriesLevel } from './family.ts';

export interface SeriesRunLength {
  /** mean number of points to the first flag */
  readonly mean: number;
  readonly standardError: number;
  readonly runs: number;
}

const LONGEST_RUN = 20_000;
const POINT_BUDGET = 150_000;
const MOST_RUNS = 3_000;

/**
 * Average run length of a chart of such values by simulation: points from the start to the first flag of any of the tests, with the
 * limits known.
 * @param level  the level the zones come from
 * @param moved  the true level of the simulated values; the same for the false-alarm figure
 * @returns      mean in points with its standard error; null when a run went on for 20,000 points without a flag
 */
export function seriesRunLength(
  family: SeriesFamily,
  level: SeriesLevel,
  moved: SeriesLevel = level,
  tests: readonly TestNumber[] = SHIFT_TESTS,
  seed = 14,
): SeriesRunLength | null {
  const uniform = seededUniform(seed);
  const mask = patternMask(tests);
  const machine = new PatternMachine();
  const edges = family.edges(level);
  const draw = family.sampler(moved);
  let points = 0;
  let runs = 0;
  let sum = 0;
  let squares = 0;
  while (runs < MOST_RUNS && points < POINT_BUDGET) {
    machine.reset();
    let previous = Number.NaN;
    let length = 0;
    while (length < LONGEST_RUN) {
      const value = draw(uniform);
      const holds = machine.push(zoneBetween(value, edges), length === 0 ? 0 : moveOf(previous, value));
      previous = value;
      length++;
      if ((holds & mask) !== 0) break;
    }
    if (length >= LONGEST_RUN) return null;
    points += length;
    runs++;
    sum += length;
    squares += length * length;
  }
  const mean = sum / runs;
  return { mean, standardError: Math.sqrt(Math.max(0, squares / runs - mean * mean) / runs), runs };
}
