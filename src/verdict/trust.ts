import { type ChartRunLength, chartRunLength, type RunDesign } from '../charts/runLength/chartRunLength.ts';
import { estimatedRunLength } from '../charts/runLength/estimatedRunLength.ts';
import type { SimulationSize } from '../charts/runLength/simulatedRunLength.ts';
import { smoothedRunLength } from '../charts/runLength/smoothedRunLength.ts';
import type { Chart, ShiftTest } from '../charts/types.ts';
import type { Delay, Trust } from './types.ts';

/** Nothing can be said about how far to trust a chart. */
export const NO_TRUST: Trust = {
  falseAlarmEvery: null,
  method: 'simulated',
  standardError: null,
  falseVerdictChance: null,
  wouldSee: null,
};

/** The moves whose delay is told, as factors on the rate: a rise by half and a halving. */
export const TOLD_MOVES = { rise: 1.5, fall: 0.5 } as const;

/** Moved rates are flagged soon: so few runs tell the delay well enough. */
const DELAY_RUNS = { seed: 5, mostRuns: 800, pointBudget: 20_000 } as const;

/**
 * How often this chart raises a false flag, how soon it flags a move, and what it does to the first figure that its usual level is estimated.
 * @param correlation     of the accounts of a subgroup, on a p' chart; else 0
 * @param tests           the tests whose flags count
 * @param accountsPerWeek accounts that reach the age in a week; 0 when unknown
 */
export function runLengthTrust(
  chart: Chart,
  correlation: number,
  tests: readonly ShiftTest[],
  accountsPerWeek: number,
): Omit<Trust, 'falseVerdictChance' | 'wouldSee'> {
  const { baseline, center, points, sigmaZ } = chart;
  const sizes = points.map((point) => point.accounts);
  const design: RunDesign = { sizes, center, sigmaZ, correlation, tests };
  const { smoothing } = chart;
  const runLength = (rate: number, simulation?: SimulationSize): ChartRunLength =>
    smoothing
      ? { method: 'simulated', length: smoothedRunLength(sizes, { ...design, rate }, smoothing, simulation) }
      : chartRunLength(design, rate, simulation);
  const { method, length } = runLength(center);
  const size = sizes.reduce((sum, n) => sum + n, 0) / sizes.length;
  const delay = (factor: number): Delay | null =>
    center * factor >= 1
      ? null
      : delayOf(runLength(center * factor, DELAY_RUNS), center * factor, size, accountsPerWeek);
  const estimated = smoothing ? null : estimatedRunLength(design, center, baseline.accounts);
  return {
    falseAlarmEvery: length?.mean ?? null,
    method,
    standardError: length?.standardError ?? null,
    settings: { n: chart.subgroupSize, p: center, tests: smoothing ? [1] : tests, sigmaZ },
    runLength: length && { mean: length.mean!, median: length.median, p10: length.p10, p90: length.p90 },
    delay: { rise: delay(TOLD_MOVES.rise), fall: delay(TOLD_MOVES.fall) },
    estimated: estimated && {
      points: points.filter(({ index }) => index <= baseline.last).length - baseline.excluded.length,
      falseAlarmEvery: estimated.mean,
      low: estimated.low,
      high: estimated.high,
    },
  };
}

function delayOf({ length }: ChartRunLength, rate: number, size: number, accountsPerWeek: number): Delay {
  const points = length?.mean ?? null;
  const accounts = points === null ? null : points * size;
  return {
    rate,
    points,
    accounts,
    weeks: accounts === null || accountsPerWeek <= 0 ? null : accounts / accountsPerWeek,
  };
}
