import * as fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { type Alarm, bernoulliCusum } from '../../../src/charts/sums/bernoulliCusum.ts';
import { type WatchSum, watchSteps } from '../../../src/charts/sums/watchSum.ts';
import { tabularCusum } from '../../support/tabularCusum.ts';

/** One account at a time. */
function plainly(sum: WatchSum, outcomes: readonly boolean[]) {
  let value = sum.start;
  let zeroAfter = 0;
  const values = [value];
  const alarms: Alarm[] = [];
  outcomes.forEach((lost, i) => {
    value = Math.max(0, value + (lost ? sum.lostStep : sum.keptStep));
    values.push(value);
    if (value === 0) zeroAfter = i + 1;
    if (value >= sum.limit) {
      const climb = alarms.at(-1);
      if (climb?.zeroAfter === zeroAfter) alarms[alarms.length - 1] = { ...climb, until: i + 1 };
      else alarms.push({ at: i + 1, until: i + 1, zeroAfter });
    }
  });
  return { values, alarms, zeroAfter };
}

const outcomes = fc
  .tuple(
    fc.double({ min: 0, max: 1, noNaN: true }),
    fc.array(fc.double({ min: 0, max: 1, noNaN: true }), { maxLength: 400 }),
  )
  .map(([rate, draws]) => Object.freeze(draws.map((u) => u < rate)));
const sums = fc
  .record({
    p0: fc.double({ min: 0.02, max: 0.9, noNaN: true }),
    factor: fc.constantFrom(0.5, 0.7, 1.5, 2),
    limit: fc.integer({ min: 1, max: 80 }),
    head: fc.double({ min: 0, max: 0.9, noNaN: true }),
  })
  .filter(({ p0, factor }) => p0 * factor < 0.98)
  .map(
    ({ p0, factor, limit, head }): WatchSum => ({
      ...watchSteps(p0, p0 * factor),
      limit,
      start: Math.floor(head * limit),
    }),
  );

const lossesOf = (lost: readonly boolean[]): number[] => lost.flatMap((gone, i) => (gone ? [i + 1] : []));

describe('the Bernoulli CUSUM over accounts', () => {
  test('jumping from loss to loss gives what going account by account gives: values, zeros, alarms', () => {
    fc.assert(
      fc.property(sums, outcomes, (sum, lost) => {
        const plain = plainly(sum, lost);
        const at = lost.map((_, i) => i + 1);
        const trace = bernoulliCusum(sum, Object.freeze(lossesOf(lost)), lost.length, [0, ...at]);
        expect(trace.values).toEqual(plain.values);
        expect(trace.value).toBe(plain.values.at(-1));
        expect(trace.zeroAfter).toBe(plain.zeroAfter);
        expect(trace.alarms).toEqual(plain.alarms);
      }),
      { numRuns: 400 },
    );
  });

  test('is the tabular CUSUM of zeros and ones around gamma', () => {
    fc.assert(
      fc.property(sums, outcomes, (sum, lost) => {
        const fresh = { ...sum, start: 0 };
        const { numerator, denominator } = sum.gamma;
        const { steps } = tabularCusum(
          lost.map((gone) => (gone ? 1 : 0)),
          numerator / denominator,
          1,
          0,
          1,
        );
        const { values } = bernoulliCusum(
          fresh,
          lossesOf(lost),
          lost.length,
          lost.map((_, i) => i + 1),
        );
        values.forEach((value, i) => {
          const step = steps[i]!;
          expect(value / denominator).toBeCloseTo(sum.direction === 'rise' ? step.up : step.down, 9);
        });
      }),
    );
  });

  test('counting kept accounts instead of lost ones and looking the other way gives the same sum', () => {
    fc.assert(
      fc.property(sums, outcomes, (sum, lost) => {
        const mirror: WatchSum = { ...sum, lostStep: sum.keptStep, keptStep: sum.lostStep };
        const kept = lost.map((gone) => !gone);
        expect(bernoulliCusum(mirror, lossesOf(kept), kept.length)).toEqual(
          bernoulliCusum(sum, lossesOf(lost), lost.length),
        );
      }),
    );
  });

  test('without accounts it stands where it starts and has raised nothing', () => {
    const sum: WatchSum = { ...watchSteps(0.06, 0.09), limit: 50, start: 25 };
    expect(bernoulliCusum(sum, [], 0, [0])).toEqual({ value: 25, zeroAfter: 0, alarms: [], values: [25] });
  });
});
