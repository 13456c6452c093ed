import { mkdtemp, readFile, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { z } from 'zod';
import truthJson from '../../fixtures/exports/truth.json' with { type: 'json' };
import { truthFile } from '../../fixtures/generate/truth.ts';
import { runEbb } from './runEbb.ts';

const truth = truthFile.parse(truthJson);
const day = z.string().regex(/^\d{4}-\d{2}-\d{2}$/);
const rate = z.number().min(0).max(1);
const pooled = z.object({ rate, low: rate, high: rate, lost: z.number().int(), accounts: z.number().int() });

/** The names other programs rely on. */
const delay = z.strictObject({
  rate,
  points: z.number().min(1).nullable(),
  accounts: z.number().positive().nullable(),
  weeks: z.number().positive().nullable(),
});
const contract = z.object({
  verdict: z.object({
    outcome: z.enum(['risen', 'fallen', 'steady', 'too-early', 'cannot-say']),
    headline: z.string().min(1),
    evidence: z.array(z.string()),
    cautions: z.array(z.string()),
    next: z.array(z.string()),
    since: z.object({ point: z.number().int(), start: day, candidates: z.tuple([z.number(), z.number()]) }).nullable(),
    before: pooled.nullable(),
    after: pooled.nullable(),
    difference: z.object({ estimate: z.number(), low: z.number(), high: z.number() }).nullable(),
  }),
  chart: z.object({
    kind: z.literal('p'),
    subgroupSize: z.number().int(),
    center: rate,
    baseline: z.object({
      first: z.literal(1),
      last: z.number(),
      excluded: z.array(z.number()),
      provisional: z.boolean(),
    }),
    points: z.array(
      z.object({
        index: z.number().int(),
        accounts: z.number().int(),
        lost: z.number().int(),
        value: rate,
        sigma: z.number().positive(),
        lower: rate,
        upper: rate,
        firstStart: day,
        lastStart: day,
        asOf: day,
        restated: z.boolean(),
      }),
    ),
    signals: z.array(
      z.object({
        test: z.number().int().min(1).max(8),
        point: z.number().int(),
        members: z.tuple([z.number(), z.number()]),
        side: z.enum(['above', 'below', 'both']),
        speaks: z.enum(['shift', 'cut']),
        state: z.enum(['standing', 'watching', 'passed']),
        words: z.string().min(1),
      }),
    ),
  }),
  trust: z.object({
    falseAlarmEvery: z.number().positive().nullable(),
    method: z.enum(['exact', 'simulated']),
    standardError: z.number().nullable(),
    falseVerdictChance: z.number().max(0.05).nullable(),
    settings: z
      .strictObject({ n: z.number().nullable(), p: rate, tests: z.array(z.number()), sigmaZ: z.number().positive() })
      .optional(),
    runLength: z
      .strictObject({
        mean: z.number().min(1),
        median: z.number().int().nullable(),
        p10: z.number().int().nullable(),
        p90: z.number().int().nullable(),
      })
      .nullish(),
    delay: z.strictObject({ rise: delay.nullable(), fall: delay.nullable() }).optional(),
    estimated: z
      .strictObject({
        points: z.number().int(),
        falseAlarmEvery: z.number().positive().nullable(),
        low: z.number().positive(),
        high: z.number().positive().nullable(),
      })
      .nullish(),
    wouldSee: z.object({ rise: rate.nullable(), fall: rate.nullable(), chance: z.literal(0.8) }).nullable(),
  }),
  data: z.object({
    rows: z.number(),
    accounts: z.number(),
    matured: z.number(),
    waiting: z.number(),
    returned: z.number(),
    asOf: day,
    rejected: z.array(z.object({ reason: z.string(), rows: z.number(), firstLine: z.number() })),
    columns: z.object({ start: z.string(), end: z.string() }),
    dates: z.enum(['iso', 'dmy', 'mdy']),
  }),
  timing: z.object({
    readMs: z.number(),
    censusMs: z.number(),
    chartMs: z.number(),
    pictureMs: z.number(),
    totalMs: z.number(),
  }),
});

let folder: string;
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'ebbline-cli-'));
});
afterAll(() => rm(folder, { recursive: true, force: true }));

const ask = async (file: string, ...args: string[]) => {
  const run = await runEbb('ask', `fixtures/exports/${file}`, '--json', ...args);
  expect(run.stderr).toBe('');
  expect(run.code).toBe(0);
  return contract.parse(JSON.parse(run.stdout));
};

it('--tests chooses what decides: without the trend test the false-alarm figure is exact', async () => {
  const usual = await ask('marrowby-nothing-changed.csv');
  expect(usual.trust).toMatchObject({ method: 'simulated', settings: { tests: [1, 2, 3, 5, 6] } });
  expect(usual.trust.standardError).toBeGreaterThan(0);
  const exact = await ask('marrowby-nothing-changed.csv', '--tests', '1,2,5,6');
  expect(exact.trust).toMatchObject({ method: 'exact', standardError: null, settings: { tests: [1, 2, 5, 6] } });
  expect(exact.chart.signals.every(({ test }) => test !== 3)).toBe(true);
  expect(exact.verdict.evidence.join(' ')).toContain('As you asked, only these flags count');
  expect(exact.trust.delay!.rise!.weeks).toBeGreaterThan(0);
  const ready = await runEbb(
    'chart',
    '--counts',
    '12,15,8,10,4,7,16,9,14,10,5,6,17,12',
    '--sizes',
    '50',
    '--tests',
    '1',
    '--json',
  );
  expect(JSON.parse(ready.stdout).trust).toMatchObject({ method: 'exact', settings: { n: 50, tests: [1] } });
});

describe('ebb ask on the Marrowby exports', () => {
  for (const entry of truth.exports) {
    // Losses too rare for this chart are another matter: see test/answers/gaps.test.ts.
    if (!('outcomes' in entry.expected) || entry.file === 'marrowby-heirloom-seeds.csv') continue;
    const { outcomes } = entry.expected;
    it(`${entry.file} is read as ${outcomes.join(' or ')}`, async () => {
      const answer = await ask(entry.file);
      expect(outcomes).toContain(answer.verdict.outcome);
      expect(answer.data.asOf).toBe(entry.asOf);
      expect(answer.data.accounts).toBe(entry.accounts);
    });
  }

  it('recipe cards: the start is dated within its candidates, and before and after hold the true rates', async () => {
    const entry = truth.exports.find((each) => each.file === 'marrowby-recipe-cards.csv')!;
    const { verdict, chart } = await ask(entry.file);
    const first = chart.points[verdict.since!.candidates[0] - 1]!;
    const last = chart.points[verdict.since!.candidates[1] - 1]!;
    expect(first.firstStart <= entry.change!.date && entry.change!.date <= last.lastStart).toBe(true);
    expect(verdict.before!.low).toBeLessThan(entry.rateBefore!);
    expect(verdict.before!.high).toBeGreaterThan(entry.rateBefore!);
    expect(verdict.after!.low).toBeLessThan(entry.rateAfter!);
    expect(verdict.after!.high).toBeGreaterThan(entry.rateAfter!);
  });

  it('mix drift: the reply names the mix, not a move', async () => {
    const { verdict } = await ask('marrowby-mix-drift.csv');
    expect(verdict.headline).toMatch(/mix moved: Windowsill grew/);
  });

  it('points hold exactly n accounts each, and matured accounts are the points and those waiting', async () => {
    const { chart, data } = await ask('marrowby-nothing-changed.csv', '--subgroup-size', '100', '--tenure', '3 months');
    expect(chart.points.every((point) => point.accounts === 100)).toBe(true);
    expect(chart.points.length * 100 + data.waiting).toBe(data.matured);
    for (const point of chart.points) expect(point.asOf <= data.asOf).toBe(true);
  });

  it('an earlier data-through date counts fewer accounts, and never one that was not yet old enough', async () => {
    const { chart, data } = await ask('marrowby-nothing-changed.csv', '--as-of', '2025-06-30', '--tenure', '3 months');
    expect(data.asOf).toBe('2025-06-30');
    expect(chart.points.every((point) => point.asOf <= '2025-06-30')).toBe(true);
  });

  it('words pin down the tenure, the group and the start', async () => {
    const answer = await ask(
      'marrowby-nothing-changed.csv',
      'has',
      'churn',
      'moved',
      'at',
      '1',
      'month',
      'for',
      'Orchard',
    );
    expect(answer.data.matured).toBeLessThan(answer.data.accounts / 3);
    expect(answer.verdict.headline).toMatch(/Orchard/);
    expect(answer.verdict.headline).toMatch(/1 month/);
  });

  it('writes the picture and the points where asked', async () => {
    const picture = join(folder, 'chart.png');
    const points = join(folder, 'points.csv');
    const answer = await ask('marrowby-price-rise.csv', '--picture', picture, '--points', points);
    const png = await readFile(picture);
    expect(png.subarray(1, 4).toString()).toBe('PNG');
    const lines = (await readFile(points, 'utf8')).trim().split('\n');
    expect(lines).toHaveLength(answer.chart.points.length + 1);
    expect(lines[1]).toContain(answer.chart.points[0]!.firstStart);
  });

  it('without --json the reply is text that says what was read, the verdict, and the usual caution', async () => {
    const run = await runEbb('ask', 'fixtures/exports/marrowby-price-rise.csv', 'has churn moved?');
    expect(run.code).toBe(0);
    expect(run.stdout).toMatch(/^I understood: /);
    expect(run.stdout).toMatch(/Read marrowby-price-rise\.csv: 7,417 rows/);
    expect(run.stdout).toMatch(/Churn has risen: about [\d.]+ % are lost within 3 months/);
    expect(run.stdout).toMatch(/finance and legal people decide/);
    expect(run.stdout).not.toMatch(/NaN|undefined|null|Infinity/);
  });
});

describe('ebb ask refuses with one clear message', () => {
  const refused: readonly [string, readonly string[], string, RegExp][] = [
    ['no file', ['ask'], 'FILE_MISSING', /ebb ask accounts\.csv/],
    ['a file that is not there', ['ask', 'no-such.csv'], 'FILE_MISSING', /no-such\.csv/],
    [
      'dates that read both ways',
      ['ask', 'fixtures/exports/marrowby-ambiguous-dates.csv'],
      'DATES_AMBIGUOUS',
      /--dates/,
    ],
    ['an unknown option', ['ask', 'x.csv', '--tenor', '3'], 'OPTION_UNKNOWN', /--tenure/],
    ['an option of the other command', ['ask', 'x.csv', '--counts', '3'], 'OPTION_UNKNOWN', /ebb chart --counts/],
    ['a tenure that is none', ['ask', 'x.csv', '--tenure', 'soon'], 'OPTION_INVALID', /3 months/],
    ['a date that is none', ['ask', 'x.csv', '--as-of', '30.6.2025'], 'OPTION_INVALID', /YYYY-MM-DD/],
    [
      'an unknown column',
      ['ask', 'fixtures/exports/marrowby-price-rise.csv', '--columns', 'start=begun'],
      'COLUMN_UNKNOWN',
      /created_at/,
    ],
    [
      'a column name with a slip',
      ['ask', 'fixtures/exports/marrowby-price-rise.csv', '--columns', 'start=craeted_at'],
      'COLUMN_UNKNOWN',
      /Did you mean "created_at"/,
    ],
    [
      'an unknown column that is like none',
      ['ask', 'fixtures/exports/marrowby-price-rise.csv', '--columns', 'start=foo'],
      'COLUMN_UNKNOWN',
      /the columns are: .*Name one of these columns/,
    ],
    [
      'a data-through date long after the data',
      ['ask', 'fixtures/exports/marrowby-price-rise.csv', '--as-of', '2090-01-01'],
      'AS_OF_TOO_LATE',
      /nothing in it happens after/,
    ],
    [
      'an unknown group',
      ['ask', 'fixtures/exports/marrowby-price-rise.csv', '--segment', 'product=Cellar'],
      'SEGMENT_UNKNOWN',
      /Orchard/,
    ],
    [
      'a picture that cannot be written',
      ['ask', 'fixtures/exports/marrowby-price-rise.csv', '--picture', '/no/such/folder/x.png'],
      'PICTURE_UNWRITABLE',
      /folder/,
    ],
    ['an unknown command', ['aks'], 'COMMAND_UNKNOWN', /ask/],
  ];
  for (const [name, args, code, hint] of refused) {
    it(name, async () => {
      const run = await runEbb(...args, '--json');
      expect(run.code).toBe(2);
      const { error } = JSON.parse(run.stdout) as { error: { code: string; message: string; hint: string } };
      expect(error.code).toBe(code);
      expect(`${error.message} ${error.hint}`).toMatch(hint);
      expect(run.stderr).toContain(error.message);
      expect(run.stderr).not.toMatch(/ at .*\.js:/);
    });
  }

  it('the ambiguous export answers once the order is given', async () => {
    const run = await runEbb('ask', 'fixtures/exports/marrowby-ambiguous-dates.csv', '--dates', 'dmy', '--json');
    expect(run.code).toBe(0);
    expect(contract.parse(JSON.parse(run.stdout)).data.dates).toBe('dmy');
  });
});
