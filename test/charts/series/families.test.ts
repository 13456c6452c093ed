import * as fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { seededUniform } from '../../../src/charts/random/uniform.ts';
import { exponentialGaps, wholeDayGaps } from '../../../src/charts/series/exponential.ts';
import type { SeriesFamily, SeriesLevel } from '../../../src/charts/series/family.ts';
import { geometricGaps } from '../../../src/charts/series/geometric.ts';
import { normalIndividuals } from '../../../src/charts/series/normal.ts';
import { zoneOf } from '../../../src/charts/tests/zone.ts';
import { symmetricEdges, TAIL_AREAS, zoneBetween } from '../../../src/charts/tests/zoneEdges.ts';

/** Chance of a gap of k or more, from its definition: a binomial process, or a Poisson process cut into days by quadrature. */
const longer: Record<string, (k: number, mean: number) => number> = {
  geometric: (k, mean) => (mean / (mean + 1)) ** k,
  'whole-exponential': (k, mean) => {
    if (k <= 0) return 1;
    const steps = 2_000;
    let sum = 0;
    for (let i = 0; i < steps; i++) sum += Math.exp(-(k - (i + 0.5) / steps) / mean);
    return sum / steps;
  },
};

const discrete: SeriesFamily[] = [geometricGaps, wholeDayGaps];

describe('zones of gaps', () => {
  test.each(discrete)('end where the tail areas do: $name', (family) => {
    fc.assert(
      fc.property(fc.double({ min: 0.5, max: 400, noNaN: true }), (mean) => {
        const atLeast = longer[family.name]!;
        const edges = family.edges({ mean, sigma: mean });
        const close = 1e-6;
        expect(atLeast(edges.center + 1, mean)).toBeLessThan(0.5 + close);
        if (edges.center > 0) expect(atLeast(edges.center, mean)).toBeGreaterThan(0.5 - close);
        TAIL_AREAS.forEach((area, j) => {
          // The last value within: the next one has a tail no larger than the area, this one has more.
          expect(atLeast(edges.above[j]! + 1, mean)).toBeLessThan(area + close);
          if (edges.above[j]! > 0) expect(atLeast(edges.above[j]!, mean)).toBeGreaterThan(area - close);
          const atMost = (k: number): number => 1 - atLeast(k + 1, mean);
          expect(atMost(edges.below[j]!)).toBeGreaterThan(area - close);
          if (edges.below[j]! > 0) expect(atMost(edges.below[j]! - 1)).toBeLessThan(area + close);
        });
      }),
      { numRuns: 300 },
    );
  });

  test.each([...discrete, exponentialGaps])('lie in order, and rise with the mean: $name', (family) => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.01, max: 5_000, noNaN: true }),
        fc.double({ min: 1, max: 10, noNaN: true }),
        (mean, factor) => {
          const ends = (at: number): number[] => {
            const { below, center, above } = family.edges({ mean: at, sigma: at });
            return [below[2], below[1], below[0], center, ...above];
          };
          const low = ends(mean);
          const high = ends(mean * factor);
          low.forEach((end, i) => {
            expect(Number.isFinite(end)).toBe(true);
            if (i > 0 && i !== 3) expect(end).toBeGreaterThanOrEqual(low[i - 1]!);
            expect(high[i]!).toBeGreaterThanOrEqual(end);
          });
        },
      ),
      { numRuns: 300 },
    );
  });

  test('a zone between edges is the zone by sigma where the edges are those of sigma', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: -60, max: 60 }),
        fc.integer({ min: -10, max: 10 }),
        fc.integer({ min: 1, max: 9 }),
        (value, center, sigma) => {
          const scaled = [value / 7, center / 7, sigma / 7] as const;
          expect(zoneBetween(scaled[0], symmetricEdges(scaled[1], scaled[2]))).toBe(zoneOf(...scaled) + 0);
        },
      ),
      { numRuns: 1_000 },
    );
  });

  test('no gap is below a lower edge of 0', () => {
    // A gap of 0 has the chance 1/41, more than the two sigma tail but less than the one sigma one.
    const edges = geometricGaps.edges({ mean: 40, sigma: 40 });
    expect(edges.below).toEqual([6, 0, 0]);
    expect(zoneBetween(0, edges)).toBe(-2);
  });
});

describe('draws of a family', () => {
  const levels: [SeriesFamily, SeriesLevel][] = [
    [geometricGaps, { mean: 30, sigma: Math.sqrt(30 * 31) }],
    [geometricGaps, { mean: 0.7, sigma: Math.sqrt(0.7 * 1.7) }],
    [exponentialGaps, { mean: 8, sigma: 8 }],
    [normalIndividuals('more-churn'), { mean: 5, sigma: 2 }],
  ];
  test.each(levels)('have its mean and its standard deviation, which fit finds again: %o', (family, level) => {
    const uniform = seededUniform(404);
    const draw = family.sampler(level);
    const values = Array.from({ length: 40_000 }, () => draw(uniform));
    const found = family.fit(values)!;
    const error = level.sigma / Math.sqrt(values.length);
    expect(Math.abs(found.mean - level.mean)).toBeLessThan(4 * error);
    expect(Math.abs(found.sigma / level.sigma - 1)).toBeLessThan(0.03);
    const spread = Math.sqrt(values.reduce((sum, x) => sum + (x - found.mean) ** 2, 0) / values.length);
    expect(Math.abs(spread / level.sigma - 1)).toBeLessThan(0.03);
  });

  test('whole days between losses are those of a process that runs through the hours of the day', () => {
    const mean = 2.5;
    const uniform = seededUniform(405);
    const counts = new Map<number, number>();
    let time = uniform();
    let day = 0;
    const gaps = 100_000;
    for (let i = 0; i < gaps; i++) {
      time -= mean * Math.log(uniform());
      const gap = Math.floor(time) - day;
      day += gap;
      counts.set(gap, (counts.get(gap) ?? 0) + 1);
    }
    const drawn = new Map<number, number>();
    const draw = wholeDayGaps.sampler({ mean, sigma: mean });
    for (let i = 0; i < gaps; i++) {
      const gap = draw(uniform);
      drawn.set(gap, (drawn.get(gap) ?? 0) + 1);
    }
    for (let gap = 0; gap < 12; gap++) {
      const expected = longer['whole-exponential']!(gap, mean) - longer['whole-exponential']!(gap + 1, mean);
      const error = Math.sqrt((expected * (1 - expected)) / gaps);
      expect(Math.abs((counts.get(gap) ?? 0) / gaps - expected)).toBeLessThan(4 * error);
      expect(Math.abs((drawn.get(gap) ?? 0) / gaps - expected)).toBeLessThan(4 * error);
    }
  });

  test.each(levels)('never fall when the mean rises, on the same numbers: %o', (family, level) => {
    const lower = family.sampler(level);
    const higher = family.sampler(family.moved(level, 0.4));
    const [one, other] = [seededUniform(3), seededUniform(3)];
    for (let i = 0; i < 500; i++) expect(higher(other)).toBeGreaterThanOrEqual(lower(one));
  });
});

describe('log likelihoods', () => {
  const families: SeriesFamily[] = [geometricGaps, wholeDayGaps, exponentialGaps, normalIndividuals('more-churn')];
  const stretch = fc.array(fc.integer({ min: 0, max: 60 }), { minLength: 1, maxLength: 12 });

  test.each(families)('are highest at the level of the stretch itself: $name', (family) => {
    fc.assert(
      fc.property(stretch, fc.double({ min: 0.2, max: 90, noNaN: true }), (values, mean) => {
        const level = { mean, sigma: family.name === 'normal' ? 3 : mean };
        const sum = values.reduce((total, value) => total + value, 0);
        const best = family.maxLogLikelihood(values.length, sum, level);
        const own = family.levelOf(values.length, sum, level);
        expect(best).toBeGreaterThanOrEqual(
          family.logLikelihood(values.length, sum, level) - 1e-9 * (1 + Math.abs(best)),
        );
        if (own.mean > 0.5) {
          expect(family.logLikelihood(values.length, sum, own)).toBeCloseTo(best, 6);
        }
      }),
      { numRuns: 300 },
    );
  });

  test('of gaps are those of their definition, an unfinished gap being at least what it is', () => {
    fc.assert(
      fc.property(
        stretch,
        fc.integer({ min: 0, max: 80 }),
        fc.double({ min: 0.2, max: 60, noNaN: true }),
        (gaps, open, mean) => {
          const p = 1 / (mean + 1);
          const naive = gaps.reduce((sum, gap) => sum + Math.log(p * (1 - p) ** gap), 0) + open * Math.log(1 - p);
          const sum = gaps.reduce((total, gap) => total + gap, 0) + open;
          expect(geometricGaps.logLikelihood(gaps.length, sum, { mean, sigma: 1 })).toBeCloseTo(naive, 6);
        },
      ),
    );
  });

  test('values without a level are told, not divided by', () => {
    expect(geometricGaps.fit([0, 0, 0])).toBeNull();
    expect(geometricGaps.fit([])).toBeNull();
    expect(wholeDayGaps.fit([0, 0])).toBeNull();
    expect(normalIndividuals('more-churn').fit([4, 4, 4])).toBeNull();
    expect(normalIndividuals('more-churn').fit([4])).toBeNull();
    expect(wholeDayGaps.edges({ mean: 0, sigma: 0 })).toEqual({ center: 0, above: [0, 0, 0], below: [0, 0, 0] });
  });
});
