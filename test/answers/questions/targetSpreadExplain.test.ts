import { describe, expect, it } from 'vitest';
import { runCli } from '../../../src/cli/runCli.ts';
import { dayFromIso } from '../../../src/days.ts';
import { asker, expectSound, type Row } from './asked.ts';

const cli = asker();
const exports = (name: string): string => `fixtures/exports/marrowby-${name}.csv`;
const first = dayFromIso('2024-01-01')!;

/** `points` of 50 accounts each, one account a day, of which point i loses lost(i) in its second month. */
const made = (points: number, lost: (point: number) => number): Row[] =>
  Array.from({ length: points * 50 + 95 }, (_, i) => {
    const start = first + i;
    const gone = i < points * 50 && i % 50 < lost(Math.floor(i / 50));
    return { start, end: gone ? start + 40 : null };
  });

const AT = ['--tenure', '3 months', '--subgroup-size', '50', '--chart', 'p'];

/** A question without a picture, as JSON. */
async function plain(...args: string[]) {
  let out = '';
  const code = await runCli([...args, '--json'], {
    stdout: (text) => {
      out += text;
    },
    stderr: () => undefined,
    clock: () => 0,
    leaving: false,
    progressWanted: false,
  });
  return { code, json: JSON.parse(out) };
}

describe('target', () => {
  it('is read from the stretch since the last move, tested exactly, and the next points are foretold', async () => {
    const told = await cli.ask(exports('recipe-cards'), 'target', '6%');
    expectSound(told);
    const { target, answer } = told.json;
    const verdict = (await plain('ask', exports('recipe-cards'))).json;
    expect(target.stretch).toMatchObject({ reason: 'moved', from: verdict.verdict.since.point });
    expect(target.lost).toBe(verdict.verdict.after.lost);
    expect(target.accounts).toBe(verdict.verdict.after.accounts);
    expect(target).toMatchObject({ outcome: 'met', target: 0.06, method: 'exact' });
    expect(target.high).toBeLessThan(0.06);
    expect(target.next.map(({ points }: { points: number }) => points)).toEqual([1, 3, 6, 12]);
    const chances = target.next.map(({ chance }: { chance: number }) => chance);
    expect(chances).toEqual([...chances].sort((a, b) => a - b));
    expect(answer.headline).toMatch(/^The target of 6 % is met, beyond chance/);
    expect(answer.cautions.at(-1)).toMatch(/pay, bonus or job.*written definitions.*finance and legal/);
  });

  it('near the level it is neither met nor missed, and the reply says how much more data would tell', async () => {
    const told = await cli.ask(exports('nothing-changed'), 'target', '6%');
    expectSound(told);
    expect(told.json.target).toMatchObject({ outcome: 'unclear', stretch: { reason: 'all', from: 1 } });
    expect(told.json.answer.headline).toMatch(/^Cannot say whether the target of 6 % is met/);
    expect(told.json.answer.next[0]).toMatch(/more accounts .* would tell it from the target|too close/);
    expect(told.json.answer.cautions.join(' ')).toMatch(/A bonus decided point by point would be paid by chance/);
  });

  it('0 % and 100 % are said to be no targets to test, 150 % to be no share', async () => {
    const nobody = await cli.ask(exports('nothing-changed'), 'target', '0%');
    expectSound(nobody);
    expect(nobody.json.answer.headline).toMatch(/^A target of 0 % is missed: .* nobody at all/);
    const everybody = await cli.ask(exports('nothing-changed'), 'target', '100%');
    expectSound(everybody);
    expect(everybody.json.answer.headline).toMatch(/^A target of 100 % cannot be missed/);
    const beyond = await plain('target', exports('nothing-changed'), '150%');
    expect(beyond.code).toBe(0);
    expect(beyond.json.answer.headline).toMatch(/^A target of 150 % cannot be tested/);
  });

  it('one point, nobody lost, everybody lost: a clear sentence each', async () => {
    const one = await cli.ask(cli.file(made(1, () => 4)), 'target', '5%', ...AT);
    expectSound(one);
    expect(one.json.target).toMatchObject({ outcome: 'unclear', accounts: 50, lost: 4 });
    expect(one.json.answer.cautions.join(' ')).toMatch(/1 point only/);
    const none = await cli.ask(cli.file(made(14, () => 0)), 'target', '5%', ...AT);
    expectSound(none);
    expect(none.json.target).toMatchObject({ outcome: 'met', lost: 0, low: 0 });
    const noneOfNone = await cli.ask(cli.file(made(14, () => 0)), 'target', '0%', ...AT);
    expectSound(noneOfNone);
    expect(noneOfNone.json.answer.headline).toMatch(/^Cannot say whether a target of 0 % is met/);
    const all = await cli.ask(cli.file(made(14, () => 50)), 'target', '5%', ...AT);
    expectSound(all);
    expect(all.json.target).toMatchObject({ outcome: 'missed', rate: 1, high: 1 });
  });

  it('not one full point: too early, and when to ask again', async () => {
    const early = await plain(
      'target',
      cli.file(made(1, () => 4)),
      '5%',
      '--tenure',
      '3 months',
      '--subgroup-size',
      '400',
    );
    expect(early.code).toBe(0);
    expect(early.json.answer.headline).toMatch(/^Too early to say whether a target of 5 % is met: only \d+ accounts/);
    expect(early.json.target.outcome).toBe('too-early');
  });

  it.each([
    ['calendar', /of customers are lost in a month/, /customer-months lost/],
    ['renewal', /of renewals are lost/, /renewals lost/],
  ])('by %s it speaks of what was counted', async (view, headline, evidence) => {
    const told = await cli.ask(exports('nothing-changed'), 'target', '2%', '--by', view);
    expectSound(told);
    expect(told.json.answer.headline).toMatch(headline);
    expect(told.json.answer.evidence[0]).toMatch(evidence);
    for (const command of ['spread', 'explain']) {
      const other = await cli.ask(exports('nothing-changed'), command, '--by', view);
      expectSound(other);
      expect(JSON.stringify(other.json.answer.evidence)).not.toMatch(/within 3 months/);
    }
  });

  it('points that vary more than chance widen the interval', async () => {
    const uneven = (point: number): number => [2, 10, 3, 12, 1, 9, 2, 11][point % 8]!;
    const told = await cli.ask(cli.file(made(24, uneven)), 'target', '10%', ...AT.slice(0, 4));
    expectSound(told);
    expect(told.json.target.method).toBe('score');
    expect(told.json.target.dispersion).toBeGreaterThan(2);
    expect(told.json.answer.cautions.join(' ')).toMatch(/times as much as chance alone/);
  });
});

describe('spread', () => {
  it('binomial points vary as chance makes them, and the histogram holds them all', async () => {
    const told = await cli.ask(exports('nothing-changed'), 'spread');
    expectSound(told);
    const { spread } = told.json;
    expect(spread.outcome).toBe('chance');
    expect(spread.histogram.of).toBe('lost');
    const sum = (key: 'seen' | 'expected'): number =>
      spread.histogram.bins.reduce((total: number, bin: Record<string, number>) => total + bin[key]!, 0);
    expect(sum('seen')).toBe(spread.stretch.points);
    expect(sum('expected')).toBeCloseTo(spread.stretch.points, 1);
    expect(spread.dispersion.degreesOfFreedom).toBe(spread.stretch.points - 1);
    expect(spread.furthest).toHaveLength(3);
  });

  it('after a move only the points before it are compared', async () => {
    const told = await cli.ask(exports('price-rise'), 'spread');
    expectSound(told);
    const verdict = (await plain('ask', exports('price-rise'))).json.verdict;
    expect(told.json.spread.stretch).toMatchObject({ from: 1, to: verdict.since.point - 1, reason: 'moved' });
  });

  it('uneven points are called so, and the wider limits are told beside those of chance', async () => {
    const uneven = (point: number): number => [2, 10, 3, 12, 1, 9, 2, 11][point % 8]!;
    const told = await cli.ask(cli.file(made(24, uneven)), 'spread', '--tenure', '3 months', '--subgroup-size', '50');
    expectSound(told);
    const { spread, answer } = told.json;
    expect(spread.outcome).toBe('wider');
    expect(spread.limits.prime.upper).toBeGreaterThan(spread.limits.binomial.upper);
    expect(answer.headline).toMatch(/^The points vary about \d+\.\d times as much as chance alone/);
    expect(answer.evidence.join(' ')).toMatch(/p-prime/);
  });

  it('points all alike are more alike than chance leaves them', async () => {
    const told = await cli.ask(cli.file(made(24, () => 5)), 'spread', ...AT);
    expectSound(told);
    expect(told.json.spread.outcome).toBe('alike');
  });

  it('one point, nobody lost, everybody lost: a clear sentence each', async () => {
    const one = await cli.ask(cli.file(made(1, () => 4)), 'spread', ...AT);
    expectSound(one);
    expect(one.json.answer.headline).toMatch(/^Cannot say how much the points vary: there is only one/);
    for (const [lost, words] of [
      [0, 'nobody was'],
      [50, 'everybody was'],
    ] as const) {
      const told = await plain('spread', cli.file(made(14, () => lost)), ...AT);
      expect(told.code).toBe(0);
      expect(told.json.answer.headline).toContain(words);
      expect(JSON.stringify(told.json.spread)).not.toMatch(/NaN|Infinity/);
    }
  });
});

describe('explain', () => {
  it.each(['price-rise', 'recipe-cards', 'nothing-changed', 'mix-drift', 'too-young'])(
    '%s: every step has its words and numbers, and the numbers are those of the verdict',
    async (name) => {
      const told = await cli.ask(exports(name), 'explain');
      expectSound(told);
      const { explain, answer } = told.json;
      const verdict = (await plain('ask', exports(name))).json;
      expect(answer.headline).toContain(verdict.verdict.headline);
      expect(explain.outcome).toBe(verdict.verdict.outcome);
      expect(answer.evidence).toHaveLength(explain.steps.length);
      const step = (title: string) => explain.steps.find((one: { title: string }) => one.title === title);
      expect(step('Usual level').center).toBe(verdict.chart.center);
      expect(step('Sigma and limits').upper).toBe(verdict.chart.points.at(-1).upper);
      expect(step('Points').charted + step('Points').waiting).toBe(step('Old enough').matured);
      if (verdict.verdict.after)
        expect(step('Since when, how much').after).toMatchObject({ lost: verdict.verdict.after.lost });
    },
  );

  it('the log likelihood ratio it prints is the sum of the terms it prints', async () => {
    const told = await cli.ask(exports('price-rise'), 'explain');
    const line: string = told.json.answer.evidence.find((one: string) => one.includes('Last block'));
    const terms = [...line.matchAll(/([\d,]+) ln\(([\d.]+) \/ ([\d.]+)\)/g)].map(
      ([, times, a, b]) => Number(times!.replaceAll(',', '')) * Math.log(Number(a) / Number(b)),
    );
    const printed = Number(/\) = ([\d.]+)\./.exec(line)![1]);
    expect(terms).toHaveLength(2);
    // Rates are printed with four decimals, so the terms carry their rounding.
    expect(Math.abs(terms[0]! + terms[1]! - printed)).toBeLessThan(0.5);
    expect(printed).toBeCloseTo(
      told.json.explain.steps.find((one: { title: string }) => one.title === 'Last block').ratio,
      2,
    );
  });

  it.each(['p-prime', 'g', 't', 'ewma', 'cusum'])('a chart of the kind %s is explained too', async (kind) => {
    const told = await cli.ask(exports('nothing-changed'), 'explain', '--chart', kind);
    expectSound(told);
    expect(told.json.explain.chartKind).toBe(kind);
    expect(told.json.explain.steps.map(({ title }: { title: string }) => title)).toContain('Verdict');
  });

  it('trial limits, one point, nobody lost, everybody lost, uneven points, a split level: a way to the verdict each', async () => {
    const uneven = (point: number): number => [2, 10, 3, 12, 1, 9, 2, 11][point % 8]!;
    const cases: [number, (point: number) => number][] = [
      [18, (point) => [3, 5, 4, 2, 6][point % 5]!],
      [1, () => 4],
      [14, () => 0],
      [14, () => 50],
      [24, uneven],
      [34, (point) => (point < 12 ? 2 : 12)],
      [20, (point) => (point < 10 ? 2 : 14)],
    ];
    for (const [points, lost] of cases) {
      const told = await cli.ask(
        cli.file(made(points, lost)),
        'explain',
        ...AT.slice(0, 4),
        ...(points > 20 ? [] : ['--chart', 'p']),
      );
      expectSound(told);
    }
  });
});
