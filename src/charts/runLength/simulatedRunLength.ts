import { betaBinomialChances } from '../random/binomialChances.ts';
import { NEVER_DRAWN, tableSampler } from '../random/tableSampler.ts';
import { seededUniform } from '../random/uniform.ts';
import { PatternMachine, patternMask } from '../tests/patterns.ts';
import { zoneOf } from '../tests/zone.ts';
import type { TestNumber } from '../types.ts';
import type { RunLength } from './types.ts';
import type { CountDesign } from './zoneChances.ts';

/** A run this long ends the simulation without an answer: the chart can hardly flag, and a mean of cut runs would be too low. */
const LONGEST_RUN = 20_000;
const POINT_BUDGET = 150_000;
const MOST_RUNS = 3_000;

export interface SimulationSize {
  readonly seed?: number;
  readonly mostRuns?: number;
  /** points after which no new run begins */
  readonly pointBudget?: number;
}

/**
 * Run length of a p or p' chart by simulation: points from the start to the first flag of any of the tests, with the limits known.
 * @param sizes  accounts per point; with unequal sizes they are gone through again and again
 * @returns      null when a run went on for 20,000 points without a flag
 */
export function simulatedRunLength(
  sizes: readonly number[],
  design: Omit<CountDesign, 'size'>,
  tests: readonly TestNumber[],
  { seed = 4, mostRuns = MOST_RUNS, pointBudget = POINT_BUDGET }: SimulationSize = {},
): RunLength | null {
  const { center, rate, sigmaZ, correlation } = design;
  const uniform = seededUniform(seed);
  const mask = patternMask(tests);
  const machine = new PatternMachine();
  const spread = Math.sqrt(center * (1 - center)) * sigmaZ;
  const kinds = new Map(
    [...new Set(sizes)].map((n) => {
      const counts = betaBinomialChances(n, rate, correlation, NEVER_DRAWN);
      // The zone of every count that can be drawn, looked up once instead of at every point.
      const zones = Int8Array.from(counts.chances, (_, i) =>
        zoneOf((counts.first + i) / n, center, spread / Math.sqrt(n)),
      );
      return [n, { n, first: counts.first, zones, sampler: tableSampler(counts) }] as const;
    }),
  );
  const inTurn = sizes.map((n) => kinds.get(n)!);
  const lengths: number[] = [];
  let points = 0;
  while (lengths.length < mostRuns && points < pointBudget) {
    machine.reset();
    let previousLost = 0;
    let previousSize = 0;
    let length = 0;
    // Each run starts at another place of the sequence of sizes, so that no single point's size decides the figure.
    let at = lengths.length % sizes.length;
    while (length < LONGEST_RUN) {
      const { n, first, zones, sampler } = inTurn[at]!;
      at = at + 1 === sizes.length ? 0 : at + 1;
      const lost = sampler.draw(uniform);
      // Rates compared as fractions of whole numbers: exact, where rates themselves need a tolerance.
      const move = length === 0 ? 0 : Math.sign(lost * previousSize - previousLost * n);
      const holds = machine.push(zones[lost - first]!, move);
      previousLost = lost;
      previousSize = n;
      length++;
      if ((holds & mask) !== 0) break;
    }
    if (length >= LONGEST_RUN) return null;
    points += length;
    lengths.push(length);
  }
  return summary(lengths);
}

/** What the lengths of some simulated runs come to. */
export function summary(lengths: readonly number[]): RunLength {
  const runs = lengths.length;
  const mean = lengths.reduce((sum, length) => sum + length, 0) / runs;
  const squares = lengths.reduce((sum, length) => sum + (length - mean) ** 2, 0);
  const sorted = Float64Array.from(lengths).sort();
  const quantile = (share: number): number => sorted[Math.max(0, Math.ceil(share * runs) - 1)]!;
  return {
    mean,
    standardError: runs > 1 ? Math.sqrt(squares / (runs - 1) / runs) : null,
    median: quantile(0.5),
    p10: quantile(0.1),
    p90: quantile(0.9),
    within: (m) => {
      const after = sorted.findIndex((length) => length > m);
      return (after === -1 ? runs : after) / runs;
    },
  };
}
