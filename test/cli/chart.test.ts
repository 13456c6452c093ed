import { describe, expect, it } from 'vitest';
import checkValues from '../published/checkValues.json' with { type: 'json' };
import { runEbb } from './runEbb.ts';

const wafers = checkValues.entries.find((entry) => entry.id === 'p-nist-wafer')!.inputs.counts as number[];

describe('ebb chart on ready counts', () => {
  it('gives the published centre line and limits of the wafer p chart', async () => {
    // NIST/SEMATECH e-Handbook of Statistical Methods, section 6.3.3.2: 0.2313, limits 0.0524 and 0.4102.
    const run = await runEbb('chart', '--counts', wafers.join(','), '--sizes', '50', '--json');
    expect(run.code).toBe(0);
    const { chart } = JSON.parse(run.stdout);
    expect(chart.center).toBeCloseTo(0.2313, 4);
    expect(chart.points[0].lower).toBeCloseTo(0.0524, 4);
    expect(chart.points[0].upper).toBeCloseTo(0.4102, 4);
    expect(
      chart.signals
        .filter((signal: { test: number }) => signal.test === 1)
        .map((signal: { point: number }) => signal.point),
    ).toEqual([15, 23]);
  });

  it('takes one size for each count', async () => {
    const run = await runEbb('chart', '--counts', '12,8,6', '--sizes', '100,80,80', '--json');
    const { chart, verdict } = JSON.parse(run.stdout);
    expect(chart.subgroupSize).toBeNull();
    expect(chart.points.map((point: { accounts: number }) => point.accounts)).toEqual([100, 80, 80]);
    expect(verdict.outcome).toBe('too-early');
  });

  for (const [name, args, words] of [
    ['no counts', ['chart', '--sizes', '50'], '--counts is missing'],
    ['a count that is no number', ['chart', '--counts', '3,x,5', '--sizes', '50'], 'entry 2: "x"'],
    ['more lost than there are', ['chart', '--counts', '3,60', '--sizes', '50'], 'entry 2: 60 lost of 50'],
    [
      'lists of different length',
      ['chart', '--counts', '3,4,5', '--sizes', '50,60'],
      '--sizes has 2 entries and --counts has 3',
    ],
  ] as const) {
    it(`refuses ${name}`, async () => {
      const run = await runEbb(...args, '--json');
      expect(run.code).toBe(2);
      expect(JSON.parse(run.stdout).error.message).toContain(words);
    });
  }

  for (const [name, counts, sizes] of [
    ['nobody lost', '0,0,0,0,0,0,0,0,0,0,0,0,0,0', '20'],
    ['everybody lost', '20,20,20,20,20,20,20,20,20,20,20,20,20', '20'],
    ['a single point', '3', '20'],
    ['one account a point', '1,0,0,1,0,0,0,0,1,0,0,0,0,0,1', '1'],
  ] as const) {
    it(`answers in words when there is ${name}`, async () => {
      const run = await runEbb('chart', '--counts', counts, '--sizes', sizes);
      expect(run.code).toBe(0);
      expect(run.stdout).not.toMatch(/NaN|Infinity|undefined/);
      expect(run.stdout.length).toBeGreaterThan(60);
    });
  }
});

describe('ebb chart --chart', () => {
  const run = async (...args: string[]) =>
    JSON.parse((await runEbb('chart', '--counts', wafers.join(','), '--sizes', '50', '--json', ...args)).stdout);

  it('draws the plain p chart unless told, and says that the points vary too much for it', async () => {
    const { chart, verdict } = await run();
    expect(chart.kind).toBe('p');
    expect(verdict.cautions.join(' ')).toMatch(/overdispersion/);
  });

  it('auto takes the p-prime chart for counts that clearly vary more than the binomial; p-prime always does', async () => {
    for (const kind of ['auto', 'p-prime']) {
      const { chart } = await run('--chart', kind);
      expect(chart.kind).toBe('p-prime');
      // NIST/SEMATECH e-Handbook 6.3.3.2 wafers: sigma_z 1.660867, recomputed.
      expect(chart.sigmaZ).toBeCloseTo(1.660867, 4);
    }
  });
});
