import { describe, expect, it } from 'vitest';
import { seededUniform } from '../../../src/charts/random/uniform.ts';
import { judgeRevenue, type RevenuePoint } from '../../../src/verdict/questions/revenue/judgeRevenue.ts';

/** One account in sixty pays about forty times what the others pay. */
const UNEVEN = [
  { amount: 10, accounts: 59 },
  { amount: 400, accounts: 1 },
];
const EVEN = [
  { amount: 10, accounts: 30 },
  { amount: 14, accounts: 30 },
];

type Amounts = readonly { readonly amount: number; readonly accounts: number }[];

function amountAt(amounts: Amounts, place: number): number {
  let left = place;
  for (const { amount, accounts } of amounts) {
    if (left < accounts) return amount;
    left -= accounts;
  }
  return amounts.at(-1)?.amount ?? 0;
}

/** Subgroups of n accounts, each lost with the rate of its point. */
function history(amounts: Amounts, rates: readonly number[], seed: number, size = 60): RevenuePoint[] {
  const uniform = seededUniform(seed);
  const all = amounts.reduce((sum, { accounts }) => sum + accounts, 0);
  return rates.map((rate) => {
    let [revenue, lostRevenue, lost, largest, largestLost] = [0, 0, 0, 0, 0];
    for (let i = 0; i < size; i++) {
      const amount = amountAt(amounts, uniform() * all);
      revenue += amount;
      largest = Math.max(largest, amount);
      if (uniform() >= rate) continue;
      lost++;
      lostRevenue += amount;
      largestLost = Math.max(largestLost, amount);
    }
    return { accounts: size, lost, revenue, lostRevenue, contraction: 0, expansion: 0, largest, largestLost };
  });
}

const steady = (points: number, rate = 0.08): number[] => Array.from({ length: points }, () => rate);
const HISTORIES = 40;

describe('revenue churn, judged', () => {
  it.each([
    ['even', EVEN],
    ['very uneven', UNEVEN],
  ] as const)('reads as moved seldom when nothing changed, with amounts that are %s', (_, amounts) => {
    let moved = 0;
    for (let seed = 1; seed <= HISTORIES; seed++) {
      const { finding } = judgeRevenue(history(amounts, steady(45), seed), amounts);
      if (finding === 'risen' || finding === 'fallen') moved++;
    }
    // 5 in 100 are promised: more than 6 of 40 would be seen once in 250 runs of a judge that keeps the promise.
    expect(moved).toBeLessThanOrEqual(6);
  });

  it('the odds it states are those of amounts as uneven as these: many more false flags than even amounts would give', () => {
    const every = (amounts: Amounts): number =>
      judgeRevenue(history(UNEVEN, steady(45), 2), amounts).trust.falseAlarmEvery ?? Number.NaN;
    expect(every(UNEVEN)).toBeLessThan(0.7 * every(EVEN));
  });

  it('sees churn double and halve, from about the point where it did', () => {
    const risen = judgeRevenue(history(EVEN, [...steady(30, 0.08), ...steady(15, 0.2)], 3), EVEN);
    expect(risen.finding).toBe('risen');
    expect(Math.abs((risen.series?.start?.first ?? 0) - 31)).toBeLessThanOrEqual(2);
    expect(risen.signals.some(({ state }) => state === 'standing')).toBe(true);
    const fallen = judgeRevenue(history(EVEN, [...steady(30, 0.2), ...steady(15, 0.06)], 4), EVEN);
    expect(fallen.finding).toBe('fallen');
    expect(fallen.signals.filter(({ state }) => state === 'standing').every(({ side }) => side === 'below')).toBe(true);
  });

  it('the chart has the limits of the values it was judged by', () => {
    const { chart, series } = judgeRevenue(history(EVEN, steady(40), 5), EVEN);
    expect(chart?.center).toBe(series?.frame.level.mean);
    expect(chart?.points[0]?.sigma).toBe(series?.frame.level.sigma);
    expect(chart?.baseline.last).toBe(series?.frame.baselineLast);
  });

  it.each([
    ['no point', () => [], 'too-few-points'],
    ['one point', () => history(EVEN, [0.1], 1), 'too-few-points'],
    ['eleven points', () => history(EVEN, steady(11), 1), 'too-few-points'],
    ['nothing lost', () => history(EVEN, steady(20, 0), 1), 'no-level'],
    ['everything lost', () => history(EVEN, steady(20, 1.1), 1), 'no-level'],
  ] as const)('%s: nothing can be told, and nothing is no number', (_, points, finding) => {
    const judged = judgeRevenue(points(), EVEN);
    expect(judged.finding).toBe(finding);
    expect(JSON.stringify(judged)).not.toMatch(/NaN|Infinity/);
    for (const point of judged.chart?.points ?? []) expect(Number.isFinite(point.upper)).toBe(true);
  });

  it('a move inside the baseline is no level to judge by', () => {
    const { finding, series } = judgeRevenue(
      history(EVEN, [...steady(8, 0.05), ...steady(18, 0.3), ...steady(20, 0.05)], 6),
      EVEN,
    );
    expect(finding).toBe('unsteady-baseline');
    expect(series?.checks?.splitAfter).toBe(8);
  });
});
