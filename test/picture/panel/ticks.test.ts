import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { dayFromIso } from '../../../src/days.ts';
import { dateTickChoices, niceDomain, niceTicks, wordedTicks } from '../../../src/picture/panel/ticks.ts';

const words = (values: readonly number[], figures: 'percent' | 'count' | 'number') =>
  wordedTicks(values, figures).map((tick) => tick.lines[0]);

describe('ticks', () => {
  test('are multiples of a round step inside the span, and never more than wanted and one', () => {
    fc.assert(
      fc.property(
        fc.double({ min: -1e6, max: 1e6, noNaN: true }),
        fc.double({ min: 1e-5, max: 1e6, noNaN: true }),
        fc.integer({ min: 1, max: 10 }),
        (low, span, wanted) => {
          const high = low + span;
          fc.pre(high - low > 1e-9 * Math.abs(low));
          const ticks = niceTicks(low, high, wanted);
          expect(ticks.length).toBeLessThanOrEqual(wanted + 1);
          for (const tick of ticks) {
            expect(tick).toBeGreaterThanOrEqual(low - 1e-9 * span - 1e-9 * Math.abs(low));
            expect(tick).toBeLessThanOrEqual(high + 1e-9 * span + 1e-9 * Math.abs(high));
          }
        },
      ),
    );
  });

  test('counts have no ticks between whole numbers', () => {
    expect(niceTicks(0, 1.5, 8, 'count')).toEqual([0, 1]);
    expect(niceTicks(0, 10, 4, 'count').every(Number.isInteger)).toBe(true);
  });

  test('a widened domain holds the values and has a span even when they are equal', () => {
    fc.assert(
      fc.property(
        fc.double({ min: -1e4, max: 1e4, noNaN: true }),
        fc.double({ min: 0, max: 1e4, noNaN: true }),
        (low, span) => {
          const [from, to] = niceDomain(low, low + span);
          expect(from).toBeLessThanOrEqual(low + 1e-5);
          expect(to).toBeGreaterThanOrEqual(low + span - 1e-5);
          expect(to).toBeGreaterThan(from);
        },
      ),
    );
  });

  test('have as many decimals as their distance needs', () => {
    expect(words([0, 0.05, 0.1], 'percent')).toEqual(['0\u00a0%', '5\u00a0%', '10\u00a0%']);
    expect(words([0, 0.025, 0.05], 'percent')).toEqual(['0\u00a0%', '2.5\u00a0%', '5.0\u00a0%']);
    expect(words([-2, 0, 2], 'number')).toEqual(['−2', '0', '2']);
    expect(words([0, 1000, 2000], 'count')).toEqual(['0', '1,000', '2,000']);
    expect(words([0, 0.25, 0.5], 'number')).toEqual(['0', '0.25', '0.50']);
  });

  test('dates are marked at first days of months, the year where it changes', () => {
    const choices = dateTickChoices(dayFromIso('2024-11-10')!, dayFromIso('2025-05-20')!);
    expect(choices[0]?.map((tick) => tick.lines)).toEqual([
      ['Dec', '2024'],
      ['Jan', '2025'],
      ['Feb'],
      ['Mar'],
      ['Apr'],
      ['May'],
    ]);
  });
});
