import { describe, expect, test } from 'vitest';
import type { SegmentCounts } from '../../src/census/types.ts';
import { readMix } from '../../src/verdict/mix.ts';

const segment = (name: string, before: [number, number], after: [number, number]): SegmentCounts => ({
  segment: name,
  accounts: [before[0], after[0]],
  lost: [before[1], after[1]],
});
/** One point before and one after. */
const read = (segments: readonly SegmentCounts[], threshold = 5) => readMix(segments, 2, 2, 1, threshold);

describe('is it the mix?', () => {
  test('yes, wholly, when every group keeps its rate', () => {
    const mix = read([segment('Windowsill', [900, 45], [300, 15]), segment('Orchard', [100, 20], [700, 140])])!;
    expect(mix.explains).toBe('all');
    expect(mix.within.difference).toBeCloseTo(0, 12);
    expect(mix.pooledDifference).toBeCloseTo(0.155 - 0.065, 12);
    expect(mix.largest).toMatchObject({ before: expect.any(Number), after: expect.any(Number) });
  });

  test('yes, when the groups moved the other way than their sum', () => {
    // Both fall, the sum rises.
    const mix = read([segment('Windowsill', [900, 45], [300, 12]), segment('Orchard', [100, 20], [700, 126])])!;
    expect(mix.pooledDifference).toBeGreaterThan(0);
    expect(mix.within.difference).toBeLessThan(0);
    expect(mix.explains).toBe('all');
  });

  test('yes, even when the groups’ own move the other way would stand by itself', () => {
    const mix = read([segment('Windowsill', [9000, 450], [3000, 90]), segment('Orchard', [1000, 300], [7000, 1750])])!;
    expect(mix.pooledDifference).toBeGreaterThan(0);
    expect(mix.within.difference).toBeLessThan(0);
    expect(mix.within.chiSquare / 2).toBeGreaterThan(5);
    expect(mix.explains).toBe('all');
  });

  test('no, when the shares stay and every group moves', () => {
    const mix = read([segment('Windowsill', [600, 30], [600, 72]), segment('Orchard', [400, 40], [400, 80])])!;
    expect(mix.explains).toBe('none');
    expect(mix.within.difference).toBeCloseTo(mix.pooledDifference, 12);
  });

  test('no, when little is left to the mix even if the groups by themselves prove nothing', () => {
    const mix = read([segment('Windowsill', [600, 30], [590, 40]), segment('Orchard', [400, 40], [410, 53])], 50)!;
    expect(mix.within.chiSquare / 2).toBeLessThan(50);
    expect(mix.explains).toBe('none');
  });

  test('unclear, when more than half but not nearly all is left and it does not stand by itself', () => {
    const mix = read([segment('Windowsill', [800, 40], [700, 49]), segment('Orchard', [200, 40], [300, 69])], 50)!;
    const left = mix.within.difference / mix.pooledDifference;
    expect(left).toBeGreaterThan(0.5);
    expect(left).toBeLessThan(0.8);
    expect(mix.explains).toBe('unclear');
  });

  test('names the group whose share changed most', () => {
    const mix = read([
      segment('Windowsill', [500, 25], [450, 22]),
      segment('Allotment', [400, 40], [150, 15]),
      segment('Orchard', [100, 20], [400, 80]),
    ])!;
    expect(mix.largest).toEqual({ segment: 'Orchard', before: 0.1, after: 0.4 });
  });

  test('has no answer without two groups on both sides, or with nobody lost', () => {
    expect(read([])).toBeNull();
    expect(read([segment('Windowsill', [500, 25], [450, 22])])).toBeNull();
    expect(read([segment('Windowsill', [500, 25], [450, 22]), segment('Orchard', [0, 0], [50, 9])])).toBeNull();
    expect(read([segment('Windowsill', [500, 0], [450, 0]), segment('Orchard', [10, 0], [50, 0])])).toBeNull();
  });
});
