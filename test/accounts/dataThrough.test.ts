import { describe, expect, it } from 'vitest';
import { type DayCount, dataThrough, latestSteadyStart } from '../../src/accounts/dataThrough.ts';

const daily = (from: number, to: number, count: number): DayCount[] =>
  Array.from({ length: to - from + 1 }, (_, at) => ({ day: from + at, count }));
const asOf = (starts: DayCount[], ends: DayCount[]): number | undefined => {
  const latest = latestSteadyStart(starts);
  return latest === undefined ? undefined : dataThrough(latest, ends, starts);
};

describe('the data-through date', () => {
  it('is the latest start when ends reach no further', () => {
    expect(asOf(daily(1000, 1700, 10), daily(1050, 1699, 3))).toBe(1700);
  });

  it('is not moved by a few cancellations booked for later', () => {
    expect(
      asOf(daily(1000, 1700, 10), [...daily(1050, 1700, 3), { day: 1720, count: 2 }, { day: 1760, count: 1 }]),
    ).toBe(1700);
  });

  it('is not moved by cancellations to the end of a paid month, which dry up within weeks', () => {
    const booked = Array.from({ length: 30 }, (_, at) => ({
      day: 1701 + at,
      count: Math.round((12 * (30 - at)) / 30),
    }));
    expect(asOf(daily(1000, 1700, 40), [...daily(1050, 1700, 12), ...booked])).toBeLessThanOrEqual(1700);
  });

  it('follows ends that come as thickly after the last start as before', () => {
    expect(asOf(daily(1000, 1700, 10), daily(1050, 1790, 3))).toBe(1790);
  });

  it('is not moved past weeks of silence by ends, however thick, when accounts used to start every day', () => {
    // After a surge of starts, cancellations already booked for the next four weeks come as thickly as those of the weeks before.
    expect(asOf(daily(1000, 1700, 200), daily(1650, 1728, 30))).toBe(1700);
  });

  it('follows ends for some days where starts come only now and then', () => {
    const weekly = Array.from({ length: 100 }, (_, at) => ({ day: 1000 + 7 * at, count: 60 }));
    expect(asOf(weekly, daily(1050, 1715, 3))).toBe(1715);
  });

  it('is the latest end when all accounts started at once', () => {
    expect(asOf([{ day: 1000, count: 500 }], daily(1030, 1200, 1))).toBe(1200);
  });

  it('is not moved by starts with a mistyped year', () => {
    expect(
      asOf([...daily(1000, 1700, 10), { day: 2065, count: 1 }, { day: 5000, count: 2 }], daily(1050, 1699, 3)),
    ).toBe(1700);
  });

  it('there is none without a start', () => {
    expect(asOf([], [])).toBeUndefined();
  });
});
