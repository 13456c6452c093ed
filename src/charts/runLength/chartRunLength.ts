import type { TestNumber } from '../types.ts';
import { exactRunLength } from './exactRunLength.ts';
import { type SimulationSize, simulatedRunLength } from './simulatedRunLength.ts';
import type { RunLength } from './types.ts';
import { type CountDesign, countZones } from './zoneChances.ts';
import { isZoneTest } from './zoneHistory.ts';

/** A p or p' chart, as far as its run length depends on it. */
export interface RunDesign extends Omit<CountDesign, 'size' | 'rate'> {
  /** accounts of the points, in time order, at least one */
  readonly sizes: readonly number[];
  readonly tests: readonly TestNumber[];
}

export interface ChartRunLength {
  readonly method: 'exact' | 'simulated';
  /** null when a flag can never come, or so seldom that no simulation sees it */
  readonly length: RunLength | null;
}

/** Whether the exact chain answers: no test looks at moves from point to point, and all points have one size. */
export function isExact({ sizes, tests }: Pick<RunDesign, 'sizes' | 'tests'>): boolean {
  return tests.every(isZoneTest) && sizes.every((n) => n === sizes[0]);
}

/**
 * Run length of a p or p' chart whose limits are known, when its accounts are lost at `rate`: exact where the chain can tell it, else
 * simulated, seeded, with the standard error of its mean.
 * @param simulation  how much is simulated, where it is
 */
export function chartRunLength(design: RunDesign, rate: number, simulation: SimulationSize = {}): ChartRunLength {
  const { sizes, tests, ...limits } = design;
  if (!isExact(design))
    return { method: 'simulated', length: simulatedRunLength(sizes, { ...limits, rate }, tests, simulation) };
  const length = exactRunLength(countZones({ ...limits, size: sizes[0]!, rate }), tests.filter(isZoneTest));
  return { method: 'exact', length: length.mean === null ? null : length };
}
