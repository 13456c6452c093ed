import { describe, expect, test } from 'vitest';
import { EMBER } from '../../../src/picture/palette.ts';
import { drawPlate } from '../../../src/picture/picture.ts';
import { whereAltText, whereScene } from '../../../src/picture/questions/where.ts';
import { judgeGroups } from '../../../src/verdict/questions/where/judgeGroups.ts';
import type { GroupReading } from '../../../src/verdict/questions/where/types.ts';
import { type GroupOf, group } from '../../verdict/questions/groups.ts';
import { faults } from '../faults.ts';

const about = { column: 'plan', tenure: '3 months', subject: 'Marrowby Seed Club', asOf: 20_000 };
const one = (value: string, seed: number, more: Partial<GroupOf> = {}) =>
  group({ value, seed, points: 30, size: 90, rate: 0.07, ...more });
const rise = { moved: { at: 22, rate: 0.18 } };

/** Every state a group can be in, long and odd names, very many points, and one to thirteen panels. */
const STATES: Readonly<Record<string, readonly GroupReading[]>> = {
  'one of three has moved': judgeGroups(
    [one('Orchard', 2, rise), one('Allotment', 3), one('Windowsill', 4, { points: 5 })],
    'plan',
  ),
  'none has moved': judgeGroups([one('Orchard', 5), one('Allotment', 6)], 'plan'),
  'a single panel': judgeGroups([one('Orchard', 7, rise), one('New', 8, { points: 1 })], 'plan'),
  'nothing to draw': judgeGroups([one('A', 9, { points: 0 }), one('B', 10, { points: 1 })], 'plan'),
  'thirteen, with long and odd names, many points, nobody and everybody lost': judgeGroups(
    [
      one('A very long name of a plan that nobody would ever print on a small panel', 11, rise),
      one('Ωμέγα 🌱 <b>&amp;', 12),
      one('Free', 13, { rate: 0 }),
      one('Trial', 14, { rate: 1 }),
      ...Array.from({ length: 8 }, (_, i) => one(`Region ${i}`, 20 + i, { points: i === 0 ? 150 : 20 })),
      one('', 40, { value: null, pooled: { values: 4_988, without: 7 } }),
    ],
    'plan',
  ),
};

describe('the picture of where', () => {
  test.each(Object.entries(STATES))(
    '%s: no word touches another, is cut, or is too small for a phone',
    (_, readings) => {
      expect(faults(whereScene(readings, about))).toEqual([]);
    },
  );

  test('a panel for each group that has points, on one scale, the moved one first and in ember with a word for it', () => {
    const readings = STATES['one of three has moved']!;
    const scene = whereScene(readings, about);
    const groups = scene.texts.filter(({ role }) => role === 'group');
    expect(groups.map(({ text }) => text)).toEqual(readings.map(({ name }) => name));
    const verdicts = scene.texts.filter(({ role }) => role === 'group verdict');
    expect(verdicts[0]).toMatchObject({ color: EMBER, weight: 700 });
    expect(verdicts[0]!.text).toMatch(/^risen, /);
    expect(verdicts[2]!.text).toMatch(/^too few: /);
    // The same figures at the left of every panel: one scale for all.
    const figures = scene.texts.filter(({ role }) => role === 'y figure').map(({ text }) => text);
    expect(new Set(figures).size * 3).toBe(figures.length);
    const ember = scene.marks.filter(({ fill }) => fill === EMBER);
    expect(ember.length).toBeGreaterThan(5);
    expect(ember.every(({ shape }) => shape === 'diamond')).toBe(true);
  });

  test('nothing of what is drawn leaves its panel, even where the limits reach far beyond the points', () => {
    for (const readings of Object.values(STATES)) {
      const scene = whereScene(readings, about);
      for (const { edge } of scene.areas ?? [])
        for (const { x, y, y2 } of edge) {
          expect(x).toBeGreaterThanOrEqual(0);
          expect(x).toBeLessThanOrEqual(scene.widthPx);
          expect(Math.abs(y2 - y)).toBeLessThanOrEqual(104.001);
        }
    }
  });

  test('says in words what it shows, and draws at the width of a phone three times over', async () => {
    const readings = STATES['one of three has moved']!;
    const text = whereAltText(readings, about);
    expect(text).toMatch(/^Orchard has risen\. 3 small charts on the same scale, one for each group of “plan”/);
    expect(text).toContain('Orchard, risen, ');
    const picture = await drawPlate(whereScene(readings, about), text);
    expect(picture.widthPx).toBe(1_080);
    expect(picture.png.length).toBeGreaterThan(10_000);
  });

  test('with nothing to draw it still says what was found', () => {
    const readings = STATES['nothing to draw']!;
    expect(whereAltText(readings, about)).toBe('Too early to say where. 2 groups with too few accounts to draw.');
    expect(whereScene(readings, about).texts.some(({ text }) => text === 'too few accounts: B (93) and A (3)')).toBe(
      true,
    );
  });
});
