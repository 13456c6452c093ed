import type { ShiftTest, Side, TestEpisode, TestNumber } from '../types.ts';
import { PatternMachine, patternBit, TEST_SPAN } from './patterns.ts';
import { moveOf, zoneOf } from './zone.ts';
import { type ZoneEdges, zoneBetween } from './zoneEdges.ts';

/** A plotted value with the centre line and sigma it is judged by. */
export interface JudgedValue {
  readonly value: number;
  readonly center: number;
  readonly sigma: number;
  /** where the zones end, when they are no multiples of sigma */
  readonly edges?: ZoneEdges;
}

/** Tests that speak about a shift; the others speak about how the data was cut. */
export const SHIFT_TESTS: readonly ShiftTest[] = [1, 2, 3, 5, 6];

export function isShiftTest(test: TestNumber): test is ShiftTest {
  return (SHIFT_TESTS as readonly TestNumber[]).includes(test);
}

const SIDED: readonly [TestNumber, readonly Side[]][] = [
  [1, ['above', 'below']],
  [2, ['above', 'below']],
  [3, ['above', 'below']],
  [4, ['both']],
  [5, ['above', 'below']],
  [6, ['above', 'below']],
  [7, ['both']],
  [8, ['both']],
];

/**
 * All eight tests of Nelson (1984), one entry for each episode: reported at the point that completed the pattern, with the points
 * of the pattern, and the last point at which the condition still held. A rising trend is reported as `above`, a falling one as `below`.
 * @param points  values in time order; points are numbered from 1
 * @returns       episodes ordered by completing point, then test
 * Source: Nelson 1984 (see patterns.ts). In tests 5 and 6 the members are the points beyond 2 (1) sigma.
 */
export function nelsonTests(points: readonly JudgedValue[]): TestEpisode[] {
  const machine = new PatternMachine();
  const zones: number[] = [];
  const held: number[] = [];
  points.forEach((point, i) => {
    const zone = point.edges ? zoneBetween(point.value, point.edges) : zoneOf(point.value, point.center, point.sigma);
    zones.push(zone);
    held.push(machine.push(zone, i === 0 ? 0 : moveOf(points[i - 1]!.value, point.value)));
  });

  const episodes: TestEpisode[] = [];
  for (const [test, sides] of SIDED) {
    for (const side of sides) {
      const bit = patternBit(test, side);
      for (let i = 0; i < held.length; i++) {
        if ((held[i]! & bit) === 0 || (i > 0 && (held[i - 1]! & bit) !== 0)) continue;
        let until = i;
        while (until + 1 < held.length && (held[until + 1]! & bit) !== 0) until++;
        episodes.push({
          test,
          side,
          point: i + 1,
          members: membersAt(test, side, i, zones),
          until: until + 1,
          speaks: isShiftTest(test) ? 'shift' : 'cut',
        });
      }
    }
  }
  return episodes.sort((a, b) => a.point - b.point || a.test - b.test);
}

function membersAt(test: TestNumber, side: Side, i: number, zones: readonly number[]): readonly [number, number] {
  let first = Math.max(0, i - TEST_SPAN[test] + 1);
  if (test === 5 || test === 6) {
    const least = test === 5 ? 3 : 2;
    const sign = side === 'above' ? 1 : -1;
    while (zones[first]! * sign < least) first++;
  }
  return [first + 1, i + 1];
}
