import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { dayFromIso } from '../../src/days.ts';
import { putIntoWords } from '../../src/requests/putIntoWords.ts';
import type { Question, Request, RequestContext } from '../../src/requests/types.ts';
import { understand } from '../../src/requests/understand.ts';

const day = (iso: string): number => dayFromIso(iso)!;
const context: RequestContext = {
  today: day('2026-07-12'),
  segments: ['Windowsill', 'Allotment', 'Orchard'],
  segmentColumn: 'plan',
  asOf: day('2026-06-30'),
};
const asks = (text: string, extra: Partial<RequestContext> = {}): unknown => {
  const found = understand(text, { ...context, ...extra });
  expect(found.notUnderstood, text).toEqual([]);
  return found.request;
};
const months = (count: number) => ({ count, unit: 'month' as const });

describe('a question in plain words', () => {
  it.each([
    ['has churn moved', {}],
    ['churn?', {}],
    ['', {}],
    ['did we lose more Orchard customers', { segment: { value: 'Orchard' } }],
    ['is churn up at 90 days', { tenure: { count: 90, unit: 'day' } }],
    [
      'has churn moved at 6 months for the allotment plan since March?',
      { tenure: months(6), segment: { value: 'Allotment' }, since: day('2026-03-01') },
    ],
    ['Are we losing more customers at half a year?', { tenure: months(6) }],
    ['churn at a quarter', { tenure: months(3) }],
    ['is churn down after a year', { tenure: months(12) }],
    ['6-month churn for orchards', { tenure: months(6), segment: { value: 'Orchard' } }],
    ['90d churn', { tenure: { count: 90, unit: 'day' } }],
    ['churn by month three', { tenure: months(3) }],
    ['has churn moved in subgroups of 120', { subgroupSize: 120 }],
    ['churn with n=1,200', { subgroupSize: 1200 }],
    ['churn, 80 accounts per point', { subgroupSize: 80 }],
    ['churn after the 3rd month', { tenure: months(3) }],
    ['m3 churn, better than before?', { tenure: months(3) }],
    ['set the baseline to 30 points for churn', { baseline: 30 }],
    ['has churn moved, baseline 30', { baseline: 30 }],
    ['has churn moved, with the usual level from the first 30 points', { baseline: 30 }],
    ['has churn moved as of 30 June 2025', { asOf: day('2025-06-30') }],
    ['has churn moved with data through June 2025', { asOf: day('2025-06-30') }],
    ['has churn moved, export complete to 2025-06-30', { asOf: day('2025-06-30') }],
    ['has churn moved since the start of 2025', { since: day('2025-01-01') }],
    ['has churn moved since Q2 2025', { since: day('2025-04-01') }],
    ['has churn moved since June 3rd, 2025', { since: day('2025-06-03') }],
    ['has churn moved since 30 June', { since: day('2026-06-30') }],
    ['has churn moved since 30.06.2025', { since: day('2025-06-30') }],
    ['is churn worse for accounts starting in March', { since: day('2026-03-01') }],
    ['has churn moved, allowing 14 days for late cancellations', { settleDays: 14 }],
    ['has churn moved since two weeks ago', { since: day('2026-06-16') }],
    ['churn for the orchrad plan', { segment: { value: 'Orchard' } }],
    ['churn for the windowsil', { segment: { value: 'Windowsill' } }],
    ['where plan is Orchard', { segment: { column: 'plan', value: 'Orchard' } }],
  ])('%s', (text, wanted) => {
    expect(asks(text)).toEqual({ kind: 'ask', ...wanted });
  });

  it('takes "since March" for the last March before the data ends, not before today', () => {
    expect(asks('has churn moved since March', { asOf: day('2026-02-10') })).toMatchObject({
      since: day('2025-03-01'),
    });
    expect(asks('has churn moved since March as of 1 February 2025')).toMatchObject({ since: day('2024-03-01') });
  });

  it('reads a contract length as the plan where the data has such a plan, and says so where it has not', () => {
    const plans = ['Annual', 'Monthly', '3 months'];
    expect(asks('churn for the annual plan', { segments: plans })).toMatchObject({ segment: { value: 'Annual' } });
    expect(asks('churn for yearly customers', { segments: plans })).toMatchObject({ segment: { value: 'Annual' } });
    expect(asks('churn at 6 months for the 3 months plan', { segments: plans })).toEqual({
      kind: 'ask',
      tenure: months(6),
      segment: { value: '3 months' },
    });
    const without = understand('churn for the annual plan', context);
    expect(without.notUnderstood).toEqual([
      { text: 'for the annual', nearest: expect.stringContaining('Windowsill, Allotment, Orchard') },
    ]);
  });

  it('finds a plan by one of its words when no other plan holds that word', () => {
    expect(asks('churn for orchard', { segments: ['Orchard (old price)', 'Allotment'] })).toMatchObject({
      segment: { value: 'Orchard (old price)' },
    });
    const two = understand('churn for orchard', { ...context, segments: ['Orchard (old)', 'Orchard (new)'] });
    expect(two.request).toEqual({ kind: 'ask' });
    expect(two.notUnderstood).toHaveLength(1);
  });
});

describe('the questions around the verdict', () => {
  it.each([
    ['where', { kind: 'where' }],
    ['where did churn move?', { kind: 'where' }],
    ['which plans moved at 6 months?', { kind: 'where', tenure: months(6) }],
    ['has churn moved by plan', { kind: 'where' }],
    ['churn by plan since 2025', { kind: 'where', since: day('2025-01-01') }],
    ['churn per tier?', { kind: 'where' }],
    ['plan', { kind: 'plan' }],
    ['plan for a halving within 6 points', { kind: 'plan', move: 0.5, within: 6 }],
    ['plan for a rise by 30 %', { kind: 'plan', move: 1.3 }],
    ['how should we count churn at 3 months?', { kind: 'plan', tenure: months(3) }],
    ['how many accounts do we need for a fall by a quarter?', { kind: 'plan', move: 0.75 }],
    ['how long until a verdict for Orchard?', { kind: 'plan', segment: { value: 'Orchard' } }],
    ['early', { kind: 'early' }],
    ['early warning for Allotment', { kind: 'early', segment: { value: 'Allotment' } }],
    ['early for a doubling', { kind: 'early', move: 2 }],
    ['early, rise to 9 %', { kind: 'early', to: 0.09 }],
    ['early watch for a fall to 2.5 percent', { kind: 'early', to: 0.025 }],
    ['revenue', { kind: 'revenue' }],
    ['has revenue churn moved for Orchard?', { kind: 'revenue', segment: { value: 'Orchard' } }],
    ['reconcile 14.2%', { kind: 'reconcile', rate: 0.142, decimals: 1 }],
    ['reconcile 3 % for March 2025', { kind: 'reconcile', rate: 0.03, decimals: 0, month: day('2025-03-01') }],
    ['where does 14.2 % come from?', { kind: 'reconcile', rate: 0.142, decimals: 1 }],
    ['worth', { kind: 'worth' }],
    ['what is a customer worth at 6 months?', { kind: 'worth', tenure: months(6) }],
    ['customer lifetime value', { kind: 'worth' }],
    ['target 5%', { kind: 'target', rate: 0.05 }],
    [
      'is the target of 4.5 percent met at 90 days?',
      { kind: 'target', rate: 0.045, tenure: { count: 90, unit: 'day' } },
    ],
    ['target 0.05', { kind: 'target', rate: 0.05 }],
    ['spread', { kind: 'spread' }],
    ['show the histogram', { kind: 'spread' }],
    ['explain', { kind: 'explain' }],
    ['how did you get this?', { kind: 'explain' }],
    ['explain with a p chart', { kind: 'explain', chart: 'p' }],
  ])('%s', (text, wanted) => {
    expect(asks(text)).toEqual(wanted);
  });

  it.each(['target', 'reconcile for March'])('%s: asks for the figure that is missing', (text) => {
    const found = understand(text, context);
    expect(found.request).toEqual({ kind: 'help' });
    expect(found.notUnderstood[0]!.nearest).toMatch(/Say the figure with it/);
  });

  it.each([
    ['has churn moved with a g chart', { chart: 'g' }],
    ['churn as an EWMA chart', { chart: 'ewma' }],
    ['has churn moved, cusum', { chart: 'cusum' }],
    ['has churn moved, account by account', { chart: 'cusum' }],
    ['has churn moved by calendar month', { view: 'calendar' }],
    ['monthly churn', { view: 'calendar' }],
    ['has churn moved by renewal date', { view: 'renewal' }],
    ['churn by month three', { tenure: months(3) }],
  ])('%s', (text, wanted) => {
    expect(asks(text)).toEqual({ kind: 'ask', ...wanted });
  });
});

describe('other requests', () => {
  it.each(['help', 'Help!', 'what can you do?', 'how do I use this'])('%s asks for help', (text) => {
    expect(understand(text, context).request).toEqual({ kind: 'help' });
  });
  it.each(['data', 'what did you read', 'what did you read?', 'show me the data', 'which columns', 'what was read?'])(
    '%s asks what was read',
    (text) => {
      expect(understand(text, context).request).toEqual({ kind: 'data' });
    },
  );
  it.each(['thank you!', 'why?', 'bananas'])(
    '"%s" alone asks nothing about churn and gets help, not a verdict',
    (text) => {
      expect(understand(text, context).request.kind).toBe('help');
    },
  );
});

describe('words that find no use', () => {
  it.each([
    ['has churn moved by country', 'by country', /one at a time.* Name one plan .*: Windowsill, Allotment, Orchard/],
    [
      'what is our churn rate?',
      'what is our churn rate',
      /whether the rate has moved.*question answered here.*usual rate/,
    ],
    ['how many customers did we lose', 'how many customers did we lose', /question answered here/],
    ["what's the Orchard churn", "what's the Orchard churn", /question answered here/],
    ['how high is churn', 'how high is churn', /question answered here/],
    ['churn rate at 6 months', 'churn rate', /question answered here/],
    ['is churn up this month?', 'this month', /single month cannot be read.*one and the same age/],
    ['did churn rise last quarter', 'last quarter', /single month cannot be read/],
    ['did churn rise in June', 'in June', /single month cannot be read/],
    ['why did churn rise', 'why', /not why/],
    ['forecast churn', 'forecast', /do not forecast/],
    ['who churned', 'who', /never name/],
    ['has churn moved over the last 6 months', 'over the last 6 months', /since 1 March/],
    ['has churn moved in 2025', 'in 2025', /since 1 March/],
    ['has churn moved since the recipe cards', 'since the recipe cards', /first start date/],
    ['has churn moved since 03/04/2025', 'since 03/04/2025', /two ways/],
    ['churn in subgroups of 1', 'subgroups of 1', /at least 2/],
    ['churn at 3 months and 6 months', '6 months', /one age at a time/],
    ['churn of bananas', 'of bananas', /whether churn has moved/],
  ])('%s: reports "%s" with the nearest thing it can do', (text, piece, nearest) => {
    const found = understand(text, context);
    expect(found.notUnderstood.map((one) => one.text)).toEqual([piece]);
    expect(found.notUnderstood[0]!.nearest).toMatch(nearest);
  });

  it.each(['has churn moved by plan Orchard', 'has the churn rate moved', 'has churn moved since this month'])(
    '%s: leaves nothing over',
    (text) => {
      asks(text);
    },
  );

  it('says that there are no groups when the export has none', () => {
    const found = understand('has churn moved by country', { ...context, segments: [] });
    expect(found.notUnderstood[0]!.nearest).toMatch(/no column that tells groups apart/);
  });

  it('uses the first of two groups and reports the other', () => {
    const found = understand('has churn moved for Orchard and Allotment', context);
    expect(found.request).toEqual({ kind: 'ask', segment: { value: 'Orchard' } });
    expect(found.notUnderstood.map((one) => one.text)).toEqual(['Allotment']);
  });
});

describe('put back into words', () => {
  it('reads as a sentence', () => {
    const request: Question = {
      kind: 'ask',
      tenure: months(6),
      segment: { value: 'Orchard' },
      since: day('2025-03-01'),
    };
    expect(putIntoWords(request)).toBe(
      'has churn at 6 months moved for “Orchard”, judging accounts that started from 1 March 2025 on against those before?',
    );
  });

  const text = fc
    .string({ minLength: 1, maxLength: 20, unit: 'grapheme' })
    .filter((value) => value.trim() !== '' && !/[\uE000-\uF8FF]/.test(value));
  const days = fc.integer({ min: 0, max: 80_000 });
  const segments = fc.uniqueArray(
    fc.oneof(text, fc.constantFrom('since March', '6 months', 'Orchard', 'baseline 30', 'a “quoted” one')),
    { minLength: 1, maxLength: 6, selector: (value) => value.toLowerCase() },
  );
  const percents = fc.integer({ min: 1, max: 9_999 }).map((n) => n / 100);
  const moves = fc.integer({ min: 1, max: 99 }).chain((n) => fc.constantFrom((100 - n) / 100, (100 + n) / 100));
  const asked = fc.oneof(
    fc.record({ kind: fc.constantFrom('ask', 'where', 'revenue', 'worth', 'spread', 'explain' as const) }),
    fc.record(
      { kind: fc.constant('plan' as const), move: moves, within: fc.integer({ min: 1, max: 50 }) },
      { requiredKeys: ['kind'] },
    ),
    fc.record({ kind: fc.constant('early' as const), move: moves }, { requiredKeys: ['kind'] }),
    fc.record({ kind: fc.constant('early' as const), to: percents.map((n) => Number((n / 100).toPrecision(12))) }),
    fc.record({ kind: fc.constant('target' as const), rate: percents.map((n) => Number((n / 100).toPrecision(12))) }),
    fc.record(
      {
        kind: fc.constant('reconcile' as const),
        rate: percents.map((n) => Number((n / 100).toPrecision(12))),
        decimals: fc.constant(2),
        month: fc.constantFrom(day('2024-05-01'), day('2025-12-01')),
      },
      { requiredKeys: ['kind', 'rate', 'decimals'] },
    ),
  );
  const question = segments.chain((values) =>
    fc.record({
      values: fc.constant(values),
      request: fc.record(
        {
          tenure: fc.record({
            count: fc.integer({ min: 1, max: 999 }),
            unit: fc.constantFrom('day' as const, 'week' as const, 'month' as const),
          }),
          subgroupSize: fc.integer({ min: 2, max: 100_000 }),
          baseline: fc.integer({ min: 2, max: 500 }),
          settleDays: fc.integer({ min: 0, max: 400 }),
          segment: fc.record(
            { value: fc.constantFrom(...values), column: fc.constant('plan name') },
            { requiredKeys: ['value'] },
          ),
          since: days,
          asOf: days,
          view: fc.constantFrom('calendar' as const, 'renewal' as const),
          chart: fc.constantFrom('p', 'p-prime', 'g', 't', 'individuals', 'ewma', 'cusum' as const),
        },
        { requiredKeys: [] },
      ),
      asked,
    }),
  );

  it('any request survives being put into words and understood again', () => {
    fc.assert(
      fc.property(question, ({ values, request: scope, asked }) => {
        const request = { ...scope, ...asked } as Request;
        const again = understand(putIntoWords(request), { ...context, segments: values, segmentColumn: 'plan name' });
        expect(again.request).toEqual(request);
        expect(again.notUnderstood).toEqual([]);
      }),
      { numRuns: 500 },
    );
  });

  it('help and data survive too', () => {
    for (const kind of ['help', 'data'] as const)
      expect(understand(putIntoWords({ kind }), context).request).toEqual({ kind });
  });

  it('never throws, whatever is typed', () => {
    fc.assert(
      fc.property(fc.string({ maxLength: 200, unit: 'binary' }), (typed) => {
        expect(understand(typed, context).understood).not.toBe('');
      }),
    );
  });
});
