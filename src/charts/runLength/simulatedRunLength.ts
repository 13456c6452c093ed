import { betaBinomialSampler } from '../random/betaBinomialSampler.ts';
import { seededUniform } from '../random/uniform.ts';
import { PatternMachine, patternMask } from '../tests/patterns.ts';
import { moveOf, zoneOf } from '../tests/zone.ts';
import type { TestNumber } from '../types.ts';

export interface RunLength {
  /** mean number of points to the first flag */
  readonly mean: number;
  readonly standardError: number;
  readonly runs: number;
}

/** A run this long ends the simulation without an answer: the chart can hardly flag, and a mean of cut runs would be too low. */
const LONGEST_RUN = 20_000;
const POINT_BUDGET = 150_000;
const MOST_RUNS = 3_000;

/**
 * Average run length of a p or p' chart by simulation: points from the start to the first flag of any of the tests, with the limits known.
 * @param sizes   accounts per point; with unequal sizes they are gone through again and again
 * @param center  rate the limits are computed from
 * @param rate    true rate of the simulated accounts (equal to center for the false-alarm figure)
 * @param excess  for a p' chart: what the accounts of a subgroup have in common, and the factor by which the limits are widened for it
 * @returns       mean in points with its standard error; null when a run went on for 20,000 points without a flag
 */
export function simulatedRunLength(
  sizes: readonly number[],
  center: number,
  rate: number,
  tests: readonly TestNumber[],
  seed = 4,
  excess: { readonly correlation: number; readonly sigmaZ: number } = { correlation: 0, sigmaZ: 1 },
): RunLength | null {
  const uniform = seededUniform(seed);
  const mask = patternMask(tests);
  const machine = new PatternMachine();
  const spread = Math.sqrt(center * (1 - center)) * excess.sigmaZ;
  const samplers = new Map([...new Set(sizes)].map((n) => [n, betaBinomialSampler(n, rate, excess.correlation)]));
  let points = 0;
  let runs = 0;
  let sum = 0;
  let squares = 0;
  while (runs < MOST_RUNS && points < POINT_BUDGET) {
    machine.reset();
    let previous = Number.NaN;
    let length = 0;
    // Each run starts at another place of the sequence of sizes, so that no single point's size decides the figure.
    let at = runs % sizes.length;
    while (length < LONGEST_RUN) {
      const n = sizes[at]!;
      at = at + 1 === sizes.length ? 0 : at + 1;
      const value = samplers.get(n)!.draw(uniform) / n;
      const holds = machine.push(
        zoneOf(value, center, spread / Math.sqrt(n)),
        length === 0 ? 0 : moveOf(previous, value),
      );
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
