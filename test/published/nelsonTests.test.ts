import { describe, expect, test } from 'vitest';
import { nelsonTests } from '../../src/charts/tests/nelsonTests.ts';
import { moveOf, zoneOf } from '../../src/charts/tests/zone.ts';
import type { Side, TestEpisode, TestNumber } from '../../src/charts/types.ts';
import { checkValue } from './checkValues.ts';

/*
 * The definitions, with sequences made by hand. Values are in sigmas from a centre line at 0, so that a sequence can be read off.
 */
const definitions = checkValue<unknown, Record<string, string>>('nelson-definitions');

const judged = (values: readonly number[]) => values.map((value) => ({ value, center: 0, sigma: 1 }));
const episodesOf = (number: TestNumber, values: readonly number[]): TestEpisode[] =>
  nelsonTests(judged(values)).filter((episode) => episode.test === number);

/** Repeats the values until there are so many. */
const repeated = (values: readonly number[], count: number): number[] =>
  Array.from({ length: count }, (_, i) => values[i % values.length]!);

interface Pattern {
  readonly test: TestNumber;
  readonly side: Side;
  /** the shortest sequence that completes the pattern with its last point */
  readonly values: readonly number[];
}

const mirrored = (pattern: Pattern): Pattern => ({
  test: pattern.test,
  side: pattern.side === 'both' ? 'both' : 'below',
  values: pattern.values.map((value) => -value),
});

/** Points that break each pattern at once: zeros a run, equal neighbours a trend. */
function around(number: TestNumber): [readonly number[], readonly number[]] {
  if (number === 7) return [[1.5], [1.5, 1.5]];
  // The alternation begins with a fall and ends with one; a fall before and after it does not go on with it.
  if (number === 4)
    return [
      [0.6, 0.6],
      [-0.6, -0.6],
    ];
  return [
    [0, 0],
    [0, 0, 0],
  ];
}

const upward: Pattern[] = [
  { test: 1, side: 'above', values: [3.01] },
  { test: 2, side: 'above', values: repeated([0.2, 0.7, 0.1], 9) },
  { test: 3, side: 'above', values: [-1.2, -0.9, -0.1, 0.3, 0.4, 1.4] },
  { test: 4, side: 'both', values: repeated([0.5, -0.5], 14) },
  { test: 5, side: 'above', values: [2.4, 0.1, 2.1] },
  { test: 6, side: 'above', values: [1.2, 1.3, -0.4, 1.1, 1.5] },
  { test: 7, side: 'both', values: repeated([0.2, 0.4, -0.3, 0.9, -0.8], 15) },
  { test: 8, side: 'both', values: [1.2, -1.4, 1.1, 1.3, -1.2, -1.6, 1.9, -1.1] },
];
const patterns = [...upward, ...upward.filter(({ side }) => side === 'above').map(mirrored)];

describe(`the eight tests: ${definitions.cited}`, () => {
  for (const pattern of patterns) {
    const name = `test ${pattern.test} (${definitions.expected[pattern.test]}), ${pattern.side}`;
    const { values } = pattern;

    test(`${name}: fires exactly at the point that completes it`, () => {
      const last = values.length;
      expect(episodesOf(pattern.test, values)).toEqual([
        {
          test: pattern.test,
          side: pattern.side,
          point: last,
          members: [1, last],
          until: last,
          speaks: [4, 7, 8].includes(pattern.test) ? 'cut' : 'shift',
        },
      ]);
    });

    test(`${name}: one point short is no flag`, () => {
      expect(episodesOf(pattern.test, values.slice(0, -1))).toEqual([]);
      expect(episodesOf(pattern.test, values.slice(1))).toEqual([]);
    });

    test(`${name}: points before and after do not move it, and it ends with its condition`, () => {
      const [before, after] = around(pattern.test);
      const [episode, ...more] = episodesOf(pattern.test, [...before, ...values, ...after]);
      expect(more).toEqual([]);
      const last = values.length + before.length;
      expect(episode).toMatchObject({ point: last, members: [before.length + 1, last], until: last });
    });
  }
});

describe('what breaks a pattern', () => {
  test('a point on the centre line breaks a run of nine', () => {
    const run = repeated([0.3], 8);
    expect(episodesOf(2, [...run, 0, 0.3])).toEqual([]);
    expect(episodesOf(2, [...run.slice(4), 0, ...run, 0.3])).toMatchObject([{ point: 14, members: [6, 14] }]);
  });

  test('equal neighbours break a trend, and start a new one', () => {
    expect(episodesOf(3, [0.1, 0.2, 0.3, 0.3, 0.4, 0.5, 0.6])).toEqual([]);
    expect(episodesOf(3, [0.1, 0.2, 0.2, 0.3, 0.4, 0.5, 0.6, 0.7])).toMatchObject([{ point: 8, members: [3, 8] }]);
  });

  test('equal neighbours break an alternation', () => {
    const turns = repeated([0.5, -0.5], 13);
    expect(episodesOf(4, [...turns, 0.5, 0.5])).toHaveLength(0);
    expect(episodesOf(4, [...turns, turns.at(-1)!])).toHaveLength(0);
  });

  test('eight beyond 1 sigma all on one side are no mixture', () => {
    expect(episodesOf(8, repeated([1.5], 8))).toEqual([]);
    expect(episodesOf(8, repeated([-1.5], 12))).toEqual([]);
    expect(episodesOf(8, [...repeated([1.5], 7), -1.5])).toHaveLength(1);
  });

  test('two of three and four of five need one side', () => {
    expect(episodesOf(5, [2.5, -2.5])).toEqual([]);
    expect(episodesOf(5, [2.5, 0, -2.5])).toEqual([]);
    expect(episodesOf(6, [1.5, 1.5, 1.5, -1.5, -1.5])).toEqual([]);
  });

  test('two of two and four of four are enough, with no third and fifth before them', () => {
    expect(episodesOf(5, [2.5, 2.5])).toMatchObject([{ point: 2, members: [1, 2] }]);
    expect(episodesOf(6, repeated([1.5], 4))).toMatchObject([{ point: 4, members: [1, 4] }]);
  });
});

describe('beyond is strict', () => {
  test('a point exactly on a sigma line is not beyond it', () => {
    expect(episodesOf(1, [3, -3])).toEqual([]);
    expect(episodesOf(5, [2, 2, 2, -2, -2, -2])).toEqual([]);
    expect(episodesOf(6, repeated([1], 8))).toEqual([]);
    expect(episodesOf(8, repeated([1, -1], 8))).toEqual([]);
    // On the line at 1 sigma is still within it.
    expect(episodesOf(7, repeated([1, -1], 15))).toHaveLength(1);
  });

  test('a rate that lies exactly on a limit by arithmetic is not beyond it, however it was computed', () => {
    // p = 0.1, n = 100: sigma = 0.03, limits 0.01 and 0.19; p = 0.5, n = 36: limits 0.25 and 0.75
    for (const [center, n, on, beyond] of [
      [0.1, 100, 19, 20],
      [0.1, 100, 1, 0],
      [30 / 300, 100, 19, 20],
      [0.5, 36, 27, 28],
      [0.5, 36, 9, 8],
      [0.2, 400, 104, 105],
      [0.2, 400, 56, 55],
    ] as const) {
      const sigma = Math.sqrt((center * (1 - center)) / n);
      expect(Math.abs(zoneOf(on / n, center, sigma))).toBe(3);
      expect(Math.abs(zoneOf(beyond / n, center, sigma))).toBe(4);
    }
  });

  test('rates that are equal by arithmetic are equal: 3 of 30 and 10 of 100, 0.1 + 0.2 and 0.3', () => {
    expect(moveOf(3 / 30, 10 / 100)).toBe(0);
    expect(moveOf(0.1 + 0.2, 0.3)).toBe(0);
    expect(zoneOf(3 / 30, 0.1 + 0.2 - 0.2, 0.01)).toBe(0);
    expect(moveOf(3 / 30, 11 / 100)).toBe(1);
    expect(moveOf(11 / 100, 3 / 30)).toBe(-1);
    // One account more or less among a hundred million is a difference, not rounding.
    expect(moveOf(5e6 / 1e8, (5e6 + 1) / 1e8)).toBe(1);
  });
});

describe('episodes', () => {
  test('a long run is one episode that lasts as long as the run', () => {
    expect(episodesOf(2, [...repeated([0.4], 15), -0.4])).toMatchObject([{ point: 9, members: [1, 9], until: 15 }]);
  });

  test('a run that is broken and completed again is told twice', () => {
    const run = repeated([-0.4], 9);
    expect(episodesOf(2, [...run, 0, ...run]).map(({ point, side }) => [point, side])).toEqual([
      [9, 'below'],
      [19, 'below'],
    ]);
  });

  test('two of three still hold while the newest point is calm and both others are in the window', () => {
    expect(episodesOf(5, [2.5, 2.5, 0, 0])).toMatchObject([{ point: 2, until: 3 }]);
  });

  test('members of two of three and four of five begin with a point that is beyond', () => {
    expect(episodesOf(5, [0.5, 2.5, 2.5])).toMatchObject([{ point: 3, members: [2, 3] }]);
    expect(episodesOf(6, [0.5, 1.5, 1.5, 1.5, 1.5])).toMatchObject([{ point: 5, members: [2, 5] }]);
  });

  test('the members of a trend span its six points', () => {
    expect(episodesOf(3, [0.5, 0.1, 0.2, 0.3, 0.4, 0.45, 0.48, 0.2])).toMatchObject([
      { point: 7, members: [2, 7], until: 7, side: 'above' },
    ]);
  });

  test('episodes are told in the order in which they were completed', () => {
    const points = nelsonTests(judged([3.5, 3.5, ...repeated([0.5, -0.5], 20), -3.5])).map(({ point }) => point);
    expect(points).toEqual([...points].sort((a, b) => a - b));
    expect(points.length).toBeGreaterThan(3);
  });
});
