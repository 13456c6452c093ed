import * as fc from 'fast-check';
import { expect, test } from 'vitest';
import { nelsonTests } from '../../src/charts/tests/nelsonTests.ts';
import type { Side, TestEpisode, TestNumber } from '../../src/charts/types.ts';

/*
 * A second implementation of the eight tests, straight from their definitions: each looks at the last so many points of every point's
 * past, with no memory. Values are whole numbers of quarter sigmas around a centre line of 0, so that no rounding blurs "beyond".
 */
type Holds = (window: readonly number[], sign: 1 | -1) => boolean;

const steadily = (w: readonly number[], sign: number): boolean =>
  w.slice(1).every((value, i) => Math.sign(value - w[i]!) === sign);
const atLeast = (w: readonly number[], count: number, holds: (value: number) => boolean): boolean =>
  w.filter(holds).length >= count;

const DEFINITIONS: Record<TestNumber, { span: number; sided: boolean; partial?: boolean; holds: Holds }> = {
  1: { span: 1, sided: true, holds: ([value], sign) => value! * sign > 3 },
  2: { span: 9, sided: true, holds: (w, sign) => w.every((value) => value * sign > 0) },
  3: { span: 6, sided: true, holds: steadily },
  4: {
    span: 14,
    sided: false,
    holds: (w) => {
      const moves = w.slice(1).map((value, i) => Math.sign(value - w[i]!));
      return moves.every((move, i) => move !== 0 && (i === 0 || move !== moves[i - 1]));
    },
  },
  5: { span: 3, sided: true, partial: true, holds: (w, sign) => atLeast(w, 2, (value) => value * sign > 2) },
  6: { span: 5, sided: true, partial: true, holds: (w, sign) => atLeast(w, 4, (value) => value * sign > 1) },
  7: { span: 15, sided: false, holds: (w) => w.every((value) => Math.abs(value) <= 1) },
  8: {
    span: 8,
    sided: false,
    holds: (w) =>
      w.every((value) => Math.abs(value) > 1) && w.some((value) => value > 0) && w.some((value) => value < 0),
  },
};

function naiveTests(values: readonly number[]): TestEpisode[] {
  const found: TestEpisode[] = [];
  for (const key of Object.keys(DEFINITIONS)) {
    const number = Number(key) as TestNumber;
    const { span, sided, partial = false, holds } = DEFINITIONS[number];
    const sides: [Side, 1 | -1][] = sided
      ? [
          ['above', 1],
          ['below', -1],
        ]
      : [['both', 1]];
    for (const [side, sign] of sides) {
      const held = values.map((_, i) => {
        const first = i - span + 1;
        if (first < 0 && !partial) return false;
        return holds(values.slice(Math.max(0, first), i + 1), sign);
      });
      held.forEach((now, i) => {
        if (!now || held[i - 1]) return;
        let first = Math.max(0, i - span + 1);
        if (partial) while (values[first]! * sign <= (number === 5 ? 2 : 1)) first++;
        const end = held.indexOf(false, i);
        found.push({
          test: number,
          side,
          point: i + 1,
          members: [first + 1, i + 1],
          until: end === -1 ? values.length : end,
          speaks: number === 4 || number === 7 || number === 8 ? 'cut' : 'shift',
        });
      });
    }
  }
  return found;
}

const byPlace = (a: TestEpisode, b: TestEpisode): number =>
  a.point - b.point || a.test - b.test || a.side.localeCompare(b.side);

/** Sequences in which every pattern is common: plain noise, quiet or wild stretches, runs, trends and alternations, ties and zeros. */
const quarter = (most: number): fc.Arbitrary<number> => fc.integer({ min: -most, max: most }).map((q) => q / 4);
const stretch: fc.Arbitrary<number[]> = fc.oneof(
  fc.array(quarter(14), { minLength: 1, maxLength: 12 }),
  fc.array(quarter(4), { minLength: 12, maxLength: 20 }),
  fc.array(quarter(10), { minLength: 9, maxLength: 14 }).map((values) => values.map((value) => Math.abs(value) + 0.25)),
  fc.array(quarter(10), { minLength: 4, maxLength: 14 }).map((values) => values.map((value) => -Math.abs(value))),
  fc.array(quarter(10), { minLength: 5, maxLength: 8 }).map((values) => values.sort((a, b) => a - b)),
  fc.array(quarter(10), { minLength: 5, maxLength: 8 }).map((values) => [...new Set(values)].sort((a, b) => b - a)),
  fc
    .array(quarter(10), { minLength: 10, maxLength: 18 })
    .map((values) => values.map((value, i) => (Math.abs(value) + 0.25) * (i % 2 === 0 ? 1 : -1))),
  fc
    .array(quarter(8), { minLength: 6, maxLength: 12 })
    .map((values) => values.map((value) => value + Math.sign(value || 1) * 1.25)),
);
const sequence = fc.array(stretch, { minLength: 1, maxLength: 5 }).map((parts) => Object.freeze(parts.flat()));

test('the eight tests agree with their definitions on any sequence, episodes and members and all', () => {
  const seen = new Map<TestNumber, number>();
  fc.assert(
    fc.property(sequence, (values) => {
      const found = nelsonTests(values.map((value) => Object.freeze({ value, center: 0, sigma: 1 })));
      for (const { test: number } of found) seen.set(number, (seen.get(number) ?? 0) + 1);
      expect([...found].sort(byPlace)).toEqual(naiveTests(values).sort(byPlace));
    }),
    { numRuns: 2_000 },
  );
  // The comparison would be worth nothing for a pattern that never came up.
  for (const number of [1, 2, 3, 4, 5, 6, 7, 8] as const) expect(seen.get(number) ?? 0).toBeGreaterThan(20);
});

test('no point, and one point, are no pattern but a point beyond three sigma', () => {
  expect(nelsonTests([])).toEqual([]);
  expect(nelsonTests([{ value: 2.9, center: 0, sigma: 1 }])).toEqual([]);
  expect(nelsonTests([{ value: -3.1, center: 0, sigma: 1 }])).toMatchObject([
    { test: 1, side: 'below', members: [1, 1] },
  ]);
});
