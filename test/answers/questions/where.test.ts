import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { describe, expect, test } from 'vitest';
import { answerQuestion } from '../../../src/answers/answerQuestion.ts';
import { answerSide } from '../../../src/answers/questions/answerSide.ts';
import type { Reply } from '../../../src/answers/questions/types.ts';
import { binomialSampler } from '../../../src/charts/random/binomialSampler.ts';
import { seededUniform } from '../../../src/charts/random/uniform.ts';
import { isoDay } from '../../../src/days.ts';
import type { SideQuestionOf } from '../../../src/requests/types.ts';
import { day, exportReader } from '../../accounts/exportFile.ts';

const files = exportReader();
const FIRST = day('2023-01-02');
const AS_OF = day('2025-06-30');

interface Plan {
  readonly value: string;
  readonly accounts: number;
  readonly rate: number;
  /** rate of accounts that start from this fraction of the history on */
  readonly later?: { readonly from: number; readonly rate: number };
}

/** An export of plans whose accounts start evenly over the history, each lost at 40 days or never. */
function exportOf(plans: readonly Plan[], seed = 3): string {
  const uniform = seededUniform(seed);
  const days = AS_OF - 100 - FIRST;
  const rows = plans.flatMap(({ value, accounts, rate, later }) =>
    Array.from({ length: accounts }, (_, i) => {
      const start = FIRST + Math.floor((i / accounts) * days);
      const now = later && i >= later.from * accounts ? later.rate : rate;
      const lost = binomialSampler(1, now).draw(uniform) === 1;
      return `${value}-${i},${isoDay(start)},${lost ? isoDay(start + 40) : ''},${value}`;
    }),
  );
  return `id,start,end,plan\n${rows.join('\n')}\nlast,${isoDay(AS_OF - 1)},,${plans[0]!.value}\n`;
}

async function where(content: string | Uint8Array, request: Partial<SideQuestionOf<'where'>> = {}): Promise<Reply> {
  return files.with(content, { asOf: AS_OF, columns: { segment: 'plan' } }, (table) => ask(table, request));
}

const ask = async (
  table: Parameters<typeof answerSide>[0],
  request: Partial<SideQuestionOf<'where'>> = {},
): Promise<Reply> =>
  (
    await answerSide(
      table,
      { ...request, kind: 'where' },
      { subject: 'Marrowby Seed Club', picture: false, clock: () => 0, readMs: 0 },
    )
  ).reply;

interface Figures {
  readonly lookedAt: number;
  readonly judged: number;
  readonly moved: readonly string[];
  readonly groups: readonly { group: string; finding: string; matured: number; adjustedChance: number | null }[];
  readonly change: { basis: string; difference: number; ratePart: number; mixPart: number } | null;
}
const figures = (reply: Reply): Figures => reply.figures as unknown as Figures;
const text = ({ headline, evidence, cautions, next }: Reply): string =>
  [headline, ...evidence, ...cautions, ...next].join('\n');
const sample = (name: string): Buffer =>
  readFileSync(fileURLToPath(new URL(`../../../fixtures/exports/${name}`, import.meta.url)));

describe('where did churn move', () => {
  test('names the one plan of three that moved, and makes its rate the change of all accounts', async () => {
    const reply = await where(
      exportOf([
        { value: 'Windowsill', accounts: 1_800, rate: 0.06 },
        { value: 'Allotment', accounts: 1_800, rate: 0.06 },
        { value: 'Orchard', accounts: 2_000, rate: 0.06, later: { from: 0.6, rate: 0.18 } },
      ]),
    );
    expect(reply.headline).toMatch(/^Churn has moved in one of the three groups of “plan”: Orchard has risen/);
    const { moved, change, lookedAt, judged } = figures(reply);
    expect(moved).toEqual(['Orchard']);
    expect([lookedAt, judged]).toEqual([3, 3]);
    expect(change!.basis).toBe('move');
    expect(change!.ratePart + change!.mixPart).toBeCloseTo(change!.difference, 12);
    expect(change!.ratePart).toBeGreaterThan(0.9 * change!.difference);
    expect(text(reply)).toContain('The group whose own rate mattered most is Orchard');
    expect(text(reply)).toContain('All accounts together: Churn has risen');
  });

  test('plans that stay as they are while their shares move: none has moved, and the mix makes the change', async () => {
    const reply = await files.with(sample('marrowby-mix-drift.csv'), {}, (table) => ask(table));
    const { moved, change } = figures(reply);
    expect(moved).toEqual([]);
    expect(change!.basis).toBe('move');
    expect(change!.difference).toBeGreaterThan(0.02);
    expect(change!.mixPart).toBeGreaterThan(0.8 * change!.difference);
    expect(text(reply)).toContain('The group whose share mattered most is ');
  });

  test('with no move at all, the stretch that set the level is compared with the rest, and that is said', async () => {
    const reply = await files.with(sample('marrowby-nothing-changed.csv'), {}, (table) => ask(table));
    expect(reply.headline).toBe('Churn has moved beyond chance in none of the three groups of “Plan”.');
    expect(figures(reply).change!.basis).toBe('level');
    expect(text(reply)).toContain('All accounts together show no move to compare before and after');
  });

  test('a group of one account, one that lost nobody and one that lost everybody each get a sentence, with their counts', async () => {
    const reply = await where(
      exportOf([
        { value: 'Orchard', accounts: 1_500, rate: 0.08 },
        { value: 'Single', accounts: 1, rate: 0 },
        { value: 'Free', accounts: 1_500, rate: 0 },
        { value: 'Pilot', accounts: 1_500, rate: 1 },
      ]),
    );
    const found = Object.fromEntries(figures(reply).groups.map(({ group, finding }) => [group, finding]));
    expect(found).toEqual({ Orchard: 'steady', Single: 'too-few', Free: 'no-level', Pilot: 'no-level' });
    const words = text(reply);
    expect(words).toMatch(/Free could not be judged: nobody was lost .* \(0 of its 1,500 accounts in all\)/);
    expect(words).toMatch(/Pilot could not be judged: everybody was lost/);
    expect(words).toMatch(/Single \(1 of /);
    expect(JSON.stringify(reply)).not.toMatch(/NaN|Infinity|undefined/);
  });

  test('five thousand values: the largest one by one, the rest together, and both are said', async () => {
    const reply = await where(
      exportOf([
        { value: 'Orchard', accounts: 1_500, rate: 0.08 },
        ...Array.from({ length: 4_999 }, (_, i) => ({ value: `p${i}`, accounts: 1, rate: 0.08 })),
      ]),
    );
    expect(figures(reply).lookedAt).toBe(13);
    expect(text(reply)).toContain('“plan” has 5,000 values: the twelve with most accounts');
    expect(text(reply)).toContain('The rest (4,988 values)');
  });

  test('accounts without a value are a group of their own', async () => {
    const content = exportOf([
      { value: 'Orchard', accounts: 2_000, rate: 0.08 },
      { value: '', accounts: 1_500, rate: 0.08 },
    ]);
    const reply = await where(content);
    expect(
      figures(reply)
        .groups.map(({ group }) => group)
        .toSorted(),
    ).toEqual(['Orchard', 'the group without “plan”']);
    expect(text(reply)).toContain('1,500 accounts have no “plan”');
  });

  test('too little of everything is said, with what it takes', async () => {
    const reply = await where(
      exportOf([
        { value: 'Orchard', accounts: 60, rate: 0.1 },
        { value: 'Allotment', accounts: 30, rate: 0.1 },
      ]),
    );
    expect(reply.headline).toContain('none could be judged');
    expect(text(reply)).not.toMatch(/NaN|Infinity|undefined|null/);
    expect(figures(reply).judged).toBe(0);
    expect(text(reply)).toContain('2 groups were looked at, and none could be judged.');
    // Of so few points not even the change is told apart.
    expect(figures(reply).change).toBeNull();
  });

  test('a day that was asked about splits every group there', async () => {
    const since = AS_OF - 300;
    const reply = await where(
      exportOf([
        { value: 'Orchard', accounts: 2_000, rate: 0.06, later: { from: 0.75, rate: 0.2 } },
        { value: 'Allotment', accounts: 2_000, rate: 0.06 },
      ]),
      { since },
    );
    expect(figures(reply).moved).toEqual(['Orchard']);
    const { groups } = reply.figures as unknown as {
      groups: readonly { baseline: { last: number }; points: readonly { lastStart: string }[] }[];
    };
    for (const { baseline, points } of groups)
      expect(baseline.last).toBe(points.filter(({ lastStart }) => lastStart < isoDay(since)).length);
  });

  test('a group looks the same as when it is asked about alone: size, points, centre and what its own chart reads', async () => {
    await files.with(sample('marrowby-recipe-cards.csv'), {}, async (table) => {
      const { groups } = (await ask(table)).figures as unknown as {
        groups: readonly {
          group: string;
          direction: string | null;
          subgroupSize: number;
          center: number;
          since: { point: number } | null;
          points: readonly { lost: number }[];
        }[];
      };
      for (const { group, direction, subgroupSize, center, since, points } of groups) {
        const alone = await answerQuestion(
          table,
          { kind: 'ask', segment: { value: group } },
          { subject: 'Marrowby Seed Club', picture: false, clock: () => 0, readMs: 0 },
        );
        expect(alone.plan!.subgroupSize).toBe(subgroupSize);
        expect(alone.chart!.points.map(({ lost }) => lost)).toEqual(points.map(({ lost }) => lost));
        expect(alone.chart!.center).toBe(center);
        expect(alone.verdict.outcome).toBe(direction ?? 'steady');
        expect(alone.verdict.since?.point).toBe(since?.point);
      }
    });
  });

  test('the order of rows changes nothing', async () => {
    const content = exportOf([
      { value: 'Orchard', accounts: 1_500, rate: 0.08 },
      { value: 'Allotment', accounts: 1_200, rate: 0.08 },
    ]);
    const [header, ...rows] = content.trim().split('\n');
    const turned = [header, ...rows.toReversed()].join('\n');
    expect((await where(turned)).figures).toEqual((await where(content)).figures);
  });
});

describe('where, when it cannot be asked', () => {
  const refused = async (run: Promise<unknown>): Promise<{ code: string; message: string; hint: string }> =>
    run.then(
      () => {
        throw new Error('it was answered, and should have been refused');
      },
      (error) => error,
    );

  test('without a column of groups it says how to name one, and which columns are left', async () => {
    const error = await refused(
      files.with(
        `id,start,end,colour\n${Array.from({ length: 30 }, (_, i) => `a${i},2024-01-0${(i % 9) + 1},,c${i}`).join('\n')}\nb,2024-02-01,2024-03-01,c\n`,
        {},
        (table) => ask(table),
      ),
    );
    expect(error).toMatchObject({ code: 'SEGMENT_UNKNOWN' });
    expect(error.message).toContain('no column that groups accounts');
    expect(error.hint).toContain('--columns segment=COLUMN');
    expect(error.hint).toContain('colour');
  });

  test('with one value for all accounts there is nothing to compare', async () => {
    const error = await refused(where(exportOf([{ value: 'Orchard', accounts: 300, rate: 0.1 }])));
    expect(error.code).toBe('SEGMENT_UNKNOWN');
    expect(error.message).toBe('every account has the same “plan”, “Orchard”, so there is no “where” to look at');
  });

  test('one group, another view, or a chart of something else do not go with it', async () => {
    const content = exportOf([
      { value: 'Orchard', accounts: 300, rate: 0.1 },
      { value: 'Allotment', accounts: 300, rate: 0.1 },
    ]);
    expect(await refused(where(content, { segment: { value: 'Orchard' } }))).toMatchObject({
      code: 'OPTION_INVALID',
      hint: 'Leave it out, or ask “has churn moved for Orchard?”.',
    });
    expect(await refused(where(content, { view: 'calendar' }))).toMatchObject({ code: 'OPTION_INVALID' });
    expect(await refused(where(content, { chart: 'ewma' }))).toMatchObject({ code: 'OPTION_INVALID' });
  });
});
