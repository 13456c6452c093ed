import * as fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { ewmaChart, USUAL_SMOOTHING } from '../../src/charts/kinds/ewmaChart.ts';
import { binomialSampler } from '../../src/charts/random/binomialSampler.ts';
import { seededUniform } from '../../src/charts/random/uniform.ts';
import { ewmaRunLength } from '../../src/charts/runLength/ewmaRunLength.ts';
import { smoothedRunLength } from '../../src/charts/runLength/smoothedRunLength.ts';
import { lastBlockFinder } from '../../src/charts/standing/lastBlock.ts';
import { standingJudge } from '../../src/charts/standing/standing.ts';
import { standingThreshold } from '../../src/charts/standing/threshold.ts';
import { smoothedFlags } from '../../src/charts/tests/smoothedFlags.ts';
import { chartAndJudge } from '../../src/verdict/chartAndJudge.ts';
import { frozen, history } from './arbitraries.ts';

const { width } = USUAL_SMOOTHING;

/** The judge put together from the chart itself, its flags and the block: another way to the same. */
function byTheChart(accounts: readonly number[], baselineLast: number, lost: ArrayLike<number>) {
  const counts = accounts.map((n, i) => ({ accounts: n, lost: lost[i]! }));
  const chart = ewmaChart(counts, { baselineLast });
  const judgedFrom = baselineLast >= accounts.length ? 0 : baselineLast;
  const flags = smoothedFlags(chart.points, chart.center, width).filter(({ until }) => until > judgedFrom);
  const blocks = lastBlockFinder({ accounts, baselineLast, excluded: [] })(lost);
  const score = (side: 'above' | 'below') =>
    flags.some((flag) => flag.side === side && flag.until >= blocks[side].first) ? blocks[side].ratio : 0;
  return { above: score('above'), below: score('below') };
}

describe('flags of a smoothed share', () => {
  test('are the points beyond their limits, in stretches', () => {
    fc.assert(
      fc.property(history(2), (counts) => {
        const { points, center } = ewmaChart(counts);
        const flags = smoothedFlags(points, center, width);
        const flagged = flags.flatMap(({ point, until, side }) =>
          Array.from({ length: until - point + 1 }, (_, i) => [point + i, side] as const),
        );
        for (const point of points) {
          const side = flagged.find(([index]) => index === point.index)?.[1];
          if (point.value > point.upper + 1e-12) expect(side).toBe('above');
          else if (point.value < point.lower - 1e-12) expect(side).toBe('below');
          else if (Math.min(point.upper - point.value, point.value - point.lower) > 1e-12) expect(side).toBeUndefined();
        }
      }),
    );
  });

  test('decide in the standing judge as they do on the chart', () => {
    fc.assert(
      fc.property(history(14), fc.integer({ min: 8, max: 14 }), (counts, baselineLast) => {
        const accounts = counts.map((count) => count.accounts);
        const lost = counts.map((count) => count.lost);
        const level = counts.slice(0, baselineLast);
        const all = level.reduce((sum, count) => sum + count.lost, 0);
        fc.pre(all > 0 && all < level.reduce((sum, count) => sum + count.accounts, 0));
        const standing = standingJudge({ accounts, baselineLast, excluded: [], smoothing: USUAL_SMOOTHING })(lost);
        const plain = byTheChart(accounts, baselineLast, lost);
        expect(standing.above.score).toBeCloseTo(plain.above, 9);
        expect(standing.below.score).toBeCloseTo(plain.below, 9);
      }),
    );
  });
});

describe('the threshold of an EWMA chart', () => {
  test.each([
    [85, 57, 25, 0.06],
    [120, 40, 25, 0.06],
    [50, 28, 28, 0.2],
  ])(
    'of %d accounts a point, %d points, %d for the level, at %d keeps false verdicts to 5 in 100 on fresh histories',
    (n, count, baselineLast, rate) => {
      const accounts = Array.from({ length: count }, () => n);
      const { ratio } = standingThreshold({ accounts, baselineLast, excluded: [], smoothing: USUAL_SMOOTHING }, rate);
      const uniform = seededUniform(4_711);
      const sampler = binomialSampler(n, rate);
      const HISTORIES = 1_500;
      let moved = 0;
      for (let i = 0; i < HISTORIES; i++) {
        const { above, below } = byTheChart(
          accounts,
          baselineLast,
          accounts.map(() => sampler.draw(uniform)),
        );
        if (Math.max(above, below) > ratio) moved++;
      }
      expect(moved / HISTORIES).toBeLessThan(0.05 + 3 * Math.sqrt((0.05 * 0.95) / HISTORIES));
    },
  );
});

describe('the run length of an EWMA chart of lost shares', () => {
  test.each([
    [85, 0.06, 0.06],
    [85, 0.06, 0.09],
    [85, 0.06, 0.03],
    [40, 0.3, 0.36],
  ])('of %d accounts a point, usual level %d, rate %d, agrees with flags on long charts', (n, center, rate) => {
    const found = smoothedRunLength([n], { center, rate, sigmaZ: 1, correlation: 0 }, USUAL_SMOOTHING)!;
    const uniform = seededUniform(99);
    const sampler = binomialSampler(n, rate);
    const sigma = Math.sqrt((center * (1 - center)) / n);
    const lengths = Array.from({ length: 300 }, () => {
      let [z, variance, length] = [center, 0, 0];
      do {
        z = 0.1 * (sampler.draw(uniform) / n) + 0.9 * z;
        variance = 0.01 * sigma ** 2 + 0.81 * variance;
        length++;
      } while (Math.abs(z - center) <= width * Math.sqrt(variance));
      return length;
    });
    const mean = lengths.reduce((sum, length) => sum + length, 0) / lengths.length;
    const error = Math.sqrt(lengths.reduce((sum, length) => sum + (length - mean) ** 2, 0)) / lengths.length;
    expect(Math.abs(found.mean! - mean) / Math.hypot(error, found.standardError!)).toBeLessThan(3.5);
  });

  test('of large subgroups is near to that of normal values, a little shorter as its limits begin narrow', () => {
    const found = smoothedRunLength([4_000], { center: 0.5, rate: 0.5, sigmaZ: 1, correlation: 0 }, USUAL_SMOOTHING)!;
    const old = ewmaRunLength(USUAL_SMOOTHING.lambda, width);
    expect(found.mean! - 3 * found.standardError!).toBeLessThan(old);
    expect(found.mean! + 3 * found.standardError!).toBeGreaterThan(0.85 * old);
  });
});

describe('a verdict from an EWMA chart', () => {
  const series = (rates: readonly number[]) => frozen(rates.map((lost) => ({ accounts: 100, lost })));
  const calm = Array.from({ length: 30 }, (_, i) => [6, 5, 8, 7, 4, 6][i % 6]!);

  test('reads a small lasting rise as risen, and calm points as steady, on its own kind of chart', () => {
    const risen = chartAndJudge({
      counts: series([...calm, ...calm.slice(0, 24).map((lost) => lost + 4)]),
      kind: 'ewma',
    });
    expect(risen.chart.kind).toBe('ewma');
    expect(risen.judgement.finding).toBe('risen');
    expect(risen.judgement.signals.find((signal) => signal.state === 'standing')?.words).toMatch(
      /^the smoothed share .*above/,
    );
    const steady = chartAndJudge({ counts: series([...calm, ...calm]), kind: 'ewma' });
    expect(steady.judgement.finding).toBe('steady');
    expect(steady.judgement.trust).toMatchObject({ method: 'simulated' });
    expect(steady.judgement.trust.falseAlarmEvery).toBeGreaterThan(100);
    expect(steady.judgement.trust.wouldSee?.rise).toBeGreaterThan(0.06);
  });

  test('keeps to a spread wider than chance', () => {
    const wild = Array.from({ length: 45 }, (_, i) => [1, 12, 3, 15, 2, 9, 0, 14, 6][i % 9]!);
    const { chart, judgement } = chartAndJudge({ counts: series(wild), kind: 'ewma' });
    expect(chart.sigmaZ).toBeGreaterThan(1.5);
    expect(judgement.finding).toBe('steady');
  });

  test('says nothing false about nobody lost, everybody lost, or one point', () => {
    for (const counts of [series(Array(20).fill(0)), series(Array(20).fill(100)), series([5])]) {
      const { chart, judgement } = chartAndJudge({ counts, kind: 'ewma' });
      expect(['no-level', 'too-few-points']).toContain(judgement.finding);
      for (const { value, sigma, lower, upper } of chart.points)
        for (const figure of [value, sigma, lower, upper]) expect(Number.isFinite(figure)).toBe(true);
    }
  });
});
