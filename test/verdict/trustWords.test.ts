import { describe, expect, test } from 'vitest';
import { type ChartRequest, chartAndJudge } from '../../src/verdict/chartAndJudge.ts';
import type { VerdictContext } from '../../src/verdict/context.ts';
import type { Judgement } from '../../src/verdict/judgement.ts';
import type { Trust } from '../../src/verdict/types.ts';
import { writeVerdict } from '../../src/verdict/verdict.ts';
import { chosenTests } from '../../src/verdict/words/testWords.ts';
import { furtherTrustSentences } from '../../src/verdict/words/trust.ts';
import { calm, points } from './counts.ts';

const steady = (request: Omit<ChartRequest, 'counts'> = {}) =>
  chartAndJudge({ counts: points(100, calm(50)), ...request });

const context: VerdictContext = {
  tenure: '3 months',
  dates: [],
  subgroupSize: 100,
  accounts: 5_000,
  matured: 5_000,
  waiting: 0,
  immature: 0,
  nextPointOn: null,
  maturedOn: () => null,
  inflowPerWeek: 80,
  asOf: null,
  asOfInferred: false,
  segmentColumn: null,
  segment: null,
  segmentValues: [],
  howChosen: ['Read at 3 months.'],
  readCautions: [],
};

describe('how soon a flag comes and what the level rests on', () => {
  test('are the last two lines of evidence, with the figures of the judgement', () => {
    const { chart, judgement } = steady({ tests: [1, 2, 5, 6], accountsPerWeek: 80 });
    const { evidence } = writeVerdict(chart, judgement, context);
    const [chosen, soon, level] = evidence.slice(-3);
    expect(chosen).toBe('Read at 3 months.');
    const { rise, fall } = judgement.trust.delay!;
    expect(soon).toContain(
      `a rise by half, to ${(100 * rise!.rate).toFixed(1)} %, after about ${Math.round(rise!.points!)} points`,
    );
    expect(soon).toContain(
      `a halving, to ${(100 * fall!.rate).toFixed(1)} %, after about ${Math.round(fall!.points!)} points`,
    );
    expect(soon).toContain(`about ${Math.round(rise!.weeks!)} weeks)`);
    const { low, high, falseAlarmEvery } = judgement.trust.estimated!;
    const main = evidence.find((line) => line.startsWith('With nothing changed'))!;
    expect(main).toContain(
      `once in ${Math.round(falseAlarmEvery!)} points, counting that its usual level rests on 25 points only`,
    );
    expect(main).toContain(
      `(about once in ${Math.round(judgement.trust.falseAlarmEvery!)} points if the level were known exactly)`,
    );
    expect(level).toContain(`${Math.round(low)} to ${Math.round(high!)} points`);
  });

  test('count cases and no weeks where nobody said what was counted', () => {
    const [soon] = furtherTrustSentences(steady().judgement, 'case');
    expect(soon).toMatch(/\(\d+ cases\)/);
    expect(soon).not.toContain('week');
  });

  test('are not told where the question is not answered', () => {
    const unsteady = chartAndJudge({
      counts: points(100, [...calm(12), ...calm(13, [16, 18]), ...calm(15)]),
      baselineLast: 25,
    });
    expect(unsteady.judgement.finding).toBe('unsteady-baseline');
    expect(furtherTrustSentences(unsteady.judgement, 'account')).toEqual([]);
  });

  test('say “hardly ever” and “or more” where there is no figure', () => {
    const { judgement } = steady();
    const told = (trust: Partial<Trust>): string[] =>
      furtherTrustSentences({ ...judgement, trust: { ...judgement.trust, ...trust } } as Judgement, 'account');
    const never = { rate: 0.03, points: null, accounts: null, weeks: null };
    expect(told({ delay: { rise: null, fall: never }, estimated: null })).toEqual([
      'How soon a first flag would come, on average: a halving, to 3.0 %, hardly ever.',
    ]);
    const wide = { points: 12, falseAlarmEvery: null, low: 40.2, high: null };
    expect(told({ delay: { rise: null, fall: null }, estimated: wide })).toEqual([
      'The usual level is itself a little off: in 8 of 10 charts like this one a false flag comes once in 40 points or more.',
    ]);
  });
});

test('a false flag rarer than any figure means is told as such', () => {
  const { chart, judgement } = steady();
  const rare = { ...judgement, trust: { ...judgement.trust, falseAlarmEvery: 3e9, estimated: null } };
  expect(writeVerdict(chart, rare, context).evidence.join(' ')).toContain(
    'a false flag less than once in 100,000 points',
  );
});

test('chosen tests are told in words', () => {
  expect(chosenTests([1, 2])).toBe(
    'As you asked, only these flags count (sigma is the usual spread of a point): one point beyond three sigma and nine in a row on one side.',
  );
});
