import * as fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { type GroupCounts, kitagawa } from '../../src/charts/mix/kitagawa.ts';
import { binomialSampler } from '../../src/charts/random/binomialSampler.ts';
import { seededUniform } from '../../src/charts/random/uniform.ts';

const side = fc
  .integer({ min: 0, max: 5_000 })
  .chain((accounts) => fc.record({ accounts: fc.constant(accounts), lost: fc.integer({ min: 0, max: accounts }) }));
const groups = fc.array(fc.record({ before: side, after: side }), { minLength: 1, maxLength: 14 });
const close = (a: number, b: number): void => expect(Math.abs(a - b)).toBeLessThan(1e-12);
const has = (list: readonly GroupCounts[], when: 'before' | 'after'): boolean =>
  list.some((group) => group[when].accounts > 0);

describe('rate part and mix part', () => {
  test('add up to the whole change, together and group by group, for any counts', () => {
    fc.assert(
      fc.property(groups, (list) => {
        const found = kitagawa(Object.freeze(list));
        if (!has(list, 'before') || !has(list, 'after')) {
          expect(found).toBeNull();
          return;
        }
        close(found!.after - found!.before, found!.difference);
        close(found!.ratePart + found!.mixPart, found!.difference);
        close(
          found!.groups.reduce((sum, group) => sum + group.ratePart + group.mixPart, 0),
          found!.difference,
        );
        for (const value of [found!.ratePartLow, found!.ratePartHigh]) expect(Number.isFinite(value)).toBe(true);
      }),
    );
  });

  test('the other way round in time both parts only change their sign', () => {
    fc.assert(
      fc.property(groups, (list) => {
        const there = kitagawa(list);
        const back = kitagawa(list.map(({ before, after }) => ({ before: after, after: before })));
        if (!there || !back) return;
        close(there.ratePart, -back.ratePart);
        close(there.mixPart, -back.mixPart);
      }),
    );
  });

  test('with the same shares before and after there is no mix part, and with the same rates no rate part', () => {
    const size = fc.integer({ min: 1, max: 60 });
    fc.assert(
      fc.property(fc.array(fc.tuple(size, size, size), { minLength: 2, maxLength: 9 }), size, (list, times) => {
        const sameShares = kitagawa(
          list.map(([n, d, e]) => ({
            before: { accounts: n, lost: Math.min(n, d) },
            after: { accounts: n * times, lost: Math.min(n * times, e) },
          })),
        )!;
        close(sameShares.mixPart, 0);
        close(sameShares.ratePart, sameShares.difference);
        const sameRates = kitagawa(
          list.map(([n, d, e]) => ({
            before: { accounts: 60 * n, lost: n * d },
            after: { accounts: 60 * e, lost: e * d },
          })),
        )!;
        close(sameRates.ratePart, 0);
        close(sameRates.mixPart, sameRates.difference);
      }),
    );
  });

  test('a group that grows counts as a fall when it loses less than all together, and as a rise when it loses more', () => {
    const found = kitagawa([
      { before: { accounts: 100, lost: 10 }, after: { accounts: 300, lost: 30 } },
      { before: { accounts: 100, lost: 30 }, after: { accounts: 100, lost: 30 } },
    ])!;
    expect(found.before).toBe(0.2);
    expect(found.after).toBe(0.15);
    close(found.ratePart, 0);
    close(found.mixPart, -0.05);
    expect(found.groups.every((group) => group.mixPart < 0)).toBe(true);
  });

  test('a group that is new, or gone, changes the mix only', () => {
    const found = kitagawa([
      { before: { accounts: 100, lost: 10 }, after: { accounts: 100, lost: 10 } },
      { before: { accounts: 0, lost: 0 }, after: { accounts: 100, lost: 30 } },
    ])!;
    expect(found.groups[1]).toMatchObject({ rateBefore: null, rateAfter: 0.3, ratePart: 0 });
    close(found.ratePart, 0);
    close(found.mixPart, 0.1);
  });

  test('the 95 % limits of the rate part hold the true one in about 95 of 100 cases', () => {
    const uniform = seededUniform(7);
    const rates = [0.05, 0.12, 0.3];
    const counts = { before: [400, 300, 200], after: [200, 400, 500] };
    const truth = rates.reduce(
      (sum, _, i) => sum + 0.02 * (counts.before[i]! / 900 + counts.after[i]! / 1_100) * 0.5,
      0,
    );
    const cases = 3_000;
    let held = 0;
    for (let i = 0; i < cases; i++) {
      const found = kitagawa(
        rates.map((rate, k) => {
          const [n, m] = [counts.before[k]!, counts.after[k]!];
          return {
            before: { accounts: n, lost: binomialSampler(n, rate).draw(uniform) },
            after: { accounts: m, lost: binomialSampler(m, rate + 0.02).draw(uniform) },
          };
        }),
      )!;
      if (found.ratePartLow <= truth && truth <= found.ratePartHigh) held++;
    }
    expect(Math.abs(held / cases - 0.95)).toBeLessThan(0.015);
  });
});
