import { describe, expect, it } from 'vitest';
import { whatIsNew } from '../../src/answers/weekly/whatIsNew.ts';
import type { Seen } from '../../src/store/types.ts';

const flag = { key: '2 below 19000', words: 'nine points in a row below the usual level', state: 'watching' };
const seen = (change: Partial<Seen> = {}): Seen => ({
  at: 0,
  asOf: 20_000,
  outcome: 'steady',
  tenure: '3 months',
  subgroupSize: 85,
  points: [
    { start: 19_000, accounts: 85, lost: 5 },
    { start: 19_030, accounts: 85, lost: 7 },
  ],
  flags: [],
  ...change,
});

describe('what is new since the last weekly post', () => {
  it('is nothing for the same chart, and nothing to compare with at first', () => {
    expect(whatIsNew(seen(), seen({ at: 1 })).lines).toEqual([]);
    expect(whatIsNew(null, seen()).lines).toEqual([]);
  });

  it('tells new points by what they count', () => {
    const points = [...seen().points, { start: 19_060, accounts: 85, lost: 6 }];
    expect(whatIsNew(seen(), seen({ points })).lines).toEqual(['1 new point: 6 of 85 lost.']);
  });

  it('tells a new flag once, and that it no longer stands', () => {
    expect(whatIsNew(seen(), seen({ flags: [flag] })).lines).toEqual([`New flag: ${flag.words}.`]);
    expect(whatIsNew(seen({ flags: [flag] }), seen({ flags: [flag] })).lines).toEqual([]);
    const passed = { ...flag, state: 'passed' };
    expect(whatIsNew(seen({ flags: [flag] }), seen({ flags: [passed] })).lines).toEqual([
      `No longer flagged: ${flag.words}.`,
    ]);
    expect(whatIsNew(seen({ flags: [flag] }), seen()).lines).toEqual([`No longer flagged: ${flag.words}.`]);
  });

  it('tells restated points and by how much', () => {
    const points = [{ start: 19_000, accounts: 85, lost: 8 }, seen().points[1]!];
    expect(whatIsNew(seen(), seen({ points })).lines).toEqual([
      '1 point shown before is restated by the newer data: +3 losses in all.',
    ]);
  });

  it('tells another answer, and points that are cut anew', () => {
    expect(whatIsNew(seen(), seen({ outcome: 'fallen' })).lines).toEqual([
      'The answer has changed: last time it was “steady”.',
    ]);
    expect(whatIsNew(seen(), seen({ subgroupSize: 120 })).lines[0]).toMatch(/cut anew: 120 accounts at 3 months now/);
  });
});
