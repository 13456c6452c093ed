import { describe, expect, it } from 'vitest';
import { vagueStart } from '../../src/verdict/words/vagueStart.ts';

const dates = Array.from({ length: 30 }, (_, i) => ({
  firstStart: 20_000 + 14 * i,
  lastStart: 20_013 + 14 * i,
  asOf: null,
}));
const since = (from: number, to: number) => ({
  point: from,
  start: dates[from - 1]!.firstStart,
  candidates: [from, to] as const,
});

describe('a start that is known badly', () => {
  it('is a range from the first start at the first possible point to the last at the last', () => {
    expect(vagueStart(since(9, 28), dates)).toEqual([20_000 + 14 * 8, 20_013 + 14 * 27]);
  });
  it('is no range where a few months at most are open, nor without dates', () => {
    expect(vagueStart(since(9, 12), dates)).toBeNull();
    const none = dates.map(() => ({ firstStart: null, lastStart: null, asOf: null }));
    expect(vagueStart(since(1, 30), none)).toBeNull();
  });
});
