import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { layout } from '../../src/picture/layout.ts';
import { boxOf } from '../../src/picture/scene.ts';
import { faults } from './faults.ts';
import { flag, makeInput } from './inputs.ts';
import { makings, state } from './states.ts';

describe('layout', () => {
  test.each(Object.keys(makings))('%s: no two texts touch and none leaves the drawing', (name) => {
    expect(faults(layout(state(name)))).toEqual([]);
  });

  test('no two texts touch, whatever the numbers, the flags and the words', () => {
    const making = fc
      .record({
        points: fc.oneof(fc.integer({ min: 1, max: 60 }), fc.integer({ min: 61, max: 400 })),
        rate: fc.oneof(fc.constantFrom(0, 1, 0.003, 0.06, 0.6), fc.double({ min: 0, max: 1, noNaN: true })),
        after: fc.double({ min: 0, max: 1, noNaN: true }),
        size: fc.integer({ min: 1, max: 150 }),
        unequal: fc.boolean(),
        baseline: fc.integer({ min: 1, max: 40 }),
        seed: fc.integer(),
        moves: fc.boolean(),
        at: fc.double({ min: 0, max: 1, noNaN: true }),
        flags: fc.array(
          fc.tuple(
            fc.double({ min: 0, max: 1, noNaN: true }),
            fc.integer({ min: 0, max: 20 }),
            fc.integer({ min: 0, max: 2 }),
          ),
          {
            maxLength: 8,
          },
        ),
        headline: fc.string({ unit: 'grapheme', minLength: 1, maxLength: 300 }),
        subject: fc.string({ unit: 'grapheme', maxLength: 200 }),
        daysPerPoint: fc.integer({ min: 1, max: 90 }),
        dated: fc.boolean(),
        waits: fc.boolean(),
        split: fc.option(fc.double({ min: 0, max: 1, noNaN: true })),
      })
      .map((one) => {
        const place = (share: number): number => 1 + Math.min(one.points - 1, Math.floor(share * one.points));
        const from = place(one.at);
        const states = ['standing', 'watching', 'passed'] as const;
        return makeInput({
          points: one.points,
          rate: one.rate,
          size: one.unequal ? (i: number) => one.size + (i % 7) : one.size,
          baseline: one.baseline,
          seed: one.seed,
          ...(one.moves && from > 1
            ? {
                moved: {
                  from,
                  rate: one.after,
                  candidates: [Math.max(2, from - 3), Math.min(one.points, from + 2)] as const,
                },
              }
            : {}),
          outcome: one.moves && from > 1 ? (one.after > one.rate ? 'risen' : 'fallen') : 'steady',
          headline: one.headline,
          subject: one.subject,
          daysPerPoint: one.daysPerPoint,
          dated: one.dated,
          signals: one.flags.map(([share, length, which]) => {
            const first = place(share);
            const members = [first, Math.min(one.points, first + length)] as const;
            return flag(2, members, 'above', states[which] ?? 'passed', 'nine points in a row above the usual level');
          }),
          ...(one.waits ? {} : { waiting: null }),
          split: one.split === null ? null : { after: place(one.split) },
        });
      });
    fc.assert(
      fc.property(making, (input) => {
        expect(faults(layout(input))).toEqual([]);
      }),
      { numRuns: 150 },
    );
  });

  test('the labels of the limits stand at the right of the plot, in the order of their values', () => {
    const scene = layout(state('fallen'));
    const labels = scene.texts.filter((text) => ['limit', 'center', 'after'].includes(text.role));
    expect(labels.map((label) => label.text)).toEqual([
      'chance alone',
      'stays below',
      expect.stringMatching(/^\d+\.\d\u00a0%$/),
      'usual level',
      expect.stringMatching(/^\d+\.\d\u00a0%$/),
      'since then',
      expect.stringMatching(/^about \d+\.\d\u00a0%$/),
      'chance alone',
      'stays above',
      expect.stringMatching(/^\d+\.\d\u00a0%$/),
    ]);
    for (const label of labels) expect(label.x).toBeGreaterThan(scene.frame.right);
  });

  test('a lower limit of zero gets no label, because nothing can fall below it', () => {
    const input = state('steady');
    expect(input.chart?.points.at(-1)?.lower).toBe(0);
    expect(layout(input).texts.map((text) => text.text)).not.toContain('stays above');
  });

  test('the waiting group is an empty mark after the last point, and its words say how full it is and when it is due', () => {
    const scene = layout(state('steady'));
    const words = scene.texts.filter((text) => text.role === 'note').map((text) => text.text.replaceAll('\u00a0', ' '));
    expect(words).toContain('next point: 37 of 85 accounts so far, due about 3 December 2025');
    expect(words).toContain('412 accounts are too young to be counted');
    const lastPoint = scene.points.at(-1);
    expect(scene.frame.xDomain[1]).toBeGreaterThan((lastPoint?.x ?? 0) + 1);
  });

  test('flagged points differ in shape from the others, and those the usual level was set from are hollow', () => {
    const scene = layout(state('risen'));
    expect(scene.points[43]?.shape).toBe('diamond');
    expect(scene.points[20]?.shape).toBe('circle');
    expect(scene.points[20]?.fill).not.toBe(scene.points[30]?.fill);
  });

  test('a flag marks only the points its words are about, and none before the start that the picture tells', () => {
    const input = makeInput({
      points: 40,
      size: 100,
      rate: 0.08,
      counts: Array.from({ length: 40 }, (_, i) => (i < 30 ? [8, 6, 10, 8, 7, 9][i % 6]! : [0, 9, 1, 7, 2, 2][i % 6]!)),
      moved: { from: 31, rate: 0.03, candidates: [31, 31] },
      outcome: 'fallen',
      headline: 'Churn has fallen: it has.',
      signals: [
        flag(6, [28, 34], 'below', 'standing', 'four of five points clearly below the usual level'),
        flag(2, [34, 40], 'below', 'standing', 'seven points in a row below the usual level'),
        flag(5, [2, 6], 'above', 'passed', 'two of three points far above the usual level'),
      ],
    });
    const marked = layout(input).points.flatMap((point) => (point.shape === 'diamond' ? [point.x] : []));
    expect(marked).toEqual([31, 33, 34, 35, 36, 37, 39, 40]);
  });

  test('a trend marks all its points, on whichever side of the usual level', () => {
    const counts = Array.from({ length: 40 }, (_, i) =>
      i < 30 ? [8, 6, 10][i % 3]! : ([5, 6, 7, 8, 9, 10, 11][i - 30] ?? 8),
    );
    const signals = [flag(3, [31, 37], 'above', 'watching', 'seven points in a row, each higher than the one before')];
    const input = makeInput({
      points: 40,
      size: 100,
      rate: 0.08,
      counts,
      outcome: 'steady',
      headline: 'Steady.',
      signals,
    });
    const marked = layout(input).points.flatMap((point) => (point.shape === 'diamond' ? [point.x] : []));
    expect(marked).toEqual([31, 32, 33, 34, 35, 36, 37]);
  });

  test('a usual level that is not one level is marked where it changes', () => {
    const scene = layout(state('cannot-say'));
    const words = scene.texts.filter((text) => text.text === 'not one level: changes about here');
    expect(words).toHaveLength(1);
    const between =
      scene.frame.left +
      ((9.5 - scene.frame.xDomain[0]) / (scene.frame.xDomain[1] - scene.frame.xDomain[0])) *
        (scene.frame.right - scene.frame.left);
    const upright = scene.over.filter((stroke) => stroke.x === stroke.x2 && Math.abs(stroke.x - between) < 0.01);
    expect(Math.max(...upright.map((stroke) => stroke.y2))).toBeCloseTo(scene.frame.bottom, 6);
    expect(
      layout(state('steady'))
        .texts.map((text) => text.text)
        .join(),
    ).not.toContain('not one level');
  });

  test('limits below 1 % have no more decimals than the limit beside them, unless nothing would be left', () => {
    const labels = (name: string) => layout(state(name)).texts.flatMap((t) => (t.role === 'limit' ? [t.text] : []));
    expect(
      labels('fallen')
        .filter((text) => text.includes('%'))
        .every((text) => /^\d+\.\d\u00a0%$/.test(text)),
    ).toBe(true);
    expect(labels('rare').some((text) => /^0\.\d\d\u00a0%$/.test(text))).toBe(true);
  });

  test('the range of starts ends with the last start of the last possible point, one point or several', () => {
    const range = (candidates: readonly [number, number]) => {
      const input = makeInput({ ...makings.fallen!, moved: { from: 33, rate: 0.04, candidates } });
      const words = layout(input).texts.map((text) => text.text.replaceAll('\u00a0', ' '));
      return words.find((text) => text.startsWith('the start could'));
    };
    expect(range([33, 34])).toBe('the start could lie anywhere from 7 Aug 2024 to 11 Sep 2024');
    expect(range([33, 33])).toBe('the start could lie anywhere from 7 Aug 2024 to 24 Aug 2024');
  });

  test('words about the usual level stay within its ground when it is narrow', () => {
    for (const points of [2, 3, 4, 5]) {
      const input = makeInput({ points, rate: 0.07, outcome: 'too-early', headline: 'Too early to tell.' });
      const scene = layout(input);
      const words = scene.texts.filter((text) => text.role === 'ground')[0];
      expect(words && boxOf(words).right).toBeLessThanOrEqual(scene.slabs[0]?.x2 ?? 0);
    }
  });

  test('a caution about every answer gives way to one about this answer', () => {
    const input = makeInput({
      ...makings.steady!,
      cautions: [
        'The data is taken to be complete through 30 June 2026.',
        'Two sources seem to take turns.',
        'Points this small can reach zero by chance.',
      ],
    });
    const words = layout(input)
      .texts.map((text) => text.text)
      .join('\n');
    expect(words).toContain('Two sources');
    expect(words).toContain('Points this small');
    expect(words).not.toContain('complete through');
  });

  test('limits that change from point to point are drawn as steps, equal ones as one stretch', () => {
    expect(layout(state('unequal')).band.length).toBe(2 * 36);
    expect(layout(state('steady')).band.length).toBe(2);
  });

  test('a scale that does not start at zero says so', () => {
    const notes = (name: string) =>
      layout(state(name))
        .texts.filter((text) => text.role === 'note')
        .map((text) => text.text);
    expect(notes('frequent').join('\n')).toMatch(/the scale starts at \d+\u00a0%, not at zero/);
    expect(notes('steady').join('\n')).not.toMatch(/scale starts/);
  });

  test('a provisional usual level is told on the picture even when no caution says so', () => {
    const notes = layout(state('eight')).texts.map((text) => text.text.replaceAll('\u00a0', ' '));
    expect(notes).toContain('provisional usual level: only 8 points');
  });

  test('ready counts have point numbers below, not dates', () => {
    const labels = layout(state('counts'))
      .texts.filter((text) => text.role === 'date')
      .map((text) => text.text);
    expect(labels[0]).toBe('point\u00a01');
    expect(labels.slice(1).every((label) => /^\d+$/.test(label))).toBe(true);
  });

  test('no letters of a trade that the reader would have to know', () => {
    for (const name of Object.keys(makings))
      for (const text of layout(state(name)).texts) expect(text.text).not.toMatch(/\b(UCL|LCL|CL|sigma)\b|σ/);
  });
});
