import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { altText } from '../../src/picture/altText.ts';
import { flag, makeInput } from './inputs.ts';
import { makings, state } from './states.ts';

const plain = (name: string): string => altText(state(name)).replaceAll('\u00a0', ' ');

describe('altText', () => {
  test('a rise is told first, with since when and both rates', () => {
    expect(plain('risen')).toMatch(
      /^Churn has risen for accounts starting from about 11 December 2024: about \d+\.\d % \([\d.]+–[\d.]+ %\), against \d+\.\d % \([\d.]+–[\d.]+ %\) before\./,
    );
  });

  test('a fall is told first', () => {
    expect(plain('fallen')).toMatch(/^Churn has fallen for accounts starting from about 7 August 2024/);
  });

  test('steady is never told without what could have been missed', () => {
    expect(plain('steady')).toMatch(
      /^Churn is steady: the usual 6\.1 % are lost within 3 months\. A rise to 8\.9 % or more, or a fall to 3\.6 % or less, would by now have shown with 80 % chance/,
    );
  });

  test('it says how many points there are, what is marked, and what is waiting', () => {
    const text = plain('risen');
    expect(text).toContain('The chart shows 57 points');
    expect(text).toContain('Flagged, points 41 to 52: nine points in a row above the usual level');
    expect(text).toContain('Flagged, but did not last, point 12');
    expect(text).toContain('Next point: 37 of 85 accounts so far, due about 3 December 2025');
    expect(text).toContain('412 accounts are too young to be counted');
    expect(plain('steady')).toContain('No point is flagged');
  });

  test('a flag is told with its own points, not with those of its neighbours, and large numbers as the message writes them', () => {
    const input = makeInput({
      ...makings.fallen!,
      signals: [
        flag(6, [29, 37], 'below', 'standing', 'four of five points clearly below the usual level'),
        flag(2, [33, 48], 'below', 'standing', '16 points in a row below the usual level'),
      ],
    });
    const text = altText(input).replaceAll('\u00a0', ' ');
    expect(text).toContain('Flagged, points 33 to 48: 16 points in a row below the usual level (and 1 more flag)');
    expect(text).toContain('of 5,760 accounts lost');
    expect(text).toContain('1,240 accounts are too young');
  });

  test('the verdict is said once when the headline begins with it', () => {
    expect(plain('steady').match(/steady/gi)).toHaveLength(1);
  });

  test('without a chart it says that there is nothing to draw yet', () => {
    expect(plain('too-early-none')).toMatch(/^Too early to say .*There is no point to draw yet\./);
  });

  test('it never passes 1000 characters, and never starts with anything but the finding', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(...Object.values(makings)),
        fc.string({ unit: 'grapheme', maxLength: 3000 }),
        fc.string({ unit: 'grapheme', maxLength: 3000 }),
        (making, headline, subject) => {
          const text = altText(makeInput({ ...making, headline, subject }));
          expect(text.length).toBeLessThanOrEqual(1000);
          const said = headline.replace(/\s+/g, ' ').trim().slice(0, 200);
          const own = /^(Churn has|The rate|No sign|Steady so far|Too early|These figures)/.test(text);
          expect(own || text.startsWith(said)).toBe(true);
        },
      ),
      { numRuns: 100 },
    );
  });
});
