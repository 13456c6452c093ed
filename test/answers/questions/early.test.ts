import { describe, expect, it } from 'vitest';
import { seededUniform } from '../../../src/charts/random/uniform.ts';
import { dayFromIso } from '../../../src/days.ts';
import { asker, expectSound, type Row } from './asked.ts';

const cli = asker();
const first = dayFromIso('2023-01-02')!;
const AT = ['--tenure', '3 months', '--subgroup-size', '80'];

/** Three accounts a day; the i-th is lost within three months with this chance. The newest are too young to be counted. */
function rows(accounts: number, rate: (i: number) => number, seed = 21): Row[] {
  const uniform = seededUniform(seed);
  return Array.from({ length: accounts }, (_, i) => {
    const start = first + Math.floor(i / 3);
    const [lost, when] = [uniform() < rate(i), uniform()];
    return { start, end: lost ? start + 3 + Math.floor(when * 80) : null };
  });
}

describe('early', () => {
  it('is quiet while nothing changes, and says how often it cries wolf and how soon it would see a move', async () => {
    const told = await cli.ask(cli.file(rows(3_300, () => 0.07)), 'early', ...AT);
    expectSound(told);
    const { answer, early } = told.json;
    expect(early).toMatchObject({ state: 'quiet', direction: null, baselinePoints: 25 });
    expect(answer.headline).toMatch(/^The early watch is quiet: the newest accounts do not look like a rise to /);
    // About two years of three accounts a day, both directions together.
    expect(early.falseAlarmEvery.method).toMatch(/^exact$|^simulated$/);
    expect(early.falseAlarmEvery.weeks / 52.18).toBeGreaterThan(1.7);
    expect(early.falseAlarmEvery.weeks / 52.18).toBeLessThan(2.6);
    for (const side of [early.rise, early.fall]) {
      expect(side.accountsToAlarm).toBeLessThan(early.falseAlarmEvery.accounts / 2);
      expect(side.weeksToAlarm).toBeCloseTo(side.accountsToAlarm / early.inflowPerWeek, 9);
      expect(side.wayToAlarm).toBeLessThan(0.5);
    }
    expect(early.rise.to).toBeCloseTo(1.5 * early.usual.rate, 12);
    expect(early.fall.to).toBeCloseTo(0.5 * early.usual.rate, 12);
    const said = answer.evidence.join(' ');
    expect(said).toMatch(
      /With nothing changed, an alarm in either direction comes about once in [\d,]+ accounts \(about \d+/,
    );
    expect(said).toMatch(/A lasting rise to .* after about \d+ accounts \(about \d+ weeks?\)/);
    expect(said).toMatch(/The verdict itself, from full points: Churn is steady/);
    expect(answer.cautions[0]).toMatch(/^This is an early watch and not the verdict/);
    expect(answer.cautions.join(' ')).toMatch(/not had 3 months yet are not counted, also when they have left already/);
  });

  it('follows the accounts of the unfinished point, and not one that is too young', async () => {
    const told = await cli.ask(cli.file(rows(3_301, () => 0.07)), 'early', ...AT);
    const { early, data } = told.json;
    const asked = await cli.ask(cli.file(rows(3_301, () => 0.07)), 'ask', ...AT);
    const { matured, waiting } = asked.json.data;
    expect(waiting).toBeGreaterThan(0);
    expect(early.accounts).toBe(matured - 25 * 80);
    expect(early.unfinished).toBe(waiting);
    expect(early.lastStart < data.asOf).toBe(true);
    // The lost ones after the baseline, those of the unfinished point among them.
    const charted = asked.json.chart.points.slice(25);
    const lost = charted.reduce((sum: number, point: { lost: number }) => sum + point.lost, 0);
    expect(early.lost - lost).toBeGreaterThanOrEqual(0);
    expect(early.lost - lost).toBeLessThanOrEqual(waiting);
  });

  it('that young accounts have left already changes nothing', async () => {
    const calm = rows(3_300, () => 0.07);
    const fled = calm.map((row, i) => (i >= 3_040 ? { ...row, end: row.start + 1 } : row));
    const as = ['--as-of', '2026-01-04'];
    const [one, other] = [
      await cli.ask(cli.file(calm), 'early', ...AT, ...as),
      await cli.ask(cli.file(fled), 'early', ...AT, ...as),
    ];
    expect(other.json.early).toEqual(one.json.early);
  });

  it.each([
    ['rise', 0.14],
    ['fall', 0.02],
  ] as const)('raises an alarm for a %s, says since when, and that it is not the verdict', async (direction, to) => {
    const told = await cli.ask(cli.file(rows(3_300, (i) => (i < 2_500 ? 0.07 : to))), 'early', ...AT);
    expectSound(told);
    const { answer, early } = told.json;
    expect(early).toMatchObject({ state: 'alarm', direction });
    expect(early[direction].wayToAlarm).toBeGreaterThanOrEqual(1);
    expect(answer.headline).toMatch(
      /^The early watch has raised an alarm: .*This is an early watch, not the verdict\.$/,
    );
    const since = dayFromIso(early[direction].since.start)!;
    expect(Math.abs(since - (first + 2_500 / 3))).toBeLessThan(120);
    expect(early[direction].alarm.start >= early[direction].since.start).toBe(true);
    expect(early[direction].alarm.readOn > early[direction].alarm.start).toBe(true);
  });

  it('watches for the move that is named, on its own side', async () => {
    const path = cli.file(rows(3_300, () => 0.07));
    const usual = (await cli.ask(path, 'early', ...AT)).json.early;
    const doubling = await cli.ask(path, 'early', 'for', 'a', 'doubling', ...AT);
    expectSound(doubling);
    expect(doubling.json.early.rise.to).toBeCloseTo(2 * usual.usual.rate, 9);
    expect(doubling.json.early.fall).toEqual(usual.fall);
    expect(doubling.json.early.rise.accountsToAlarm).toBeLessThan(usual.rise.accountsToAlarm);
    const fall = await cli.ask(path, 'early', 'for', 'a', 'fall', 'by', '30', '%', ...AT);
    expect(fall.json.early.fall.to).toBeCloseTo(0.7 * usual.usual.rate, 9);
    expect(fall.json.early.rise).toEqual(usual.rise);
    const named = await cli.ask(path, 'early', 'rise', 'to', '12', '%', ...AT);
    expect(named.json.early.rise.to).toBeCloseTo(0.12, 9);
    const near = await cli.ask(path, 'early', 'rise', 'to', '7', '%', ...AT);
    expect(near.json.error).toMatchObject({ code: 'OPTION_INVALID' });
    const tiny = await cli.ask(path, 'early', 'for', 'a', 'rise', 'by', '2', '%', ...AT);
    expect(tiny.code).toBe(2);
    expect(tiny.json.error).toMatchObject({ code: 'OPTION_INVALID' });
    expect(tiny.json.error.hint).toMatch(/10 % or more/);
  });

  it('says clearly why there is nothing to watch: too few, nobody lost, everybody lost, one account', async () => {
    for (const [accounts, rate] of [
      [500, 0.07],
      [2_000, 0],
      [2_000, 1],
      [1, 0],
    ] as const) {
      const told = await cli.ask(cli.file(rows(accounts, () => rate)), 'early', ...AT);
      expectSound(told);
      expect(told.json.answer.headline).toMatch(
        /^No early watch is possible: it needs a usual level to watch against\. (Too early|Cannot say)/,
      );
      expect(told.json.early).toMatchObject({ state: null, rise: null, fall: null });
    }
  });

  it('answers for next to nobody lost, next to nobody kept, and a chart with hardly a point to watch', async () => {
    for (const [accounts, rate] of [
      [3_000, 0.002],
      [3_000, 0.997],
      [1_240, 0.3],
      [3_000, 0.5],
    ] as const) {
      const told = await cli.ask(cli.file(rows(accounts, () => rate, 5)), 'early', ...AT);
      expectSound(told);
    }
  });
});

describe('has it moved, account by account', () => {
  it.each([
    ['risen', 0.12, 'above'],
    ['fallen', 0.025, 'below'],
  ] as const)('reads as %s when it has, with when and how much', async (outcome, to, side) => {
    const path = cli.file(rows(4_000, (i) => (i < 2_800 ? 0.07 : to)));
    const { code, json, png } = await cli.ask(path, 'ask', '--chart', 'cusum', ...AT);
    expect(code).toBe(0);
    expect(png!.length).toBeGreaterThan(10_000);
    const { verdict, chart, trust } = json;
    expect(verdict.outcome).toBe(outcome);
    expect(Math.abs(dayFromIso(verdict.since.start)! - (first + 2_800 / 3))).toBeLessThan(60);
    expect(chart).toMatchObject({ kind: 'cusum', scale: 'score', center: 0 });
    const standing = chart.signals.filter((signal: { state: string }) => signal.state === 'standing');
    expect(standing).toHaveLength(1);
    expect(standing[0]).toMatchObject({ side, speaks: 'shift' });
    expect(standing[0].words).toMatch(/account-by-account sum/);
    // Every matured account is on the chart, those of the unfinished point too.
    const total = (key: 'accounts' | 'lost') =>
      chart.points.reduce((sum: number, point: Record<string, number>) => sum + point[key]!, 0);
    expect(total('accounts')).toBe(json.data.matured);
    expect(verdict.before.accounts + verdict.after.accounts).toBeLessThanOrEqual(json.data.matured);
    const newest = chart.points.at(-1);
    if (side === 'above') expect(newest.value).toBeGreaterThan(newest.upper);
    else expect(newest.value).toBeLessThan(newest.lower);
    expect(trust.falseVerdictChance).toBeLessThanOrEqual(0.05);
    expect(trust.falseAlarmEvery).toBeGreaterThan(10);
    expect(JSON.stringify(json)).not.toMatch(/NaN|Infinity/);
  });

  it('is steady while nothing changes, and says what it could have missed', async () => {
    const { json } = await cli.ask(cli.file(rows(4_000, () => 0.07)), 'ask', '--chart', 'cusum', ...AT);
    expect(json.verdict.outcome).toBe('steady');
    expect(json.verdict.evidence.join(' ')).toMatch(
      /A lasting rise to .* would by now have been reported with 80 % chance/,
    );
    expect(json.verdict.evidence.join(' ')).toMatch(/accounts one by one/);
    expect(json.verdict.headline).toMatch(/the usual [5-9]\.\d %/);
  });

  it('without a usual level shows the shares and says so', async () => {
    const { json, code } = await cli.ask(cli.file(rows(500, () => 0.07)), 'ask', '--chart', 'cusum', ...AT);
    expect(code).toBe(0);
    expect(json.verdict.outcome).toBe('too-early');
    expect(json.verdict.cautions[0]).toMatch(/^No account-by-account sum is drawn/);
  });
});

describe('has it moved, smoothed', () => {
  it('answers on an EWMA chart from words and from the option alike', async () => {
    const path = cli.file(rows(4_000, (i) => (i < 2_600 ? 0.07 : 0.11)));
    const option = await cli.ask(path, 'ask', '--chart', 'ewma', ...AT);
    const words = await cli.ask(path, 'ask', 'has', 'churn', 'moved', 'on', 'a', 'smoothed', 'chart', ...AT);
    for (const { json, code, png } of [option, words]) {
      expect(code).toBe(0);
      expect(png!.length).toBeGreaterThan(10_000);
      expect(json.chart.kind).toBe('ewma');
      expect(json.verdict.outcome).toBe('risen');
      expect(json.verdict.evidence.join(' ')).toMatch(/an EWMA chart/);
      expect(json.trust.falseVerdictChance).toBeLessThanOrEqual(0.05);
    }
    expect(words.json.verdict).toEqual(option.json.verdict);
    const { points, center } = option.json.chart;
    let z = center;
    for (const point of points) {
      z = 0.1 * (point.lost / point.accounts) + 0.9 * z;
      expect(point.value).toBeCloseTo(z, 12);
    }
  });
});
