import { describe, expect, it } from 'vitest';
import { hazardByMonth } from '../../src/census/hazard.ts';
import { planCensus, recommendSize, recommendTenure } from '../../src/census/plan.ts';
import { chanceSeen, subgroupSizes } from '../../src/census/sizes.ts';
import { isoDay } from '../../src/days.ts';
import { day, exportReader } from '../accounts/exportFile.ts';

const files = exportReader();

/** mulberry32, so that every run draws the same. */
function drawer(seed: number): () => number {
  let state = seed;
  return () => {
    state = (state + 0x6d2b79f5) | 0;
    let t = Math.imul(state ^ (state >>> 15), 1 | state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}

function simulated(
  accounts: number,
  days: number,
  life: (random: () => number) => number,
): { content: string; asOf: number } {
  const random = drawer(99);
  const base = day('2022-01-01');
  const asOf = base + days;
  const rows = Array.from({ length: accounts }, (_, at) => {
    const start = base + Math.floor((at * days) / accounts);
    const end = start + life(random);
    return `k${at},${isoDay(start)},${end <= asOf ? isoDay(end) : ''}`;
  });
  return { content: `id,start,end\n${rows.join('\n')}\n`, asOf };
}

describe('subgroupSizes', () => {
  it('at 6 %: about 85 for five losses, 145 for a lower limit above zero', () => {
    expect(subgroupSizes(0.06)).toMatchObject({ fiveLosses: 85, positiveLowerLimit: 145 });
  });

  it.each([0.01, 0.06, 0.2, 0.5, 0.9])(
    'the size that sees a halving of %d does so in four of five cases, as a simulation agrees',
    (rate) => {
      const size = subgroupSizes(rate).seesHalving;
      const exact = chanceSeen(size, rate, rate / 2);
      expect(exact).toBeGreaterThanOrEqual(0.75);
      const random = drawer(5);
      const sigma = Math.sqrt((rate * (1 - rate)) / size);
      const runs = 1500;
      let seen = 0;
      for (let run = 0; run < runs; run++) {
        const z: number[] = [];
        for (let point = 0; point < 6; point++) {
          let lost = 0;
          for (let account = 0; account < size; account++) if (random() < rate / 2) lost++;
          z.push((lost / size - rate) / sigma);
          const below = (limit: number, last: number): number =>
            z.slice(-last).filter((one) => one < -limit - 1e-9).length;
          const newest = z.at(-1) ?? 0;
          if (
            newest < -3 - 1e-9 ||
            (newest < -2 - 1e-9 && below(2, 3) >= 2) ||
            (newest < -1 - 1e-9 && below(1, 5) >= 4)
          ) {
            seen++;
            break;
          }
        }
      }
      expect(Math.abs(seen / runs - exact)).toBeLessThan(4 * Math.sqrt((exact * (1 - exact)) / runs) + 0.001);
    },
  );
});

describe('recommendSize', () => {
  it('5,400 accounts at 6 %: 85, because the larger size would leave too few points', () => {
    const { subgroupSize, why } = recommendSize(5400, subgroupSizes(0.06));
    expect(subgroupSize).toBe(85);
    expect(why).toContain('145');
  });

  it('20,000 accounts at 6 %: the size with a lower limit above zero', () => {
    expect(recommendSize(20_000, subgroupSizes(0.06)).subgroupSize).toBe(145);
  });

  it('never more than 150 points', () => {
    for (const matured of [30_000, 100_000, 1_000_000])
      expect(matured / recommendSize(matured, subgroupSizes(0.06)).subgroupSize).toBeLessThanOrEqual(150);
  });
});

describe('planCensus', () => {
  it('reads just after the riskiest month', async () => {
    // one in ten leaves in the third month, hardly anybody else
    const { content, asOf } = simulated(8000, 900, (random) =>
      random() < 0.1 ? 75 : 400 + Math.floor(random() * 3000),
    );
    const plan = await files.with(content, { asOf }, (table) => planCensus(table, { settleDays: 0, asOf }));
    expect(plan.tenure).toEqual({ count: 3, unit: 'month' });
    expect(plan.tenureWhy).toContain('month 3');
    expect(plan.rate).toBeGreaterThan(0.08);
    expect(plan.sizeWhy).toMatch(/accounts a point.*week/);
  });

  it('an annual renewal is read at 12 months when enough accounts have got there', async () => {
    const { content, asOf } = simulated(8000, 1200, (random) => (random() < 0.25 ? 365 : 3000));
    const plan = await files.with(content, { asOf }, (table) => planCensus(table, { settleDays: 0, asOf }));
    expect(plan.tenure).toEqual({ count: 12, unit: 'month' });
  });

  it('keeps what was asked for, and says so', async () => {
    const { content, asOf } = simulated(500, 300, () => 60);
    const plan = await files.with(content, { asOf }, (table) =>
      planCensus(table, { settleDays: 0, asOf, tenure: { count: 6, unit: 'week' }, subgroupSize: 33 }),
    );
    expect(plan).toMatchObject({ tenure: { count: 6, unit: 'week' }, subgroupSize: 33, rate: 0 });
    expect(plan.tenureWhy).toContain('6 weeks, as asked');
  });

  it('few accounts, none of them lost, still give a plan', async () => {
    const { content, asOf } = simulated(30, 300, () => 5000);
    const plan = await files.with(content, { asOf, columns: { end: 'end' } }, (table) =>
      planCensus(table, { settleDays: 0, asOf }),
    );
    expect(plan.rate).toBe(0);
    expect(plan.subgroupSize).toBe(20);
    expect(plan.sizeWhy).toMatch(/nobody was lost so far/);
    expect(Number.isFinite(plan.sizes.positiveLowerLimit)).toBe(true);
  });
});

describe('hazardByMonth', () => {
  it('counts a month only for accounts observed through it', async () => {
    const content =
      'id,start,end\n1,2024-01-10,2024-02-10\n2,2024-01-10,2024-02-11\n3,2024-01-10,\n4,2024-03-20,2024-03-25\n';
    const counts = await files.with(content, { asOf: day('2024-04-10') }, (table) =>
      hazardByMonth(table, day('2024-04-10'), 0),
    );
    // account 4 has not been observed for a whole month: its loss is not counted
    expect(counts.months).toEqual([
      { month: 1, atRisk: 3, lost: 1 },
      { month: 2, atRisk: 2, lost: 1 },
      { month: 3, atRisk: 1, lost: 0 },
    ]);
  });

  it('an even hazard has no peak', () => {
    const months = Array.from({ length: 24 }, (_, at) => ({
      month: at + 1,
      atRisk: 5000 - at * 150,
      lost: 150 - at * 4,
    }));
    const byTenure = months.map(({ month }) => ({ matured: 5000, lost: month * 150 }));
    expect(recommendTenure({ months, byTenure }).why).toContain('evenly');
  });
});
