import { describe, expect, test } from 'vitest';
import { rounded, sizeThatReachesLimit, subgroupSizes } from '../../src/census/sizes.ts';
import { pChart } from '../../src/charts/kinds/pChart.ts';
import { binomialChances } from '../../src/charts/random/binomialChances.ts';
import { exactRunLength } from '../../src/charts/runLength/exactRunLength.ts';
import { countZones } from '../../src/charts/runLength/zoneChances.ts';
import { nelsonTests } from '../../src/charts/tests/nelsonTests.ts';
import { zoneOf } from '../../src/charts/tests/zone.ts';
import type { Chart, SubgroupCount } from '../../src/charts/types.ts';
import { calendarCautions } from '../../src/verdict/words/viewCautions.ts';
import { checkValue, checkValues } from './checkValues.ts';

interface EqualSizes {
  counts: number[];
  n: number;
}
interface UnequalSizes {
  D: number[];
  n: number[];
}

const equal = ({ counts, n }: EqualSizes): SubgroupCount[] => counts.map((lost) => ({ accounts: n, lost }));
const unequal = ({ D, n }: UnequalSizes): SubgroupCount[] => D.map((lost, i) => ({ accounts: n[i]!, lost }));

function outside(chart: Chart): number[] {
  return chart.points
    .filter((point) => Math.abs(zoneOf(point.value, chart.center, point.sigma)) === 4)
    .map((point) => point.index);
}

function outsideByTestOne(chart: Chart): number[] {
  return nelsonTests(chart.points.map(({ value, sigma }) => ({ value, sigma, center: chart.center })))
    .filter((episode) => episode.test === 1)
    .map((episode) => episode.point);
}

const near = (actual: number, expected: number, tolerance: number): void =>
  expect(Math.abs(actual - expected), `${actual} is not within ${tolerance} of ${expected}`).toBeLessThanOrEqual(
    tolerance,
  );

const wafers = checkValue<EqualSizes, { sum: number; p: number; lcl: number; ucl: number; out: number[] }>(
  'p-nist-wafer',
);
const revised = checkValue<EqualSizes & { exclude: number[] }, { p: number; lcl: number; ucl: number; out: number[] }>(
  'p-oj-revised',
);
const later = checkValue<EqualSizes, { sum: number; p: number; ucl: number; below_rev: number[] }>('p-oj-after');

describe('p chart with equal sizes', () => {
  test(`the thirty wafers have the published centre line and limits, and wafers 15 and 23 outside: ${wafers.cited}`, () => {
    const chart = pChart(equal(wafers.inputs));
    expect(chart.baseline).toMatchObject({ first: 1, last: 30, lost: wafers.expected.sum, provisional: false });
    expect(chart.subgroupSize).toBe(50);
    near(chart.center, wafers.expected.p, wafers.tolerance);
    for (const point of chart.points) {
      near(point.lower, wafers.expected.lcl, wafers.tolerance);
      near(point.upper, wafers.expected.ucl, wafers.tolerance);
    }
    expect(outside(chart)).toEqual(wafers.expected.out);
    expect(outsideByTestOne(chart)).toEqual(wafers.expected.out);
  });

  test(`without 15 and 23 the limits are the revised ones, and 21 falls outside too: ${revised.cited}`, () => {
    const chart = pChart(equal(revised.inputs), { excluded: revised.inputs.exclude });
    expect(chart.baseline.excluded).toEqual([15, 23]);
    near(chart.center, revised.expected.p, revised.tolerance);
    near(chart.points[0]!.lower, revised.expected.lcl, revised.tolerance);
    near(chart.points[0]!.upper, revised.expected.ucl, revised.tolerance);
    expect(outside(chart)).toEqual(revised.expected.out);
  });

  test(`of 24 later samples only 41 is below the revised limits, and they lie on one side for long: ${later.cited}`, () => {
    const chart = pChart([...equal(revised.inputs), ...equal(later.inputs)], {
      baselineLast: 30,
      excluded: revised.inputs.exclude,
    });
    near(chart.center, revised.expected.p, revised.tolerance);
    expect(outside(chart).filter((point) => point > 30)).toEqual(later.expected.below_rev);
    const alone = pChart(equal(later.inputs));
    expect(alone.baseline).toMatchObject({ lost: later.expected.sum, provisional: true });
    near(alone.center, later.expected.p, later.tolerance);
    expect(alone.points[0]!.lower).toBe(0);
    near(alone.points[0]!.upper, later.expected.ucl, later.tolerance);
  });
});

interface Limits {
  sumD: number;
  sumN: number;
  p: number;
  lcl: number[];
  ucl: number[];
  z?: number[];
  out: number[];
}

describe('p chart with unequal sizes', () => {
  for (const id of ['p-purchase-order', 'p-motors']) {
    const orders = checkValue<UnequalSizes, Limits>(id);
    test(`${id}: each point has the limits of its own size, and just the published points are outside: ${orders.cited}`, () => {
      const chart = pChart(unequal(orders.inputs));
      expect(chart.subgroupSize).toBeNull();
      expect(chart.baseline).toMatchObject({ lost: orders.expected.sumD, accounts: orders.expected.sumN });
      near(chart.center, orders.expected.p, orders.tolerance);
      expect(chart.points).toHaveLength(orders.expected.lcl.length);
      chart.points.forEach((point, i) => {
        near(point.lower, orders.expected.lcl[i]!, orders.tolerance);
        near(point.upper, orders.expected.ucl[i]!, orders.tolerance);
        near(point.sigma, Math.sqrt((chart.center * (1 - chart.center)) / orders.inputs.n[i]!), 1e-15);
        if (orders.expected.z) near((point.value - chart.center) / point.sigma, orders.expected.z[i]!, 1e-4);
      });
      expect(outside(chart)).toEqual(orders.expected.out);
    });
  }

  const average = checkValue<{ nbar: number }, { p_exact: { lcl: number; ucl: number }; out: number[] }>(
    'p-purchase-order-avg',
  );
  test(`limits on the average size would hide the purchase orders' point 11: ${average.cited}`, () => {
    const orders = checkValue<UnequalSizes, Limits>('p-purchase-order');
    const own = pChart(unequal(orders.inputs));
    const sigma = Math.sqrt((own.center * (1 - own.center)) / average.inputs.nbar);
    near(own.center - 3 * sigma, average.expected.p_exact.lcl, average.tolerance);
    near(own.center + 3 * sigma, average.expected.p_exact.ucl, average.tolerance);
    const byAverage = own.points.filter(({ value }) => Math.abs(zoneOf(value, own.center, sigma)) === 4);
    expect(byAverage).toEqual(average.expected.out);
    expect(outside(own)).toEqual([11]);
  });
});

describe('sizes that differ too much for one pair of limits', () => {
  const { expected, cited } = checkValue<unknown, { threshold: number }>('p-avg-n-rule');
  test(`months of a calendar call for a word once one is more than 25 % from their mean: ${cited}`, () => {
    const off = (part: number): number[] => [1_000 * (1 + part), 1_000 * (1 - part)];
    const told = (sizes: readonly number[]): boolean =>
      calendarCautions({ sizes, passed: 0 }).some((caution) => caution.includes('from their mean'));
    expect(told(off(expected.threshold))).toBe(false);
    expect(told(off(expected.threshold + 0.001))).toBe(true);
    // Every size of the purchase orders is within it, and still limits on the average size hide point 11 (above).
    expect(told(checkValue<UnequalSizes, Limits>('p-purchase-order').inputs.n)).toBe(false);
  });
});

describe('smallest size with a lower limit above zero', () => {
  for (const entry of checkValues<
    { p: number },
    { smallest_n: number; positive_lcl_bound: number; np5: number; n95_atleast1: number }
  >('nmin-p')) {
    test(`p = ${entry.inputs.p}: n = ${entry.expected.smallest_n}, and one less has none: ${entry.cited}`, () => {
      const lower = (accounts: number): number =>
        pChart(
          [
            { accounts: 10_000, lost: Math.round(10_000 * entry.inputs.p) },
            { accounts, lost: 0 },
          ],
          { baselineLast: 1 },
        ).points[1]!.lower;
      expect(lower(entry.expected.smallest_n)).toBeGreaterThan(1e-9);
      expect(lower(entry.expected.positive_lcl_bound)).toBeLessThan(1e-15);
      expect(entry.expected.smallest_n).toBe(entry.expected.positive_lcl_bound + 1);
    });

    test(`p = ${entry.inputs.p}: the sizes that are offered are these, rounded up`, () => {
      const { fiveLosses, positiveLowerLimit } = subgroupSizes(entry.inputs.p);
      expect(fiveLosses).toBe(rounded(entry.expected.np5));
      expect(positiveLowerLimit).toBe(rounded(entry.expected.smallest_n));
    });

    test(`p = ${entry.inputs.p}: ${entry.expected.n95_atleast1} accounts hold at least one loss in 95 of 100 cases, one fewer does not`, () => {
      const none = (size: number): number => binomialChances(size, entry.inputs.p).chances[0]!;
      expect(binomialChances(entry.expected.n95_atleast1, entry.inputs.p).first).toBe(0);
      expect(none(entry.expected.n95_atleast1)).toBeLessThanOrEqual(0.05);
      expect(none(entry.expected.n95_atleast1 - 1)).toBeGreaterThan(0.05);
    });
  }

  const { inputs, expected, tolerance, cited } = checkValue<
    { p: number; delta: number },
    { n_exact: number; n: number; exact_power_at_56_p05: number }
  >('nmin-duncan');
  test(`the size at which a rise reaches the upper limit, and how often the next point then lies beyond it: ${cited}`, () => {
    const { p, delta } = inputs;
    near(sizeThatReachesLimit(p, delta), expected.n_exact, tolerance);
    expect(Math.ceil(sizeThatReachesLimit(p, delta))).toBe(expected.n);
    const zones = countZones({ size: expected.n, center: p, rate: p + delta, sigmaZ: 1, correlation: 0 });
    near(exactRunLength(zones, [1]).within(1), expected.exact_power_at_56_p05, tolerance);
  });
});
