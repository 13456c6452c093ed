import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { dayFromIso } from '../../src/days.ts';
import { putIntoWords } from '../../src/requests/putIntoWords.ts';
import type { Request, RequestContext } from '../../src/requests/types.ts';
import { understand } from '../../src/requests/understand.ts';

const context: RequestContext = {
  today: dayFromIso('2026-07-12')!,
  segments: ['Windowsill', 'Allotment', 'Orchard'],
  segmentColumn: 'plan',
};
const plain = { kind: 'ask' } as const;

describe('a weekly post in words', () => {
  it.each([
    ['every monday at 9:00', { weekday: 1, hour: 9, minute: 0 }, plain],
    ['every Fri at 5pm', { weekday: 5, hour: 17, minute: 0 }, plain],
    ['post every tuesday 08:30', { weekday: 2, hour: 8, minute: 30 }, plain],
    ['each Sunday at 12 am in Europe/Vienna', { weekday: 7, hour: 0, minute: 0, zone: 'Europe/Vienna' }, plain],
    [
      'every monday at 9:00 America/New_York: has churn at 6 months moved for “Orchard”?',
      { weekday: 1, hour: 9, minute: 0, zone: 'America/New_York' },
      { kind: 'ask', tenure: { count: 6, unit: 'month' }, segment: { value: 'Orchard' } },
    ],
    [
      'tell us every wednesday at 10 whether churn moved for Allotment',
      { weekday: 3, hour: 10, minute: 0 },
      { kind: 'ask', segment: { value: 'Allotment' } },
    ],
  ])('%s', (text, time, question) => {
    const found = understand(text, context);
    expect(found.request).toEqual({ kind: 'weekly-set', time, question });
    expect(found.notUnderstood).toEqual([]);
  });

  it.each(['every monday', 'every monday at 25:00', 'every monday at 6 months'])('%s: asks for the time', (text) => {
    const found = understand(text, context);
    expect(found.request).toEqual({ kind: 'help' });
    expect(found.notUnderstood[0]!.nearest).toMatch(/Say the day and the time/);
  });

  it.each([
    ['when do you post?', { kind: 'weekly-show' }],
    ['weekly posts', { kind: 'weekly-show' }],
    ['stop the weekly post', { kind: 'weekly-stop', which: null }],
    ['stop weekly posts', { kind: 'weekly-stop', which: null }],
    ['stop the weekly post 2', { kind: 'weekly-stop', which: 2 }],
  ])('%s', (text, wanted) => {
    expect(understand(text, context).request).toEqual(wanted);
  });

  it('posts only the verdict by itself, and says so', () => {
    const found = understand('every monday at 9:00 where did churn move', context);
    expect(found.request).toMatchObject({ kind: 'weekly-set', question: plain });
    expect(found.notUnderstood[0]!.nearest).toMatch(/only whether churn has moved/);
  });

  it('survives being put into words and understood again', () => {
    const time = fc.record(
      {
        weekday: fc.integer({ min: 1, max: 7 }),
        hour: fc.integer({ min: 0, max: 23 }),
        minute: fc.integer({ min: 0, max: 59 }),
        zone: fc.constantFrom('Europe/London', 'America/Argentina/Buenos_Aires', 'UTC', 'Asia/Kathmandu'),
      },
      { requiredKeys: ['weekday', 'hour', 'minute'] },
    );
    const question = fc.record(
      {
        kind: fc.constant('ask' as const),
        subgroupSize: fc.integer({ min: 2, max: 500 }),
        segment: fc.constant({ value: 'Orchard' }),
      },
      { requiredKeys: ['kind'] },
    );
    const request = fc.oneof(
      fc.record({ kind: fc.constant('weekly-set' as const), time, question }),
      fc.record({ kind: fc.constant('weekly-stop' as const), which: fc.option(fc.integer({ min: 1, max: 9 })) }),
      fc.constant({ kind: 'weekly-show' as const }),
    );
    fc.assert(
      fc.property(request, (asked) => {
        const again = understand(putIntoWords(asked as Request), context);
        expect(again.request).toEqual(asked);
        expect(again.notUnderstood).toEqual([]);
      }),
    );
  });
});
