import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { seededUniform } from '../../src/charts/random/uniform.ts';
import { runCli } from '../../src/cli/runCli.ts';
import { addMonths, type Day, isoDay } from '../../src/days.ts';
import { day } from '../accounts/exportFile.ts';
import { asker, type Row, type Told } from './questions/asked.ts';

const heirloom = fileURLToPath(new URL('../../fixtures/exports/marrowby-heirloom-seeds.csv', import.meta.url));
const FIRST = day('2019-01-01');
const { ask, file, text } = asker();

/** One account a day, so that the order of start is clear; the chosen ones leave after so many days, within their first 3 months. */
function oneADay(days: number, lost: (i: number) => number | null, plan?: (i: number) => string): Row[] {
  return Array.from({ length: days }, (_, i) => {
    const after = lost(i);
    const start = FIRST + i;
    return { start, end: after === null ? null : start + after, ...(plan ? { plan: plan(i) } : {}) };
  });
}

/** Losses by chance at a rate that may change with the account. */
function byChance(rate: (i: number) => number, seed: number): (i: number) => number | null {
  const uniform = seededUniform(seed);
  return (i) => {
    const [lost, when] = [uniform() < rate(i), uniform()];
    return lost ? 1 + Math.floor(when * 80) : null;
  };
}

async function chart(...args: readonly string[]): Promise<{ code: number; json: Told['json'] }> {
  let out = '';
  const code = await runCli(['chart', ...args, '--json'], {
    stdout: (written) => {
      out += written;
    },
    stderr: () => undefined,
    clock: () => performance.now(),
    leaving: false,
    progressWanted: false,
  });
  return { code, json: JSON.parse(out) };
}

/** Words a person can read, whatever the data. */
function expectWords({ code, json }: { readonly code: number; readonly json: Told['json'] }): void {
  expect(code).toBe(0);
  const { headline, evidence, cautions, next } = json.verdict;
  for (const sentence of [headline, ...evidence, ...cautions, ...next]) {
    expect(sentence).toMatch(/^[A-Z“0-9].*[.?!”]$/);
    expect(sentence).not.toMatch(/NaN|Infinity|undefined|null|\[object| ,| \.|\.\.| {2}/);
  }
  expect(JSON.stringify(json)).not.toMatch(/NaN|Infinity/);
}

describe('losses too rare to count by groups', () => {
  it('are charted as gaps without being asked, and the reply says why', async () => {
    const told = await ask(heirloom, 'ask', '--tenure', '3 months');
    expectWords(told);
    const { verdict, chart: drawn, data, trust } = told.json;
    expect(drawn).toMatchObject({ kind: 'g', scale: 'accounts' });
    expect(verdict.outcome).toBe('risen');
    expect(verdict.evidence.join(' ')).toMatch(
      /Losses are rare here: a point with five of them would take about \d+ accounts, and a year brings about \d+/,
    );
    // The truth: 0.4 % before, four times that for accounts from 3 March 2025.
    expect(verdict.before.low).toBeLessThan(0.004);
    expect(verdict.before.high).toBeGreaterThan(0.004);
    expect(verdict.after.low).toBeLessThan(0.016);
    expect(verdict.after.high).toBeGreaterThan(0.016);
    expect(Math.abs(Date.parse(verdict.since.start) - Date.parse('2025-03-03'))).toBeLessThan(45 * 86_400_000);
    expect(trust.falseVerdictChance).toBeLessThanOrEqual(0.05);
    expect(trust.falseAlarmEvery).toBeGreaterThan(20);
    // Every matured account is in one gap, ended one, or has come since the last loss.
    const inPoints = drawn.points.reduce((sum: number, point: { accounts: number }) => sum + point.accounts, 0);
    expect(inPoints + data.waiting).toBe(data.matured);
    expect(told.png!.subarray(1, 4).toString()).toBe('PNG');
  });

  it('are counted by groups where somebody says how many accounts make a point, or asks for a p chart', async () => {
    for (const how of [
      ['--subgroup-size', '400'],
      ['--chart', 'p'],
    ]) {
      const told = await ask(heirloom, 'ask', '--tenure', '3 months', ...how);
      expect(told.json.chart.kind).toBe('p');
    }
  });

  it('are charted as gaps when asked in words', async () => {
    for (const [words, kind, value] of [
      ['has churn at 3 months moved with a g chart', 'g', 'accounts'],
      ['has churn at 3 months moved with a t chart', 't', 'days'],
    ] as const) {
      const told = await ask(heirloom, 'ask', words);
      expectWords(told);
      expect(told.json.chart).toMatchObject({ kind, scale: value });
      expect(told.json.notUnderstood).toEqual([]);
    }
  });
});

describe('the gaps', () => {
  it('of a g chart are the accounts kept between losses in order of start, with the days on which they started', async () => {
    const lost = new Set([3, 4, 40, 41, 95, 120, 170, 171, 240, 300, 333, 360, 401]);
    const told = await ask(
      file(oneADay(600, (i) => (lost.has(i) ? 10 : null))),
      'ask',
      '--chart',
      'g',
      '--tenure',
      '1 month',
      '--as-of',
      isoDay(FIRST + 599),
    );
    expectWords(told);
    const points = told.json.chart.points;
    const places = [...lost];
    expect(points.slice(0, 13).map((point: { value: number }) => point.value)).toEqual(
      places.map((place, i) => place - (places[i - 1] ?? -1) - 1),
    );
    points.slice(0, 13).forEach((point: Record<string, unknown>, i: number) => {
      expect(point).toMatchObject({
        accounts: Number(point.value) + 1,
        lost: 1,
        firstStart: isoDay(FIRST + (places[i - 1] ?? -1) + 1),
        lastStart: isoDay(FIRST + places[i]!),
        asOf: isoDay(addMonths(FIRST + places[i]!, 1)),
      });
    });
    // 401 is the last loss; whoever started up to a month before the end has matured and was kept.
    const matured = told.json.data.matured;
    expect(points[13]).toMatchObject({ value: matured - 402, accounts: matured - 402, lost: 0, open: true });
    expect(told.json.data.waiting).toBe(0);
  });

  it('of a t chart are the days between losses, from the first account’s tenure point to the data-through date', async () => {
    const rows = oneADay(
      900,
      byChance(() => 0.06, 21),
    );
    const told = await ask(file(rows), 'ask', '--chart', 't', '--tenure', '3 months', '--as-of', isoDay(FIRST + 899));
    expectWords(told);
    const from = addMonths(FIRST, 3);
    const days = rows
      .flatMap(({ start, end }): Day[] => (end !== null && end <= addMonths(start, 3) ? [end] : []))
      .filter((end) => end > from && end <= FIRST + 899)
      .sort((a, b) => a - b);
    const gaps = days.map((end, i) => end - (days[i - 1] ?? from));
    expect(
      told.json.chart.points
        .filter((point: { lost: number }) => point.lost === 1)
        .map((point: { value: number }) => point.value),
    ).toEqual(gaps);
    expect(gaps).toContain(0);
    expect(told.json.verdict.cautions.join(' ')).toContain('number of customers');
    expect(told.json.verdict.headline).toMatch(/one loss every \d/);
  });

  it('do not count accounts that have not had the time to leave, whether they left or not', async () => {
    const old = oneADay(400, (i) => (i % 25 === 7 ? 20 : null));
    const young: Row[] = Array.from({ length: 50 }, (_, i) => ({ start: FIRST + 430 + i, end: FIRST + 431 + i }));
    const options = ['--chart', 'g', '--tenure', '3 months', '--as-of', isoDay(FIRST + 490)];
    const without = await ask(file(old), 'ask', ...options);
    const withThem = await ask(file([...old, ...young]), 'ask', ...options);
    expect(withThem.json.chart).toEqual(without.json.chart);
    expect(withThem.json.data.immature).toBe(50);
  });
});

describe('verdicts about gaps', () => {
  const options = ['--chart', 'g', '--tenure', '3 months', '--as-of', isoDay(FIRST + 3_999)];

  it('name the direction of churn: shorter gaps are a rise, longer ones a fall', async () => {
    for (const [after, outcome] of [
      [0.08, 'risen'],
      [0.003, 'fallen'],
    ] as const) {
      const told = await ask(
        file(
          oneADay(
            4_000,
            byChance((i) => (i < 2_200 ? 0.02 : after), 5),
          ),
        ),
        'ask',
        ...options,
      );
      expectWords(told);
      const { verdict } = told.json;
      expect(verdict.outcome).toBe(outcome);
      expect(verdict.after.rate > verdict.before.rate).toBe(outcome === 'risen');
      expect(Math.sign(verdict.difference.estimate)).toBe(outcome === 'risen' ? 1 : -1);
    }
  });

  it('with nothing changed say how large a move could have been missed', async () => {
    const told = await ask(
      file(
        oneADay(
          4_000,
          byChance(() => 0.02, 8),
        ),
      ),
      'ask',
      ...options,
    );
    expectWords(told);
    const { verdict, trust } = told.json;
    expect(verdict.outcome).toBe('steady');
    expect(trust.wouldSee.rise).toBeGreaterThan(told.json.chart.baseline.lost / told.json.chart.baseline.accounts);
    expect(verdict.evidence.join(' ')).toContain('could have been missed');
    // How long nothing has happened, and from when on that would say something.
    expect(verdict.next.join(' ')).toMatch(/Since the last loss: .* would stand out as a fall/);
  });

  it('take the usual level from before the day somebody names, or from as many gaps as they say', async () => {
    const path = file(
      oneADay(
        4_000,
        byChance(() => 0.02, 9),
      ),
    );
    const since = await ask(path, 'ask', `has churn moved since ${isoDay(FIRST + 2_000)}`, ...options);
    const before = since.json.chart.points.filter(
      (point: { lastStart: string }) => point.lastStart < isoDay(FIRST + 2_000),
    );
    expect(since.json.chart.baseline.last).toBe(before.length);
    const named = await ask(path, 'ask', ...options, '--baseline', '14');
    expect(named.json.chart.baseline).toMatchObject({ last: 14, provisional: true });
  });

  it('are about the group that is named', async () => {
    const path = file(
      oneADay(
        4_000,
        byChance(() => 0.02, 10),
        (i) => (i % 2 === 0 ? 'Orchard' : 'Allotment'),
      ),
    );
    const told = await ask(path, 'ask', ...options, '--segment', 'plan=Orchard');
    expectWords(told);
    expect(told.json.verdict.headline).toContain('for Orchard');
    const all = told.json.chart.points.reduce((sum: number, point: { accounts: number }) => sum + point.accounts, 0);
    expect(all + told.json.data.waiting).toBe(told.json.data.matured);
  });

  it('say when it is too early, and about when it will not be', async () => {
    const few = await ask(
      file(oneADay(800, (i) => (i % 130 === 60 ? 15 : null))),
      'ask',
      '--chart',
      'g',
      '--tenure',
      '3 months',
    );
    expectWords(few);
    expect(few.json.verdict.outcome).toBe('too-early');
    expect(few.json.verdict.headline).toMatch(
      /only 5 of \d+ accounts were lost within 3 months; at least 12 losses are needed/,
    );
    expect(few.json.verdict.next.join(' ')).toMatch(/7 more losses will take until around \d+ \w+ 20\d\d/);
  });

  it.each([
    ['one account', oneADay(1, () => null)],
    ['nobody lost', oneADay(300, () => null)],
    ['everybody lost', oneADay(300, () => 20)],
    ['a single loss', oneADay(300, (i) => (i === 80 ? 12 : null))],
    ['only young accounts', oneADay(20, () => null)],
    ['all losses on one day', oneADay(200, (i) => (i > 60 && i < 140 ? 140 - i : null))],
    ['losses in clusters', oneADay(1_400, (i) => (i % 100 < 6 ? 9 : null))],
  ])('are clear sentences for %s', async (_, rows) => {
    const path = file(rows);
    for (const kind of ['g', 't', 'auto']) {
      const told = await ask(path, 'ask', '--chart', kind, '--tenure', '3 months');
      expectWords(told);
      expect(told.json.verdict.headline.length).toBeGreaterThan(30);
    }
  });

  it('are refused where losses are not rare, or where a view has only shares to chart', async () => {
    const many = await ask(
      file(oneADay(1_500, (i) => (i % 2 === 0 ? 9 : null))),
      'ask',
      '--chart',
      'g',
      '--tenure',
      '1 month',
    );
    expect(many.code).toBe(2);
    expect(many.json.error).toMatchObject({ code: 'OPTION_INVALID' });
    expect(many.json.error.message).toContain('rare losses');
    const monthly = await ask(file(oneADay(400, () => null)), 'ask', '--chart', 'g', '--by', 'calendar');
    expect(monthly.code).toBe(2);
  });

  it('are told in words as in JSON', async () => {
    const words = await text(heirloom, 'ask', '--tenure', '3 months');
    expect(words).toContain('Churn has risen');
    expect(words).toContain('a g chart');
  });
});

describe('ready values', () => {
  it('on a g chart have the exact limits of the constructed series', async () => {
    const told = await chart('--chart', 'g', '--values', '4, 12, 30, 7, 55, 18, 3, 22, 41, 9, 16, 27');
    expectWords(told);
    expect(told.json.chart).toMatchObject({ kind: 'g', scale: 'accounts', center: 14 });
    expect(told.json.chart.mean).toBeCloseTo(20.333333, 6);
    expect(told.json.chart.points[0]).toMatchObject({ accounts: 5, lost: 1, value: 4, lower: 0, upper: 137 });
  });

  it('on a t chart are read as whole days, or as finely as they are given', async () => {
    const valves = '286 948 536 124 816 729 4 143 431 8 2837 596 81 227 603 492 1199 1214 2831 96';
    const whole = await chart('--chart', 't', '--values', valves);
    const fine = await chart('--chart', 't', '--values', valves.replace('286', '286.0001'));
    // Closed form at the mean 710.05: 0.959 and 4691.8, rounded inwards where only whole days can be seen.
    expect(fine.json.chart.points[0].upper).toBeCloseTo(4691.76, 0);
    expect(fine.json.chart.points[0].lower).toBeCloseTo(0.959, 3);
    expect(whole.json.chart.points[0]).toMatchObject({ lower: 1, upper: 4692 });
    expect(whole.json.verdict.outcome).toBe('steady');
  });

  it('on an individuals chart have the printed limits of the flow rates', async () => {
    // NIST/SEMATECH e-Handbook, section 6.3.2.2 (recomputed with 2.66): 50.81, limits 45.8151 and 55.8049.
    const told = await chart('--chart', 'individuals', '--values', '49.6 47.6 49.9 51.3 47.8 51.2 52.6 52.4 53.6 52.1');
    expectWords(told);
    expect(told.json.chart).toMatchObject({ kind: 'individuals', scale: 'score' });
    expect(told.json.chart.center).toBeCloseTo(50.81, 6);
    expect(told.json.chart.points[0].upper).toBeCloseTo(55.8049, 4);
    expect(told.json.chart.points[0].lower).toBeCloseTo(45.8151, 4);
    expect(told.json.verdict.outcome).toBe('too-early');
  });

  it('that move are read as moved, in their own direction and unit', async () => {
    const values = [
      ...Array.from({ length: 26 }, (_, i) => -5 + ((i * 7) % 5) / 4),
      ...Array.from({ length: 10 }, (_, i) => -9 + ((i * 7) % 5) / 4),
    ];
    const told = await chart('--chart', 'individuals', `--values=${values.join(' ')}`);
    expectWords(told);
    expect(told.json.verdict).toMatchObject({ outcome: 'fallen', since: { point: 27 } });
    expect(told.json.verdict.headline).toContain('−8.5');
  });

  it.each([
    ['all equal', 'individuals', '3 3 3 3 3 3 3 3 3 3 3 3 3'],
    ['a single one', 'individuals', '3'],
    ['every account lost', 'g', '0 0 0 0 0 0 0 0 0 0 0 0 0'],
    ['all on one day', 't', '0 0 0 0 0 0 0 0 0 0 0 0 0'],
    ['one gap', 't', '12'],
    [
      'very large ones',
      'g',
      '900000000 800000000 1 700000000 900000000 800000000 1 700000000 900000000 800000000 1 7 5',
    ],
    ['very small ones', 't', '0.0001 0.0002 0.0001 0.0003 0.0001 0.0002 0.0001 0.0003 0.0001 0.0002 0.0001 0.0003'],
  ])('answer in words: %s', async (_, kind, values) => {
    expectWords(await chart('--chart', kind, '--values', values));
  });

  it.each([
    ['a fraction of an account', ['--chart', 'g', '--values', '3,4.5'], 'entry 2: "4.5"'],
    ['a negative time', ['--chart', 't', '--values', '3,-4'], 'entry 2: "-4"'],
    ['no number', ['--chart', 'individuals', '--values', '3,x'], 'entry 2: "x"'],
    ['nothing', ['--chart', 'g', '--values', ' '], '--values is empty'],
    ['values of no kind', ['--values', '3,4'], 'needs to know what the values are'],
    ['values beside counts', ['--chart', 'g', '--values', '3', '--counts', '3'], 'neither --counts nor --sizes'],
    ['counts for a chart of gaps', ['--chart', 'g', '--counts', '3', '--sizes', '5'], 'not from counts'],
  ] as const)('are refused when they are %s', async (_, args, words) => {
    const told = await chart(...args);
    expect(told.code).toBe(2);
    expect(told.json.error.message).toContain(words);
    expect(told.json.error.hint.length).toBeGreaterThan(10);
  });
});
