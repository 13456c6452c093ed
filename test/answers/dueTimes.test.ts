import fc from 'fast-check';
import { DateTime } from 'luxon';
import { describe, expect, it } from 'vitest';
import { dueAfter, isZone, momentInWords } from '../../src/answers/weekly/dueTimes.ts';

const at = (iso: string, zone = 'utc'): number => DateTime.fromISO(iso, { zone }).toMillis();
const ZONES = [
  'UTC',
  'Europe/London',
  'America/St_Johns',
  'Australia/Lord_Howe',
  'Pacific/Apia',
  'Africa/Casablanca',
  'Asia/Kathmandu',
];

describe('when a weekly post is due', () => {
  const monday = { weekday: 1, hour: 9, minute: 0, zone: 'Europe/London' };

  it.each([
    ['2026-08-02T12:00', '2026-08-03T08:00'], // summer time: one hour ahead of UTC
    ['2026-08-03T07:59:59.999', '2026-08-03T08:00'],
    ['2026-08-03T08:00', '2026-08-10T08:00'], // strictly later
    ['2026-10-24T00:00', '2026-10-26T09:00'], // the clock has gone back on the day before
  ])('after %s UTC it is %s UTC', (after, due) => {
    expect(new Date(dueAfter(monday, at(after))).toISOString().slice(0, 16)).toBe(due);
  });

  it('takes a time that the clock jumps over as much later, and goes back to the usual time a week on', () => {
    const sunday = { weekday: 7, hour: 1, minute: 30, zone: 'Europe/London' };
    const jumped = dueAfter(sunday, at('2027-03-27T00:00'));
    expect(momentInWords(jumped, 'Europe/London')).toBe('Sunday 28 March 2027, 02:30');
    expect(momentInWords(dueAfter(sunday, jumped), 'Europe/London')).toBe('Sunday 4 April 2027, 01:30');
  });

  it('takes a time that comes twice the first time, and not again', () => {
    const sunday = { weekday: 7, hour: 1, minute: 30, zone: 'Europe/London' };
    const first = dueAfter(sunday, at('2026-10-24T00:00'));
    expect(new Date(first).toISOString()).toBe('2026-10-25T00:30:00.000Z');
    expect(momentInWords(dueAfter(sunday, first), 'Europe/London')).toBe('Sunday 1 November 2026, 01:30');
  });

  it('comes on the right day of every week, once, in any zone', () => {
    fc.assert(
      fc.property(
        fc.record({
          weekday: fc.integer({ min: 1, max: 7 }),
          hour: fc.integer({ min: 0, max: 23 }),
          minute: fc.integer({ min: 0, max: 59 }),
          zone: fc.constantFrom(...ZONES),
        }),
        fc.integer({ min: at('2015-01-01'), max: at('2035-01-01') }),
        (time, after) => {
          const due = dueAfter(time, after);
          const next = dueAfter(time, due);
          const local = DateTime.fromMillis(due, { zone: time.zone });
          const days = DateTime.fromMillis(next, { zone: time.zone })
            .startOf('day')
            .diff(local.startOf('day'), 'days').days;
          expect(due).toBeGreaterThan(after);
          expect(due - after).toBeLessThanOrEqual(7 * 86_400_000 + 2 * 3_600_000);
          expect(local.weekday).toBe(time.weekday);
          expect(days).toBe(7);
        },
      ),
      { numRuns: 400 },
    );
  });

  it('knows zones by their IANA names only', () => {
    expect(isZone('Europe/Vienna')).toBe(true);
    expect(isZone('Europe/Atlantis')).toBe(false);
  });
});
