import { describe, expect, it } from 'vitest';
import { betaBinomialSampler } from '../../src/charts/random/betaBinomialSampler.ts';
import { seededUniform } from '../../src/charts/random/uniform.ts';
import { chartAndJudge } from '../../src/verdict/chartAndJudge.ts';

function counts(points: number, size: number, rate: (point: number) => number, correlation: number, seed: number) {
  const uniform = seededUniform(seed);
  return Array.from({ length: points }, (_, i) => ({
    accounts: size,
    lost: betaBinomialSampler(size, rate(i + 1), correlation).draw(uniform),
  }));
}

describe('the kind of chart', () => {
  it('is a p chart for binomial counts, and a p′ chart when the points clearly vary more', () => {
    expect(chartAndJudge({ counts: counts(50, 400, () => 0.06, 0, 1) }).chart.kind).toBe('p');
    const wide = chartAndJudge({ counts: counts(50, 400, () => 0.06, 0.02, 1) });
    expect(wide.chart.kind).toBe('p-prime');
    expect(wide.chart.sigmaZ).toBeGreaterThan(1.5);
    expect(wide.judgement.finding).toBe('steady');
  });

  it('is the one asked for, whatever the counts', () => {
    const wide = counts(50, 400, () => 0.06, 0.02, 1);
    expect(chartAndJudge({ counts: wide, kind: 'p' }).chart.kind).toBe('p');
    expect(chartAndJudge({ counts: counts(50, 400, () => 0.06, 0, 1), kind: 'p-prime' }).chart.kind).toBe('p-prime');
  });

  it('a step inside the baseline is not taken for spread: it stays a p chart, and the step is found', () => {
    const { chart, judgement } = chartAndJudge({ counts: counts(50, 400, (point) => (point < 18 ? 0.06 : 0.1), 0, 3) });
    expect(chart.kind).toBe('p');
    expect(judgement.finding).toBe('risen');
    expect(judgement.start!.candidates[0]).toBeLessThanOrEqual(18);
    expect(judgement.start!.candidates[1]).toBeGreaterThanOrEqual(18);
  });

  it('a p′ chart finds a large step in counts that vary too much', () => {
    const { chart, judgement } = chartAndJudge({
      counts: counts(60, 400, (point) => (point < 42 ? 0.06 : 0.14), 0.01, 4),
    });
    expect(chart.kind).toBe('p-prime');
    expect(judgement.finding).toBe('risen');
  });
});

describe('a short chart, whose every point sets the usual level', () => {
  it('with a clear step at its end reads as moved since the step, not as unable to say', () => {
    const step = [14, 14, 6, 9, 10, 8, 12, 10, 7, 8, 10, 10, 12, 7, 6, 7, 6, 4, 5, 7, 5].map((lost) => ({
      accounts: 60,
      lost,
    }));
    const { chart, judgement } = chartAndJudge({ counts: step });
    expect(judgement.finding).toBe('fallen');
    expect(chart.baseline.last).toBe(13);
    expect(chart.baseline.provisional).toBe(true);
    expect(judgement.start!.candidates[0]).toBeLessThanOrEqual(14);
    expect(judgement.start!.candidates[1]).toBeGreaterThanOrEqual(14);
  });

  it('with nothing changed reads as moved in at most 5 of 100 cases, the step included', () => {
    let moved = 0;
    const histories = 300;
    for (let seed = 0; seed < histories; seed++) {
      const { finding } = chartAndJudge({ counts: counts(24, 100, () => 0.08, 0, 1_000 + seed) }).judgement;
      if (finding === 'risen' || finding === 'fallen') moved++;
    }
    // 5 % and three standard errors of 300 histories.
    expect(moved / histories).toBeLessThan(0.05 + 3 * Math.sqrt((0.05 * 0.95) / histories));
  });
});
