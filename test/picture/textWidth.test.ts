import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { fontFile } from '../../src/picture/fonts.ts';
import { drawable, textWidth } from '../../src/picture/textWidth.ts';
import { balanceText, wrapText } from '../../src/picture/wrapText.ts';

/** The part of the fontkit package used here; it comes without types. */
interface FontReader {
  openSync(file: string): { unitsPerEm: number; layout(text: string): { advanceWidth: number } };
}
const fontkit = (await import('fontkit' as string)) as FontReader;

describe('textWidth', () => {
  test.each([400, 700] as const)(
    'weight %i: as wide as an independent font reader lays it out, or a little wider',
    (weight) => {
      const font = fontkit.openSync(fontFile(weight));
      for (const text of [
        'usual level set here',
        'before 6.2\u00a0% (5.4–7.0\u00a0%)',
        'AVATAR Tomatoes, Type To We.',
      ]) {
        const reference = (font.layout(text).advanceWidth / font.unitsPerEm) * 20;
        const ours = textWidth(text, 20, weight);
        expect(ours).toBeGreaterThanOrEqual(reference - 0.01);
        expect(ours).toBeLessThan(reference * 1.04);
      }
    },
  );
});

describe('drawable', () => {
  test('what the font cannot draw becomes one question mark, and control characters disappear', () => {
    expect(drawable('Plan 種子 A\u0000\u0007\tB')).toBe('Plan ? A B');
    expect(drawable('Orchard “plan” – 5 €')).toBe('Orchard “plan” – 5 €');
  });

  test('a figure keeps its unit, and a date its parts', () => {
    expect(drawable('6.2 % since 12 March 2025, 85 accounts')).toBe(
      '6.2\u00a0% since 12\u00a0March\u00a02025, 85\u00a0accounts',
    );
  });
});

describe('wrapText', () => {
  test('no line is wider than the room, and no word is lost', () => {
    fc.assert(
      fc.property(fc.string({ maxLength: 200 }), fc.integer({ min: 40, max: 700 }), (text, room) => {
        for (const wrap of [wrapText, balanceText]) {
          const lines = wrap(text, room, 20, 400);
          for (const line of lines) expect(textWidth(line, 20, 400)).toBeLessThanOrEqual(room);
          expect(lines.join('').replaceAll(' ', '')).toBe(text.replaceAll(' ', ''));
        }
      }),
      { numRuns: 100 },
    );
  });

  test('balancing evens lines out without adding any', () => {
    const text = 'sixteen points in a row below the usual level (and one more flag)';
    expect(balanceText(text, 400, 20, 400)).toHaveLength(wrapText(text, 400, 20, 400).length);
  });
});
