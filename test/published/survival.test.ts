import { describe, expect, test } from 'vitest';
import { kaplanMeier, survivalAt } from '../../src/charts/survival/kaplanMeier.ts';
import { logRank } from '../../src/charts/survival/logRank.ts';
import { nelsonAalen } from '../../src/charts/survival/nelsonAalen.ts';
import { restrictedMean } from '../../src/charts/survival/restrictedMean.ts';
import { riskSets } from '../../src/charts/survival/riskSets.ts';
import { type SurvivalScale, survivalInterval } from '../../src/charts/survival/survivalInterval.ts';
import { survivalQuantile } from '../../src/charts/survival/survivalQuantile.ts';
import type { Departures } from '../../src/charts/survival/types.ts';
import { checkValue } from './checkValues.ts';

const departures = (time: readonly number[], event?: readonly number[]): Departures[] =>
  time.map((at, i) => {
    const lost = event?.[i] ?? 1;
    return { time: at, lost, censored: 1 - lost };
  });
const close = (got: number, wanted: number, tolerance: number): void =>
  expect(Math.abs(got - wanted), `${got} for ${wanted}`).toBeLessThanOrEqual(tolerance);

interface Published {
  time: number[];
  n_risk: number[];
  n_event: number[];
  surv: number[];
  se: (number | null)[];
}
const treated = checkValue<
  { time: number[]; event: number[] },
  Published & {
    ci_plain: [number, number][];
    ci_log: [number, number][];
    ci_loglog: [number, number][];
    nelson_aalen: number[];
    median: number;
    q25: number;
    median_lower95_log: number;
    rmst35: number;
    rmst35_se: number;
  }
>('km-6mp');
const placebo = checkValue<{ time: number[] }, Published & { median: number; median_ci95: [number, number] }>(
  'km-placebo',
);

describe(`Kaplan-Meier, 6-MP: ${treated.cited}`, () => {
  const { inputs, expected, tolerance } = treated;
  const sets = riskSets(departures(inputs.time, inputs.event));
  const steps = kaplanMeier(sets);

  test('risk sets, survival and Greenwood errors', () => {
    expect(steps.map(({ time }) => time)).toEqual(expected.time);
    expect(steps.map(({ atRisk }) => atRisk)).toEqual(expected.n_risk);
    expect(steps.map(({ lost }) => lost)).toEqual(expected.n_event);
    steps.forEach(({ survival, standardError }, i) => {
      close(survival, expected.surv[i]!, tolerance);
      close(standardError!, expected.se[i]!, tolerance);
    });
  });

  test.each<[SurvivalScale, 'ci_plain' | 'ci_log' | 'ci_loglog']>([
    ['plain', 'ci_plain'],
    ['log', 'ci_log'],
    ['log-log', 'ci_loglog'],
  ])('%s intervals', (scale, key) => {
    steps.forEach((step, i) => {
      const { low, high } = survivalInterval(step, scale)!;
      close(low, expected[key][i]![0], tolerance);
      close(high, expected[key][i]![1], tolerance);
    });
  });

  test('Nelson-Aalen', () => {
    nelsonAalen(sets).forEach(({ hazard }, i) => {
      close(hazard, expected.nelson_aalen[i]!, tolerance);
    });
  });

  test('median, its lower limit, the quarter, and an upper limit that is not reached', () => {
    expect(survivalQuantile(steps, 0.5, 'log')).toEqual({
      time: expected.median,
      low: expected.median_lower95_log,
      high: null,
    });
    expect(survivalQuantile(steps, 0.25).time).toBe(expected.q25);
  });

  test('restricted mean to 35 weeks', () => {
    const { mean, standardError } = restrictedMean(steps, 35);
    close(mean, expected.rmst35, tolerance);
    close(standardError, expected.rmst35_se, tolerance);
  });
});

describe(`Kaplan-Meier, placebo, nobody censored: ${placebo.cited}`, () => {
  const { inputs, expected, tolerance } = placebo;
  const steps = kaplanMeier(riskSets(departures(inputs.time)));

  test('survival and Greenwood errors, none for the last step', () => {
    expect(steps.map(({ time }) => time)).toEqual(expected.time);
    expect(steps.map(({ atRisk }) => atRisk)).toEqual(expected.n_risk);
    expect(steps.map(({ lost }) => lost)).toEqual(expected.n_event);
    steps.forEach(({ survival, standardError }, i) => {
      close(survival, expected.surv[i]!, tolerance);
      if (expected.se[i] === null) expect(standardError).toBeNull();
      else close(standardError!, expected.se[i]!, tolerance);
    });
  });

  test('median with its limits', () => {
    const [low, high] = expected.median_ci95;
    expect(survivalQuantile(steps, 0.5, 'log')).toEqual({ time: expected.median, low, high });
  });
});

describe('log-rank test', () => {
  const entry = checkValue<
    { time_6mp: number[]; event_6mp: number[]; time_placebo: number[] },
    {
      observed: number[];
      expected: number[];
      variance: number;
      chisq: number;
      df: number;
      p: number;
      peto_rho1: number;
    }
  >('logrank-6mp');
  const groups = [
    departures(entry.inputs.time_6mp, entry.inputs.event_6mp),
    departures(entry.inputs.time_placebo),
  ] as const;

  test(`6-MP against placebo: ${entry.cited}`, () => {
    const { expected, tolerance } = entry;
    const result = logRank(groups)!;
    expect(result.observed).toEqual(expected.observed);
    result.expected.forEach((value, i) => {
      close(value, expected.expected[i]!, tolerance);
    });
    close(result.variance[0]![0]!, expected.variance, tolerance);
    close(result.chiSquare, expected.chisq, tolerance);
    expect(result.degreesOfFreedom).toBe(expected.df);
    close(result.pValue, expected.p, 1e-10);
  });

  test('weighted towards early ages (Peto-Peto)', () => {
    close(logRank(groups, 'early')!.chiSquare, entry.expected.peto_rho1, entry.tolerance);
  });
});

const aml = checkValue<
  { time: number[]; event: number[]; time_non: number[]; event_non: number[] },
  { time: number[]; surv: number[]; se: number[]; logrank: number }
>('km-aml');

describe(`second set: ${aml.cited}`, () => {
  const { inputs, expected, tolerance } = aml;
  const maintained = departures(inputs.time, inputs.event);

  test('survival and errors of the maintained group', () => {
    const steps = kaplanMeier(riskSets(maintained));
    expected.time.forEach((time, i) => {
      close(survivalAt(steps, time), expected.surv[i]!, tolerance);
      close(steps.find((step) => step.time === time)!.standardError!, expected.se[i]!, tolerance);
    });
  });

  test('log-rank', () => {
    close(logRank([maintained, departures(inputs.time_non, inputs.event_non)])!.chiSquare, expected.logrank, tolerance);
  });
});
