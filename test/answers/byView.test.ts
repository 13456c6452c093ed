import { describe, expect, it } from 'vitest';
import type { AccountTable } from '../../src/accounts/types.ts';
import { answerQuestion } from '../../src/answers/answerQuestion.ts';
import type { Answer } from '../../src/answers/types.ts';
import { contractJson, pointsCsv } from '../../src/cli/contractJson.ts';
import { addMonths, isoDay } from '../../src/days.ts';
import type { Question } from '../../src/requests/types.ts';
import { day, exportReader } from '../accounts/exportFile.ts';

const files = exportReader();
const FIRST = day('2022-01-03');

/** Accounts started evenly over 900 days that renew by the month; each renewal is lost with the chance that holds on its date. */
function monthly(chance: (due: number) => number, perDay = 3, days = 900): string {
  let seed = 7;
  const next = (): number => {
    seed = (Math.imul(seed, 1_664_525) + 1_013_904_223) >>> 0;
    return seed / 2 ** 32;
  };
  const rows: string[] = [];
  const asOf = FIRST + days;
  for (let start = FIRST; start <= asOf; start++) {
    for (let i = 0; i < perDay; i++) {
      let end = '';
      for (let k = 1; addMonths(start, k) <= asOf && end === ''; k++) {
        const due = addMonths(start, k);
        if (next() < chance(due)) end = isoDay(due);
      }
      rows.push(`k${rows.length},${isoDay(start)},${end}`);
    }
  }
  return `id,start,end\n${rows.join('\n')}\n`;
}

async function asked(content: string, question: Partial<Question>): Promise<Answer> {
  const answer = await files.with(content, { asOf: FIRST + 900 }, (table: AccountTable) =>
    answerQuestion(
      table,
      { ...question, kind: 'ask' },
      { subject: 'seeds.csv', picture: true, clock: () => 0, readMs: 0 },
    ),
  );
  for (const text of said(answer)) {
    expect(text).not.toMatch(/accounts? (that )?start(ed|ing)\b(?! then)|not yet customers|NaN|Infinity|undefined/);
  }
  return answer;
}

/** Everything that is said about an answer, on its picture too. */
function said({ verdict, picture }: Answer): string[] {
  return [
    verdict.headline,
    ...verdict.evidence,
    ...verdict.cautions,
    ...verdict.next,
    picture!.altText,
    ...[...picture!.svg.matchAll(/<text[^>]*>([^<]*)</g)].map((match) => match[1]!),
  ];
}

const doubled = monthly((due) => (due < day('2023-10-01') ? 0.06 : 0.12));

describe('has churn moved, by renewal', () => {
  it('finds renewals lost twice as often, and dates it by renewal', async () => {
    const { verdict, chart, census, plan } = await asked(doubled, {
      view: 'renewal',
      tenure: { count: 1, unit: 'month' },
    });
    expect(verdict.outcome).toBe('risen');
    expect(verdict.headline).toMatch(
      /^Churn has risen: about 1\d\.\d % of renewals are lost since about \d+ (September|October) 2023, up from the usual \d\.\d %\.$/,
    );
    expect(verdict.evidence.join(' ')).toMatch(/Counted in order of renewal date: \d+ points of \d+ renewals each/);
    expect(verdict.cautions.join(' ')).toMatch(/The export holds no renewals: one is taken to come every month/);
    expect(new Set(chart!.points.map(({ accounts }) => accounts))).toEqual(new Set([plan!.subgroupSize]));
    expect(plan!.rate).toBeCloseTo(
      census!.subgroups.reduce((sum, { lost }) => sum + lost, 0) / (census!.subgroups.length * plan!.subgroupSize),
      2,
    );
  });

  it('the size asked for is kept, and one larger than the data is too early to tell', async () => {
    expect((await asked(doubled, { view: 'renewal', subgroupSize: 321 })).chart!.subgroupSize).toBe(321);
    const { verdict, chart } = await asked(doubled, { view: 'renewal', subgroupSize: 9_000_000 });
    expect(chart).toBeNull();
    expect(verdict).toMatchObject({ outcome: 'too-early' });
    expect(verdict.headline).toMatch(/only [\d,]+ renewals so far/);
  });

  it('with nobody or everybody lost there is no level to compare with, and it says so', async () => {
    const none = await asked(
      monthly(() => 0, 1),
      { view: 'renewal', subgroupSize: 50 },
    );
    expect(none.verdict.headline).toBe(
      'Cannot say whether churn has moved: no renewal was lost in the points that set the usual level.',
    );
    const all = await asked(
      monthly(() => 1, 1),
      { view: 'renewal', tenure: { count: 1, unit: 'month' }, subgroupSize: 30 },
    );
    expect(all.verdict.headline).toMatch(/every renewal was lost/);
  });
});

describe('has churn moved, by calendar month', () => {
  it('finds the month from which customers leave twice as often, each month with its own limits', async () => {
    const answer = await asked(doubled, { view: 'calendar' });
    const { verdict, chart, dates } = answer;
    expect(verdict.outcome).toBe('risen');
    expect(verdict.headline).toMatch(
      /^Churn has risen: about \d+\.\d % of customers are lost in a month since about (September|October|November) 2023, up from the usual \d\.\d %\.$/,
    );
    expect(verdict.before!.accounts).toBeGreaterThan(1_000);
    expect(verdict.evidence.join(' ')).toMatch(/of [\d,]+ customer-months; 95 % interval/);
    expect(verdict.cautions.join(' ')).toMatch(/Calendar months mix young and old accounts/);
    expect(verdict.cautions.join(' ')).toMatch(/more than 25 % from their mean \(common practice, no source\)/);
    expect(verdict.evidence.join(' ')).toContain('June 2024 is not over in the data and left out');
    const [first, last] = [chart!.points[5]!, chart!.points.at(-1)!];
    expect(first.upper - first.lower).toBeGreaterThan(last.upper - last.lower);
    expect(dates.every(({ firstStart, lastStart }) => addMonths(firstStart!, 1) === lastStart! + 1)).toBe(true);

    const json = contractJson(answer) as {
      chart: Record<string, unknown>;
      data: Record<string, unknown>;
      plan: unknown;
    };
    expect(json.chart).toMatchObject({ view: 'calendar', subgroupSize: null });
    expect(json).toMatchObject({
      plan: null,
      data: { tenure: null, matured: chart!.points.reduce((n, p) => n + p.accounts, 0) },
    });
    expect(pointsCsv(answer).split('\n')[0]).toBe(
      'index,accounts,lost,value,sigma,lower,upper,firstStart,lastStart,asOf,exactLower,exactUpper',
    );
  });

  it('too few months are too early to tell, and the month is named from which there are enough', async () => {
    const { verdict } = await asked(
      monthly(() => 0.1),
      { view: 'calendar', asOf: day('2022-07-10') },
    );
    expect(verdict.headline).toBe(
      'Too early to say whether churn has moved: only 5 full months so far, and at least 12 are needed.',
    );
    expect(verdict.next[0]).toBe('There will be 12 months after 31 January 2023.');
  });

  it('with no full month it says so', async () => {
    const { verdict, chart } = await asked(
      monthly(() => 0.1),
      { view: 'calendar', asOf: day('2022-01-20') },
    );
    expect(chart).toBeNull();
    expect(verdict.headline).toMatch(/there is no full month with customers yet/);
  });

  it('with nobody lost there is no level to compare with', async () => {
    const { verdict } = await asked(
      monthly(() => 0, 1),
      { view: 'calendar' },
    );
    expect(verdict).toMatchObject({ outcome: 'cannot-say' });
    expect(verdict.headline).toMatch(/no customer was lost/);
  });

  it('a kind of chart that months cannot have is refused', async () => {
    await expect(asked(doubled, { view: 'calendar', chart: 'g' })).rejects.toMatchObject({ code: 'OPTION_INVALID' });
  });
});
