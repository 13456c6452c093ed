import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { ink } from '../../../src/picture/panel/ink.ts';
import { callouts, endLabels, endLabelsRoom } from '../../../src/picture/panel/labels.ts';
import { panel } from '../../../src/picture/panel/panel.ts';
import { plate, smallMultiples, words } from '../../../src/picture/panel/plate.ts';
import { band, bars, dots, line, steps } from '../../../src/picture/panel/shapes.ts';
import { drawPlate } from '../../../src/picture/picture.ts';
import { faults } from '../faults.ts';
import { normalised } from '../normalised.ts';
import { plates } from './plates.ts';

const frame = { top: 40, height: 200, x: { domain: [0, 10] as const }, y: { domain: [0, 1] as const } };

describe('plates', () => {
  test.each(Object.keys(plates))(
    '%s: no two texts touch, none leaves the drawing, all is legible on a phone',
    (name) => {
      expect(faults(plates[name]!)).toEqual([]);
    },
  );

  test.each(Object.keys(plates))('%s: draws as it did when somebody last looked at it', async (name) => {
    const picture = await drawPlate(plates[name]!, 'words for those who cannot see it');
    expect(picture.altText).toBe('words for those who cannot see it');
    expect(picture.widthPx).toBe(1080);
    await expect(normalised(picture.svg)).toMatchFileSnapshot(`../../pictures/kit-${name}.svg`);
  });

  test('no two texts touch, whatever the words and the numbers', () => {
    const text = fc.string({ unit: 'grapheme', maxLength: 160 });
    const value = fc.double({ min: -1e7, max: 1e7, noNaN: true });
    const figures = fc.constantFrom('percent' as const, 'count' as const, 'number' as const);
    fc.assert(
      fc.property(
        fc.record({
          title: text,
          lead: text,
          counted: fc.array(text, { maxLength: 3 }),
          keys: fc.array(text, { maxLength: 4 }),
          notes: fc.array(text, { maxLength: 4 }),
          x: fc.tuple(value, value),
          y: fc.tuple(value, value),
          xFigures: fc.oneof(figures, fc.constant('date' as const)),
          figures,
          height: fc.integer({ min: 90, max: 400 }),
          axis: text,
          ends: fc.array(value, { maxLength: 2 }),
          callouts: fc.array(fc.tuple(value, value, fc.string({ unit: 'grapheme', maxLength: 40 })), { maxLength: 6 }),
          nice: fc.boolean(),
        }),
        (one) => {
          const ordered = ([a, b]: [number, number]): [number, number] => [Math.min(a, b), Math.max(a, b)];
          const x =
            one.xFigures === 'date' ? ordered(one.x.map((v) => 20_000 + v / 1e3) as [number, number]) : ordered(one.x);
          const scene = plate(
            {
              title: one.title,
              lead: one.lead,
              counted: one.counted,
              keys: one.keys.map((key) => ({ words: key, sign: { line: '#000' } })),
            },
            [
              (top) => {
                const y = ordered(one.y);
                const ends = one.ends.map((_, i) => ({ y: y[i] ?? 0, lines: ['chance alone', 'stays below'] }));
                const plot = panel({
                  top,
                  height: one.height,
                  rightRoom: endLabelsRoom(ends),
                  x: { domain: x, figures: one.xFigures, title: one.axis },
                  y: { domain: y, nice: one.nice, figures: one.figures, title: 'still there' },
                });
                return {
                  ink: ink(
                    plot.axes,
                    endLabels(plot, ends),
                    callouts(
                      plot,
                      one.callouts.map(([a, b, c]) => ({ x: a, y: b, words: c })),
                    ),
                  ),
                  bottom: plot.bottom,
                };
              },
            ],
            one.notes.map((note) => ({ words: note, sign: 'heed' })),
          );
          expect(faults(scene)).toEqual([]);
        },
      ),
      { numRuns: 200 },
    );
  });

  test('small multiples stand in rows, each cell below the highest of the row above', () => {
    const boxes: { left: number; right: number; top: number }[] = [];
    const made = smallMultiples(
      [100, 140, 60].map((height) => (box) => {
        boxes.push(box);
        return { ink: words('cell', box)(box.top).ink, bottom: box.top + height };
      }),
    )(50);
    expect(boxes[0]?.top).toBe(50);
    expect(boxes[1]?.left).toBeGreaterThan(boxes[0]?.right ?? Number.NaN);
    expect(boxes[2]?.top).toBeGreaterThan(50 + 140);
    expect(made.bottom).toBe((boxes[2]?.top ?? Number.NaN) + 60);
  });
});

describe('panel', () => {
  test('maps the ends of its domains to its edges', () => {
    const plot = panel(frame);
    expect([plot.x(0), plot.x(10), plot.y(0), plot.y(1)]).toEqual([
      plot.frame.left,
      plot.frame.right,
      plot.frame.bottom,
      plot.frame.top,
    ]);
  });

  test('refuses to show what is no number', () => {
    expect(() => panel({ ...frame, y: { domain: [0, Number.NaN] } })).toThrow(/cannot show NaN/);
  });

  test('steps hold each value to the next place, the last one to the end', () => {
    const plot = panel(frame);
    const [drawn] =
      steps(
        plot,
        [
          { x: 0, y: 1 },
          { x: 4, y: 0.5 },
        ],
        10,
      ).polylines ?? [];
    expect(drawn?.path).toEqual(
      [
        [0, 1],
        [4, 1],
        [4, 0.5],
        [10, 0.5],
      ].map(([x, y]) => ({ x: plot.x(x!), y: plot.y(y!) })),
    );
  });

  test('bars stand on the foot, a band lies between its edges, a single place is no line', () => {
    const plot = panel(frame);
    const [bar] = bars(plot, [{ x: 1, x2: 2, y: 0.5 }]).slabs ?? [];
    expect([bar?.y, bar?.y2]).toEqual([plot.y(0.5), plot.frame.bottom]);
    const [water] =
      band(plot, [
        { x: 0, low: 0.2, high: 0.4 },
        { x: 10, low: 0.1, high: 0.6 },
      ]).areas ?? [];
    expect(water?.edge.map(({ y, y2 }) => [y, y2])).toEqual([
      [plot.y(0.4), plot.y(0.2)],
      [plot.y(0.6), plot.y(0.1)],
    ]);
    expect(line(plot, [{ x: 1, y: 1 }])).toEqual({});
  });

  test('words beside a place keep clear of a line through it, and are left out where there is no room', () => {
    const plot = panel(frame);
    const curve = line(plot, [
      { x: 0, y: 0.5 },
      { x: 10, y: 0.5 },
    ]);
    const [clear] = callouts(plot, [{ x: 5, y: 0.5, words: 'here', sides: ['right', 'above'] }], [curve]).texts ?? [];
    expect(clear?.y).toBeLessThan(plot.y(0.5));
    const wall = { left: 0, right: 720, top: 0, bottom: 400 };
    expect(callouts(plot, [{ x: 5, y: 0.5, words: 'here' }], [wall]).texts).toEqual([]);
    expect(dots(plot, [{ x: 5, y: 0.5 }]).marks).toHaveLength(1);
  });
});
