import type { Smoothing } from '../kinds/ewmaChart.ts';
import { smoother } from '../kinds/smoothed.ts';
import { PatternMachine, patternMask, TEST_SPAN } from '../tests/patterns.ts';
import { beyondLimits } from '../tests/smoothedFlags.ts';
import { moveOf, zoneOf } from '../tests/zone.ts';
import type { ShiftTest } from '../types.ts';

/** Flags at one point: bits, as both sides may be flagged at once. */
export const FLAG_ABOVE = 1;
export const FLAG_BELOW = 2;

/** Raises the flags of a chart point by point; the same for the real chart and for every simulated history. */
export interface FlagMaker {
  /** how many points a flag can span: earlier ones need not be pushed */
  readonly span: number;
  /** starts a chart with this center and this sigma of a single account */
  begin(center: number, spread: number): void;
  /** takes the next point's lost share and size; returns its flags */
  push(value: number, size: number): number;
}

/** The shift tests of Nelson on the shares themselves. */
export function patternFlags(tests: readonly ShiftTest[]): FlagMaker {
  const machine = new PatternMachine();
  const above = patternMask(tests, 'above');
  const below = patternMask(tests, 'below');
  let center = 0;
  let spread = 0;
  let previous = Number.NaN;
  return {
    span: Math.max(...tests.map((test) => TEST_SPAN[test])),
    begin(atCenter, withSpread) {
      center = atCenter;
      spread = withSpread;
      previous = Number.NaN;
      machine.reset();
    },
    push(value, size) {
      const move = Number.isNaN(previous) ? 0 : moveOf(previous, value);
      const holds = machine.push(zoneOf(value, center, spread / Math.sqrt(size)), move);
      previous = value;
      return ((holds & above) !== 0 ? FLAG_ABOVE : 0) | ((holds & below) !== 0 ? FLAG_BELOW : 0);
    },
  };
}

/** The smoothed share beyond its limits. */
export function smoothFlags({ lambda, width }: Smoothing): FlagMaker {
  let center = 0;
  let spread = 0;
  let smooth = smoother(lambda, 0);
  return {
    span: Number.POSITIVE_INFINITY,
    begin(atCenter, withSpread) {
      center = atCenter;
      spread = withSpread;
      smooth = smoother(lambda, center);
    },
    push(value, size) {
      const { value: level, sigma } = smooth(value, spread / Math.sqrt(size));
      const side = beyondLimits(level, center, width * sigma);
      return side > 0 ? FLAG_ABOVE : side < 0 ? FLAG_BELOW : 0;
    },
  };
}
